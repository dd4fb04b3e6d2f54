package desk_test

import (
	"fmt"
	"math/rand/v2"
	"net/http"
	"net/url"
	"slices"
	"strings"
	"testing"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/trial"
	"ratehouse/web/words"
)

// judgedHere is a batch judged again by the engine alone: what its page must say.
type judgedHere struct {
	sheet    store.BatchSheet
	judge    *trial.Judge
	verdicts map[string]string // the word expected, by serial
	results  map[string]trial.Result
}

func judgeHere(t testing.TB, h *storetest.House, code string) judgedHere {
	t.Helper()
	s, err := h.BatchSheet(t.Context(), h.Lead, code)
	must(t, err)
	j, err := trial.NewJudge(s.Batch.Programme, s.Batch.Category)
	must(t, err)
	out := judgedHere{s, j, map[string]string{}, map[string]trial.Result{}}
	for _, m := range s.Movements {
		var r trial.Result
		j.Rates(m.Rates, &r)
		word := r.Verdict.String()
		switch {
		case m.End != store.InTrial:
			word = string(m.End)
		case r.Verdict == trial.Open && j.CannotPass(m.Rates):
			word = "cannot pass"
		}
		out.verdicts[m.Serial], out.results[m.Serial] = word, r
	}
	return out
}

// rowsOf are the rows of the table of movements, without the limits.
func rowsOf(d doc) (rows []doc) {
	for _, r := range d.all("table.pieces tbody tr") {
		if class, _ := r.attr("class"); !strings.Contains(class, "limits") {
			rows = append(rows, r)
		}
	}
	return rows
}

// muddle makes a batch of random rates, some missing, some movements ended, corrected, remarked.
func muddle(t testing.TB, h *storetest.House, code string, n int, seed uint64) {
	t.Helper()
	r := rand.New(rand.NewPCG(seed, 17))
	h.Batch(t, code, n)
	rates := make([][]string, n)
	for i := range rates {
		centre, read := r.IntN(160)-60, 15
		if r.IntN(3) == 0 {
			read = r.IntN(16)
		}
		for d := range 15 {
			text := ""
			if d < read && r.IntN(40) > 0 {
				text = trial.Milli(100 * (centre + r.IntN(41) - 20)).String()
			}
			rates[i] = append(rates[i], text)
		}
	}
	h.Run(t, code, rates)
	for range n / 6 {
		end := []store.End{store.Rejected, store.Withdrawn, store.Void, store.Removed}[r.IntN(4)]
		err := h.EndMovement(t.Context(), h.Lead, code, storetest.Serial(1+r.IntN(n)), end, "as it came", "")
		if err != nil && store.KindOf(err) != store.KindConflict {
			t.Fatal(err)
		}
	}
}

// What the page says is what the judge says on the same numbers: verdicts, values, marks and counts.
func TestPageAgreesWithTheJudge(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	const n = 60
	for seed := range uint64(3) {
		muddle(t, h, fmt.Sprintf("26-00%d", seed), n, seed)
	}
	lead := visit(t, base, "lead")
	p := words.New(words.EN, nil)
	for seed := range 3 {
		code := fmt.Sprintf("26-00%d", seed)
		want, page := judgeHere(t, h, code), lead.page("/batches/"+code)
		rows := rowsOf(page)
		if len(rows) != n {
			t.Fatalf("%s: %d rows, want %d", code, len(rows), n)
		}
		count := map[string]int{}
		for _, row := range rows {
			serial := row.all("th")[0].text()
			count[want.verdicts[serial]]++
			if got := row.all("td span.v")[0].text(); got != want.verdicts[serial] {
				t.Errorf("%s %s: the page says %q, the judge %q", code, serial, got, want.verdicts[serial])
			}
			compareCells(t, p, want, serial, row)
		}
		compareTally(t, page, count)
		comparePareto(t, page, want.sheet)
	}
}

// comparePareto holds the bars of the page against the summary that the list of batches keeps.
func comparePareto(t *testing.T, page doc, sheet store.BatchSheet) {
	t.Helper()
	sum, err := sheet.Summarise()
	must(t, err)
	for i, k := range sheet.Batch.Programme.Criteria {
		found := false
		for _, bar := range page.all("svg g[role=img]") {
			says, _ := bar.attr("aria-label")
			if strings.HasPrefix(says, k.Symbol+" ") && strings.Contains(says, "movement") {
				found = true
				if want := fmt.Sprintf(": %d movement", sum.Failed[i]); !strings.Contains(says, want) {
					t.Errorf("%s: the page says %q, the summary %d", sheet.Batch.Code, says, sum.Failed[i])
				}
			}
		}
		if !found {
			t.Errorf("%s: no bar for %s", sheet.Batch.Code, k.Symbol)
		}
	}
}

