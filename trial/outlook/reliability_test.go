package outlook_test

import (
	"fmt"
	"math"
	"os"
	"strings"
	"testing"

	"ratehouse/trial"
	"ratehouse/trial/outlook"
	"ratehouse/trial/simulate/rival"
)

// line is a logistic regression of passing on the mean rate so far: what outlooks are measured against.
type line struct{ at, by float64 }

func (l line) chance(mean float64) float64 { return 1 / (1 + math.Exp(-l.at-l.by*mean)) }

// fit is by Newton's method.
func fit(means []float64, passed []bool) (l line) {
	for range 30 {
		var g0, g1, h00, h01, h11 float64
		for i, m := range means {
			p := l.chance(m)
			off, w := -p, p*(1-p)
			if passed[i] {
				off++
			}
			g0, g1 = g0+off, g1+off*m
			h00, h01, h11 = h00+w, h01+w*m, h11+w*m*m
		}
		det := h00*h11 - h01*h01
		l.at, l.by = l.at+(h11*g0-h01*g1)/det, l.by+(h00*g1-h01*g0)/det
	}
	return l
}

func meanOf(rates []trial.Rate) (m float64) {
	for _, r := range rates {
		m += float64(r.Milli()) / 1000 / float64(len(rates))
	}
	return m
}

// decile counts forecasts between one tenth and the next.
type decile struct{ n, said, passed float64 }

func (d decile) gap() float64 { return (d.said - d.passed) / d.n }

// chanceOf is the standard error of a gap that is nothing but chance.
func (d decile) chanceOf() float64 { q := d.said / d.n; return math.Sqrt(q * (1 - q) / d.n) }

// figures are what forecasts after so many days are worth.
type figures struct {
	days         int
	brier, logit float64
	deciles      [10]decile
}

func (f figures) ratio() float64 { return f.brier / f.logit }

// lotsOf delivers lots of the second generator with who passes.
func lotsOf(t testing.TB, m *rival.Maker, lots, size int) (rates [][]trial.Rate, passed []bool) {
	t.Helper()
	j := judgeOf(t, trial.ISO3159())
	var r trial.Result
	for range lots {
		for _, s := range m.Lot(trial.ISO3159(), size) {
			rates = append(rates, ratesOf(s))
			j.Rates(rates[len(rates)-1], &r)
			passed = append(passed, r.Verdict == trial.Pass)
		}
	}
	return rates, passed
}

// measure forecasts movements of other lots than the history's after these days.
func measure(t testing.TB, f *outlook.Forecast, past [][]trial.Rate, went []bool, now [][]trial.Rate, passed []bool, days []int) (all []figures) {
	t.Helper()
	for _, k := range days {
		var means []float64
		for _, r := range past {
			means = append(means, meanOf(r[:k]))
		}
		simple, out := fit(means, went), figures{days: k}
		for i, r := range now {
			y := 0.0
			if passed[i] {
				y = 1
			}
			p, q := chance(t, f, first(r, k)), simple.chance(meanOf(r[:k]))
			out.brier, out.logit = out.brier+(p-y)*(p-y)/float64(len(now)), out.logit+(q-y)*(q-y)/float64(len(now))
			d := &out.deciles[min(9, int(10*p))]
			d.n, d.said, d.passed = d.n+1, d.said+p, d.passed+y
		}
		all = append(all, out)
	}
	return all
}

// The figures on the second generator: a history of 3,000 movements in 100 lots, and others of
// many other lots (2,500; 40,000 under RATEHOUSE_SOAK=1). A gap may be 0.03, and what chance makes of so
// few movements besides: two of its standard errors, four where few are drawn.
func TestReliability(t *testing.T) {
	t.Parallel()
	lots, days, errors := 500, []int{2, 6, 10}, 4.0
	if os.Getenv("RATEHOUSE_SOAK") == "1" {
		lots, days, errors = 8000, []int{2, 4, 6, 8, 10, 13}, 2
	}
	m := rival.New(5301)
	past, went := lotsOf(t, m, 100, 30)
	now, passed := lotsOf(t, m, lots, 5)
	all := measure(t, forecastOf(t, priorOf(t, past), nil), past, went, now, passed, days)
	all = append(all, together(all))
	t.Log("\n" + table(all))
	counted := 0
	for _, f := range all {
		if f.ratio() > 0.9 {
			t.Errorf("%d days: Brier score %.4f, %.2f of the regression's", f.days, f.brier, f.ratio())
		}
		for i, d := range f.deciles {
			if d.n < 200 {
				continue
			}
			counted++
			if math.Abs(d.gap()) > 0.03+errors*d.chanceOf() {
				t.Errorf("%d days, decile %d: %.0f forecasts are off by %+.3f", f.days, i+1, d.n, d.gap())
			}
		}
	}
	if counted < len(all)+2 {
		t.Errorf("%d deciles with 200 forecasts and more", counted)
	}
}

// together is all days in one, as 0 days.
func together(all []figures) (sum figures) {
	for _, f := range all {
		sum.brier, sum.logit = sum.brier+f.brier/float64(len(all)), sum.logit+f.logit/float64(len(all))
		for i, d := range f.deciles {
			s := &sum.deciles[i]
			s.n, s.said, s.passed = s.n+d.n, s.said+d.said, s.passed+d.passed
		}
	}
	return sum
}

// table prints the figures as they stand in the docs.
func table(all []figures) string {
	var b strings.Builder
	b.WriteString("| days read | Brier score | of the regression's | gap of deciles 1 to 10 (movements) |\n| --- | --- | --- | --- |\n")
	for _, f := range all {
		fmt.Fprintf(&b, "| %d | %.4f | %.2f |", f.days, f.brier, f.ratio())
		for _, d := range f.deciles {
			switch {
			case d.n < 200:
				b.WriteString(" -")
			default:
				fmt.Fprintf(&b, " %+.3f (%.0f)", d.gap(), d.n)
			}
		}
		b.WriteString(" |\n")
	}
	return b.String()
}
