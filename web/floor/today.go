package floor

import (
	"net/http"
	"slices"
	"strings"
	"time"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// todayView is the page of what must be done now.
type todayView struct {
	sheet  page.Sheet
	due    []roundRow
	coming []roundRow
	done   []roundRow
	wind   []windRow
	care   []string
	empty  part.Empty
}

// roundRow is one round in a list.
type roundRow struct {
	class     string // late, under live, is-done
	due, when string
	code, sub string // batch and what it is
	round     string // Round 4: closes ..., opens ...
	strip     part.Strip
	moved     part.Moved
	acts      string
	care      []string
	ruler     part.Ruler
	act, url  string
	actSays   string
	main      bool
}

// windRow reminds of the winding before round 0 (practice notes W10).
type windRow struct {
	code, what, begins, url string
	passed                  bool
}

// Today shows what is due, what comes next and what is done.
func (f *Floor) Today(w http.ResponseWriter, r *http.Request) error {
	c := page.Of(r)
	today, err := f.lab.Today(r.Context(), c.Actor)
	if err != nil {
		return err
	}
	return page.Render(w, r, http.StatusOK, todayPage(c, viewToday(c, today)))
}

func viewToday(c *page.Context, t store.Today) todayView {
	v := todayView{sheet: page.Sheet{Title: c.Say(words.NavToday), Nav: page.TodayURL, Floor: true, Styles: styles}}
	care := map[string]string{}
	late := 0
	for i := range t.Due {
		r := &t.Due[i]
		if w, ok := windBefore(c, r, t.Now); ok {
			v.wind = append(v.wind, w)
		}
		row := rowOf(c, r, t.Now)
		if !isToday(c, r, t.Now) {
			row.due = c.Weekday(r.Due)
			row.when, row.act = c.Time(r.Due), c.Say(words.RoundLook)
			v.coming = append(v.coming, row)
			continue
		}
		if r.Late(t.Now) > 0 {
			late++
		}
		noteCare(c, r, care)
		v.due = append(v.due, row)
	}
	for i := range t.Done {
		v.done = append(v.done, rowOf(c, &t.Done[i], t.Now))
	}
	markMain(v.due)
	v.sheet.Sub = todaySum(c, len(v.due), late, len(v.done))
	v.care = sayCare(care)
	v.empty = part.Empty{Title: c.Say(words.TodayNone), Text: c.Say(words.TodayNoneText)}
	if c.Actor.May(store.RightRegister) {
		v.sheet.Acts = append(v.sheet.Acts, page.Act{Text: c.Say(words.NewBatch), URL: page.NewBatchURL})
		v.empty.ActText, v.empty.Act = c.Say(words.NewBatch), page.NewBatchURL
	}
	return v
}

// isToday tells whether a round belongs to this day: due before midnight, or begun.
func isToday(c *page.Context, r *store.Round, now time.Time) bool {
	y, m, d := now.In(c.Zone()).Date()
	midnight := time.Date(y, m, d+1, 0, 0, 0, 0, c.Zone())
	return r.State == store.RoundOpen || r.Due.Before(midnight)
}

func todaySum(c *page.Context, due, late, done int) string {
	parts := []string{c.Say(words.TodaySum.With(due))}
	if late > 0 {
		parts = append(parts, c.Say(words.TodayLate.With(late)))
	}
	sum := strings.Join(parts, ", ")
	if done > 0 {
		sum += "; " + c.Say(words.TodayDone.With(done))
	}
	return sum
}

func rowOf(c *page.Context, r *store.Round, now time.Time) roundRow {
	b := &r.Batch
	row := roundRow{
		due: c.Time(r.Due), code: b.Code, sub: batchWords(c, b),
		round: c.Say(words.FaultLine.With(words.RoundNumber.With(r.K), words.Raw(roundWords(c, b, r.Plan)))),
		strip: part.StripOf(c.Printer, b.Programme, closedDays(r), nil), moved: part.MovedAt(b.Programme, r.K),
		ruler: part.Ruler{Done: r.Read, Whole: r.Going, Label: c.Say(words.MovementsReadIn.With(b.Code)), Live: r.State == store.RoundOpen},
		url:   page.RoundURL(b.Code, r.K), care: careTags(c, r),
	}
	if out := b.Size - r.Going; out > 0 {
		row.ruler.Text = c.Say(words.ReadOfMore.With(words.ReadOf.With(r.Read, r.Going), words.OutOfTrial.With(out)))
	}
	if acts := actWords(c, r.Plan); acts != "" {
		row.acts = c.Say(words.AfterReading.With(words.Raw(acts)))
	}
	row.class, row.when, row.act = standing(c, r, now)
	row.actSays = c.Say(words.RoundAndCode.With(r.K, b.Code))
	return row
}

// closedDays is how many days are behind a batch when it stands at round r.
func closedDays(r *store.Round) int {
	if r.Done() {
		return r.Plan.Closes
	}
	return max(r.Plan.Closes-1, 0)
}

// standing says how a round stands: class of its row, a line in words, what to press.
func standing(c *page.Context, r *store.Round, now time.Time) (class, when, act string) {
	late, open := r.Late(now), r.State == store.RoundOpen
	switch {
	case r.State == store.RoundClosed && !r.ClosedAt.IsZero():
		return "is-done", c.Say(words.ClosedAt.With(c.Time(r.ClosedAt))), c.Say(words.RoundLook)
	case r.Done():
		return "is-done", c.Say(words.DoneAt.With(c.Time(r.LastRead))), c.Say(words.RoundLook)
	case late > 0 && open:
		return "late live", c.Say(words.LateUnderWay.With(words.LateBy.With(c.Span(late)))), c.Say(words.RoundGoOn)
	case late > 0:
		return "late", c.Say(words.LateBy.With(c.Span(late))), c.Say(words.RoundStart)
	case open:
		return "under live", c.Say(words.UnderWay), c.Say(words.RoundGoOn)
	case now.Sub(r.Due) >= time.Minute: // within the programme's tolerance: due, not late
		return "", c.Say(words.DueSince.With(c.Span(now.Sub(r.Due)))), c.Say(words.RoundStart)
	}
	return "", c.Due(r.Due, now), c.Say(words.RoundStart)
}

// markMain gives the page its one main act: the round under way, else the first one due.
func markMain(rows []roundRow) {
	at := slices.IndexFunc(rows, func(r roundRow) bool { return strings.Contains(r.class, "live") })
	if len(rows) > 0 {
		rows[max(at, 0)].main = true
	}
}

func windBefore(c *page.Context, r *store.Round, now time.Time) (windRow, bool) {
	p := r.Batch.Programme.Conditioning
	if r.K != 0 || !p.Wind || p.MinHours == 0 || r.State != store.RoundWaiting || now.After(r.Due) {
		return windRow{}, false
	}
	by := r.Due.Add(-time.Duration(p.MinHours) * time.Hour)
	says := words.WindBefore
	if now.After(by) {
		says = words.WindPassed
	}
	when := c.Time(by)
	if c.FieldDate(by) != c.FieldDate(now) {
		when = c.Weekday(by) + ", " + when
	}
	begins := c.Time(r.Due)
	if c.FieldDate(r.Due) != c.FieldDate(now) {
		begins = c.Weekday(r.Due) + ", " + begins
	}
	return windRow{code: r.Batch.Code, what: c.Say(says.With(when, c.Celsius(p.TemperatureC.String()), p.MinHours)),
		begins: c.Say(words.RoundZeroAt.With(begins)), url: page.RoundURL(r.Batch.Code, 0), passed: now.After(by)}, true
}

// careTags are the short words beside a round that asks for care.
func careTags(c *page.Context, r *store.Round) (tags []string) {
	if r.Done() {
		return nil
	}
	for _, t := range temperatures(r) {
		switch {
		case t < coldBelow:
			tags = append(tags, c.Say(words.CareCold))
		case t > warmAbove:
			tags = append(tags, c.Say(words.CareWarm))
		}
	}
	if weekend(c, r.Due) != nil {
		tags = append(tags, c.Say(words.CareWeekend))
	}
	return tags
}

// temperatures are those of the chambers somebody goes into at a round: where the movements come
// from, and where they go to.
func temperatures(r *store.Round) []trial.Milli {
	_, from := now(r.Batch.Programme, r.Plan)
	list := []trial.Milli{from}
	if to, ok := moved(r.Plan); ok {
		list = append(list, to)
	}
	return list
}

// noteCare gathers the sentences of care that the day needs, each once.
func noteCare(c *page.Context, r *store.Round, care map[string]string) {
	for _, t := range temperatures(r) {
		switch {
		case t < coldBelow:
			care["cold"] = c.Say(words.CareColdText.With(c.Celsius(t.String())))
		case t > warmAbove:
			care["warm"] = c.Say(words.CareWarmText.With(c.Celsius(t.String())))
		}
	}
	if day := weekend(c, r.Due); day != nil {
		care["weekend"] = c.Say(words.CareWeekendText.With(day))
	}
}

func sayCare(care map[string]string) (lines []string) {
	for _, k := range []string{"cold", "warm", "weekend"} {
		if care[k] != "" {
			lines = append(lines, care[k])
		}
	}
	return lines
}

// weekend is the name of a day on which somebody may be alone in the house, nil for the others.
func weekend(c *page.Context, at time.Time) words.Text {
	switch at.In(c.Zone()).Weekday() {
	case time.Saturday:
		return words.Saturday
	case time.Sunday:
		return words.Sunday
	}
	return nil
}
