package api_test

import (
	"fmt"
	"slices"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/google/uuid"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/web/api"
)

func newID() string { return uuid.Must(uuid.NewV7()).String() }

// state is an item: a found state of movement i at step k, read now.
func (h *house) state(i, k int, value string) fields {
	return fields{"id": newID(), "batch": "26-001", "serial": storetest.Serial(i), "step": k, "kind": "state", "method": "typed", "value": value,
		"read_at": h.Clock.Now().Format(time.RFC3339)}
}

func (h *house) rate(i, k int, value string) fields {
	return h.state(i, k, value).with("kind", "rate", "read_at", nil)
}

func (h *house) body(items ...fields) string {
	return fields{"sent_at": h.Clock.Now().Format(time.RFC3339), "readings": append([]fields{}, items...)}.String()
}

// post sends items with the token and gives what became of each.
func (h *house) post(t testing.TB, token string, items ...fields) []api.Answer {
	t.Helper()
	return h.postBody(t, token, h.body(items...))
}

func (h *house) postBody(t testing.TB, token, body string) []api.Answer {
	t.Helper()
	var out api.Answers
	h.call(t, token, "POST", "/api/v1/readings", body).want(t, 200, "").into(t, &out)
	return out.Items
}

func wantStatus(t testing.TB, a api.Answer, status, code string) {
	t.Helper()
	if a.Status != status || string(a.Code) != code {
		t.Errorf("got %s %s (%s), want %s %s", a.Status, a.Code, a.Detail, status, code)
	}
	if status == "refused" && (a.Detail == "" || blank.MatchString(a.Detail) || strings.Contains(a.Detail, "("+code+")")) {
		t.Errorf("code %s: the sentence %q does not help", code, a.Detail)
	}
}

func (h *house) movement(t testing.TB, i int) (m api.Movement) {
	t.Helper()
	h.call(t, h.all, "GET", "/api/v1/batches/26-001/movements/"+storetest.Serial(i), "").want(t, 200, "").into(t, &m)
	return m
}

// values are the readings of a movement as one text: "0:0.5 1:2.9".
func (h *house) values(t testing.TB, i int) string {
	t.Helper()
	var list []string
	for _, r := range h.movement(t, i).Readings {
		v := r.Code
		if r.Value != nil {
			v = *r.Value
		}
		list = append(list, fmt.Sprintf("%d:%s", r.Step, v))
	}
	return strings.Join(list, " ")
}

func TestReadingsThenMovement(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.Batch(t, "26-001", 3)
	for k := range 3 {
		h.Clock.Set(storetest.Start.Add(time.Duration(k) * 24 * time.Hour))
		for _, a := range h.post(t, h.all, h.state(1, k, fmt.Sprintf("%d.5", 2*k)), h.state(2, k, "stopped").with("step", nil, "day", k)) {
			wantStatus(t, a, "accepted", "")
		}
	}
	m := h.movement(t, 1)
	if m.Verdict != "open" || m.CannotPass || m.End != nil || len(m.Rates) != 15 || len(m.Criteria) != 7 || len(m.Readings) != 3 {
		t.Errorf("%+v", m)
	}
	if m.Rates[0].Rate == nil || *m.Rates[0].Rate != "2" || m.Rates[2].Rate != nil || m.Rates[0].Position != "6H" {
		t.Errorf("rates %+v", m.Rates[:3])
	}
	if m.Readings[1].ReadBy != "Ilse Marden" || m.Readings[1].Typed != "2.5" || m.Readings[1].Superseded {
		t.Errorf("%+v", m.Readings[1])
	}
	if got := h.values(t, 2); got != "0:stopped 1:stopped 2:stopped" {
		t.Errorf("observations: %s", got)
	}
	h.call(t, h.all, "GET", "/api/v1/batches/26-001/movements/S-9", "").want(t, 404, "no_movement")
	h.call(t, h.all, "GET", "/api/v1/batches/26-009/movements/S-0001", "").want(t, 404, "no_batch")
	h.call(t, h.all, "GET", "/api/v1/batches/26-001/movements/S%00", "").want(t, 404, "no_movement")
	var b api.Batch
	h.call(t, h.all, "GET", "/api/v1/batches/26-001", "").into(t, &b)
	if b.Rounds[1].Read != 2 || b.Rounds[1].Going != 3 || b.Standing.Open != 3 {
		t.Errorf("round 1 %+v, standing %+v", b.Rounds[1], b.Standing)
	}
}

