package store_test

import (
	"bytes"
	"errors"
	"math/big"
	"slices"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"ratehouse/store"
	"ratehouse/store/proof"
	"ratehouse/store/storetest"
	"ratehouse/trial"
	"ratehouse/trial/sheet"
)

// Fifteen rates of category 1 in s/d: one movement that passes, one outside its limits in D.
var (
	passing = []string{"1.2", "1.6", "0.4", "-0.3", "2.9", "2.5", "3.8", "3.3", "2.1", "2.6", "8.9", "2.4", "-8.7", "1.5", "1.9"}
	failing = []string{"8.4", "8.1", "-6.9", "-7.6", "6.2", "6.8", "-0.4", "0.1", "-1.2", "-0.8", "2.6", "-1.0", "-7.3", "7.6", "7.2"}
	partly  = []string{"1.2", "1.6", "0.4", "-0.3", "", "2.5", "3.8", "3.3", "2.1", "2.6", "8.9", "2.4", "-8.7", "1.5", "1.9"}
)

// finished is a batch that was read to its end by the technician.
func finished(t *testing.T, h *storetest.House, code string, rates ...[]string) {
	t.Helper()
	h.Batch(t, code, len(rates))
	h.Run(t, code, rates)
}

func release(t *testing.T, h *storetest.House, a store.Actor, code string, serials ...string) []store.Released {
	t.Helper()
	out, err := h.Release(t.Context(), a, code, serials)
	if err != nil {
		t.Fatal(err)
	}
	return out
}

