package desk_test

import (
	"fmt"
	"math/rand/v2"
	"strings"
	"testing"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/trial"
	"ratehouse/web/words"
)

// onHouse is a batch on a programme of the house, six positions in five days, with other criteria than
// the seven; some movements are read in full, some to day 4, one not at all.
func onHouse(t testing.TB, n int) (*storetest.House, string) {
	t.Helper()
	h, base := house(t)
	h.ProgrammeFile(t, "../../testdata/programmes/house6.json")
	h.Batch(t, "B1", n, func(b *store.NewBatch) { b.Programme, b.Category = "HOUSE6", "LARGE" })
	rng := rand.New(rand.NewPCG(6, 5))
	rates := make([][]string, n)
	for i := range rates {
		read := []int{10, 10, 10, 4}[i%4]
		if i == n-1 {
			read = 0
		}
		spread := 1 + rng.Int64N(50)
		for d := range 10 {
			text := ""
			if d < read {
				text = trial.Milli(100 * (rng.Int64N(spread) - spread/3)).String()
			}
			rates[i] = append(rates[i], text)
		}
	}
	h.Run(t, "B1", rates)
	return h, base
}

// Pages take their columns, titles and limits from the programme, whatever it judges by.
func TestPagesOnAnotherProgramme(t *testing.T) {
	t.Parallel()
	h, base := onHouse(t, 12)
	v := visit(t, base, "lead")
	here := judgeHere(t, h, "B1")
	d := v.page("/batches/B1")
	heads := strings.Join(d.texts("table.pieces thead th"), "|")
	for _, c := range here.sheet.Batch.Programme.Criteria {
		if !strings.Contains(heads, c.Symbol) {
			t.Errorf("no column %s in %s", c.Symbol, heads)
		}
	}
	rows := rowsOf(d)
	if len(rows) != 12 {
		t.Fatalf("%d rows", len(rows))
	}
	p := words.New(words.EN, nil)
	for i, m := range here.sheet.Movements {
		text := rows[i].text()
		if !strings.Contains(strings.ToLower(text), here.verdicts[m.Serial]) {
			t.Errorf("%q, want %s", text, here.verdicts[m.Serial])
		}
		r := here.results[m.Serial]
		for k, c := range here.sheet.Batch.Programme.Criteria {
			if x := r.Values[k]; x.Known && !strings.Contains(text, p.Criterion(c, here.judge.Limit(k), x.Exact, words.Decimals(c))) {
				t.Errorf("%s: %s = %s is not in %q", m.Serial, c.Symbol, x.Exact, text)
			}
		}
	}
	for _, c := range here.sheet.Batch.Programme.Criteria {
		for _, q := range []string{"?dist=", "?sort=", "?sort=-", "?failed="} {
			v.page("/batches/B1" + q + c.Symbol)
		}
	}
	sorted := v.page("/batches/B1?sort=S")
	if order := sortedBy(rowsOf(sorted), here, 1); order != "" {
		t.Error(order)
	}
	sheet := v.page("/batches/B1/movements/S-0001").text()
	for _, want := range []string{"hanging less lying", "figure of merit, smaller is better", "standard deviation of days 1 to 6", "greatest less least rate of days 1 to 6"} {
		if !strings.Contains(sheet, want) {
			t.Errorf("%q is not on the rate sheet", want)
		}
	}
	if strings.Contains(sheet, p.Say(words.FlatAndHanging)) {
		t.Error("the term of another criterion stands on the rate sheet")
	}
	for _, m := range here.sheet.Movements {
		v.page("/batches/B1/movements/" + m.Serial)
	}
	for k := range here.sheet.Batch.Steps {
		v.page(fmt.Sprintf("/batches/B1/rounds/%d", k))
	}
	v.page("/batches/new")
	v.page("/batches/B1/release")
}

// A programme of 203 days without any limit: its pages open, and say no verdict.
func TestPagesOnALongProgrammeWithoutLimits(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	h.ProgrammeFile(t, "../../trial/sheet/programmes/weekly.json")
	b := h.Batch(t, "B1", 2, func(n *store.NewBatch) { n.Programme = "weekly" })
	h.Clock.Set(b.Due(1))
	must(t, h.OpenRound(t.Context(), h.Technician, "B1", 1))
	h.MustSave(t, h.Technician, h.Rate("B1", 1, 1, "1.2"))
	v := visit(t, base, "lead")
	if text := v.page("/batches/B1").text(); !strings.Contains(text, "no limits") {
		t.Errorf("no word of no limits in %q", text)
	}
	for _, path := range []string{"/batches", "/today", "/batches/B1?dist=T", "/batches/B1?sort=-T", "/batches/B1/movements/S-0001", "/batches/B1/rounds/1", "/batches/B1/release"} {
		v.page(path)
	}
}

// sortedBy tells the first pair of rows out of order by criterion k; unknown values stand last.
func sortedBy(rows []doc, here judgedHere, k int) string {
	var before *trial.Value
	for _, row := range rows {
		for serial, r := range here.results {
			if !strings.Contains(row.text(), serial) {
				continue
			}
			x := r.Values[k]
			if before != nil && x.Known && (!before.Known || before.Cmp(x.Exact) > 0) {
				return fmt.Sprintf("%s stands after %s", x.Exact, before.Exact)
			}
			before = &x
		}
	}
	return ""
}

func TestPagesOnAnotherProgrammeLook(t *testing.T) {
	t.Parallel()
	_, base := onHouse(t, 12)
	look(t, base, "lead", [][2]string{{"house-batch", "/batches/B1?dist=S"}})
}
