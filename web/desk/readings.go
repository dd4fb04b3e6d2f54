package desk

import (
	"slices"
	"strings"
	"time"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/web/words"
)

// readingRow is one entry of the evidence, or a round that has none.
type readingRow struct {
	Round, Day      string
	Position        trial.Position
	Celsius         string
	Start           bool
	At, By          string
	State, Rate     string
	HasState        bool
	HasRate         bool
	Seen            string // observation in place of a value
	Missing         bool   // nothing was read in this round
	Replaced, Extra bool   // a later entry stands; evidence beside the series
	Notes           []string
	Correct         string // address of the form that corrects it; "" for who may not
}

func (r readingRow) note() string { return strings.Join(r.Notes, "; ") }

// readings lists the evidence in the order of the trial: every entry, both figures of a correction,
// and the rounds that passed without one.
func (v movementView) readings() (rows []readingRow) {
	for k := 0; k <= v.lastRow(); k++ {
		lines := v.linesAt(k)
		for i := range lines {
			rows = append(rows, v.readingRow(&lines[i], lines))
		}
		if len(lines) == 0 {
			row := v.roundRow(k)
			row.Missing = true
			rows = append(rows, row)
		}
	}
	return rows
}

// lastRow is the newest round that is due or has something.
func (v movementView) lastRow() int {
	last := -1
	for k := range v.Batch.Steps {
		if !v.Batch.Due(k).After(v.c.Now) && v.End == store.InTrial || len(v.linesAt(k)) > 0 {
			last = k
		}
	}
	return last
}

func (v movementView) entersRates() bool { return v.Batch.Entry == store.EntryRate }

func (v movementView) linesAt(step int) (lines []store.ReadingLine) {
	for _, l := range v.Readings {
		if l.Step == step {
			lines = append(lines, l)
		}
	}
	return lines
}

// roundRow is what is known of a round without its readings.
func (v movementView) roundRow(k int) readingRow {
	row := readingRow{Round: itoa(k), Start: k == 0}
	if d, ok := v.Batch.Programme.Day(v.Batch.Steps[k].Day); ok {
		row.Day, row.Position, row.Celsius = itoa(d.N), d.Position, d.TemperatureC.String()
		if d.Accessory {
			row.Notes = append(row.Notes, v.c.Say(words.WithAccessory))
		}
		if !v.used(d.N) && v.may.verdicts {
			row.Notes = append(row.Notes, v.c.Say(words.EntersNone))
		}
	}
	return row
}

// used tells whether a day enters some criterion.
func (v movementView) used(day int) bool {
	return slices.ContainsFunc(v.Batch.Programme.Criteria, func(k trial.Criterion) bool { return slices.Contains(k.Formula.AllDays(), day) })
}

func (v movementView) readingRow(l *store.ReadingLine, beside []store.ReadingLine) readingRow {
	row := v.roundRow(l.Step)
	row.At, row.By, row.Replaced = v.c.Stamp(l.ReadAt), l.ReadBy, l.Replaced
	row.Extra = l.Kind == store.KindReplicate || l.Kind == store.KindLateCheck
	v.figures(&row, l)
	row.Notes = append(row.Notes, v.lineNotes(l, beside)...)
	if v.may.correct && v.End == store.InTrial && correctable(l) {
		row.Correct = v.open(doCorrect, cellOf(l))
	}
	return row
}

// figures fills in state and rate, or what was seen in their place.
func (v movementView) figures(row *readingRow, l *store.ReadingLine) {
	switch {
	case l.Code != "":
		row.Seen = v.c.Say(words.Seen(l.Code))
	case l.Kind == store.KindRate:
		row.HasRate, row.Rate = true, v.decimal(l.Value)
	default:
		row.HasState, row.State = true, v.decimal(l.Value)
		if rate := v.rateOf(l); rate.Known() {
			row.HasRate, row.Rate = true, v.c.Signed(rate.Decimal(1), 1)
		}
	}
}

// decimal shows what was read with at least one decimal and as many as it has.
func (v movementView) decimal(value string) string {
	_, frac, _ := strings.Cut(value, ".")
	return v.c.Signed(value, max(1, len(frac)))
}

