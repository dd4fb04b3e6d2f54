package trial

import (
	"fmt"
	"slices"
	"strings"
)

// Fault is one thing wrong with a programme: where, as a path in its file form, and what, as a
// code with arguments (web/words says it in other languages).
type Fault struct {
	Path string // such as criteria[2].formula.days
	Code string
	Args []string
}

// Error is the English text: "criteria[2].formula.days: day 16 is not a day of the programme".
func (f *Fault) Error() string {
	text, ok := faultTexts[f.Code]
	if !ok {
		text = f.Code
	}
	args := make([]any, len(f.Args))
	for i, a := range f.Args {
		args[i] = a
	}
	return f.Path + ": " + fmt.Sprintf(text, args...)
}

// Is lets errors.Is(err, ErrNotBuilt) find what is named but not computed yet.
func (f *Fault) Is(target error) bool { return target == ErrNotBuilt && f.Code == "not_built" }

// faultTexts says the codes in English for the command line.
var faultTexts = map[string]string{
	"missing":          "is missing",
	"unknown_day":      "day %s is not a day of the programme",
	"repeated":         "%s appears twice",
	"empty":            "is empty",
	"no_guard":         "goes with the guarded rule alone",
	"bad_date":         "%s is not a date like 2026-12-01",
	"too_few":          "has too few entries, at least %s are needed",
	"too_many":         "has too many entries, at most %s are allowed",
	"too_many_roots":   "rests on too many standard deviations, at most %s are allowed",
	"too_deep":         "rests on sums of sums more than %s deep",
	"not_before":       "%s is not the symbol of a criterion listed before this one",
	"same_day":         "both days of a pair are day %s",
	"same_temperature": "both sides have the same mean temperature, so there is nothing to divide by",
	"unknown_kind":     "%s is not a kind of formula",
	"unknown_value":    "%s is not allowed here",
	"unknown_category": "category %s is not one of the programme's",
	"crossed":          "the lower limit %s is above the upper limit %s",
	"day_order":        "days must be numbered 1, 2, 3, ... in order; found %s",
	"position":         "%s is not a position (CH, FH, 3H, 6H, 9H, 12H)",
	"out_of_range":     "%s is outside what is allowed (%s to %s)",
	"not_built":        "%s: not built yet",
	"not_json":         "is not JSON: %s",
	"wrong_type":       "must be %s",
	"unknown_name":     "is not a name of the programme file",
	"bad_symbol":       "%s is no symbol: a letter, then letters, digits or _, and no name of a fixed column",
	"bad_code":         "%s is no code: up to 40 of letters, digits, . _ -, beginning with a letter or digit",
}

func fault(path, code string, args ...string) *Fault { return &Fault{path, code, args} }

// Check finds the first fault of the programme, in the order of its file form; nil if there is
// none. Formulas this version cannot compute yet are no fault here: NewJudge names them.
func (p *Programme) Check() error {
	for _, check := range []func() *Fault{p.checkHead, p.checkDays, p.checkRules, p.checkCategories, p.checkCriteria} {
		if f := check(); f != nil {
			return f
		}
	}
	return nil
}

func (p *Programme) checkHead() *Fault {
	for _, field := range []struct{ path, value string }{{"code", p.Code}, {"version", p.Version}, {"title", p.Title}} {
		if field.value == "" {
			return fault(field.path, "missing")
		}
	}
	if !isCode(p.Code) {
		return fault("code", "bad_code", p.Code)
	}
	if t := p.TextChecked; t != nil {
		for _, field := range []struct{ path, value string }{{"by", t.By}, {"edition", t.Edition}} {
			if field.value == "" {
				return fault("text_checked."+field.path, "missing")
			}
		}
		if !isDate(t.Date) {
			return fault("text_checked.date", "bad_date", t.Date)
		}
	}
	if p.Measurand != AsPerformed && p.Measurand != AtNominal {
		return fault("measurand", "unknown_value", string(p.Measurand))
	}
	return nil
}

// isDate tells a date written YYYY-MM-DD; that the month has that day nobody checks.
func isDate(s string) bool {
	if len(s) != 10 || s[4] != '-' || s[7] != '-' || strings.Trim(s[:4]+s[5:7]+s[8:], "0123456789") != "" {
		return false
	}
	month, day := s[5:7], s[8:]
	return month >= "01" && month <= "12" && day >= "01" && day <= "31"
}