// compareCells holds the numbers of one row against the judge's: the same figure, inside when it says
// inside, marked when it says outside.
func compareCells(t *testing.T, p *words.Printer, want judgedHere, serial string, row doc) {
	t.Helper()
	r := want.results[serial]
	cells := row.all("td.num")
	cells = cells[len(cells)-len(r.Values):]
	for i, v := range r.Values {
		class, _ := cells[i].attr("class")
		marked := strings.Contains(" "+class+" ", " out ")
		if marked != (v.Outcome == trial.Outside) {
			t.Errorf("%s criterion %d: marked %v, the judge says %s", serial, i, marked, v.Outcome)
		}
		if !v.Known {
			if got := cells[i].text(); got != "not read ·" {
				t.Errorf("%s criterion %d: %q where nothing is known", serial, i, got)
			}
			continue
		}
		k, l := want.sheet.Batch.Programme.Criteria[i], want.judge.Limit(i)
		text := cells[i].text()
		if wanted := p.Criterion(k, l, v.Exact, words.Decimals(k)); text != wanted {
			t.Errorf("%s criterion %d: %q, want %q", serial, i, text, wanted)
		}
		shown, err := trial.ParseExact(strings.NewReplacer("−", "-", "+", "").Replace(text))
		if err != nil || l.Contains(shown) != (v.Outcome == trial.Inside) {
			t.Errorf("%s criterion %d: the printed %s contradicts %s (%v)", serial, i, text, v.Outcome, err)
		}
	}
}

func compareTally(t *testing.T, page doc, count map[string]int) {
	t.Helper()
	for _, line := range page.all("ul.tally li") {
		word, n := line.all("span.v")[0].text(), line.all("span.n")[0].text()
		if fmt.Sprint(count[word]) != n {
			t.Errorf("tally: %s movements %q, the rows have %d", n, word, count[word])
		}
		delete(count, word)
	}
	for word, n := range count {
		t.Errorf("tally: %d movements %q are not counted", n, word)
	}
}

// The table is sorted and filtered by the address, over the whole batch.
func TestSortingAndChoosing(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	muddle(t, h, "26-001", 80, 5)
	want := judgeHere(t, h, "26-001")
	lead := visit(t, base, "lead")
	at := func(query string) []string {
		return serials(rowsOf(lead.page("/batches/26-001?" + query)))
	}
	plain := at("")
	for i, k := range want.sheet.Batch.Programme.Criteria {
		for _, dir := range []string{"", "-"} {
			got := at("sort=" + dir + k.Symbol)
			if len(got) != len(plain) {
				t.Fatalf("sorting by %s shows %d movements of %d", k.Symbol, len(got), len(plain))
			}
			for n := 1; n < len(got); n++ {
				x, y := want.results[got[n-1]].Values[i], want.results[got[n]].Values[i]
				wrong := !x.Known && y.Known
				if x.Known && y.Known {
					c := x.Cmp(y.Exact)
					wrong = dir == "" && c > 0 || dir == "-" && c < 0
				}
				if wrong {
					t.Errorf("sort=%s%s: %s before %s", dir, k.Symbol, got[n-1], got[n])
				}
			}
		}
	}
	for _, verdict := range []string{"pass", "fail", "open", "cannot", "rejected", "withdrawn", "void", "removed"} {
		word := strings.Replace(verdict, "cannot", "cannot pass", 1)
		var expect []string
		for _, s := range plain {
			if want.verdicts[s] == word {
				expect = append(expect, s)
			}
		}
		if got := at("verdict=" + verdict); !slices.Equal(got, expect) {
			t.Errorf("verdict=%s shows %v, want %v", verdict, got, expect)
		}
	}
	var failed []string
	for _, s := range plain {
		r := want.results[s]
		if slices.Contains(r.Failed(), "V") {
			failed = append(failed, s)
		}
	}
	if got := at("failed=V"); len(failed) == 0 || !slices.Equal(got, failed) {
		t.Errorf("failed=V shows %v, want %v", got, failed)
	}
	if got := at("text=s-0007"); !slices.Equal(got, []string{"S-0007"}) {
		t.Errorf("text=s-0007 shows %v", got)
	}
	if page := lead.page("/batches/26-001?text=zzz"); len(rowsOf(page)) != 0 || len(page.all("#table .empty")) != 1 {
		t.Error("a choice that leaves nothing shows no empty state")
	}
	if heads := lead.page("/batches/26-001?sort=-V").all("table.pieces th[aria-sort=descending]"); len(heads) != 1 {
		t.Errorf("%d heads are marked as sorted", len(heads))
	}
}

