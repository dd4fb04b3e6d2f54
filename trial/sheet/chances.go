package sheet

import (
	"io"
	"math"
	"strconv"

	"ratehouse/trial"
)

// NewVerdictsWithChances is NewVerdicts with the columns pM, pV, … pAll between unreachable and
// calibre: the probability that each criterion, and all together, truly lie within their limits.
func NewVerdictsWithChances(w io.Writer, p *trial.Programme, format VerdictFormat, calibre bool, extra ...string) *Verdicts {
	v := &Verdicts{}
	for range len(p.Criteria) + 1 {
		v.chances = append(v.chances, math.NaN())
	}
	v.begin(w, p, format, calibre, extra)
	return v
}

// WithChances sets the probabilities of the next movement written: one a criterion, then that of all
// together; NaN where there is none. Without such a call they are blank.
func (v *Verdicts) WithChances(each []float64, all float64) {
	copy(v.chances, each)
	v.chances[len(v.chances)-1] = all
}

// chanceNames are the columns of the probabilities.
func chanceNames(p *trial.Programme) []string {
	var names []string
	for _, c := range p.Criteria {
		names = append(names, "p"+c.Symbol)
	}
	return append(names, "pAll")
}

// probabilities writes them from column at on, forgets them, and gives the column after them.
func (v *Verdicts) probabilities(at int) int {
	const decimals = 6
	for i, p := range v.chances {
		v.lead(at + i)
		switch {
		case math.IsNaN(p) && v.json:
			v.buf = append(v.buf, "null"...)
		case math.IsNaN(p):
		case v.json:
			v.buf = append(strconv.AppendFloat(append(v.buf, '"'), p, 'f', decimals, 64), '"')
		default:
			v.buf = strconv.AppendFloat(v.buf, p, 'f', decimals, 64)
		}
		v.chances[i] = math.NaN()
	}
	return at + len(v.chances)
}
