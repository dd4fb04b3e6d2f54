package paper

import (
	"slices"
	"strconv"
	"strings"

	"ratehouse/store/proof"
	"ratehouse/trial"
	"ratehouse/web/words"
)

// days is the table of the trial: one column a programme day, and one before them where the state at the
// start was read.
type days struct {
	Start     bool
	StartAt   moment
	StartText string
	Columns   []day
	States    bool
	Note      string
}

type day struct {
	N                     int
	Position              trial.Position
	Temperature           string
	Rate                  string
	Known, Unused, Turned bool
	State                 string
	At                    moment
}

// moment is when a reading was taken, on two lines.
type moment struct{ Day, Time string }

func (s *sheet) moment(i proof.Instant) moment {
	if i.IsZero() {
		return moment{words.Blank, ""}
	}
	return moment{s.p.Day(i.Time()), s.p.Time(i.Time())}
}

// days puts rates, states and instants side by side. What does not fit into one cell a day, corrections
// and readings beyond the programme's days, stands in the notes.
func (s *sheet) days() (t days) {
	if r, ok := s.closing(0); ok && r.Kind == proof.ReadingState {
		t.Start, t.StartAt, t.StartText = true, s.moment(r.ReadAt), s.signed(r.Value)
	}
	var unused, accessory []int
	for i, d := range s.Record.Days {
		c := day{N: d.Day, Position: trial.Position(d.Position), Temperature: s.p.Magnitude(string(d.TemperatureC), places(string(d.TemperatureC))),
			Rate: words.Blank, State: words.Blank, At: moment{Day: words.Blank}, Unused: len(d.Enters) == 0}
		c.Turned = i > 0 && (d.Position != s.Record.Days[i-1].Position || d.TemperatureC != s.Record.Days[i-1].TemperatureC)
		if d.Rate != "" {
			c.Known, c.Rate = true, s.signed(d.Rate)
		}
		if r, ok := s.closing(d.Day); ok {
			c.At = s.moment(r.ReadAt)
			if r.Kind == proof.ReadingState {
				t.States, c.State = true, s.signed(r.Value)
			}
		}
		if c.Unused {
			unused = append(unused, d.Day)
		}
		if d.Accessory {
			accessory = append(accessory, d.Day)
		}
		t.Columns = append(t.Columns, c)
	}
	t.Note = strings.Join(s.dayNotes(unused, accessory), " ")
	return t
}

func (s *sheet) dayNotes(unused, accessory []int) (out []string) {
	switch {
	case len(unused) == 1:
		out = append(out, s.say(words.PaperUnusedOne.With(ranges(unused))))
	case len(unused) > 1:
		out = append(out, s.say(words.PaperUnused.With(ranges(unused))))
	}
	if len(accessory) > 0 {
		out = append(out, s.say(words.PaperAccessory.With(ranges(accessory))))
	}
	return out
}

func (s *sheet) signed(d proof.Decimal) string {
	return s.p.Signed(string(d), max(1, places(string(d))))
}

// decides tells whether a reading of this kind makes a rate.
func decides(r proof.Reading) bool {
	return r.Kind == proof.ReadingRate || r.Kind == proof.ReadingState
}

// closing is the reading in force that closes a programme day, day 0 for the start: of two, as after a
// repetition, the later round's.
func (s *sheet) closing(day int) (found proof.Reading, ok bool) {
	for _, r := range s.Record.Readings {
		if decides(r) && !r.Superseded && r.Code == "" && r.Day == day && (day > 0 || r.Step == 0) {
			found, ok = r, true
		}
	}
	return found, ok
}

