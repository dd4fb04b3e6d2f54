package desk

import (
	"net/http"

	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// batchesView is the list of batches ready to be drawn.
type batchesView struct {
	Words    string
	Verdicts bool
	Lines    []batchLine
	Next     string // address of the next page
	First    string // address of the first one, when this is none
	New      string // address of the form for a new batch; "" for who may not
}

// batchLine is one batch of the list.
type batchLine struct {
	URL, Code, For string
	Strip          part.Strip
	State          string
	When           string
	Late           bool
	Progress       *part.Ruler
	Pass, Fail     string
	Open, Cannot   string
	HasCannot      bool
	Yield          string
	Judged         string
	Remarks        string
	HasRemarks     bool
}

// Batches is the list of batches, latest start first.
func (d *Desk) Batches(w http.ResponseWriter, r *http.Request) error {
	c, q := page.Of(r), r.URL.Query()
	list, err := d.lab.Batches(r.Context(), c.Actor, store.BatchFilter{Words: q.Get("q")}, q.Get("cursor"))
	if err != nil {
		return err
	}
	v := batchesView{Words: q.Get("q"), Verdicts: rightsOf(c).verdicts, Lines: make([]batchLine, len(list.Lines))}
	for i := range list.Lines {
		v.Lines[i] = batchLineOf(c, &list.Lines[i])
	}
	if list.Next != "" {
		v.Next = page.Query(page.BatchesURL, "q", v.Words, "cursor", list.Next)
	}
	if q.Get("cursor") != "" {
		v.First = page.Query(page.BatchesURL, "q", v.Words)
	}
	if rightsOf(c).register {
		v.New = page.NewBatchURL
	}
	return page.Render(w, r, http.StatusOK, batchesPage(c, v))
}

func batchLineOf(c *page.Context, b *store.BatchLine) batchLine {
	v := batchLine{URL: page.BatchURL(b.Batch.Code), Code: b.Batch.Code,
		For:   c.Say(words.SizeAndCalibre.With(words.Movements.With(b.Batch.Size), words.Raw(forWhom(c, &b.Batch)))),
		Strip: part.StripOf(c.Printer, b.Batch.Programme, closedDays(&b.Batch, b.Due), nil), HasRemarks: b.OpenRemarks > 0, Remarks: c.Count(b.OpenRemarks)}
	v.when(c, b)
	if s := b.Summary; s != nil {
		all := s.All()
		v.Pass, v.Fail, v.Open = c.Count(all.Pass), c.Count(all.Failed()), c.Count(all.Open-s.Cannot)
		v.Cannot, v.HasCannot = c.Count(s.Cannot), s.Cannot > 0
		v.Yield = c.Share(s.First.Pass, s.First.Judged())
		if n := s.First.Judged(); n > 0 {
			v.Judged = c.Say(words.OfJudged.With(s.First.Pass, n))
		}
	}
	return v
}

// when says where the batch lies in time and how far its next round is.
func (v *batchLine) when(c *page.Context, b *store.BatchLine) {
	r := b.Round()
	switch b.State {
	case store.BatchDone:
		v.State, v.When = c.Say(words.BatchStateDone), c.Date(b.Batch.Due(b.Batch.LastStep()))
	case store.BatchWaiting:
		v.State, v.When = c.Say(words.BatchStateWaiting), c.Say(words.RoundDueAt.With(r.K, c.Weekday(r.Due), c.Time(r.Due)))
	default:
		v.State = c.Say(words.DayOf.With(max(closedDays(&b.Batch, b.Due), 0), len(b.Batch.Programme.Days)))
		v.When = c.Say(words.RoundDueAt.With(r.K, c.Weekday(r.Due), c.Time(r.Due)))
		if r.State == store.RoundOpen || r.Read > 0 {
			v.Progress = &part.Ruler{Done: r.Read, Whole: r.Going, Label: c.Say(words.MovementsReadIn.With(b.Batch.Code)), Live: true}
		}
	}
	if r != nil && r.Late(c.Now) > 0 {
		v.Late, v.When = true, c.Say(words.RoundLate.With(r.K, c.Due(r.Due, c.Now)))
	}
}

// closedDays is how many programme days are over when round due is the next one: -1 before round 0
// is read, all when there is none.
func closedDays(b *store.Batch, due int) int {
	if due < 0 {
		return len(b.Programme.Days)
	}
	closed := -1
	for k := range due {
		closed = max(closed, b.Steps[k].Day)
	}
	return closed
}

// forWhom is calibre and depositor in one line; who is reading is not told the depositor (practice
// notes X1).
func forWhom(c *page.Context, b *store.Batch) string {
	calibre := c.Say(words.NoCalibre)
	if b.Calibre.Code != "" {
		calibre = c.Say(words.OfCalibre.With(b.Calibre.Code))
	}
	if !rightsOf(c).verdicts {
		return calibre
	}
	return c.Say(words.CalibreFor.With(calibre, depositorName(b)))
}

func depositorName(b *store.Batch) string {
	if b.Depositor.Title != "" {
		return b.Depositor.Title
	}
	return b.Depositor.Code
}

func (v batchesView) empty(c *page.Context) part.Empty {
	if v.Words != "" {
		return part.Empty{Title: c.Say(words.BatchesNoneLike.With(v.Words)), Text: c.Say(words.BatchesNoneLikeText),
			ActText: c.Say(words.BatchesAll), Act: page.BatchesURL}
	}
	e := part.Empty{Title: c.Say(words.BatchesNone), Text: c.Say(words.BatchesNoneText)}
	if v.New != "" {
		e.ActText, e.Act = c.Say(words.NewBatch), v.New
	}
	return e
}

func (v batchesView) sheet(c *page.Context) page.Sheet {
	s := page.Sheet{Title: c.Say(words.NavBatches), Sub: c.Say(words.BatchesSub), Nav: page.BatchesURL, Styles: []string{"desk.css"}}
	if v.New != "" && len(v.Lines) > 0 {
		s.Acts = append(s.Acts, page.Act{Text: c.Say(words.NewBatch), URL: v.New, Main: true})
	}
	return s
}
