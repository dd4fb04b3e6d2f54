package bench

import (
	"net/http"
	"slices"
	"strconv"
	"strings"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/trial/balance"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// mostRejects is how many rejects of a batch the page lists, those first that regulating alone mends.
const mostRejects = 200

// Rejects lists the batches with rejects, latest start first, and the rejects of one of them: the one
// that the address names, else the first.
func (b *Bench) Rejects(w http.ResponseWriter, r *http.Request) error {
	c, q := page.Of(r), r.URL.Query()
	list, err := b.lab.Batches(r.Context(), c.Actor, store.BatchFilter{}, q.Get("cursor"))
	if err != nil {
		return err
	}
	v := rejectsView{}
	chosen := q.Get("batch")
	for i := range list.Lines {
		line := &list.Lines[i]
		n := failed(line)
		if n == 0 {
			continue
		}
		if chosen == "" {
			chosen = line.Batch.Code
		}
		v.Batches = append(v.Batches, batchLink{line.Batch.Code, page.Query(page.BenchURL, "batch", line.Batch.Code, "cursor", q.Get("cursor")),
			whose(c, &line.Batch), c.Say(words.BenchRejects.With(n)), line.Batch.Code == chosen})
	}
	if list.Next != "" {
		v.Earlier = page.Query(page.BenchURL, "cursor", list.Next)
	}
	if chosen != "" {
		if err := b.rejectsOf(r, &v, chosen); err != nil {
			return err
		}
	}
	return page.Render(w, r, http.StatusOK, rejectsPage(c, v))
}

// failed counts what of a batch is for the bench.
func failed(line *store.BatchLine) int {
	if line.Summary == nil {
		return 0
	}
	return line.Summary.All().Failed()
}

// rejectsView is the page ready to be drawn.
type rejectsView struct {
	Batches []batchLink
	Earlier string // address of earlier batches
	Code    string // of the batch whose rejects are listed; "" for none
	Count   string
	Rows    []rejectRow
	Rest    int
}

type batchLink struct {
	Code, URL, Whose, Count string
	Here                    bool
}

// rejectRow is one reject.
type rejectRow struct {
	Serial, URL, Place string
	Judged             part.Judged
	Outside            string
	Shift              string // what regulating alone would take; "" if it is not enough
}

func (v rejectsView) sheet(c *page.Context) page.Sheet {
	return page.Sheet{Title: c.Say(words.BenchTitle), Sub: c.Say(words.BenchSub), Nav: page.BenchURL, Styles: styles}
}

func (b *Bench) rejectsOf(r *http.Request, v *rejectsView, code string) error {
	c := page.Of(r)
	s, err := b.lab.BatchSheet(r.Context(), c.Actor, code)
	if err != nil {
		return err
	}
	j, err := trial.NewJudge(s.Batch.Programme, s.Batch.Category)
	if err != nil {
		return err
	}
	var result trial.Result
	for i := range s.Movements {
		m := &s.Movements[i]
		if j.Rates(m.Rates, &result); rejected(m, result.Verdict) {
			v.Rows = append(v.Rows, rowOf(c, code, m, j, &result))
		}
	}
	v.Code, v.Count = code, c.Say(words.BenchRejects.With(len(v.Rows)))
	slices.SortStableFunc(v.Rows, func(x, y rejectRow) int { return strings.Compare(order(x), order(y)) })
	if v.Rest = len(v.Rows) - mostRejects; v.Rest > 0 {
		v.Rows = v.Rows[:mostRejects]
	}
	return nil
}

// order puts first what regulating alone mends.
func order(r rejectRow) string {
	if r.Shift != "" {
		return "a"
	}
	return "b"
}

func rowOf(c *page.Context, code string, m *store.Movement, j *trial.Judge, result *trial.Result) rejectRow {
	row := rejectRow{Serial: m.Serial, URL: page.BenchNoteURL(code, m.Serial), Judged: standing(m, result.Verdict),
		Outside: strings.Join(result.Failed(), ", "), Place: words.Blank}
	if m.Holder != "" {
		row.Place = m.Holder + words.Blank + strconv.Itoa(m.Place)
	}
	if s, ok := balance.Regulation(j, m.Rates); ok && result.Verdict == trial.Fail {
		row.Shift = c.Needed(s.Lo.Exact(), s.Hi.Exact())
	}
	return row
}
