package desk_test

import (
	"net/http"
	"net/url"
	"slices"
	"strings"
	"testing"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

// The criteria of the rate sheet are the judge's, with printed figures that never contradict them.
func TestRateSheetAgreesWithTheJudge(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	muddle(t, h, "26-001", 25, 8)
	want := judgeHere(t, h, "26-001")
	lead, p := visit(t, base, "lead"), words.New(words.EN, nil)
	for _, m := range want.sheet.Movements {
		sheet, r := lead.page(page.MovementURL("26-001", m.Serial)), want.results[m.Serial]
		if got := sheet.all("dl.cells span.v")[0].text(); got != want.verdicts[m.Serial] {
			t.Errorf("%s stands %q, the judge says %q", m.Serial, got, want.verdicts[m.Serial])
		}
		rows := sheet.all("table.loose tbody tr")
		if len(rows) != len(r.Values) {
			t.Fatalf("%s: %d criteria", m.Serial, len(rows))
		}
		for i, v := range r.Values {
			cells := rows[i].all("td.num")
			k, l := want.sheet.Batch.Programme.Criteria[i], want.judge.Limit(i)
			if v.Known && cells[0].text() != p.Criterion(k, l, v.Exact, words.Decimals(k)) {
				t.Errorf("%s %s: %s", m.Serial, k.Symbol, cells[0].text())
			}
			margin, ok := r.Margin(i)
			if ok && (margin.Sign() < 0) != strings.HasPrefix(cells[2].text(), "−") {
				t.Errorf("%s %s: margin %s shown as %s", m.Serial, k.Symbol, margin, cells[2].text())
			}
		}
	}
}

// What the next day must be is exact: with either end of what is shown the movement can pass, a step
// beyond the true interval it cannot.
func TestNeededIsExact(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	lot(t, h, "26-001", 40, 9, 77)
	want, lead := judgeHere(t, h, "26-001"), visit(t, base, "lead")
	tried := 0
	for _, m := range want.sheet.Movements {
		lo, hi, ok := want.judge.Needed(m.Rates, 10)
		if !ok {
			continue
		}
		text := strings.Join(lead.page(page.MovementURL("26-001", m.Serial)).texts("section .top p"), " ")
		_, after, found := strings.Cut(text, "day 10 within ")
		interval, _, _ := strings.Cut(after, " s/d")
		from, to, split := strings.Cut(interval, " … ")
		if !found || !split {
			t.Fatalf("%s: no interval in %q", m.Serial, text)
		}
		for _, end := range []string{from, to} {
			e, err := trial.ParseExact(strings.NewReplacer("−", "-", "+", "").Replace(end))
			must(t, err)
			if e.Cmp(lo) < 0 || e.Cmp(hi) > 0 {
				t.Errorf("%s: %s is shown, [%s, %s] is true", m.Serial, end, lo, hi)
			}
			milli := e.Times(trial.Ratio(1000, 1)).Rat()
			rates := append([]trial.Rate(nil), m.Rates...)
			rates[9] = trial.RateOf(milli.Num().Int64() / milli.Denom().Int64())
			if want.judge.CannotPass(rates) {
				t.Errorf("%s cannot pass with day 10 at %s, which is shown as good", m.Serial, end)
			}
		}
		tried++
	}
	if tried < 20 {
		t.Errorf("only %d movements had an interval", tried)
	}
}

// Both figures of a correction stay on the sheet, with who, when and why, and the chart has its cross.
func TestCorrectionByForm(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	lot(t, h, "26-001", 2, 4, 3)
	lead, path := visit(t, base, "lead"), "/batches/26-001/movements/S-0001"
	sheet, err := h.MovementSheet(t.Context(), h.Lead, "26-001", "S-0001")
	must(t, err)
	old := sheet.Readings[3]
	form := lead.page(path + "?do=correct&cell=state.3.1")
	if got := form.all("select#f-cell option[selected]"); len(got) != 1 || !strings.Contains(got[0].text(), "round 3") {
		t.Fatalf("the form is about %v", form.texts("select#f-cell option[selected]"))
	}
	id, _ := form.all("#correct input[name=id]")[0].attr("value")
	good := url.Values{"id": {id}, "cell": {"state.3.1"}, "value": {"+2.5"}, "reason": {"misread the tens"}}
	for _, missing := range []string{"cell", "value", "reason"} {
		bad := url.Values{}
		for k, v := range good {
			if k != missing {
				bad[k] = v
			}
		}
		status, body, _ := lead.post(path+"/readings", bad)
		back := parse(t, body)
		if status != http.StatusUnprocessableEntity || len(back.all(".faults li")) == 0 {
			t.Errorf("without %s: %d", missing, status)
		}
		if v, _ := back.all("input#f-value")[0].attr("value"); missing != "value" && v != "+2.5" {
			t.Errorf("without %s the typed value is lost", missing)
		}
	}
	for range 2 { // sending it twice saves it once
		if status, body, _ := lead.post(path+"/readings", good); status != http.StatusSeeOther {
			t.Fatalf("correction: %d, %v", status, parse(t, body).texts(".faults"))
		}
	}
	rows := readingRows(lead.page(path), "3")
	if len(rows) != 2 {
		t.Fatalf("round 3 has %d rows", len(rows))
	}
	p := words.New(words.EN, nil)
	if got := rows[0].all("del")[0].text(); got != p.Signed(old.Value, 1) {
		t.Errorf("the first figure is %s, was %s", got, old.Value)
	}
	if !strings.Contains(rows[0].text(), "misread the tens") || !strings.Contains(rows[1].text(), "+2.5") || !strings.Contains(rows[1].text(), "misread the tens") {
		t.Errorf("rows: %q, %q", rows[0].text(), rows[1].text())
	}
	for _, chart := range lead.page(path).all("svg.chart") { // one for each width of screen
		if n := len(chart.all("path.old")); n != 1 {
			t.Errorf("a chart has %d crosses", n)
		}
	}
	status, body, _ := lead.post(path+"/readings", url.Values{"cell": {"state.3.1"}, "value": {"9"}, "reason": {"again"}})
	if status != http.StatusUnprocessableEntity || !strings.Contains(body, "changed it meanwhile to 2.5") {
		t.Errorf("correcting what was corrected meanwhile: %d", status)
	}
}

func readingRows(d doc, round string) (rows []doc) {
	for _, r := range d.all("table.readings tbody tr") {
		if r.all("th")[0].text() == round {
			rows = append(rows, r)
		}
	}
	return rows
}

// A correction that means a rate beyond ±60 s/d is asked for again, blind, and saved on the second look.
func TestCorrectionAskedAgain(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	lot(t, h, "26-001", 1, 2, 3)
	lead, path := visit(t, base, "lead"), "/batches/26-001/movements/S-0001"
	form := url.Values{"id": {"01980000-0000-7000-8000-000000000001"}, "cell": {"state.2.1"}, "value": {"130"}, "reason": {"image 2"}}
	status, body, _ := lead.post(path+"/readings", form)
	back := parse(t, body)
	if status != http.StatusUnprocessableEntity || len(back.all("#correct .again")) != 1 {
		t.Fatalf("a doubtful correction: %d, %v", status, back.texts("#correct"))
	}
	if strings.Contains(back.all("#correct")[0].text(), "130") || strings.Contains(back.all("#correct")[0].text(), "60") {
		t.Error("the second look shows what was typed or why it is asked")
	}
	for name := range form {
		if v, _ := back.all("#correct input[name=" + name + "]")[0].attr("value"); v != form.Get(name) {
			t.Errorf("%s is lost", name)
		}
	}
	form.Set("confirm", "130.2")
	if status, body, _ := lead.post(path+"/readings", form); status != http.StatusSeeOther {
		t.Fatalf("the second look: %d, %v", status, parse(t, body).texts("#correct"))
	}
	if rows := readingRows(lead.page(path), "2"); len(rows) != 2 || !strings.Contains(rows[1].text(), "130, 130.2") {
		t.Errorf("looks: %v", lead.page(path).texts("table.readings tr"))
	}
}

// A movement is taken out with a cause and taken back; that it cannot pass is not offered to who reads.
func TestEndByForm(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	lot(t, h, "26-001", 2, 3, 1)
	reader, lead, path := visit(t, base, "technician"), visit(t, base, "lead"), "/batches/26-001/movements/S-0001"
	choices := func(v *visitor) (list []string) {
		for _, i := range v.page(path + "?do=end").all("#end input[name=end]") {
			value, _ := i.attr("value")
			list = append(list, value)
		}
		return list
	}
	if got := choices(reader); slices.Contains(got, "removed") || len(got) != 3 {
		t.Errorf("a technician may choose %v", got)
	}
	if got := choices(lead); !slices.Contains(got, "removed") {
		t.Errorf("the lead may choose %v", got)
	}
	if status, _, _ := reader.post(path+"/end", url.Values{"end": {"removed"}, "cause": {"V"}}); status != http.StatusForbidden {
		t.Errorf("a technician removing: %d", status)
	}
	status, body, _ := reader.post(path+"/end", url.Values{"end": {"rejected"}, "seen": {"stopped"}})
	if back := parse(t, body); status != http.StatusUnprocessableEntity || len(back.all("#end input[checked]")) != 1 {
		t.Errorf("without a cause: %d, %v", status, back.texts(".faults"))
	}
	if status, _, _ := reader.post(path+"/end", url.Values{"end": {"rejected"}, "seen": {"stopped"}, "cause": {"stands still"}}); status != http.StatusSeeOther {
		t.Errorf("rejecting: %d", status)
	}
	sheet := lead.page(path)
	if got := sheet.all("dl.cells span.v")[0].text(); got != "rejected" || !strings.Contains(sheet.all("#end")[0].text(), "stands still") {
		t.Errorf("after rejecting: %s, %v", got, sheet.texts("#end"))
	}
	if status, _, _ := lead.post(path+"/end", url.Values{"back": {"yes"}, "cause": {"it was the other one"}}); status != http.StatusSeeOther {
		t.Errorf("taking back: %d", status)
	}
	if got := lead.page(path).texts("#end .list b"); !slices.Equal(got, []string{"rejected", "end taken back"}) {
		t.Errorf("history: %v", got)
	}
}

// Rounds that passed without a reading stand there as not read.
func TestMissedRoundsAreShown(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	good := slices.Repeat([]string{"1.5"}, 15)
	gap := slices.Clone(good)
	gap[4] = ""
	h.Batch(t, "26-001", 1)
	h.Run(t, "26-001", [][]string{gap})
	rows := readingRows(visit(t, base, "lead").page("/batches/26-001/movements/S-0001"), "5")
	if len(rows) != 1 || !strings.Contains(rows[0].text(), "not read") {
		t.Errorf("round 5: %v", rows)
	}
}

func TestSearchGoesStraightToASingleHit(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	h.Batch(t, "26-001", 3, numbered("KW21", 4381))
	h.Batch(t, "26-002", 3, numbered("OD44", 4381), func(n *store.NewBatch) { n.Pieces[2].Serial = "OD44/7 %_ä" })
	lead := visit(t, base, "lead")
	for asked, want := range map[string]string{
		"KW21-004384": "/batches/26-001/movements/KW21-004384", "kw21-004384": "/batches/26-001/movements/KW21-004384", "26-002": "/batches/26-002",
		"OD44/7": page.MovementURL("26-002", "OD44/7 %_ä"), "%_ä": page.MovementURL("26-002", "OD44/7 %_ä"), " 004387 ": "/batches/26-001/movements/KW21-004387",
	} {
		status, _, to := lead.get(page.Query("/search", "q", asked))
		if status != http.StatusSeeOther || to != want {
			t.Errorf("%q leads to %d %s, want %s", asked, status, to, want)
		}
		if status, _, _ := lead.get(to); status != http.StatusOK {
			t.Errorf("%s answers %d", to, status)
		}
	}
	many := lead.page("/search?q=4384")
	if got := many.texts("table tbody th"); !slices.Equal(got, []string{"KW21-004384", "OD44-004384"}) && !slices.Equal(got, []string{"OD44-004384", "KW21-004384"}) {
		t.Errorf("last digits find %v", got)
	}
	for _, nothing := range []string{"0815", "%", "_", "", "KW2_"} {
		if page := lead.page("/search?" + url.Values{"q": {nothing}}.Encode()); len(page.all(".empty")) != 1 {
			t.Errorf("%q finds %v", nothing, page.texts("table tbody th"))
		}
	}
	if status, _, _ := lead.get("/batches/26-999"); status != http.StatusNotFound {
		t.Errorf("no such batch: %d", status)
	}
	if status, _, _ := lead.get("/batches/26-001/movements/none"); status != http.StatusNotFound {
		t.Errorf("no such movement: %d", status)
	}
}