func serials(rows []doc) (list []string) {
	for _, r := range rows {
		list = append(list, r.all("th")[0].text())
	}
	return list
}

// Pages of the table together show every movement once, whatever it is sorted by.
func TestTablePageByPage(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	lot(t, h, "26-001", 450, 1, 3)
	lead := visit(t, base, "lead")
	seen := map[string]bool{}
	to, pages := "/batches/26-001?sort=mean", 0
	for to != "" {
		page := lead.page(to)
		for _, s := range serials(rowsOf(page)) {
			if seen[s] {
				t.Fatalf("%s is shown twice", s)
			}
			seen[s] = true
		}
		to, pages = "", pages+1
		for _, a := range page.all("p.pager a") {
			if a.text() == "Further rows" {
				to, _ = a.attr("href")
			}
		}
		if n := page.all("ul.tally span.n"); n[3].text() != "450" && n[2].text() == "0" {
			t.Errorf("page %d of the table counts %v movements", pages, page.texts("ul.tally li"))
		}
	}
	if len(seen) != 450 || pages != 3 {
		t.Errorf("%d movements on %d pages", len(seen), pages)
	}
}

// Who is reading sees no verdict, limit, value or depositor on any of these pages (practice notes X1).
func TestTechniciansSeeNoVerdicts(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	_, err := h.AddDepositor(t.Context(), h.Lead, store.Depositor{Code: "ONDREL", Title: "Ondrel Movements"})
	must(t, err)
	lot(t, h, "26-001", 40, 15, 9, func(n *store.NewBatch) { n.Depositor = "ONDREL" })
	must(t, h.EndMovement(t.Context(), h.Lead, "26-001", "S-0002", store.Removed, "V cannot come back inside", ""))
	sheet, err := h.MovementSheet(t.Context(), h.Lead, "26-001", "S-0001")
	must(t, err)
	reader := visit(t, base, "technician")
	for _, path := range []string{"/batches", "/batches/26-001", "/batches/26-001?verdict=pass&sort=-M&dist=V", "/batches/26-001/movements/S-0001", "/batches/26-001/movements/S-0002", "/search?q=S-00"} {
		page := reader.page(path)
		main := page.all("main")[0].text()
		for _, bad := range []string{"pass", "fail", "Yield", "Limit", "limit", "Vmax", "Ondrel", "−4.0", "V cannot", "removed"} {
			if strings.Contains(main, bad) {
				t.Errorf("%s tells a technician %q", path, bad)
			}
		}
		for _, l := range sheet.Readings[1:] {
			if v := words.New(words.EN, nil).Signed(l.Value, 1); strings.Contains(main, v) {
				t.Errorf("%s tells a technician the value %s", path, v)
			}
		}
	}
	all := serials(rowsOf(reader.page("/batches/26-001?verdict=pass")))
	if len(all) != 40 {
		t.Errorf("a technician can choose by verdict: %d rows", len(all))
	}
	if status, _, _ := reader.get("/batches/26-001/sheets.csv"); status != http.StatusForbidden {
		t.Errorf("a technician asking for the values gets %d", status)
	}
}

// The file is what the judge says, with the end of each movement.
func TestValuesAsCSV(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	muddle(t, h, "26-001", 30, 2)
	want := judgeHere(t, h, "26-001")
	lead := visit(t, base, "lead")
	_, body, _ := lead.get("/batches/26-001/sheets.csv")
	lines := strings.Split(strings.TrimSuffix(body, "\n"), "\n")
	if lines[0] != "serial,category,verdict,M,V,Vmax,D,P,C,R,failed,unreachable,end,end_cause" {
		t.Errorf("header %s", lines[0])
	}
	if len(lines) != 31 {
		t.Fatalf("%d lines", len(lines))
	}
	for i, m := range want.sheet.Movements {
		cells := strings.Split(lines[i+1], ",")
		r := want.results[m.Serial]
		if cells[0] != m.Serial || cells[2] != r.Verdict.String() || cells[12] != string(m.End) || cells[13] != m.Cause {
			t.Errorf("line %d: %s; the judge says %s", i+2, lines[i+1], r.Verdict)
		}
	}
}