// A movement read to its end says the same here as the table of its batch does.
func TestMovementAndSheetAgree(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.Batch(t, "26-001", 2, func(n *store.NewBatch) { n.Entry = store.EntryRate })
	good := strings.Fields("1.2 0.8 -0.5 -0.9 2.1 2.0 1.1 0.7 -0.4 1.9 1.5 1.6 1.8 1.0 1.1")
	bad := slices.Clone(good)
	bad[0] = "22.5"
	h.Run(t, "26-001", [][]string{good, bad})
	lines := strings.Split(string(h.call(t, h.all, "GET", "/api/v1/batches/26-001/sheets.csv", "").body), "\n")
	for i, want := range []string{"pass", "fail"} {
		m := h.movement(t, i+1)
		cells := []string{m.Serial, m.Category, m.Verdict}
		for _, c := range m.Criteria {
			cells = append(cells, *c.Value)
		}
		cells = append(cells, strings.Join(m.Failed, " "), strings.Join(m.Unreachable, " "), "", "")
		if got := strings.Join(cells, ","); got != lines[i+1] || m.Verdict != want {
			t.Errorf("movement %s\nsheet    %s\nwant     %s", got, lines[i+1], want)
		}
	}
	m := h.movement(t, 2)
	for _, c := range m.Criteria {
		if (c.Outcome == "outside") != (strings.HasPrefix(*c.Margin, "-")) || c.Outcome == "outside" != slices.Contains(m.Failed, c.Symbol) {
			t.Errorf("criterion %+v, failed %v", c, m.Failed)
		}
	}
	if err := h.EndMovement(t.Context(), h.Lead, "26-001", storetest.Serial(1), store.Withdrawn, "asked back", ""); err != nil {
		t.Fatal(err)
	}
	if m := h.movement(t, 1); m.End == nil || m.End.Kind != "withdrawn" || m.End.Cause != "asked back" || m.Verdict != "pass" {
		t.Errorf("after its end: %+v, verdict %s", m.End, m.Verdict)
	}
	if lines := string(h.call(t, h.all, "GET", "/api/v1/batches/26-001/sheets.csv", "").body); !strings.Contains(lines, ",withdrawn,asked back\n") {
		t.Errorf("the sheet does not say the end: %s", lines)
	}
}

func TestTwoPeopleSaveTheSameCell(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.Batch(t, "26-001", 1)
	other := h.token(t, store.NewToken{Title: "other", Account: "second", Scopes: store.Scopes})
	wantStatus(t, h.post(t, h.all, h.state(1, 0, "0.5"))[0], "accepted", "")
	second := h.state(1, 0, "0.7")
	a := h.post(t, other, second)[0]
	wantStatus(t, a, "conflict", "")
	if a.Current == nil || a.Current.Value != "0.5" || a.Current.Nth != 1 || a.Current.ReadBy != "Ilse Marden" {
		t.Errorf("current %+v", a.Current)
	}
	wantStatus(t, h.post(t, other, second.with("base", 1))[0], "refused", "reason_needed")
	a = h.post(t, other, second.with("base", 1, "reason", "misread the hand"))[0]
	wantStatus(t, a, "accepted", "")
	if a.Nth != 2 {
		t.Errorf("nth %d", a.Nth)
	}
	wantStatus(t, h.post(t, h.all, h.state(1, 0, "0.9").with("base", 3, "reason", "x"))[0], "refused", "base_ahead")
	m := h.movement(t, 1)
	if len(m.Readings) != 2 || !m.Readings[0].Superseded || m.Readings[1].Superseded || m.Readings[1].Reason != "misread the hand" {
		t.Errorf("%+v", m.Readings)
	}
}