func paper(t *testing.T, h *storetest.House, number string) store.Certificate {
	t.Helper()
	c, err := h.Certificate(t.Context(), h.Lead, number)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// whyOf says what the preview and the release itself make of one movement, and wants both to agree.
func whyOf(t *testing.T, h *storetest.House, a store.Actor, code, serial string) string {
	t.Helper()
	list, err := h.Releasable(t.Context(), a, code)
	if err != nil {
		t.Fatal(err)
	}
	i := slices.IndexFunc(list.Movements, func(m store.Releasable) bool { return m.Serial == serial })
	if i < 0 {
		t.Fatalf("%s is not in the list", serial)
	}
	got := release(t, h, a, code, serial)
	if got[0].Why != list.Movements[i].Why {
		t.Errorf("%s: the list says %q, the release %q", serial, list.Movements[i].Why, got[0].Why)
	}
	if got[0].Why != "" && !slices.Contains(store.HoldCodes, got[0].Why) {
		t.Errorf("%q is not in the list of reasons", got[0].Why)
	}
	return got[0].Why
}

func TestReleaseIssuesPapers(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	finished(t, h, "B1", passing, failing, partly)
	got := release(t, h, h.Lead, "B1", "S-0001", "S-0002", "S-0003", "S-0009", "S-0001")
	want := []store.Released{{Serial: "S-0001", Number: "B1-0001", Kind: "certificate"}, {Serial: "S-0002", Number: "B1-0002", Kind: "rejection"},
		{Serial: "S-0003", Why: "open"}, {Serial: "S-0009", Why: "no_movement"}}
	if !slices.Equal(got, want) {
		t.Fatalf("got %+v\nwant %+v", got, want)
	}
	for _, r := range got[:2] {
		c := paper(t, h, r.Number)
		rec, err := proof.VerifyFile(h.Key.Public(), []byte(c.JWS+"\n"))
		if err != nil {
			t.Fatalf("%s: what ratehouse verify does: %v", r.Number, err)
		}
		if string(rec.Kind) != r.Kind || rec.Movement.Serial != r.Serial || rec.ReleasedBy != "Nadja Quill" || len(rec.Days) != 15 || len(rec.Readings) != 15 {
			t.Errorf("%s: record %+v", r.Number, rec)
		}
		hash, err := rec.Hash()
		if err != nil || c.Code != proof.ShortCode(hash) {
			t.Errorf("%s: code %q is not that of the record", r.Number, c.Code)
		}
	}
	other, err := proof.GenerateKey()
	if err != nil {
		t.Fatal(err)
	}
	if _, err := proof.VerifyFile(other.Public(), []byte(paper(t, h, "B1-0001").JWS)); err == nil {
		t.Error("another key accepts the paper")
	}
}

// The record holds what judge prints for the same numbers.
func TestPapersAgreeWithJudge(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	finished(t, h, "B1", passing, failing)
	release(t, h, h.Lead, "B1", "S-0001", "S-0002")
	for i, line := range judged(t, passing, failing) {
		rec := paper(t, h, []string{"B1-0001", "B1-0002"}[i]).Record
		cells := strings.Split(line, ",")
		if got := string(rec.Verdict); got != cells[2] {
			t.Errorf("%s: verdict %s, judge says %s", rec.Number, got, cells[2])
		}
		for k, c := range rec.Criteria {
			v, ok := new(big.Rat).SetString(string(c.Value))
			if !ok || string(proof.Rounded(v, 6)) != cells[3+k] {
				t.Errorf("%s: %s = %s, judge says %s", rec.Number, c.Symbol, c.Value, cells[3+k])
			}
		}
		if got := strings.Join(rec.Failed, " "); got != cells[10] {
			t.Errorf("%s: failed %q, judge says %q", rec.Number, got, cells[10])
		}
	}
}

// judged is what the command judge prints for the rates, line by line.
func judged(t *testing.T, rates ...[]string) []string {
	t.Helper()
	p := trial.ISO3159()
	in := "serial,category,d1,d2,d3,d4,d5,d6,d7,d8,d9,d10,d11,d12,d13,d14,d15\n"
	for i, r := range rates {
		in += storetest.Serial(i+1) + ",1," + strings.Join(r, ",") + "\n"
	}
	movements, err := sheet.OpenMovements(strings.NewReader(in), p, false)
	if err != nil {
		t.Fatal(err)
	}
	judge, err := trial.NewJudge(p, "1")
	if err != nil {
		t.Fatal(err)
	}
	var out bytes.Buffer
	w, res := sheet.NewVerdicts(&out, p, sheet.CSV, false), trial.Result{}
	for range rates {
		m, fault, err := movements.Next()
		if err != nil || fault != nil {
			t.Fatal(err, fault)
		}
		judge.MilliLong(m.Rates, m.Known, &res)
		if err := w.Write(m.Serial, []byte("1"), nil, &res); err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	return strings.Split(strings.TrimSpace(out.String()), "\n")[1:]
}

func TestWhatHoldsARelease(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	finished(t, h, "B1", passing, passing, passing, passing, passing, failing)
	end := func(i int, e store.End) {
		must(t, h.EndMovement(t.Context(), h.Lead, "B1", storetest.Serial(i), e, "seen at the bench", store.Observation("")))
	}
	end(1, store.Withdrawn)
	end(2, store.Void)
	end(3, store.Rejected)
	must(t, h.AddRemark(t.Context(), h.Technician, "B1", "S-0004", 6, "placed late"))
	for serial, want := range map[string]string{"S-0001": "withdrawn", "S-0002": "void", "S-0003": "", "S-0004": "open_remark", "S-0005": "", "S-0006": ""} {
		if got := whyOf(t, h, h.Lead, "B1", serial); got != want {
			t.Errorf("%s: held as %q, want %q", serial, got, want)
		}
	}
	rec := paper(t, h, "B1-0003").Record
	if rec.Kind != proof.KindRejection || rec.Verdict != proof.VerdictFail || rec.End != "rejected" || rec.EndCause != "seen at the bench" {
		t.Errorf("rejected for cause: %s %s %q %q", rec.Kind, rec.Verdict, rec.End, rec.EndCause)
	}
}

// A remark on the whole batch concerns every movement in it.
func TestOpenRemarkOnTheBatchHoldsAll(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	finished(t, h, "B1", passing)
	must(t, h.AddRemark(t.Context(), h.Technician, "B1", "", 11, "chamber C at 9.4 °C for two hours"))
	if got := whyOf(t, h, h.Lead, "B1", "S-0001"); got != "open_remark" {
		t.Fatalf("held as %q", got)
	}
	closeRemarks(t, h, h.Lead, "B1", "no effect: C would change by 0.01")
	if got := whyOf(t, h, h.Lead, "B1", "S-0001"); got != "" {
		t.Fatalf("held as %q after the remark was closed", got)
	}
	got := paper(t, h, "B1-0001").Record.Remarks
	want := []proof.Remark{{Code: "note", Step: 11, Text: "chamber C at 9.4 °C for two hours"}, {Code: "decision", Step: 11, Text: "no effect: C would change by 0.01"}}
	if !slices.Equal(got, want) {
		t.Errorf("remarks on the paper: %+v", got)
	}
}

func closeRemarks(t *testing.T, h *storetest.House, a store.Actor, code, words string) {
	t.Helper()
	s, err := h.BatchSheet(t.Context(), h.Lead, code)
	if err != nil {
		t.Fatal(err)
	}
	for _, k := range s.Remarks {
		if k.State != "closed" {
			must(t, h.CloseRemark(t.Context(), a, k.ID, "closed", words))
		}
	}
}

// A failing movement is not stopped by a report while it is still read; removing it stops it.
func TestRunningIsHeld(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	b := h.Batch(t, "B1", 2)
	for k := range 11 { // D is decided by days 1, 2, 9 and 10
		h.Clock.Set(b.Due(k))
		must(t, h.OpenRound(t.Context(), h.Technician, "B1", k))
		if k > 0 {
			h.MustSave(t, h.Technician, h.Rate("B1", 1, k, failing[k-1]), h.Rate("B1", 2, k, passing[k-1]))
		}
		must(t, h.CloseRound(t.Context(), h.Technician, "B1", k))
	}
	if got := whyOf(t, h, h.Lead, "B1", "S-0001"); got != "running" {
		t.Errorf("failing on day 10: held as %q", got)
	}
	if got := whyOf(t, h, h.Lead, "B1", "S-0002"); got != "open" {
		t.Errorf("open on day 10: held as %q", got)
	}
	must(t, h.EndMovement(t.Context(), h.Lead, "B1", "S-0001", store.Removed, "cannot pass", store.Observation("")))
	if got := whyOf(t, h, h.Lead, "B1", "S-0001"); got != "" {
		t.Errorf("removed: held as %q", got)
	}
	if rec := paper(t, h, "B1-0001").Record; rec.End != "removed" || len(rec.Failed) != 1 || rec.Failed[0] != "D" {
		t.Errorf("record: end %q, failed %v", rec.End, rec.Failed)
	}
}

// secondLead is another person with the right to release.
func secondLead(t *testing.T, h *storetest.House) store.Actor {
	t.Helper()
	a, err := h.AddAccount(t.Context(), store.Program, store.NewAccount{Name: "lead2", Title: "Ida Brandt", Role: store.Lead, Password: storetest.Password})
	if err != nil {
		t.Fatal(err)
	}
	return store.Actor{Account: a.ID, Name: "lead2", Title: "Ida Brandt", Role: store.Lead, Via: "page"}
}

// Four eyes: barred is who corrected, confirmed a second look, decided a remark or entered more than
// a quarter of the readings of that movement (practice notes X8), and nobody else.
func TestFourEyes(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	other := secondLead(t, h)
	b := h.Batch(t, "B1", 7)
	by := func(i, k int) store.Actor { // who enters what
		switch {
		case i == 1 && k <= 4, i == 2 && k <= 3: // 4 of 15 is more than a quarter, 3 is not
			return h.Lead
		case i == 3 && k == 9:
			return h.Lead
		}
		return h.Technician
	}
	for k := range b.Steps {
		h.Clock.Set(b.Due(k))
		must(t, h.OpenRound(t.Context(), h.Technician, "B1", k))
		for i := 1; i <= 7 && k > 0; i++ {
			e := h.Rate("B1", i, k, passing[k-1])
			if i == 3 && k == 9 {
				e.Value, e.Confirm = "70", []string{"70.1"} // asked for again, and confirmed
			}
			if i == 6 && k == 4 {
				e.ReadBy = "lead" // read by the lead, entered by the technician: 1 of 15
			}
			h.MustSave(t, by(i, k), e)
		}
		must(t, h.CloseRound(t.Context(), h.Technician, "B1", k))
	}
	corrected := h.Rate("B1", 4, 5, "2.8")
	corrected.Base, corrected.Reason = 1, "slip found on the sheet"
	h.MustSave(t, h.Lead, corrected)
	byOther := h.Rate("B1", 7, 5, "2.8")
	byOther.Base, byOther.Reason = 1, "slip found on the sheet"
	h.MustSave(t, h.Second, byOther)
	must(t, h.AddRemark(t.Context(), h.Technician, "B1", "S-0005", 3, "placed late"))
	closeRemarks(t, h, h.Lead, "B1", "no effect")

	want := map[string]string{"S-0001": "four_eyes", "S-0002": "", "S-0003": "four_eyes", "S-0004": "four_eyes", "S-0005": "four_eyes", "S-0006": "", "S-0007": ""}
	for serial, why := range want {
		if got := whyOf(t, h, h.Lead, "B1", serial); got != why {
			t.Errorf("%s released by who had a hand in it: held as %q, want %q", serial, got, why)
		}
	}
	for serial, why := range want {
		if why == "" {
			continue
		}
		if got := whyOf(t, h, other, "B1", serial); got != "" {
			t.Errorf("%s released by the other lead: held as %q", serial, got)
		}
	}
}

func TestDoubleReleaseIsHeld(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	finished(t, h, "B1", passing, failing)
	first := release(t, h, h.Lead, "B1", "S-0001", "S-0002")
	again := release(t, h, h.Lead, "B1", "S-0001", "S-0002")
	for i := range first {
		if again[i].Why != "released_already" || again[i].Number != first[i].Number || again[i].Kind != first[i].Kind {
			t.Errorf("released again: %+v, first %+v", again[i], first[i])
		}
	}
	papers, err := h.Papers(t.Context(), h.Lead, "B1")
	if err != nil || len(papers) != 2 || !papers[0].Valid() || papers[0].By != "Nadja Quill" || papers[1].Kind != "rejection" {
		t.Errorf("papers: %+v, %v", papers, err)
	}
}

func TestConcurrentReleaseGivesOnePaper(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	finished(t, h, "B1", passing, passing, failing, passing, failing)
	serials := []string{"S-0001", "S-0002", "S-0003", "S-0004", "S-0005"}
	var wg sync.WaitGroup
	var mu sync.Mutex
	issued := map[string]int{}
	ready, start := sync.WaitGroup{}, make(chan struct{})
	for range 8 {
		ready.Add(1)
		wg.Go(func() {
			_, err := h.Releasable(t.Context(), h.Lead, "B1") // each has its connection before they start
			ready.Done()
			if err != nil {
				t.Error(err)
			}
			<-start
			out, err := h.Release(t.Context(), h.Lead, "B1", serials)
			if err != nil {
				t.Error(err)
			}
			mu.Lock()
			defer mu.Unlock()
			for _, r := range out {
				if r.Why == "" {
					issued[r.Serial]++
				}
			}
		})
	}
	ready.Wait()
	close(start)
	wg.Wait()
	for _, s := range serials {
		if issued[s] != 1 {
			t.Errorf("%s: %d releases say they issued its paper", s, issued[s])
		}
	}
	if n := h.Count(t, "certificate"); n != len(serials) {
		t.Errorf("%d papers for %d movements", n, len(serials))
	}
}

// The same movement in two batches gets one valid certificate, whoever is first.
func TestOneIdentityOneCertificate(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	finished(t, h, "B1", passing)
	finished(t, h, "B2", passing, failing)
	var wg sync.WaitGroup
	var mu sync.Mutex
	whys := map[string]string{}
	for _, code := range []string{"B1", "B2"} {
		wg.Go(func() {
			out, err := h.Release(t.Context(), h.Lead, code, []string{"S-0001"})
			if err != nil {
				t.Error(err)
				return
			}
			mu.Lock()
			defer mu.Unlock()
			whys[code] = out[0].Why
		})
	}
	wg.Wait()
	held, first := "B2", "B1"
	if whys["B1"] != "" {
		held, first = "B1", "B2"
	}
	if whys[first] != "" || whys[held] != "certified_elsewhere" {
		t.Fatalf("two releases of one identity: %v", whys)
	}
	if got := whyOf(t, h, h.Lead, "B2", "S-0002"); got != "" {
		t.Errorf("another movement of the second batch is held as %q", got)
	}
	must(t, h.Revoke(t.Context(), h.Lead, first+"-0001", "issued for the wrong piece"))
	if got := whyOf(t, h, h.Lead, held, "S-0001"); got != "" {
		t.Errorf("held as %q after the other certificate was taken back", got)
	}
}

// What is released stays as it was, whatever changes afterwards.
func TestPaperIsFrozen(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	finished(t, h, "B1", passing)
	release(t, h, h.Lead, "B1", "S-0001")
	before := paper(t, h, "B1-0001")
	must(t, h.SetHouse(t.Context(), h.Manager, store.House{Title: "Renamed House", Address: []string{"Elsewhere"}, Zone: time.UTC}))
	late := h.Rate("B1", 1, 5, "9.9")
	late.Base, late.Reason = 1, "after the release"
	if got := saveOne(t, h, h.Second, late); got.Status != store.Refused || got.Code != "released" {
		t.Errorf("a correction after the release: %+v", got)
	}
	after := paper(t, h, "B1-0001")
	if after.JWS != before.JWS || after.Code != before.Code || after.Record.Laboratory.Name != "Test Laboratory" {
		t.Error("the paper changed after its release")
	}
}

func TestRevokedIsReplaced(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	finished(t, h, "B1", passing)
	release(t, h, h.Lead, "B1", "S-0001")
	must(t, h.Revoke(t.Context(), h.Lead, "B1-0001", "day 5 was misread"))
	if err := h.Revoke(t.Context(), h.Lead, "B1-0001", "again"); store.KindOf(err) != store.KindConflict {
		t.Errorf("revoked twice: %v", err)
	}
	fixed := h.Rate("B1", 1, 5, "2.8")
	fixed.Base, fixed.Reason = 1, "day 5 was misread"
	h.MustSave(t, h.Second, fixed)
	got := release(t, h, h.Lead, "B1", "S-0001")
	if got[0].Number != "B1-0001-2" || got[0].Why != "" {
		t.Fatalf("released again: %+v", got)
	}
	again, old := paper(t, h, "B1-0001-2"), paper(t, h, "B1-0001")
	if again.Record.Replaces != "B1-0001" || again.Record.ReplaceReason != "day 5 was misread" || again.Record.Days[4].Rate != "2.8" {
		t.Errorf("the new paper: %+v", again.Record)
	}
	if old.ReplacedBy != "B1-0001-2" || old.RevokedAt.IsZero() || old.Revoked != "day 5 was misread" || old.Record.Days[4].Rate != "2.9" {
		t.Errorf("the old paper: replaced by %q, revoked %v %q", old.ReplacedBy, old.RevokedAt, old.Revoked)
	}
	if got := release(t, h, h.Lead, "B1", "S-0001"); got[0].Why != "released_already" || got[0].Number != "B1-0001-2" {
		t.Errorf("released a third time: %+v", got)
	}
	valid, err := h.Certificates(t.Context(), h.Lead, "B1", 0, 10)
	if err != nil || len(valid) != 1 || valid[0].Record.Number != "B1-0001-2" {
		t.Errorf("valid papers of the batch: %d, %v", len(valid), err)
	}
}

func TestVerify(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	finished(t, h, "B1", passing, failing)
	release(t, h, h.Lead, "B1", "S-0001", "S-0002")
	one, two := paper(t, h, "B1-0001"), paper(t, h, "B1-0002")
	c, err := h.Verify(t.Context(), " b1-0001", strings.ToLower(strings.ReplaceAll(one.Code, "-", " ")))
	if err != nil || c.Record.Movement.Serial != "S-0001" {
		t.Fatalf("verify: %v", err)
	}
	_, wrongCode := h.Verify(t.Context(), "B1-0001", two.Code)
	_, wrongNumber := h.Verify(t.Context(), "B1-0009", two.Code)
	if wrongCode == nil || wrongNumber == nil || wrongCode.Error() != wrongNumber.Error() || store.KindOf(wrongCode) != store.KindNotFound {
		t.Errorf("a wrong code answers %v, a wrong number %v", wrongCode, wrongNumber)
	}
	if _, err := h.Verify(t.Context(), "B1-0001", ""); store.KindOf(err) != store.KindInvalid {
		t.Errorf("the number alone answers %v", err)
	}
	must(t, h.Revoke(t.Context(), h.Lead, "B1-0001", "wrong piece"))
	if c, err := h.Verify(t.Context(), "B1-0001", one.Code); err != nil || c.Revoked != "wrong piece" {
		t.Errorf("a revoked paper: %q, %v", c.Revoked, err)
	}
}

// Whoever can write to the database as its owner still cannot make it show an altered paper.
func TestTamperedPaperIsNotShown(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	finished(t, h, "B1", passing, failing)
	release(t, h, h.Lead, "B1", "S-0001", "S-0002")
	good := paper(t, h, "B1-0002")
	db, err := pgx.Connect(t.Context(), h.DB.Owner)
	if err != nil {
		t.Fatal(err)
	}
	defer db.Close(t.Context())
	_, err = db.Exec(t.Context(), `ALTER TABLE rh.certificate DISABLE TRIGGER USER`)
	must(t, err)
	for name, sql := range map[string]string{
		"a digit of the signed text": `UPDATE rh.certificate SET jws = overlay(jws placing 'QQ' from 300 for 2) WHERE number = 'B1-0002'`,
		"another paper's record":     `UPDATE rh.certificate c SET jws = o.jws, hash = o.hash FROM rh.certificate o WHERE c.number = 'B1-0002' AND o.number = 'B1-0001'`,
		"a hash":                     `UPDATE rh.certificate SET hash = sha256('x'::bytea) WHERE number = 'B1-0002'`,
	} {
		tag, err := db.Exec(t.Context(), sql)
		if err != nil || tag.RowsAffected() != 1 {
			t.Fatal(name, err)
		}
		if c, err := h.Certificate(t.Context(), h.Lead, "B1-0002"); err == nil || c.Record.Number != "" {
			t.Errorf("%s altered: shown all the same (%v)", name, err)
		}
		if _, err := h.Verify(t.Context(), "B1-0002", good.Code); err == nil {
			t.Errorf("%s altered: verified all the same", name)
		}
		if _, err := h.Certificates(t.Context(), h.Lead, "B1", 0, 10); err == nil {
			t.Errorf("%s altered: printed all the same", name)
		}
		hash, err := good.Record.Hash()
		must(t, err)
		_, err = db.Exec(t.Context(), `UPDATE rh.certificate SET jws = $1, hash = $2 WHERE number = 'B1-0002'`, good.JWS, hash[:])
		must(t, err)
	}
	if c := paper(t, h, "B1-0002"); c.JWS != good.JWS {
		t.Error("the paper put back is not shown")
	}
}

func TestWhoMayRelease(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	finished(t, h, "B1", passing)
	for _, a := range []store.Actor{h.Technician, h.Adjuster, h.Manager} {
		if _, err := h.Release(t.Context(), a, "B1", []string{"S-0001"}); store.KindOf(err) != store.KindForbidden {
			t.Errorf("%s releases: %v", a.Name, err)
		}
		if _, err := h.Releasable(t.Context(), a, "B1"); store.KindOf(err) != store.KindForbidden {
			t.Errorf("%s sees what can be released: %v", a.Name, err)
		}
	}
	keyless, err := store.Open(t.Context(), store.Config{DSN: h.DB.App, Clock: h.Clock.Now, Engine: "test", Conns: 2})
	must(t, err)
	defer keyless.Close()
	_, err = keyless.Release(t.Context(), h.Lead, "B1", []string{"S-0001"})
	if e, ok := errors.AsType[*store.Error](err); !ok || e.Code != "no_signing_key" {
		t.Errorf("without a key: %v", err)
	}
	list, err := keyless.Releasable(t.Context(), h.Lead, "B1")
	if err != nil || list.CanSign || len(list.Movements) != 1 {
		t.Errorf("the list without a key: %+v, %v", list, err)
	}
	if _, err := h.Release(t.Context(), h.Lead, "B9", []string{"S-0001"}); store.KindOf(err) != store.KindNotFound {
		t.Errorf("a batch that is not there: %v", err)
	}
	if n := h.Count(t, "certificate"); n != 0 {
		t.Errorf("%d papers", n)
	}
}

// A state read in the minute ahead of our clock waits until that instant is past.
func TestReadAheadIsHeld(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	finished(t, h, "B1", passing)
	late := h.State("B1", 1, 15, "1.0")
	late.Kind, late.ID, late.ReadAt = store.KindReplicate, uuid.Must(uuid.NewV7()), h.Clock.Now().Add(30*time.Second)
	h.MustSave(t, h.Technician, late)
	if got := whyOf(t, h, h.Lead, "B1", "S-0001"); got != "read_ahead" {
		t.Errorf("held as %q", got)
	}
	h.Clock.Advance(time.Minute)
	if got := whyOf(t, h, h.Lead, "B1", "S-0001"); got != "" {
		t.Errorf("a minute later held as %q", got)
	}
}

// A correction and a release of the same movement at the same time: either the paper holds the
// corrected value, or the correction is refused. It is never accepted behind the paper's back.
func TestCorrectionMeetsRelease(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	const n = 40
	rates := make([][]string, n)
	for i := range rates {
		rates[i] = passing
	}
	finished(t, h, "B1", rates...)
	accepted := make([]bool, n)
	var wg sync.WaitGroup
	for i := range n {
		start := make(chan struct{})
		wg.Go(func() {
			<-start
			e := h.Rate("B1", i+1, 5, "2.8")
			e.Base, e.Reason = 1, "slip"
			answers, err := h.Save(t.Context(), h.Second, time.Time{}, []store.Entry{e})
			if err != nil {
				t.Error(err)
				return
			}
			accepted[i] = answers[0].Status == store.Accepted
			if !accepted[i] && answers[0].Code != "released" {
				t.Errorf("the correction was refused as %q", answers[0].Code)
			}
		})
		wg.Go(func() {
			<-start
			if _, err := h.Release(t.Context(), h.Lead, "B1", []string{storetest.Serial(i + 1)}); err != nil {
				t.Error(err)
			}
		})
		close(start)
	}
	wg.Wait()
	papers, err := h.Certificates(t.Context(), h.Lead, "B1", 0, n)
	if err != nil || len(papers) != n {
		t.Fatalf("%d papers, %v", len(papers), err)
	}
	for i, c := range papers {
		if got := c.Record.Days[4].Rate; accepted[i] != (got == "2.8") {
			t.Errorf("%s: the correction was accepted: %v, the paper prints %s", c.Record.Movement.Serial, accepted[i], got)
		}
	}
}