// A programme may have a year and a day, that many criteria as fill a page or two, and pairs enough
// for every two of 45 days.
const (
	mostDays     = 366
	mostCriteria = 60
	mostPairs    = 990
)

func (p *Programme) checkDays() *Fault {
	if len(p.Days) == 0 {
		return fault("days", "empty")
	}
	if len(p.Days) > mostDays {
		return fault("days", "out_of_range", fmt.Sprint(len(p.Days)), "1", fmt.Sprint(mostDays))
	}
	for i, d := range p.Days {
		path := fmt.Sprintf("days[%d]", i)
		if d.N != i+1 {
			return fault(path+".day", "day_order", fmt.Sprint(d.N))
		}
		if f := checkPlace(path, d.Position, d.TemperatureC); f != nil {
			return f
		}
	}
	if p.Conditioning.Position == "" {
		return checkPlace("conditioning", CH, p.Conditioning.TemperatureC)
	}
	return checkPlace("conditioning", p.Conditioning.Position, p.Conditioning.TemperatureC)
}

func checkPlace(path string, pos Position, celsius Milli) *Fault {
	if !slices.Contains(Positions(), pos) {
		return fault(path+".position", "position", string(pos))
	}
	if celsius < -100_000 || celsius > 100_000 {
		return fault(path+".temperature_c", "out_of_range", celsius.String(), "-100", "100")
	}
	return nil
}

func (p *Programme) checkRules() *Fault {
	if s := p.Reading.IntervalS; s < 1 || s > 30*SecondsPerDay {
		return fault("reading.interval_s", "out_of_range", fmt.Sprint(s), "1", fmt.Sprint(30*SecondsPerDay))
	}
	if p.Reading.ToleranceS < 0 || p.Reading.ToleranceS >= p.Reading.IntervalS {
		return fault("reading.tolerance_s", "out_of_range", fmt.Sprint(p.Reading.ToleranceS), "0", fmt.Sprint(p.Reading.IntervalS-1))
	}
	if p.Reading.SecondLook.Then != MedianOfThree {
		return fault("reading.second_look.then", "unknown_value", p.Reading.SecondLook.Then)
	}
	for _, r := range p.ranges() {
		if r.value < r.least || r.value > r.most {
			return fault(r.path, "out_of_range", r.value.String(), r.least.String(), r.most.String())
		}
	}
	for i, group := range p.Recovery.Groups {
		if f := p.checkDayList(fmt.Sprintf("recovery.groups[%d]", i), group); f != nil {
			return f
		}
	}
	if p.Recovery.MaxTotalDays != 0 && p.Recovery.MaxTotalDays < len(p.Days) {
		return fault("recovery.max_total_days", "out_of_range", fmt.Sprint(p.Recovery.MaxTotalDays), fmt.Sprint(len(p.Days)), fmt.Sprint(2*mostDays))
	}
	return p.checkDecision()
}

func (p *Programme) checkDecision() *Fault {
	switch d := p.Decision; {
	case d.Rule != Simple && d.Rule != Guarded:
		return fault("decision.rule", "unknown_value", string(d.Rule))
	case d.Guard.Sign() < 0:
		return fault("decision.guard", "out_of_range", d.Guard.String(), "0", "10")
	case d.Rule == Guarded && d.Guard.Sign() == 0:
		return fault("decision.guard", "missing")
	case d.Rule == Simple && d.Guard.Sign() != 0:
		return fault("decision.guard", "no_guard")
	}
	return nil
}

// span is a number with its bounds, in thousandths.
type span struct {
	path               string
	value, least, most Milli
}

// ranges are the plain numbers of the rules.
func (p *Programme) ranges() []span {
	const one, percent = 1000, 100_000
	count := func(path string, n, most int) span { return span{path, Milli(n) * one, 0, Milli(most) * one} }
	e := p.Environment
	return []span{
		count("conditioning.min_hours", p.Conditioning.MinHours, 1000),
		{"reading.second_look.agree", p.Reading.SecondLook.Agree, 0, 60 * one},
		{"environment.temperature_tolerance_c", e.TemperatureToleranceC, 0, percent},
		count("environment.outside_minutes", e.OutsideMinutes, 1440),
		{"environment.humidity_percent.min", e.HumidityMin, 0, percent},
		{"environment.humidity_percent.max", e.HumidityMax, e.HumidityMin, percent},
		count("recovery.max_repeats", p.Recovery.MaxRepeats, 100),
		count("recovery.idle_days_allowed", p.Recovery.IdleDaysAllowed, mostDays),
		count("recovery.max_total_days", p.Recovery.MaxTotalDays, 2*mostDays),
	}
}