// Sixteen senders race for one cell: one is accepted, every other is told what stands there.
func TestRaceForACell(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.Batch(t, "26-001", 1)
	answers := make([]api.Answer, 16)
	var wg sync.WaitGroup
	for i := range answers {
		wg.Go(func() { answers[i] = h.post(t, h.all, h.state(1, 0, fmt.Sprintf("0.%02d", i+1)))[0] })
	}
	wg.Wait()
	accepted := 0
	for i, a := range answers {
		switch {
		case a.Status == "accepted":
			accepted++
		case a.Status != "conflict" || a.Current == nil || "0:"+a.Current.Value != h.values(t, 1):
			t.Errorf("sender %d: %+v", i, a)
		}
	}
	if accepted != 1 {
		t.Errorf("%d accepted", accepted)
	}
}

func TestReplayOfAWholeCall(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.Batch(t, "26-001", 3)
	body := h.body(h.state(1, 0, "0.5"), h.state(2, 0, "0.6"), h.state(3, 0, "oops"))
	first := h.postBody(t, h.all, body)
	wantStatus(t, first[0], "accepted", "")
	wantStatus(t, first[2], "refused", "not_number")
	h.Clock.Advance(3 * time.Hour) // a queue sent again much later
	for range 3 {
		again := h.postBody(t, h.all, body)
		for i := range 2 {
			wantStatus(t, again[i], "duplicate", "")
			if again[i].Nth != first[i].Nth || again[i].ID != first[i].ID {
				t.Errorf("item %d: %+v, was %+v", i, again[i], first[i])
			}
		}
		wantStatus(t, again[2], "refused", "not_number")
	}
	if got := h.values(t, 1) + h.values(t, 2) + h.values(t, 3); got != "0:0.50:0.6" {
		t.Errorf("readings %s", got)
	}
	h.wantStrays(t, 1) // the same refused item is kept once
	// An id stands for one cell and value.
	wantStatus(t, h.post(t, h.all, h.state(1, 0, "0.8").with("id", first[0].ID))[0], "refused", "id_reused")
	wantStatus(t, h.post(t, h.all, h.state(3, 0, "0.5").with("id", first[0].ID))[0], "refused", "id_reused")
	wantStatus(t, h.post(t, h.all, h.state(1, 0, "0.500").with("id", first[0].ID))[0], "duplicate", "")
}

// wantStrays counts what was refused and kept.
func (h *house) wantStrays(t testing.TB, n int) {
	t.Helper()
	s, err := h.BatchSheet(t.Context(), h.Lead, "26-001")
	if err != nil {
		t.Fatal(err)
	}
	if len(s.Strays) != n {
		t.Errorf("%d refused items kept, want %d", len(s.Strays), n)
	}
}

func TestSecondLook(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.Batch(t, "26-001", 2)
	h.Clock.Advance(24 * time.Hour)
	item := h.rate(1, 1, "75")
	a := h.post(t, h.all, item)[0]
	wantStatus(t, a, "second_look", "")
	if a.Finding == "" || a.Nth != 0 {
		t.Errorf("%+v", a)
	}
	wantStatus(t, h.post(t, h.all, item)[0], "second_look", "") // asked again, still not read again
	wantStatus(t, h.post(t, h.all, item.with("confirm", []string{"7.5"}))[0], "second_look", "")
	wantStatus(t, h.post(t, h.all, item.with("confirm", []string{"7.5", "x"}))[0], "refused", "confirm_number")
	wantStatus(t, h.post(t, h.all, item.with("confirm", []string{"7.5", "7.4", "7.6"}))[0], "refused", "field_list")
	wantStatus(t, h.post(t, h.all, item.with("confirm", []string{"7.5", "7.4"}))[0], "accepted", "")
	if got := h.values(t, 1); got != "1:7.5" { // the median of three
		t.Errorf("readings %s", got)
	}
	if m := h.movement(t, 1); !m.Readings[0].SecondLook {
		t.Error("the reading does not say that it was asked for again")
	}
	far := h.rate(2, 1, "-75.2")
	wantStatus(t, h.post(t, h.all, far)[0], "second_look", "")
	wantStatus(t, h.post(t, h.all, far.with("confirm", []string{"-75"}))[0], "accepted", "")
	if got := h.values(t, 2); got != "1:-75.2" { // within 0.3: the first counts
		t.Errorf("readings %s", got)
	}
	wantStatus(t, h.post(t, h.all, far.with("confirm", []string{"-75"}))[0], "duplicate", "")
}
