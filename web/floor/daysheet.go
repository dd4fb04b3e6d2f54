package floor

import (
	"net/http"
	"strconv"

	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// dayView is a round on paper, for when no screen works: laid out like the round page.
type dayView struct {
	sheet        page.Sheet
	url          string
	title, sub   string
	cells        []page.Cell
	value, foot  string
	leaves       []dayLeaf
	houseAddress string
}

type dayLeaf struct {
	n, of   string
	holders []dayHolder
}

type dayHolder struct {
	code string
	rows []dayRow
}

// dayRow is one place that carries a movement; a piece out of the trial is struck, so that what is below
// it does not move up.
type dayRow struct {
	place, serial, ended string
}

// Heights on a leaf in tenths of a millimetre: what holders may fill, the head of one, a row, and a row
// whose number takes two lines. print.css gives the sizes; a test measures that no leaf is longer than
// its sheet.
const (
	leafHeight = 1900
	headHeight = 140
	rowHeight  = 78
	rowTwice   = 100
	longSerial = 34
)

// DaySheet shows a round as leaves to print.
func (f *Floor) DaySheet(w http.ResponseWriter, r *http.Request) error {
	c := page.Of(r)
	code, k, err := roundOf(r)
	if err != nil {
		return err
	}
	s, err := f.lab.RoundSheet(r.Context(), c.Actor, code, k)
	if err != nil {
		return err
	}
	return page.Render(w, r, http.StatusOK, daySheet(c, viewDay(c, &s)))
}

func viewDay(c *page.Context, s *store.RoundSheet) dayView {
	v := dayView{url: page.RoundURL(s.Batch.Code, s.K), houseAddress: c.House.Title,
		title: c.Say(words.DaySheetTitle.With(words.RoundNumber.With(s.K), c.Date(s.Due))),
		sub:   c.Say(words.BatchTitle.With(s.Batch.Code)) + ", " + batchWords(c, &s.Batch) + "; " + roundWords(c, &s.Batch, s.Plan),
		value: c.Say(words.WriteState), foot: c.Say(words.DaySheetOf.With(s.Batch.Code, words.RoundNumber.With(s.K)))}
	sign := words.SignState
	if s.Batch.Entry == store.EntryRate {
		v.value, sign = c.Say(words.WriteRate), words.SignRate
	}
	v.sheet = page.Sheet{Title: v.title, Nav: page.TodayURL, Floor: true, Bare: true, Styles: []string{"floor.css"}, Scripts: []string{"print.js"}}
	pos, celsius := now(s.Batch.Programme, s.Plan)
	a := afterReading(c, s)
	then := c.Say(words.ThenCell)
	if a.acts != "" {
		then = c.Say(words.AfterReading.With(words.Raw(a.acts)))
	}
	v.cells = []page.Cell{page.TextCell(c.Say(words.ReadAtCell), c.Say(words.DueWithin.With(c.Time(s.Due), c.Span(tolerance(s))))),
		{Label: c.Say(words.ReadNow), Body: part.Position(c.Printer, pos, celsius.String())}, {Label: then, Body: a.where},
		page.TextCell(c.Say(words.SignCell), c.Say(sign))}
	v.leaves = leavesOf(c, s)
	return v
}

// leavesOf fills leaves with holders in order; one that does not fit begins a new leaf, and one larger
// than a leaf goes on on the next.
func leavesOf(c *page.Context, s *store.RoundSheet) (leaves []dayLeaf) {
	left := 0
	for i := range s.Holders {
		rows := dayRows(c, &s.Holders[i])
		for len(rows) > 0 {
			if len(leaves) == 0 || left < leafHeight && fitting(rows, left) < len(rows) {
				leaves, left = append(leaves, dayLeaf{}), leafHeight
			}
			n := fitting(rows, left)
			last := &leaves[len(leaves)-1]
			last.holders = append(last.holders, dayHolder{s.Holders[i].Code, rows[:n]})
			left -= headHeight + heightOf(rows[:n])
			rows = rows[n:]
		}
	}
	for i := range leaves {
		leaves[i].n, leaves[i].of = strconv.Itoa(i+1), strconv.Itoa(len(leaves))
	}
	return leaves
}

// fitting is how many of the rows go into so much height, below a head.
func fitting(rows []dayRow, height int) int {
	n := len(rows)
	for n > 0 && headHeight+heightOf(rows[:n]) > height {
		n--
	}
	return n
}

func heightOf(rows []dayRow) (sum int) {
	for _, r := range rows {
		if len(r.serial) > longSerial {
			sum += rowTwice
		} else {
			sum += rowHeight
		}
	}
	return sum
}

func dayRows(c *page.Context, h *store.HolderRound) (rows []dayRow) {
	for _, x := range h.Seats {
		if x.No == 0 {
			continue
		}
		r := dayRow{place: strconv.Itoa(x.Place), serial: x.Serial}
		if x.Ended != store.InTrial {
			r.ended = c.Say(words.EndWord(x.Ended))
		}
		rows = append(rows, r)
	}
	return rows
}

func (l dayLeaf) words(c *page.Context) string { return c.Say(words.LeafOf.With(l.n, l.of)) }
