package paper

import (
	"math/big"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"time"

	"ratehouse/store"
	"ratehouse/store/proof"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// sheet is a released paper ready to be drawn. All of it comes from the frozen record, except the marks
// that it was taken back or replaced since.
type sheet struct {
	p *words.Printer // in the language and the time zone of the paper
	proof.Record
	Heading  string
	Level    string // of the heading on the page: "1" where the paper is all there is
	Code     string
	Marks    []string // what makes the paper invalid or void of proof, in words
	Across   []string // the same, in a word or two across the leaf
	Verdict  part.Judged
	Word     string
	Says     []string
	Cells    []cell
	Criteria []criterion
	Unit     string
	Defs     []definition
	DefNote  definition
	Days     days
	Chart    picture
	Terms    []term
	Notes    []string
	Here     []string   // of the notes on the first leaf
	More     [][]string // on each further leaf
	Moved    bool       // the statements stand on the second leaf, for want of room
	Leaves   int
	QR       qrDrawing
	Address  string
	Signed   string
}

// cell is one of the ruled cells: a label above a value.
type cell struct {
	Label, Text string
	Mono        bool
}

// term is a statement of the paper.
type term struct {
	Label string
	Lines []string
}

type criterion struct {
	Symbol, Title, Unit   string
	Value, Limits, Margin string
	Known, Out            bool
	Judged                part.Judged
	Gauge                 part.Gauge
	Accept                string
}

// open makes the sheet of a paper in the language asked for, or in its own.
func open(c store.Certificate, lang string, level string) sheet {
	rec := c.Record
	if string(words.Choose(lang, "")) != lang {
		lang = rec.Language
	}
	zone, err := time.LoadLocation(rec.TimeZone)
	if err != nil {
		zone = time.UTC
	}
	s := sheet{p: words.New(words.Lang(lang), zone), Record: rec, Level: level, Code: c.Code}
	rejection := rec.Kind == proof.KindRejection
	s.Heading = s.p.Say(words.PaperTitle(rec.Title, rejection))
	s.mark(c)
	s.judge()
	s.Cells = s.cells()
	s.criteria()
	s.Days = s.days()
	s.Chart = s.picture(0)
	s.Notes = s.notes()
	s.Terms = s.terms()
	s.proof()
	s.Leaves = s.leaves()
	return s
}

func (s *sheet) say(t words.Text) string { return s.p.Say(t) }

// mark says what makes the paper void.
func (s *sheet) mark(c store.Certificate) {
	if s.Demo {
		s.Marks, s.Across = append(s.Marks, s.say(words.PaperDemo)), append(s.Across, s.say(words.DemoMark))
	}
	if !c.RevokedAt.IsZero() {
		s.Marks = append(s.Marks, s.say(words.PaperRevokedBy.With(s.p.Date(c.RevokedAt), stop(c.Revoked))))
		s.Across = append(s.Across, s.say(words.AcrossRevoked))
	}
	if c.ReplacedBy != "" {
		s.Marks = append(s.Marks, s.say(words.PaperReplacing.With(c.ReplacedBy)))
		if c.RevokedAt.IsZero() {
			s.Across = append(s.Across, s.say(words.AcrossReplaced))
		}
	}
}

// stop drops the full stop at the end of what somebody typed, where our sentence brings its own.
func stop(text string) string { return strings.TrimSuffix(strings.TrimSpace(text), ".") }

// judge says the verdict in a word and a few sentences.
func (s *sheet) judge() {
	if s.Kind == proof.KindCertificate {
		s.Verdict, s.Word = part.Judged{Mark: part.Pass, Word: words.VerdictPass}, s.say(words.PaperPass)
		s.Says = []string{s.say(words.PaperMet.With(s.limited(), s.Movement.Category.Code))}
	} else {
		s.Verdict, s.Word = part.Judged{Mark: part.Fail, Word: words.VerdictFail}, s.say(words.PaperFail)
		s.failing()
	}
	if s.ReplaceReason != "" {
		s.Says = append(s.Says, s.say(words.PaperReplaces.With(s.Replaces, stop(s.ReplaceReason))))
	}
	s.Says = append(s.Says, s.trial())
}

func (s *sheet) failing() {
	switch s.End {
	case proof.EndRejected:
		s.Says = append(s.Says, s.say(words.PaperRejected.With(stop(s.EndCause))))
	case proof.EndRemoved:
		s.Says = append(s.Says, s.say(words.PaperRemoved.With(stop(s.EndCause))))
	}
	var failed, undecided []string
	for _, k := range s.Record.Criteria {
		switch k.Verdict {
		case proof.VerdictFail:
			failed = append(failed, s.say(words.PaperUnmetOne.With(k.Symbol, s.p.Unit(s.number(k, string(k.Printed)), s.say(words.Unit(k.Unit))), s.limits(k.Min, k.Max, k))))
		case proof.VerdictOpen:
			undecided = append(undecided, k.Symbol)
		}
	}
	if len(failed) > 0 {
		s.Says = append(s.Says, s.say(words.PaperUnmet.With(len(failed), s.limited(), s.Movement.Category.Code, strings.Join(failed, "; "))))
	}
	if len(undecided) > 0 {
		s.Says = append(s.Says, s.say(words.PaperOpen.With(strings.Join(undecided, ", "))))
	}
}

// limited counts the criteria that decide.
func (s *sheet) limited() (n int) {
	for _, k := range s.Record.Criteria {
		if k.Verdict != proof.VerdictNone {
			n++
		}
	}
	return n
}

// trial is the trial in one sentence: days, positions, temperatures.
func (s *sheet) trial() string {
	positions, temperatures := map[string]bool{}, []string{}
	for _, d := range s.Record.Days {
		positions[d.Position] = true
		if t := string(d.TemperatureC); !slices.Contains(temperatures, t) {
			temperatures = append(temperatures, t)
		}
	}
	slices.SortFunc(temperatures, func(x, y string) int { return ratOf(x).Cmp(ratOf(y)) })
	return s.say(words.PaperTrial.With(words.Days.With(len(s.Record.Days)), words.PaperPositions.With(len(positions)), s.celsius(temperatures)))
}

// celsius lists temperatures: 8, 23 and 38 °C.
func (s *sheet) celsius(list []string) string {
	last := len(list) - 1
	texts := make([]string, len(list))
	for i, t := range list {
		texts[i] = s.p.Magnitude(t, places(t))
	}
	texts[last] = s.p.Celsius(list[last])
	if last == 0 {
		return texts[0]
	}
	return s.say(words.PaperAnd.With(strings.Join(texts[:last], ", "), texts[last]))
}

func ratOf(dec string) *big.Rat {
	if r, ok := new(big.Rat).SetString(dec); ok {
		return r
	}
	return new(big.Rat)
}

// places is the number of decimals that a number is written with.
func places(dec string) int {
	_, frac, _ := strings.Cut(dec, ".")
	return len(frac)
}

func (s *sheet) cells() []cell {
	m := s.Movement
	return []cell{
		{Label: s.say(words.SerialNumber), Text: m.Serial, Mono: true},
		{Label: s.say(words.Calibre), Text: orBlank(m.Calibre)},
		{Label: s.say(words.PaperSize), Text: s.size()},
		{Label: s.say(words.Depositor), Text: named(m.Depositor)},
		{Label: s.say(words.PaperReceived), Text: s.received()},
		{Label: s.say(words.PaperSpan), Text: s.span()},
		{Label: s.say(words.PaperPresented), Text: s.presented()},
		{Label: s.say(words.PaperState), Text: s.state()},
	}
}

func orBlank(text string) string {
	if text == "" {
		return words.Blank
	}
	return text
}

func named(n proof.Named) string {
	if n.Title == "" {
		return n.Code
	}
	return n.Title
}

// size is the category with its title, and the size it was chosen by.
func (s *sheet) size() string {
	m := s.Movement
	parts := []string{m.Category.Code}
	switch {
	case m.Size.DiameterMM != "":
		parts = append(parts, s.say(words.PaperDiameter.With(s.length(m.Size.DiameterMM, "mm"))))
	case m.Size.AreaMM2 != "":
		parts = append(parts, s.say(words.PaperArea.With(s.length(m.Size.AreaMM2, "mm²"))))
	case m.Category.Title != "":
		parts = append(parts, m.Category.Title)
	}
	return strings.Join(parts, ", ")
}

func (s *sheet) length(d proof.Decimal, unit string) string {
	return s.p.Unit(s.p.Magnitude(string(d), places(string(d))), unit)
}

func (s *sheet) received() string {
	r := s.Received
	if r == nil {
		return s.say(words.PaperNotNoted)
	}
	parts := []string{s.date(r.At)}
	if r.Condition != "" {
		parts = append(parts, r.Condition)
	}
	if r.DeliveryNote != "" {
		parts = append(parts, s.say(words.PaperNote.With(r.DeliveryNote)))
	}
	if r.Order != "" {
		parts = append(parts, s.say(words.PaperOrder.With(r.Order)))
	}
	return strings.Join(parts, ", ")
}

// date is a date with its year and without its weekday.
func (s *sheet) date(i proof.Instant) string {
	return s.p.Day(i.Time()) + " " + strconv.Itoa(i.Time().In(s.p.Zone()).Year())
}

func (s *sheet) span() string {
	from, to := s.Trial.From, s.Trial.To
	first := s.date(from)
	if from.Time().In(s.p.Zone()).Year() == to.Time().In(s.p.Zone()).Year() {
		first = s.p.Day(from.Time())
	}
	return s.say(words.PaperFromTo.With(first, s.date(to)))
}

func (s *sheet) presented() string {
	which := s.say(words.PaperFirst)
	if s.Movement.Attempt > 1 {
		which = s.say(words.PaperNth.With(strconv.Itoa(s.Movement.Attempt)))
	}
	return which + ", " + s.Batch
}

func (s *sheet) state() string {
	if len(s.Movement.State) == 0 {
		return s.say(words.PaperAsReceived)
	}
	list := make([]string, len(s.Movement.State))
	for i, code := range s.Movement.State {
		list[i] = s.say(words.PieceState(code))
	}
	return strings.Join(list, ", ")
}

// magnitude tells whether a criterion has no sign by nature: its definition says so, a distance or the
// greatest of distances.
var magnitude = regexp.MustCompile(`^max\b|^√|^\(\|`)

// unsigned tells whether figures of the criterion are printed without a plus.
func unsigned(k proof.Criterion) bool { return magnitude.MatchString(k.Definition) || k.Min == "0" }

func (s *sheet) number(k proof.Criterion, dec string) string {
	if strings.Contains(dec, "/") {
		return dec // no decimal can tell it from its limit
	}
	return s.p.Number(dec, places(dec), !unsigned(k))
}

// limits is an interval; magnitudes begin at zero by nature.
func (s *sheet) limits(least, most proof.Decimal, k proof.Criterion) string {
	lo, hi := string(least), string(most)
	if lo == "" && hi != "" && unsigned(k) {
		lo = "0"
	}
	if strings.Contains(lo+hi, "/") {
		return lo + " … " + hi
	}
	return s.p.Interval(lo, hi, max(1, places(lo), places(hi)), !unsigned(k))
}

func (s *sheet) criteria() {
	s.Unit = common(s.Record.Criteria)
	for _, k := range s.Record.Criteria {
		row := criterion{Symbol: k.Symbol, Title: s.say(words.CriterionTitle(k.Symbol, k.Title)), Limits: s.limits(k.Min, k.Max, k), Known: k.Value != "",
			Value: words.Blank, Margin: words.Blank, Judged: outcome(k.Verdict), Out: k.Verdict == proof.VerdictFail, Gauge: gauge(k)}
		if k.Unit != s.Unit {
			row.Unit = s.say(words.Unit(k.Unit))
		}
		if row.Known {
			row.Value = s.number(k, string(k.Printed))
		}
		if k.Margin != "" {
			row.Margin = s.p.Signed(string(k.Margin), places(string(k.Margin)))
		}
		if k.AcceptMin != "" || k.AcceptMax != "" {
			row.Accept = s.say(words.PaperAccept.With(s.limits(k.AcceptMin, k.AcceptMax, k)))
		}
		s.Criteria = append(s.Criteria, row)
	}
	s.define()
	s.Unit = s.say(words.Unit(s.Unit))
}

func common(list []proof.Criterion) (unit string) {
	count := map[string]int{}
	for _, k := range list {
		if count[k.Unit]++; count[k.Unit] > count[unit] {
			unit = k.Unit
		}
	}
	return unit
}

func outcome(v proof.Verdict) part.Judged {
	switch v {
	case proof.VerdictPass:
		return part.Judged{Mark: part.Pass, Word: words.VerdictPass}
	case proof.VerdictFail:
		return part.Judged{Mark: part.Fail, Word: words.VerdictFail}
	case proof.VerdictNone:
		return part.Judged{Mark: part.Open, Word: words.VerdictNone}
	}
	return part.Judged{Mark: part.Open, Word: words.VerdictOpen}
}
