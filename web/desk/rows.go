package desk

import (
	"strconv"
	"strings"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// tableView is the table of movements ready to be drawn.
type tableView struct {
	Columns  []part.Column
	Mean     bool     // the mean of the days read so far has a column: its criterion is not known yet
	Limits   []string // of the criteria, in their columns
	Rows     []pieceRow
	Shown    string
	Matching int
	Next     string
	First    string
	Clear    string // address without the filter; "" when there is none
	Filters  []page.Option
	Failures []page.Option
}

// pieceRow is one movement.
type pieceRow struct {
	Serial, URL, Place string
	Judged             part.Judged
	Off                bool // left the trial
	Cells              []part.Cell
	Notes              []string
	Paper, PaperURL    string
	Read               string // how many rounds have it, for who sees no verdict
}

func (v batchView) tableView() tableView {
	chosen := v.choose(v.choice)
	t := tableView{Matching: chosen.matching, Mean: v.may.verdicts && v.meanOpen(), Rows: make([]pieceRow, len(chosen.pieces))}
	t.Columns = v.columns(t.Mean)
	for i, p := range chosen.pieces {
		t.Rows[i] = v.pieceRow(p, t.Mean)
	}
	if v.may.verdicts {
		for i, k := range v.Batch.Programme.Criteria {
			t.Limits = append(t.Limits, v.c.Limits(k, v.judge.Limit(i)))
		}
	}
	t.Shown = v.shown(chosen)
	q := v.choice
	q.Remark = ""
	if chosen.next != "" {
		q.Cursor = chosen.next
		t.Next = q.address(v.Batch.Code, "table")
	}
	q.Cursor = ""
	if chosen.from > 1 {
		t.First = q.address(v.Batch.Code, "table")
	}
	if q.filtered() {
		q.Verdict, q.Failed, q.Text = "", "", ""
		t.Clear = q.address(v.Batch.Code, "table")
	}
	t.Filters, t.Failures = v.filters()
	return t
}

// shown says how many movements the table shows of how many.
func (v batchView) shown(s selection) string {
	c, size := v.c, len(v.Movements)
	switch last := s.from + len(s.pieces) - 1; {
	case s.matching == size && len(s.pieces) == size:
		return c.Say(words.Movements.With(size))
	case len(s.pieces) == s.matching:
		return c.Say(words.MatchingOf.With(s.matching, size))
	case s.matching == size:
		return c.Say(words.RowsOf.With(s.from, last, size))
	default:
		return c.Say(words.RowsOfMatching.With(s.from, last, s.matching, size))
	}
}

// meanOpen tells whether the days of the mean are still being read: it is then shown over those that
// are, apart from the criteria, because it decides nothing.
func (v batchView) meanOpen() bool {
	days := meanDays(v.Batch.Programme)
	return v.next > 0 && v.next <= days[len(days)-1]
}

func (v batchView) columns(mean bool) []part.Column {
	c := v.c
	cols := []part.Column{v.column(byNumber, c.Say(words.SerialNumber), "", false), v.column(byPlace, c.Say(words.HolderPlace), "", false)}
	if !v.may.verdicts {
		return cols
	}
	cols = append(cols, v.column(byVerdict, c.Say(words.Verdict), "", false))
	if mean {
		cols = append(cols, v.column(byMean, c.Say(words.MeanSoFarShort), c.Say(words.UnitSecondsPerDay), true))
	}
	for _, k := range v.Batch.Programme.Criteria {
		cols = append(cols, v.column(k.Symbol, k.Symbol, c.Say(words.Unit(k.Unit)), true))
	}
	return cols
}

func (v batchView) column(name, label, unit string, num bool) part.Column {
	return part.Column{Label: label, Unit: unit, Num: num, URL: v.choice.turned(name).address(v.Batch.Code, "table"), Order: v.choice.order(name)}
}

func (v batchView) pieceRow(p *piece, mean bool) pieceRow {
	c := v.c
	row := pieceRow{Serial: p.Serial, URL: page.MovementURL(v.Batch.Code, p.Serial), Place: placeText(p.Movement), Off: p.End != store.InTrial, Notes: v.notes(p)}
	if !v.may.verdicts {
		row.Judged = plainStanding(p.End)
		row.Read = c.Say(words.RoundsRead.With(p.Read, len(v.Batch.Steps)))
		return row
	}
	row.Judged = judgedAs(p.standing())
	if p.Paper != "" {
		row.Paper, row.PaperURL = p.Paper, page.CertificateURL(p.Paper)
	}
	if mean {
		row.Cells = append(row.Cells, meanCell(c, p))
	}
	for i, k := range v.Batch.Programme.Criteria {
		x := &p.result.Values[i]
		cell := part.Cell{Known: x.Known, Mark: part.OutcomeOf(x.Outcome, x.Unreachable).Mark}
		if x.Known {
			cell.Text = c.Criterion(k, v.judge.Limit(i), x.Exact, words.Decimals(k))
		}
		row.Cells = append(row.Cells, cell)
	}
	return row
}

// meanCell is the mean of the days read so far; it carries no mark, because it decides nothing.
func meanCell(c *page.Context, p *piece) part.Cell {
	if p.days == 0 {
		return part.Cell{}
	}
	return part.Cell{Text: c.Signed(p.mean.Decimal(2), 2), Known: true}
}

// plainStanding is how a movement stands for who is reading: in trial, or why it is not. That it could
// not pass is a verdict and is not told.
func plainStanding(e store.End) part.Judged {
	switch e {
	case store.InTrial:
		return part.Judged{Mark: part.Open, Word: words.InTrial}
	case store.Withdrawn, store.Void:
		return part.JudgedOf(trial.Open, false, e)
	}
	return part.Judged{Mark: part.Void, Word: words.TakenOut}
}

// notes are what else is known of a movement, in few words.
func (v batchView) notes(p *piece) (notes []string) {
	c := v.c
	if p.End != store.InTrial && (v.may.verdicts || p.End != store.Removed) {
		notes = append(notes, p.Cause)
	}
	if p.Attempt > 1 {
		notes = append(notes, c.Say(words.AttemptNumber.With(p.Attempt)))
	}
	if p.Corrections > 0 {
		notes = append(notes, c.Say(words.Corrections.With(p.Corrections)))
	}
	if p.Remarks > 0 {
		notes = append(notes, c.Say(words.RemarksCount.With(p.Remarks)))
	}
	return notes
}

func (r pieceRow) note() string { return strings.Join(r.Notes, "; ") }

// filters are the choices of the two lists above the table.
func (v batchView) filters() (stands, failures []page.Option) {
	count := map[string]int{}
	failed := map[string]int{}
	for i := range v.pieces {
		count[v.pieces[i].standing()]++
		for _, s := range v.pieces[i].result.Failed() {
			failed[s]++
		}
	}
	stands = []page.Option{{Text: v.c.Say(words.All)}}
	for _, s := range standings {
		if count[s] > 0 || s == v.choice.Verdict {
			stands = append(stands, page.Option{Value: s, Text: v.c.Say(words.WithCount.With(judgedAs(s).Word, count[s]))})
		}
	}
	failures = []page.Option{{Text: v.c.Say(words.AnyCriterion)}}
	for _, k := range v.Batch.Programme.Criteria {
		failures = append(failures, page.Option{Value: k.Symbol, Text: v.c.Say(words.WithCount.With(words.Raw(k.Symbol), failed[k.Symbol]))})
	}
	return stands, failures
}

func itoa(n int) string { return strconv.Itoa(n) }
