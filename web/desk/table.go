package desk

import (
	"cmp"
	"net/url"
	"slices"
	"strconv"
	"strings"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/web/page"
)

// rowsOnPage is how many movements the table of a batch shows at once; totals, charts and lists are
// always made over all of them.
const rowsOnPage = 200

// choice is what the address says about the table and the chart of a batch page.
type choice struct {
	Sort    string // a column, "-" before it for descending; "" as registered
	Verdict string // a standing
	Failed  string // a criterion that is outside its limits
	Text    string // in the number, the holder or the cause
	Cursor  string // the number in the batch of the last movement on the page before
	Dist    string // the criterion whose distribution is drawn
	Remark  string // the remark whose form is open; "new" for a new one
}

func choiceOf(q url.Values) choice {
	return choice{q.Get("sort"), q.Get("verdict"), q.Get("failed"), strings.TrimSpace(q.Get("text")), q.Get("cursor"), q.Get("dist"), q.Get("remark")}
}

// address is the page with this choice, at the given part of it.
func (q choice) address(code, at string) string {
	u := page.Query(page.BatchURL(code), "sort", q.Sort, "verdict", q.Verdict, "failed", q.Failed, "text", q.Text, "cursor", q.Cursor,
		"dist", q.Dist, "remark", q.Remark)
	if at != "" {
		u += "#" + at
	}
	return u
}

// filtered tells whether some movements are left out.
func (q choice) filtered() bool { return q.Verdict != "" || q.Failed != "" || q.Text != "" }

// The columns that are no criteria.
const (
	byNumber  = "number"
	byPlace   = "place"
	byVerdict = "verdict"
	byMean    = "mean"
)

// turned is the choice when a column's head is pressed: sorted by it, the other way round if it was
// already.
func (q choice) turned(column string) choice {
	if q.Sort == column {
		column = "-" + column
	}
	q.Sort, q.Cursor, q.Remark = column, "", ""
	return q
}

// order is how a column stands in the table's head.
func (q choice) order(column string) string {
	switch q.Sort {
	case column:
		return "ascending"
	case "-" + column:
		return "descending"
	}
	return ""
}

// selection is the part of a batch that the table shows.
type selection struct {
	pieces   []*piece
	matching int // movements that match the filter
	from     int // of these, the place of the first one shown, from 1
	next     string
}

// choose filters, sorts and cuts out the page.
func (b *judged) choose(q choice) selection {
	var s selection
	for i := range b.pieces {
		if b.matches(&b.pieces[i], q) {
			s.pieces = append(s.pieces, &b.pieces[i])
		}
	}
	s.matching = len(s.pieces)
	b.sort(s.pieces, q.Sort)
	start := 0
	if no, err := strconv.Atoi(q.Cursor); err == nil {
		start = slices.IndexFunc(s.pieces, func(p *piece) bool { return p.No == no }) + 1
	}
	end := min(start+rowsOnPage, len(s.pieces))
	if end < len(s.pieces) {
		s.next = strconv.Itoa(s.pieces[end-1].No)
	}
	s.from, s.pieces = start+1, s.pieces[start:end]
	return s
}

func (b *judged) matches(p *piece, q choice) bool {
	if q.Verdict != "" && p.standing() != q.Verdict {
		return false
	}
	if q.Failed != "" && !slices.Contains(p.result.Failed(), q.Failed) {
		return false
	}
	text := strings.ToLower(q.Text)
	return text == "" || strings.Contains(strings.ToLower(p.Serial), text) || strings.Contains(strings.ToLower(p.Holder), text) ||
		strings.Contains(strings.ToLower(p.Cause), text)
}

// sort orders by a column; movements alike in it stay as they were registered, and those without a
// value stand last either way.
func (b *judged) sort(pieces []*piece, column string) {
	name, down := strings.CutPrefix(column, "-")
	compare := b.comparing(name)
	if compare == nil {
		return
	}
	slices.SortStableFunc(pieces, func(x, y *piece) int {
		n, bothKnown := compare(x, y)
		if down && bothKnown {
			n = -n
		}
		return n
	})
}

// comparing compares two movements by a column, nil for none; bothKnown is false where the order must
// not be turned round.
func (b *judged) comparing(column string) func(x, y *piece) (n int, bothKnown bool) {
	switch column {
	case byNumber:
		return func(x, y *piece) (int, bool) { return strings.Compare(x.Serial, y.Serial), true }
	case byPlace:
		return comparePlaces
	case byVerdict:
		return func(x, y *piece) (int, bool) {
			return cmp.Compare(slices.Index(standings, x.standing()), slices.Index(standings, y.standing())), true
		}
	}
	if column == byMean {
		return func(x, y *piece) (int, bool) {
			return compareValues(&trial.Value{Exact: x.mean, Known: x.days > 0}, &trial.Value{Exact: y.mean, Known: y.days > 0})
		}
	}
	for i, c := range b.Batch.Programme.Criteria {
		if c.Symbol == column {
			return func(x, y *piece) (int, bool) { return compareValues(&x.result.Values[i], &y.result.Values[i]) }
		}
	}
	return nil
}

// comparePlaces puts what lies nowhere last.
func comparePlaces(x, y *piece) (n int, bothKnown bool) {
	switch {
	case x.Place > 0 && y.Place > 0:
		return cmp.Or(strings.Compare(x.Holder, y.Holder), cmp.Compare(x.Place, y.Place)), true
	case x.Place > 0:
		return -1, false
	case y.Place > 0:
		return 1, false
	}
	return 0, false
}

// compareValues puts what is not known last.
func compareValues(x, y *trial.Value) (n int, bothKnown bool) {
	switch {
	case x.Known && y.Known:
		return x.Cmp(y.Exact), true
	case x.Known:
		return -1, false
	case y.Known:
		return 1, false
	}
	return 0, false
}

// roundOfDay is the newest step that closes a programme day; -1 for none.
func roundOfDay(b *store.Batch, day int) int {
	for k := len(b.Steps) - 1; k >= 0; k-- {
		if b.Steps[k].Day == day && (day > 0 || k == 0) {
			return k
		}
	}
	return -1
}