func (p *Programme) checkCategories() *Fault {
	if len(p.Categories) == 0 {
		return fault("categories", "empty")
	}
	seen := map[string]bool{}
	for i, c := range p.Categories {
		path := fmt.Sprintf("categories[%d].code", i)
		if !isCode(c.Code) {
			return fault(path, "bad_code", c.Code)
		}
		if seen[c.Code] {
			return fault(path, "repeated", c.Code)
		}
		seen[c.Code] = true
	}
	return nil
}

func (p *Programme) checkCriteria() *Fault {
	if len(p.Criteria) == 0 {
		return fault("criteria", "empty")
	}
	if len(p.Criteria) > mostCriteria {
		return fault("criteria", "too_many", fmt.Sprint(mostCriteria))
	}
	seen := map[string]bool{}
	for i, c := range p.Criteria {
		path := fmt.Sprintf("criteria[%d]", i)
		if !isSymbol(c.Symbol) {
			return fault(path+".symbol", "bad_symbol", c.Symbol)
		}
		if seen[c.Symbol] {
			return fault(path+".symbol", "repeated", c.Symbol)
		}
		if c.Decimals < 0 || c.Decimals > 6 {
			return fault(path+".decimals", "out_of_range", fmt.Sprint(c.Decimals), "0", "6")
		}
		if f := p.checkFormula(path+".formula", c.Formula, seen); f != nil {
			return f
		}
		if f := p.checkLimits(path+".limits", c.Limits); f != nil {
			return f
		}
		seen[c.Symbol] = true
	}
	return p.checkProbabilities(seen)
}

// checkProbabilities keeps a symbol from being the name of another's column of probabilities.
func (p *Programme) checkProbabilities(seen map[string]bool) *Fault {
	for i, c := range p.Criteria {
		if other, ok := strings.CutPrefix(c.Symbol, "p"); ok && seen[other] {
			return fault(criterionPath(i)+".symbol", "bad_symbol", c.Symbol)
		}
	}
	return nil
}

// isCode tells the closed form of codes, so that they need no quoting anywhere.
func isCode(s string) bool {
	const inner = "ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789"
	return s != "" && len(s) <= 40 && strings.Trim(s[:1], inner) == "" && strings.Trim(s, inner+"._-") == ""
}

// isSymbol tells a criterion's symbol: a column name beside judge's fixed ones.
func isSymbol(s string) bool {
	const letters = "ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz"
	fixed := []string{"serial", "category", "verdict", "failed", "unreachable", "calibre", "end", "end_cause", "pAll"}
	return s != "" && len(s) <= 20 && strings.Trim(s[:1], letters) == "" &&
		strings.Trim(s, letters+"0123456789_") == "" && !slices.Contains(fixed, s)
}

func (p *Programme) checkLimits(path string, limits map[string]Limit) *Fault {
	for _, code := range sortedKeys(limits) {
		l := limits[code]
		if !p.HasCategory(code) {
			return fault(path+"."+code, "unknown_category", code)
		}
		if l.HasMin && l.HasMax && l.Min.Cmp(l.Max) > 0 {
			return fault(path+"."+code, "crossed", l.Min.String(), l.Max.String())
		}
	}
	return nil
}

func sortedKeys(m map[string]Limit) []string {
	keys := make([]string, 0, len(m))
	for k := range m {
		keys = append(keys, k)
	}
	slices.Sort(keys)
	return keys
}

