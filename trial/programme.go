package trial

import "slices"

// Programme is a test programme as data: which days in which position and temperature, what is
// computed from them and between which limits. It is immutable once used; a batch keeps the
// version it began with. Its JSON form and content hash live in trial/sheet.
type Programme struct {
	Code    string // closed form ^[A-Z0-9][A-Z0-9._-]{0,39}$ or a built-in lower-case code
	Version string
	Title   string
	Source  string // where the procedure was read
	// TextChecked says who compared the programme with the text of the standard; nil: nobody.
	// While it is nil a certificate may not bear the standard's number as its method.
	TextChecked  *TextChecked
	Measurand    Measurand
	Days         []Day // in order, day numbers 1..n
	Conditioning Conditioning
	Reading      Reading
	Environment  Environment
	Recovery     Recovery
	Categories   []Category
	Criteria     []Criterion
	Decision     Decision
}

// TextChecked records a comparison with the bought text of a standard.
type TextChecked struct {
	By      string
	Date    string // YYYY-MM-DD
	Edition string
}

// Measurand says which rates are meant.
type Measurand string

// As performed: temperature inside its tolerance is part of the method. At nominal: at exactly
// the nominal temperature, so that its deviation enters the uncertainty.
const (
	AsPerformed Measurand = "as_performed"
	AtNominal   Measurand = "at_nominal"
)

// Day is one programme day: a stretch between two readings.
type Day struct {
	N            int
	Position     Position
	TemperatureC Milli // nominal, thousandths of a degree Celsius
	Accessory    bool  // an additional mechanism runs during this day, on pieces that have one
}

// Conditioning is what happens before round 0.
type Conditioning struct {
	Position     Position // empty: any
	TemperatureC Milli
	MinHours     int
	Wind         bool
}

// Reading is how readings are taken.
type Reading struct {
	IntervalS  int64 // nominal, seconds
	ToleranceS int64 // either way, seconds; beyond it a remark
	SecondLook SecondLook
}

// SecondLook is the rule for a reading asked for again.
type SecondLook struct {
	Agree Milli  // the second within this of the first: the first counts (s or s/d)
	Then  string // else: median_of_three
}

// Environment holds the conditions a chamber must keep.
type Environment struct {
	TemperatureToleranceC Milli
	OutsideMinutes        int // longest time outside the chamber at a round without a remark
	HumidityMin           Milli
	HumidityMax           Milli // percent; both zero: recorded, not limited
}

// Recovery says what may be repeated after a lost reading (practice: one cell a day is not enough).
type Recovery struct {
	Groups          [][]int // days that must be repeated together
	MaxRepeats      int
	IdleDaysAllowed int
	MaxTotalDays    int // programme days, repeats and idle days together
}

// Category is a size class with its own limits.
type Category struct{ Code, Title string }

// Criterion is one figure computed from the rates.
type Criterion struct {
	Symbol   string
	Title    string
	Unit     string
	Decimals int // as printed on paper; verdicts never hang on it
	Formula  Formula
	Limits   map[string]Limit // by category code; a category without entry has no limits
}

// Limit is the closed interval a criterion must lie in.
type Limit struct {
	HasMin, HasMax bool
	Min, Max       Exact
}

// Any tells whether there is a limit at all.
func (l Limit) Any() bool { return l.HasMin || l.HasMax }

// Contains tells whether the number lies within; a number equal to a limit does.
func (l Limit) Contains(e Exact) bool {
	return !(l.HasMin && e.Cmp(l.Min) < 0) && !(l.HasMax && e.Cmp(l.Max) > 0)
}

// Decision is the rule that turns a number into a verdict.
type Decision struct {
	Rule  DecisionRule
	Guard Exact // multiple of the expanded uncertainty, for the guarded rule
}

// DecisionRule names a rule.
type DecisionRule string

// Simple acceptance: the measured number decides. Guarded: limits drawn in by a guard band.
const (
	Simple  DecisionRule = "simple"
	Guarded DecisionRule = "guarded"
)

// Kind names a formula.
type Kind string

// The kinds of formula. See Formula for what each computes.
const (
	Mean              Kind = "mean"
	MeanVariation     Kind = "mean_variation"
	GreatestVariation Kind = "greatest_variation"
	Difference        Kind = "difference"
	GreatestDeviation Kind = "greatest_deviation"
	PerDegree         Kind = "per_degree"
	RangeOf           Kind = "range"
	StandardDeviation Kind = "standard_deviation"
	PeriodRange       Kind = "period_range"
	GreatestStep      Kind = "greatest_step"
	WeightedSum       Kind = "weighted_sum"
)

// Formula says how a criterion is computed. Only the fields of its kind are set.
//
//	mean                Days        mean of the rates
//	mean_variation      Pairs       mean of |second - first|
//	greatest_variation  Pairs       greatest |second - first|
//	difference          Of, From    mean of Of minus mean of From
//	greatest_deviation  Days        greatest |rate - mean of all Days|
//	per_degree          Of, From    that difference over the nominal temperature difference, signed
//	range               Days        greatest minus least rate
//	standard_deviation  Days, Divisor ("n" or "n-1")
//	period_range        Periods     greatest minus least sum
//	greatest_step       Periods     greatest |sum - sum of the period before|
//	weighted_sum        Constant, Terms   constant + Σ weight · criterion
//
// Rates are in s/d, sums of days in s, per_degree in s/d per °C; variations, deviations, ranges and
// steps are magnitudes, the others keep their sign. A criterion is undecided unless all its days are
// read, a weighted sum unless all its criteria are known. Values are exact, standard deviations as
// roots; decimals are rounded once, half to even. Sources: the first six kinds from published
// descriptions of ISO 3159; sums of periods from memory of the trials of marine chronometers; range
// and standard deviation from a watch lexicon on rate tests; weighted sums from published scores of
// observatory contests.
type Formula struct {
	Kind     Kind
	Days     []int
	Pairs    [][2]int
	Of, From []int
	Divisor  string
	Periods  [][]int
	Constant Exact
	Terms    []Term
}

// Term is one addend of a weighted sum over criteria listed before.
type Term struct {
	Weight   Exact
	Symbol   string
	Absolute bool // take the magnitude of the criterion
}

// Day gives programme day n, counted from 1; ok is false outside the programme.
func (p *Programme) Day(n int) (d Day, ok bool) {
	if n < 1 || n > len(p.Days) {
		return Day{}, false
	}
	return p.Days[n-1], true
}

// HasCategory tells whether the programme knows the category code, byte for byte.
func (p *Programme) HasCategory(code string) bool {
	return slices.ContainsFunc(p.Categories, func(c Category) bool { return c.Code == code })
}

// Criterion finds a criterion by its symbol.
func (p *Programme) Criterion(symbol string) (c Criterion, ok bool) {
	i := slices.IndexFunc(p.Criteria, func(c Criterion) bool { return c.Symbol == symbol })
	if i < 0 {
		return Criterion{}, false
	}
	return p.Criteria[i], true
}

// AllDays lists the programme days whose rates enter the formula, each once, in order. A weighted
// sum names no days of its own: it rests on the criteria before it.
func (f Formula) AllDays() []int {
	days := slices.Concat(f.Days, f.Of, f.From)
	for _, p := range f.Pairs {
		days = append(days, p[0], p[1])
	}
	for _, p := range f.Periods {
		days = append(days, p...)
	}
	slices.Sort(days)
	return slices.Compact(days)
}
