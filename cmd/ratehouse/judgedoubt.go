package main

import (
	"errors"
	"flag"
	"fmt"
	"math"
	"os"
	"strings"

	"ratehouse/trial"
	"ratehouse/trial/conformity"
	"ratehouse/trial/sheet"
)

// doubt is what judge -uncertainty and -budget add: how probable it is that true values lie within
// limits, given the uncertainty of a state reading alone or a laboratory's whole budget.
type doubt struct {
	judges    []*trial.Judge // by category, with the limits as they are
	result    trial.Result
	assessors []*conformity.Assessor
	budget    trial.Budget
	varies    bool // the covariance hangs on the movement's own slope with temperature
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

// readBudget reads a budget file.
func readBudget(name string) (trial.Budget, error) {
	data, err := os.ReadFile(name)
	if err != nil {
		return trial.Budget{}, err
	}
	b, err := sheet.ParseBudget(data)
	if err != nil {
		return trial.Budget{}, fmt.Errorf("%s: %w", name, err)
	}
	return b, nil
}

// doubt prepares the categories' assessors if probabilities are wanted; else it is nil.
func (j judgeJob) doubt(judges []*trial.Judge) *doubt {
	if j.budget == nil {
		return nil
	}
	p := j.prog
	d := &doubt{judges: judges, budget: *j.budget, rates: make([]float64, len(p.Days)), each: make([]float64, len(p.Criteria))}
	d.varies = p.Measurand == trial.AtNominal && (d.budget.ChamberSystematic.Sign() > 0 || d.budget.ChamberRandom.Sign() > 0)
	for _, one := range judges {
		d.assessors = append(d.assessors, d.assessor(one, conformity.Movement{}))
	}
	return d
}

// assessor is for days that share their readings.
func (d *doubt) assessor(j *trial.Judge, m conformity.Movement) *conformity.Assessor {
	p := j.Programme()
	return conformity.NewAssessor(j, conformity.Propagate(p, conformity.Chain(p), d.budget, m))
}

// add gives the verdicts their probabilities for the movement written next.
func (d *doubt) add(m *sheet.Movement, to *sheet.Verdicts) {
	r := &d.result
	d.judges[m.Category].MilliLong(m.Rates, m.Known, r)
	for i, milli := range m.Rates {
		d.rates[i] = float64(milli) / 1000
	}
	a := d.assessors[m.Category]
	if j := d.judges[m.Category]; d.varies {
		if slope, ok := conformity.Slope(j, r); ok {
			a = d.assessor(j, conformity.Movement{Slope: slope.Float()})
		}
	}
	a.Assess(d.rates, r, &d.chances)
	for i, c := range d.chances.Each {
		d.each[i] = orNaN(c)
	}
	to.WithChances(d.each, orNaN(d.chances.All))
}

// guarded are the judges whose limits are drawn in by the programme's guard band.
func (d *doubt) guarded() ([]*trial.Judge, error) {
	if d.varies {
		return nil, errors.New("the guarded decision rule needs one uncertainty for all movements, and this budget's temperature terms differ by movement: not built yet")
	}
	out := make([]*trial.Judge, len(d.assessors))
	for i, a := range d.assessors {
		p, err := a.Guarded()
		if err != nil {
			return nil, err
		}
		if out[i], err = trial.NewJudge(p, d.judges[i].Category()); err != nil {
			return nil, err
		}
	}
	return out, nil
}

func orNaN(c conformity.Chance) float64 {
	if !c.Known {
		return math.NaN()
	}
	return c.P
}

// wantDoubt notes which probabilities the command line asks for.
func (j *judgeJob) wantDoubt(flags *flag.FlagSet, uncertainty, budget string) error {
	given := map[string]bool{}
	flags.Visit(func(f *flag.Flag) { given[f.Name] = true })
	switch {
	case given["uncertainty"] && given["budget"]:
		return errors.New("-uncertainty and -budget exclude each other")
	case given["uncertainty"]:
		u, err := parseUncertainty(uncertainty)
		if err != nil {
			return err
		}
		b := trial.ReadingOnly(u)
		j.budget = &b
	case given["budget"]:
		b, err := readBudget(budget)
		if err != nil {
			return err
		}
		j.budget = &b
	}
	return nil
}