// A remark is added, decided and closed by form; a form that is not acceptable comes back filled in.
func TestRemarksByForm(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	lot(t, h, "26-001", 3, 2, 1)
	lead := visit(t, base, "lead")
	status, body, _ := lead.post("/batches/26-001/remarks", url.Values{"serial": {"S-9999"}, "words": {"the lid was cracked"}})
	back := parse(t, body)
	if status != http.StatusUnprocessableEntity || len(back.all(".faults li")) != 1 || back.all("textarea#f-words")[0].text() != "the lid was cracked" {
		t.Errorf("an unknown movement: %d, %v", status, back.texts(".faults"))
	}
	if status, _, to := lead.post("/batches/26-001/remarks", url.Values{"serial": {"S-0002"}, "words": {"the lid was cracked"}}); status != http.StatusSeeOther {
		t.Fatalf("a good remark: %d, %s", status, to)
	}
	page := lead.page("/batches/26-001")
	if got := page.texts("ul.remarks li span.said"); !slices.Equal(got, []string{"the lid was cracked"}) {
		t.Fatalf("remarks: %v", got)
	}
	form, _ := page.all("ul.remarks a.more")[0].attr("href")
	action, _ := lead.page(form).all("ul.remarks form")[0].attr("action")
	if status, _, _ := lead.post(action, url.Values{"state": {"closed"}}); status != http.StatusUnprocessableEntity {
		t.Errorf("closing without a word: %d", status)
	}
	if status, _, _ := lead.post(action, url.Values{"state": {"closed"}, "words": {"no effect"}}); status != http.StatusSeeOther {
		t.Errorf("closing: %d", status)
	}
	page = lead.page("/batches/26-001")
	if line := page.all("ul.remarks li")[0]; !strings.Contains(line.text(), "closed") || len(line.all("a.more")) != 0 {
		t.Errorf("after closing: %s", line.text())
	}
}

// The batch page offers the release when the trial is over, and only to who may release.
func TestReleaseButton(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	good := slices.Repeat([]string{"1"}, 15)
	h.Batch(t, "26-001", 2)
	lead := visit(t, base, "lead")
	if b := lead.page("/batches/26-001").all(".acts button[disabled]"); len(b) != 1 {
		t.Error("before the end the release is not shown as not possible yet")
	}
	h.Batch(t, "26-002", 1)
	for k := 1; k <= 10; k++ { // fails in M on day 10, with the trial going on
		h.MustSave(t, h.Technician, h.Rate("26-002", 1, k, "7.5"))
	}
	running := lead.page("/batches/26-002")
	if got := running.texts("ul.tally li"); !slices.Contains(got, "fail 1 100.0 %") || len(running.all(".acts button[disabled]")) != 1 {
		t.Errorf("while the trial goes on: %v, %v", got, running.texts(".title .acts"))
	}
	h.Run(t, "26-001", [][]string{good, good})
	lead = visit(t, base, "lead")
	if a := lead.page("/batches/26-001").all(".title a.main"); len(a) != 1 || a[0].text() != "Release 2 certificates" {
		t.Errorf("after the end: %v", lead.page("/batches/26-001").texts(".title .acts"))
	}
	if _, err := h.Release(t.Context(), h.Lead, "26-001", []string{storetest.Serial(1)}); err != nil {
		t.Fatal(err)
	}
	if got := lead.page("/batches/26-001").texts(".title .acts a"); !slices.Contains(got, "1 paper") {
		t.Errorf("after a release: %v", got)
	}
	if got := lead.page("/batches/26-001/certificates").texts("h1"); len(got) != 1 {
		t.Errorf("behind that: %v", got)
	}
	manager := visit(t, base, "manager")
	if acts := manager.page("/batches/26-001").texts(".title .acts"); strings.Contains(strings.Join(acts, " "), "Release") {
		t.Errorf("the manager is offered %v", acts)
	}
}
