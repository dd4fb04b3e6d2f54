package conformity

import (
	"math/big"

	"ratehouse/trial"
)

// ExcursionEffect is what an excursion of a chamber did to the rate of the day it fell into:
// degree-hours · slope / 24 h, in thousandths of s/d rounded away from zero, so that nothing is
// played down. degreeHours is the integral of the deviation from nominal over time, °C h, with its
// sign; slope is in s/d per °C. 3.5 °C for 2.5 h at 0.6 make 0.219 s/d. Common practice, no source;
// it takes the rate as following temperature at once and linearly.
func ExcursionEffect(degreeHours, slope trial.Exact) trial.Milli {
	r := degreeHours.Times(slope).Times(trial.Ratio(1000, 24)).Rat()
	q, m := new(big.Int).QuoRem(r.Num(), r.Denom(), new(big.Int))
	if m.Sign() != 0 {
		q.Add(q, big.NewInt(int64(r.Sign())))
	}
	return trial.Milli(q.Int64())
}

// Slope is a movement's own variation with temperature, s/d per °C, from the first criterion of the
// programme that is one; ok is false before its days are read. Until then take the calibre's.
func Slope(j *trial.Judge, r *trial.Result) (slope trial.Exact, ok bool) {
	for i, c := range j.Programme().Criteria {
		if c.Formula.Kind == trial.PerDegree {
			return r.Values[i].Exact, r.Values[i].Known
		}
	}
	return trial.Exact{}, false
}

// Impact is the effect of an excursion on one movement.
type Impact struct {
	Measured, Without trial.Verdict // as measured, and without the excursion
	Criteria          []CriterionImpact
}

// CriterionImpact is the effect on one decided criterion that the excursion touched.
type CriterionImpact struct {
	Criterion int
	Shift     trial.Exact // value as measured minus value without the excursion
	Limited   bool
	Margin    trial.Exact // if limited: distance to the nearer limit without the excursion, negative outside
	Flips     bool        // the excursion decides on which side of its limits it lies
}

// Changed tells whether the verdict hangs on the excursion.
func (m *Impact) Changed() bool { return m.Measured != m.Without }

// Excursion takes the effect of an excursion, by programme day, out of a movement's rates and judges
// it again: exact. effects holds what was added to each day's rate; see ExcursionEffect.
func Excursion(j *trial.Judge, rates []trial.Rate, effects map[int]trial.Milli) Impact {
	var with, without trial.Result
	bare := make([]trial.Rate, len(rates))
	for d, r := range rates {
		bare[d] = r
		if e := effects[d+1]; e != 0 {
			bare[d] = r.Shifted(-int64(e), trial.SecondsPerDay)
		}
	}
	j.Rates(rates, &with)
	j.Rates(bare, &without)
	m := Impact{Measured: with.Verdict, Without: without.Verdict}
	for i := range with.Values {
		a, b := &with.Values[i], &without.Values[i]
		if !a.Known || a.Cmp(b.Exact) == 0 {
			continue
		}
		c := CriterionImpact{Criterion: i, Shift: a.Sub(b.Exact), Flips: a.Outcome != b.Outcome}
		c.Margin, c.Limited = without.Margin(i)
		m.Criteria = append(m.Criteria, c)
	}
	return m
}

// LotImpact sums up an excursion over a lot: what closes or opens its remark.
type LotImpact struct {
	Movements int
	Changed   int         // verdicts that hang on it
	Touched   bool        // some limited criterion was touched, and Worst is known
	Worst     trial.Exact // of a touched criterion, the margin nearest to zero without the excursion; negative outside
	At        int         // index of the movement it belongs to
	Criterion int
}

// Add counts one movement's impact.
func (l *LotImpact) Add(m Impact) {
	if m.Changed() {
		l.Changed++
	}
	for _, c := range m.Criteria {
		if c.Limited && (!l.Touched || magnitudeOf(c.Margin).Cmp(magnitudeOf(l.Worst)) < 0) {
			l.Touched, l.Worst, l.At, l.Criterion = true, c.Margin, l.Movements, c.Criterion
		}
	}
	l.Movements++
}

func magnitudeOf(e trial.Exact) trial.Exact {
	if e.Sign() < 0 {
		return e.Neg()
	}
	return e
}
