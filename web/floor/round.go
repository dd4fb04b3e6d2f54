package floor

import (
	"net/http"
	"slices"
	"strconv"
	"strings"
	"time"

	"github.com/a-h/templ"
	"github.com/google/uuid"

	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// roundView is the page of a reading round.
type roundView struct {
	sheet    page.Sheet
	url      string
	state    store.RoundState
	nothing  bool // nothing is read: round 0 of a batch that takes in rates
	opening  opening
	holders  []holderView
	at       holderView // the one shown first
	many     bool       // too many holders for tabs with words
	field    fieldView
	after    after
	codes    []codeKey
	model    roundModel
	readText string
}

// opening is what stands in place of the keys while the round is not open.
type opening struct{ early, earlyText string }

// holderView is one holder with its tab.
type holderView struct {
	part.Holder
	n, of      int
	read, all  int
	looks      int
	text, says string
	class      string // of its tab: full, begun or ""
	url        string
	shown      bool
}

// after is what is done when a holder is read: the acts in words, and where it goes then.
type after struct {
	acts  string
	where templ.Component
}

// codeKey is an observation with the key that stands for it in every language.
type codeKey struct{ key, code, text string }

// observationKeys are the keys of the observations, in their order.
var observationKeys = []string{"S", "H", "U", "N", "D"}

// fieldView is the field for one place, as the server draws it; the script takes over from there.
type fieldView struct {
	holder, serial, label, hint, note string
	place                             int
	id                                string
	base                              int
	value, reason                     string
	first                             string   // second look: the value typed first
	confirm                           []string // and those after it
	why                               string
	needsReason, again, off           bool
}

// Round shows the page of a reading round at one holder and place.
func (f *Floor) Round(w http.ResponseWriter, r *http.Request) error {
	c := page.Of(r)
	code, k, err := roundOf(r)
	if err != nil {
		return err
	}
	s, err := f.lab.RoundSheet(r.Context(), c.Actor, code, k)
	if err != nil {
		return err
	}
	q := r.URL.Query()
	v := viewRound(c, &s, q.Get("holder"), q.Get("place"))
	if q.Get("noted") != "" {
		v.sheet.Notices = append(v.sheet.Notices, page.Notice{Tone: page.Good, Title: c.Say(words.RemarkSaved)})
	}
	return page.Render(w, r, http.StatusOK, roundPage(c, v))
}

func viewRound(c *page.Context, s *store.RoundSheet, holder, place string) roundView {
	h, i := chosen(s, holder, place)
	v := roundView{
		url: page.RoundURL(s.Batch.Code, s.K), state: s.State, nothing: nothingRead(s), many: len(s.Holders) > tabsMost,
		after: afterReading(c, s), model: modelOf(c, s, h, i), readText: c.Say(words.CountOf.With(s.Read, s.Going)),
	}
	v.sheet = roundFrame(c, s, v.readText)
	for n := range s.Holders {
		hv := viewHolder(c, s, n, i)
		hv.shown = n == h
		if hv.shown {
			v.at = hv
		}
		v.holders = append(v.holders, hv)
	}
	for n, o := range store.Observations {
		v.codes = append(v.codes, codeKey{observationKeys[n], string(o), c.Say(words.SeenShort(o))})
	}
	if h < len(s.Holders) {
		v.field = viewField(c, s, &s.Holders[h], &s.Holders[h].Seats[i])
	}
	if s.State == store.RoundWaiting && c.Now.Before(s.Due.Add(-tolerance(s))) {
		v.opening = opening{c.Say(words.TooEarlyTitle.With(c.Instant(s.Due))), c.Say(words.TooEarlyText)}
	}
	return v
}

// tabsMost is how many holders have tabs with words; more get small ones, so that all of a batch's
// holders stay in reach of one touch.
const tabsMost = 5

// nothingRead tells whether a round has nothing to type: a rate closes a day, and round 0 closes none.
func nothingRead(s *store.RoundSheet) bool { return s.K == 0 && s.Batch.Entry == store.EntryRate }

func tolerance(s *store.RoundSheet) time.Duration {
	return time.Duration(s.Batch.Programme.Reading.ToleranceS) * time.Second
}

// chosen finds the holder and seat an address names, else the first one to read, else the first.
func chosen(s *store.RoundSheet, holder, place string) (h, i int) {
	n, _ := strconv.Atoi(place)
	for h := range s.Holders {
		if s.Holders[h].Code != holder {
			continue
		}
		if i := slices.IndexFunc(s.Holders[h].Seats, func(x store.Seat) bool { return x.Place == n }); i >= 0 {
			return h, i
		}
		if i := slices.IndexFunc(s.Holders[h].Seats, toRead); i >= 0 {
			return h, i
		}
		return h, 0
	}
	for h := range s.Holders {
		if i := slices.IndexFunc(s.Holders[h].Seats, toRead); i >= 0 {
			return h, i
		}
	}
	return 0, 0
}

func toRead(x store.Seat) bool { return x.No > 0 && x.Ended == store.InTrial && !x.Read }

// roundFrame is the title block: what the round closes and opens, where it is read, what comes after.
func roundFrame(c *page.Context, s *store.RoundSheet, read string) page.Sheet {
	url := page.RoundURL(s.Batch.Code, s.K)
	sheet := page.Sheet{
		Title: c.Say(words.RoundTitle.With(s.K)), Code: s.Batch.Code, Nav: page.TodayURL, Floor: true, Styles: styles,
		Sub:     c.Say(words.RoundAndBatch.With(words.Raw(roundWords(c, &s.Batch, s.Plan)), words.Raw(batchWords(c, &s.Batch)))),
		Back:    &page.Link{Text: c.Say(words.NavToday), URL: page.TodayURL},
		Scripts: []string{"round.js"},
		Acts: []page.Act{{Text: c.Say(words.RemarkAct), URL: page.Under(url, "remark")},
			{Text: c.Say(words.DaySheet), URL: page.Under(url, "sheet")}},
	}
	switch s.State {
	case store.RoundOpen:
		sheet.Acts = append(sheet.Acts, page.Act{Text: c.Say(words.CloseRound), URL: page.Under(url, "close"), Post: true, Main: s.Done() || nothingRead(s)})
	case store.RoundClosed:
		sheet.Acts = append(sheet.Acts, page.Act{Text: c.Say(words.ReopenRound), URL: page.Under(url, "open"), Post: true})
		sheet.Notices = append(sheet.Notices, page.Notice{Title: c.Say(words.IsClosedTitle.With(c.Instant(s.ClosedAt))), Text: c.Say(words.IsClosedText)})
	}
	pos, celsius := now(s.Batch.Programme, s.Plan)
	a := afterReading(c, s)
	label := c.Say(words.NothingAfter)
	if a.acts != "" {
		label = c.Say(words.AfterReading.With(words.Raw(a.acts)))
	}
	sheet.Cells = []page.Cell{
		{Label: c.Say(words.ReadNow), Body: part.Position(c.Printer, pos, celsius.String())},
		{Label: label, Body: a.where},
		page.TextCell(c.Say(words.Due), c.Say(words.DueWithin.With(c.Time(s.Due), c.Span(tolerance(s))))),
		{Label: c.Say(words.ReadCell), Body: counted("n-read", read)},
		{Label: c.Say(words.LooksCell), Body: counted("n-look", c.Count(looksOf(s)))},
	}
	return sheet
}

func afterReading(c *page.Context, s *store.RoundSheet) after {
	d, ok := s.Batch.Programme.Day(s.Plan.Opens)
	if !ok {
		return after{actWords(c, s.Plan), page.Text(c.Say(words.TrialEnds))}
	}
	return after{actWords(c, s.Plan), part.Position(c.Printer, d.Position, d.TemperatureC.String())}
}

func looksOf(s *store.RoundSheet) (n int) {
	for _, h := range s.Holders {
		n += looksIn(h)
	}
	return n
}

func looksIn(h store.HolderRound) (n int) {
	for _, x := range h.Seats {
		if x.Look {
			n++
		}
	}
	return n
}

// viewHolder is a holder as it is drawn, at most one place of which is the one to read now.
func viewHolder(c *page.Context, s *store.RoundSheet, n, here int) holderView {
	h := &s.Holders[n]
	v := holderView{n: n + 1, of: len(s.Holders), read: h.Read, all: h.Going, looks: looksIn(*h),
		Holder: part.Holder{Code: h.Code, Rows: h.Type.Rows, Cols: h.Type.Columns},
		url:    page.RoundPlaceURL(s.Batch.Code, s.K, h.Code, "")}
	for i := range h.Seats {
		v.Places = append(v.Places, viewPlace(c, s, h, i))
	}
	for _, b := range h.Type.Blocked {
		row, col := h.Type.At(b)
		v.Places = append(v.Places, part.HolderPlace{N: strconv.Itoa(b), Row: row, Col: col, State: part.PlaceBlocked})
	}
	slices.SortFunc(v.Places, func(a, b part.HolderPlace) int { return (a.Row*100 + a.Col) - (b.Row*100 + b.Col) })
	v.text = c.Say(words.HolderRead.With(h.Read, h.Going))
	if v.looks > 0 {
		v.text = c.Say(words.AndLooks.With(words.Raw(v.text), v.looks))
	}
	v.says = c.Say(words.FaultLine.With(words.Raw(h.Code), words.Raw(v.text)))
	switch {
	case h.Read >= h.Going:
		v.class = "full"
	case h.Read > 0:
		v.class = "begun"
	}
	return v
}

func viewPlace(c *page.Context, s *store.RoundSheet, h *store.HolderRound, i int) part.HolderPlace {
	x := &h.Seats[i]
	row, col := h.Type.At(x.Place)
	p := part.HolderPlace{N: strconv.Itoa(x.Place), Row: row, Col: col, Serial: x.Serial, Short: short(x.Serial), State: part.PlaceToDo}
	switch {
	case x.No == 0:
		p.State = part.PlaceEmpty
		return p
	case x.Ended != store.InTrial:
		p.State, p.Word = part.PlaceOff, c.Say(words.EndWord(x.Ended))
	case x.Look:
		p.State = part.PlaceLook
	case x.Code != "":
		p.State, p.Word = part.PlaceRead, c.Say(words.SeenShort(x.Code))
	case x.Read:
		p.State = part.PlaceRead
	}
	p.URL = page.RoundPlaceURL(s.Batch.Code, s.K, h.Code, p.N)
	return p
}

// short is the end of a number, as it is read under the loupe.
func short(serial string) string {
	const most = 7
	r := []rune(serial)
	if len(r) <= most+1 {
		return serial
	}
	return "…" + strings.TrimLeft(string(r[len(r)-most:]), " -/.")
}

func viewField(c *page.Context, s *store.RoundSheet, h *store.HolderRound, x *store.Seat) fieldView {
	v := fieldView{holder: h.Code, place: x.Place, serial: x.Serial, base: x.Nth, id: uuid.Must(uuid.NewV7()).String()}
	label, sign := words.FieldState, words.SignState
	if s.Batch.Entry == store.EntryRate {
		label, sign = words.FieldRate, words.SignRate
	}
	v.label, v.hint = c.Say(label.With(x.Place)), c.Say(sign)
	switch {
	case x.No == 0:
		v.label, v.hint, v.off = c.Say(words.FieldNone.With(x.Place)), c.Say(words.HintEmpty), true
	case x.Ended != store.InTrial:
		v.label, v.off = c.Say(words.FieldNone.With(x.Place)), true
		v.hint = c.Say(words.HintEnded.With(words.EndWord(x.Ended)))
	case x.Look:
		v.label, v.note, v.again = c.Say(words.FieldAgain.With(x.Place)), c.Say(words.HintAgain), true
	case x.Read && mayCorrectFreely(s, x):
		v.label, v.note = c.Say(words.FieldCorrect.With(x.Place)), c.Say(words.HintOwn.With(words.Raw(ownValue(c, x))))
	case x.Read:
		v.label, v.note, v.needsReason = c.Say(words.FieldCorrect.With(x.Place)), c.Say(words.HintOther), true
	}
	return v
}

// mayCorrectFreely tells whether the actor may correct without a reason: what he read himself, while the
// round is open (practice notes E11). He alone sees then what stands there (E8).
func mayCorrectFreely(s *store.RoundSheet, x *store.Seat) bool {
	return x.Mine && s.State == store.RoundOpen
}

func ownValue(c *page.Context, x *store.Seat) string {
	if x.Code != "" {
		return c.Say(words.Seen(x.Code))
	}
	return c.Signed(x.Value, max(1, decimals(x.Value)))
}

func decimals(dec string) int {
	for i := range dec {
		if dec[i] == '.' {
			return len(dec) - i - 1
		}
	}
	return 0
}

// decimalSign is what the point key types and shows.
func decimalSign(c *page.Context) string {
	if c.Lang() == words.EN {
		return "."
	}
	return ","
}