// rateOf is the rate that the stretch closed by this state has, or had before it was replaced.
func (v movementView) rateOf(l *store.ReadingLine) trial.Rate {
	if l.Kind != store.KindState || l.Step == 0 {
		return trial.Rate{}
	}
	from, ok := v.opening(l.Step - 1)
	if !ok {
		return trial.Rate{}
	}
	to, ok := stateOf(l)
	if !ok {
		return trial.Rate{}
	}
	return trial.RateBetween(from.state, to, l.ReadAt.Unix()-from.at.Unix())
}

// opened is the state at which a stretch begins.
type opened struct {
	state trial.State
	at    time.Time
}

// opening is the state that stands at the end of a step: as left if the hands were set, else as found.
func (v movementView) opening(step int) (o opened, ok bool) {
	for _, l := range v.linesAt(step) {
		if l.Replaced || l.Kind != store.KindState && l.Kind != store.KindLeft {
			continue
		}
		s, has := stateOf(&l)
		if !has {
			continue
		}
		at := l.ReadAt
		if l.Kind == store.KindLeft && ok {
			at = o.at // the stretch begins at the instant of the reading
		}
		o, ok = opened{s, at}, true
	}
	return o, ok
}

func stateOf(l *store.ReadingLine) (trial.State, bool) {
	e, err := trial.ParseExact(l.Value)
	if err != nil {
		return 0, false
	}
	n, ok := milliOf(e)
	return trial.State(n), ok
}

// replacedRates are the rates that corrections replaced, by day: the crosses of the chart.
func (v movementView) replacedRates() map[int][]trial.Rate {
	out := map[int][]trial.Rate{}
	for i := range v.Readings {
		l := &v.Readings[i]
		day := v.Batch.Steps[l.Step].Day
		if !l.Replaced || l.Code != "" || day == 0 {
			continue
		}
		rate := v.rateOf(l)
		if l.Kind == store.KindRate {
			if n, ok := stateOf(l); ok {
				rate = trial.RateOf(int64(n))
			}
		}
		if rate.Known() {
			out[day] = append(out[day], rate)
		}
	}
	return out
}

// lineNotes say what is particular about one entry.
func (v movementView) lineNotes(l *store.ReadingLine, beside []store.ReadingLine) (notes []string) {
	c := v.c
	add := func(t words.Text) { notes = append(notes, c.Say(t)) }
	switch l.Kind {
	case store.KindLeft:
		add(words.NoteLeft)
	case store.KindReplicate:
		add(words.NoteReplicate)
	case store.KindLateCheck:
		add(words.NoteLateCheck)
	}
	if l.Replaced {
		for _, after := range beside {
			if after.Kind == l.Kind && after.Nth == l.Nth+1 {
				add(words.NoteReplaced.With(c.Stamp(after.EnteredAt), reasonText(after.Reason)))
			}
		}
	} else if l.Reason != "" {
		add(words.NoteCorrection.With(reasonText(l.Reason)))
	}
	if l.Second {
		add(words.NoteSecondLook.With(v.looksAt(l)))
	}
	if l.EnteredBy != l.ReadBy {
		add(words.NoteEnteredBy.With(l.EnteredBy))
	}
	if l.Method != store.Typed && l.Method != "" {
		add(words.ReadingMethod(string(l.Method)))
	}
	if l.Station != "" {
		add(words.NoteStation.With(l.Station))
	}
	for _, r := range v.MovementSheet.Remarks {
		if r.Step == l.Step && !l.Replaced && l.Kind != store.KindLeft {
			notes = append(notes, r.Words)
		}
	}
	return notes
}

// reasonText says the reason that the program gives to a reader's own correction at once.
func reasonText(reason string) words.Text {
	if reason == "at entry" {
		return words.ReasonAtEntry
	}
	return words.Raw(reason)
}

// looksAt lists what was typed before the value that stands.
func (v movementView) looksAt(l *store.ReadingLine) string {
	var typed []string
	for _, k := range v.Looks {
		if k.Step == l.Step && k.Kind == l.Kind {
			typed = append(typed, k.Typed)
		}
	}
	return strings.Join(typed, ", ")
}