// notes lists what the table cannot hold, in the order of the trial: what a correction replaced, what
// was seen in place of a value, readings taken as evidence, then the remarks.
func (s *sheet) notes() (out []string) {
	list := s.Record.Readings
	for i, r := range list {
		switch {
		case r.Superseded:
			out = append(out, s.replaced(r, list[i+1:]))
		case r.Code != "" || !decides(r) || r.Day == 0 && r.Step > 0:
			out = append(out, s.byAt(r, s.say(words.PaperExtra.With(strconv.Itoa(r.Step), words.ReadingKind(r.Kind), s.seen(r)))))
		}
	}
	for _, k := range s.Record.Remarks {
		text := k.Text
		if k.Code == "decision" {
			text = s.say(words.PaperDecided.With(text))
		} else if k.Step >= 0 {
			text = s.say(words.PaperRemarkAt.With(strconv.Itoa(k.Step), text))
		}
		out = append(out, stop(text)+".")
	}
	return out
}

func (s *sheet) replaced(old proof.Reading, later []proof.Reading) string {
	i := slices.IndexFunc(later, func(r proof.Reading) bool { return r.Step == old.Step && r.Kind == old.Kind && r.Nth == old.Nth+1 })
	if i < 0 {
		return s.byAt(old, s.say(words.PaperExtra.With(strconv.Itoa(old.Step), words.ReadingKind(old.Kind), s.seen(old))))
	}
	now := later[i]
	reason := now.Reason
	if reason == "at entry" {
		reason = s.say(words.PaperAtEntry)
	}
	return s.byAt(now, s.say(words.PaperReplaced.With(strconv.Itoa(old.Step), s.seen(old), s.seen(now), stop(reason))))
}

func (s *sheet) byAt(r proof.Reading, what string) string {
	return s.say(words.PaperByAt.With(what, r.EnteredBy, s.p.Day(r.ReadAt.Time())+" "+s.p.Time(r.ReadAt.Time())))
}

// seen is what a reading says: its value with its unit, or the observation.
func (s *sheet) seen(r proof.Reading) string {
	if r.Code != "" {
		return s.say(words.Observed(r.Code))
	}
	unit := words.UnitSeconds
	if r.Kind == proof.ReadingRate {
		unit = words.UnitSecondsPerDay
	}
	return s.p.Unit(s.signed(r.Value), s.say(unit))
}

// read says how and by whom the readings were taken, in a sentence each.
func (s *sheet) read() []string {
	if len(s.Record.Readings) == 0 {
		return []string{s.say(words.PaperNoReading)}
	}
	how := s.grouped(func(r proof.Reading) string {
		method := words.ReadingMethod(r.Method)
		if r.Station != "" {
			method = words.PaperAtStation.With(method, r.Station)
		}
		return s.say(words.PaperWhat.With(words.ReadingKind(r.Kind), method))
	})
	out := make([]string, 0, len(how)+1)
	for _, g := range how {
		out = append(out, sentence(s.say(words.PaperRounds.With(g.what, ranges(g.steps)))))
	}
	who := s.grouped(func(r proof.Reading) string {
		if r.EnteredBy != r.ReadBy {
			return s.say(words.PaperEnteredBy.With(r.ReadBy, r.EnteredBy))
		}
		return r.ReadBy
	})
	people := make([]string, len(who))
	for i, g := range who {
		if people[i] = g.what; len(who) > 1 {
			people[i] = s.say(words.PaperBy.With(g.what, ranges(g.steps)))
		}
	}
	return append(out, s.say(words.PaperReadBy.With(strings.Join(people, "; "))))
}

// sentence begins with a capital and ends with a full stop.
func sentence(text string) string {
	r := []rune(text)
	return strings.ToUpper(string(r[:1])) + string(r[1:]) + "."
}

type group struct {
	what  string
	steps []int
}

// grouped gathers the rounds of deciding readings in force that have the same thing said of them.
func (s *sheet) grouped(say func(proof.Reading) string) (out []group) {
	for _, r := range s.Record.Readings {
		if !decides(r) || r.Superseded {
			continue
		}
		what := say(r)
		i := slices.IndexFunc(out, func(g group) bool { return g.what == what })
		if i < 0 {
			out, i = append(out, group{what: what}), len(out)
		}
		if !slices.Contains(out[i].steps, r.Step) {
			out[i].steps = append(out[i].steps, r.Step)
		}
	}
	return out
}
