package part

import (
	"strconv"

	"ratehouse/trial"
	"ratehouse/web/words"
)

// Criteria is the table of everything a movement is judged by.
type Criteria struct {
	Name string // of the table for screen readers: unique on its page
	Unit string // of most criteria; the others name theirs
	Rows []CriterionRow
}

// CriterionRow is one criterion of one movement, ready to be drawn.
type CriterionRow struct {
	Symbol, Title, Meaning string
	Unit                   string // "" when it is the table's
	Value, Limits, Margin  string
	Known                  bool
	Judged                 Judged
	Gauge                  Gauge
}

// CriteriaOf makes the table from a result of the judge. Papers show the programme's own decimals, the
// screen those of words.Decimals.
func CriteriaOf(p *words.Printer, j *trial.Judge, res *trial.Result, onPaper bool) Criteria {
	crit := j.Programme().Criteria
	c := Criteria{Name: p.Say(words.Criteria), Unit: commonUnit(crit), Rows: make([]CriterionRow, len(crit))}
	for i, k := range crit {
		l, v := j.Limit(i), res.Values[i]
		places := words.Decimals(k)
		if onPaper {
			places = k.Decimals
		}
		row := CriterionRow{
			Symbol: k.Symbol, Title: p.Say(words.CriterionTitle(k.Symbol, k.Title)), Meaning: p.Say(words.Formula(k.Formula)),
			Limits: p.Limits(k, l), Known: v.Known, Judged: OutcomeOf(v.Outcome, v.Unreachable), Gauge: GaugeOf(k, l, v),
			Value: words.Blank, Margin: words.Blank,
		}
		if k.Unit != c.Unit {
			row.Unit = p.Say(words.Unit(k.Unit))
		}
		if v.Known {
			row.Value = p.Criterion(k, l, v.Exact, places)
		}
		if m, ok := res.Margin(i); ok {
			row.Margin = p.Margin(m, places)
		}
		c.Rows[i] = row
	}
	c.Unit = p.Say(words.Unit(c.Unit))
	return c
}

func commonUnit(crit []trial.Criterion) (common string) {
	count := map[string]int{}
	for _, k := range crit {
		if count[k.Unit]++; count[k.Unit] > count[common] {
			common = k.Unit
		}
	}
	return common
}

// Gauge is a value drawn to scale between its limits.
type Gauge struct {
	Zero     string // where zero is; "" if out of sight
	Min, Max bool
	Dot      string // where the value is; "" while it is not known
	Class    string
}

const gaugeMin, gaugeMax, gaugeLeast, gaugeMost = 26.0, 106.0, 6.0, 126.0

// GaugeOf places a value: the limits always stand at the same two places, a value far outside at the
// end of the line. With one limit only, its own size is the scale.
func GaugeOf(k trial.Criterion, l trial.Limit, v trial.Value) Gauge {
	lo, hi := l.Min.Float(), l.Max.Float()
	g := Gauge{Min: l.HasMin, Max: l.HasMax}
	if !words.SignedKind(k.Formula.Kind) && !l.HasMin {
		g.Min, lo = true, 0
	}
	switch {
	case !l.Any():
		return Gauge{}
	case !g.Min:
		lo = hi - scaleOf(hi)
	case !g.Max:
		hi = lo + scaleOf(lo)
	}
	if lo == hi { // one value alone is allowed
		lo, hi = lo-scaleOf(lo), hi+scaleOf(hi)
	}
	at := func(x float64) float64 { return gaugeMin + (x-lo)/(hi-lo)*(gaugeMax-gaugeMin) }
	if z := at(0); z > gaugeMin && z < gaugeMax {
		g.Zero = tenth(z)
	}
	if !v.Known {
		return g
	}
	x, class := at(v.Float()), "ok"
	if v.Outcome == trial.Outside {
		class = "bad"
		// The engine's word, not the rounding of a pixel, puts the dot beyond the bar.
		if v.Float() > (lo+hi)/2 {
			x = max(x, gaugeMax+5)
		} else {
			x = min(x, gaugeMin-5)
		}
	}
	g.Dot, g.Class = tenth(min(max(x, gaugeLeast), gaugeMost)), class
	return g
}

func scaleOf(x float64) float64 {
	if x < 0 {
		x = -x
	}
	if x == 0 {
		return 1
	}
	return x
}

func tenth(x float64) string { return strconv.FormatFloat(x, 'f', 1, 64) }
