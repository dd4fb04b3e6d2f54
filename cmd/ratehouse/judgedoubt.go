package main

import (
	"errors"
	"flag"
	"math"
	"strings"

	"ratehouse/trial"
	"ratehouse/trial/conformity"
	"ratehouse/trial/sheet"
)

// doubt is what judge -uncertainty adds: how probable it is that true values lie within limits,
// given the uncertainty of a state reading alone.
type doubt struct {
	assessors []*conformity.Assessor // by category
	rates     []float64
	chances   conformity.Chances
	each      []float64
}

// parseUncertainty reads U: an ASCII decimal above 0 with at most 9 decimals.
func parseUncertainty(s string) (trial.Exact, error) {
	refused := errors.New("-uncertainty wants a decimal above 0 with at most 9 decimals: the standard uncertainty of one state reading in s")
	_, decimals, _ := strings.Cut(s, ".")
	u, err := trial.ParseExact(s)
	if err != nil || strings.Contains(s, "/") || len(decimals) > 9 || u.Sign() <= 0 {
		return trial.Exact{}, refused
	}
	if most := trial.Ratio(1_000_000_000, 1); u.Cmp(most) > 0 { // no limit is left to tell them apart
		return most, nil
	}
	return u, nil
}

// newDoubt prepares the categories' assessors; days share their readings, one a day at 24 h.
func newDoubt(judges []*trial.Judge, u trial.Exact) *doubt {
	p := judges[0].Programme()
	d := &doubt{rates: make([]float64, len(p.Days)), each: make([]float64, len(p.Criteria))}
	cov := conformity.Propagate(p, conformity.Chain(len(p.Days)), trial.ReadingOnly(u), conformity.Movement{})
	for _, j := range judges {
		d.assessors = append(d.assessors, conformity.NewAssessor(j, cov))
	}
	return d
}

// add gives the verdicts their probabilities for the movement written next.
func (d *doubt) add(m *sheet.Movement, r *trial.Result, to *sheet.Verdicts) {
	for i, milli := range m.Rates {
		d.rates[i] = float64(milli) / 1000
	}
	d.assessors[m.Category].Assess(d.rates, r, &d.chances)
	for i, c := range d.chances.Each {
		d.each[i] = orNaN(c)
	}
	to.WithChances(d.each, orNaN(d.chances.All))
}

func orNaN(c conformity.Chance) float64 {
	if !c.Known {
		return math.NaN()
	}
	return c.P
}

// flagGiven tells whether a flag stands on the command line, be it empty.
func flagGiven(flags *flag.FlagSet, name string) (given bool) {
	flags.Visit(func(f *flag.Flag) { given = given || f.Name == name })
	return given
}