// checkFormula checks the arguments of a formula; earlier holds the symbols of criteria before it.
func (p *Programme) checkFormula(path string, f Formula, earlier map[string]bool) *Fault {
	switch f.Kind {
	case Mean, GreatestDeviation, RangeOf, StandardDeviation:
		if f.Kind == StandardDeviation && f.Divisor != "n" && f.Divisor != "n-1" {
			return fault(path+".divisor", "unknown_value", f.Divisor)
		}
		if f.Divisor == "n-1" && len(f.Days) == 1 {
			return fault(path+".days", "too_few", "2")
		}
		return p.checkDayList(path+".days", f.Days)
	case MeanVariation, GreatestVariation:
		return p.checkPairs(path+".pairs", f.Pairs)
	case Difference, PerDegree:
		if fl := p.checkDayList(path+".of", f.Of); fl != nil {
			return fl
		}
		if fl := p.checkDayList(path+".from", f.From); fl != nil {
			return fl
		}
		if f.Kind == PerDegree && p.meanTemperature(f.Of).Cmp(p.meanTemperature(f.From)) == 0 {
			return fault(path, "same_temperature")
		}
		return nil
	case PeriodRange, GreatestStep:
		if len(f.Periods) < 2 {
			return fault(path+".periods", "too_few", "2")
		}
		if len(f.Periods) > mostDays {
			return fault(path+".periods", "too_many", fmt.Sprint(mostDays))
		}
		for i, period := range f.Periods {
			if fl := p.checkDayList(fmt.Sprintf("%s.periods[%d]", path, i), period); fl != nil {
				return fl
			}
		}
		return nil
	case WeightedSum:
		return p.checkTerms(path+".terms", f.Terms, earlier)
	}
	return fault(path+".kind", "unknown_kind", string(f.Kind))
}

// mostRoots bounds the standard deviations a weighted sum may rest on: to compare such a sum exactly
// takes work that doubles with each. mostNested bounds sums within sums within sums.
const (
	mostRoots  = 6
	mostNested = 3
)

func (p *Programme) checkTerms(path string, terms []Term, earlier map[string]bool) *Fault {
	if len(terms) == 0 {
		return fault(path, "empty")
	}
	if len(terms) > mostCriteria {
		return fault(path, "too_many", fmt.Sprint(mostCriteria))
	}
	for i, t := range terms {
		if !earlier[t.Symbol] {
			return fault(fmt.Sprintf("%s[%d].symbol", path, i), "not_before", t.Symbol)
		}
	}
	roots := map[string]bool{}
	switch {
	case !p.shallow(terms, mostNested, roots):
		return fault(path, "too_deep", fmt.Sprint(mostNested))
	case len(roots) > mostRoots:
		return fault(path, "too_many_roots", fmt.Sprint(mostRoots))
	}
	return nil
}

// shallow collects the standard deviations that terms rest on, and tells whether sums lie within
// sums no deeper than allowed.
func (p *Programme) shallow(terms []Term, levels int, roots map[string]bool) bool {
	for _, t := range terms {
		switch c, _ := p.Criterion(t.Symbol); c.Formula.Kind {
		case StandardDeviation:
			roots[t.Symbol] = true
		case WeightedSum:
			if levels == 1 || !p.shallow(c.Formula.Terms, levels-1, roots) {
				return false
			}
		}
	}
	return true
}

func (p *Programme) checkDayList(path string, days []int) *Fault {
	if len(days) == 0 {
		return fault(path, "empty")
	}
	seen := map[int]bool{}
	for i, d := range days {
		at := fmt.Sprintf("%s[%d]", path, i)
		if _, ok := p.Day(d); !ok {
			return fault(at, "unknown_day", fmt.Sprint(d))
		}
		if seen[d] {
			return fault(at, "repeated", fmt.Sprint(d))
		}
		seen[d] = true
	}
	return nil
}

func (p *Programme) checkPairs(path string, pairs [][2]int) *Fault {
	if len(pairs) == 0 {
		return fault(path, "empty")
	}
	if len(pairs) > mostPairs {
		return fault(path, "too_many", fmt.Sprint(mostPairs))
	}
	for i, pair := range pairs {
		at := fmt.Sprintf("%s[%d]", path, i)
		for _, d := range pair {
			if _, ok := p.Day(d); !ok {
				return fault(at, "unknown_day", fmt.Sprint(d))
			}
		}
		if pair[0] == pair[1] {
			return fault(at, "same_day", fmt.Sprint(pair[0]))
		}
	}
	return nil
}

// meanTemperature is the mean nominal temperature of days, in degrees Celsius.
func (p *Programme) meanTemperature(days []int) Exact {
	var sum int64
	for _, d := range days {
		sum += int64(p.Days[d-1].TemperatureC)
	}
	return Ratio(sum, 1000*int64(len(days)))
}
