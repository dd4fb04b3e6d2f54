package lot

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// Variance is a one-way analysis of variance; sums of squares in the square of the values' unit.
type Variance struct {
	Between, Within     float64 // sums of squares
	FreeBetween, Free   int     // degrees of freedom
	F, P                float64 // P: chance of such an F or a greater one if no group differs
	Explained, Residual float64 // R²; standard deviation within groups
}

// OneWay compares the means of independent groups, with sums of twice the digits of a float (NIST
// StRD, ANOVA, to the digits that the numbers themselves carry). Empty groups are skipped. ok is false
// for fewer than two groups, without a degree of freedom within, or if nothing varies within. It knows
// of nothing but the groups: where day, calibre or depositor differ with them, use Compare. Source:
// NIST/SEMATECH e-Handbook 1.3.5.4.
func OneWay(groups [][]float64) (v Variance, ok bool) {
	var all []float64
	var within, between sum
	used := 0
	for _, g := range groups {
		all = append(all, g...)
	}
	if len(all) == 0 {
		return v, false
	}
	grand := meanOf(all)
	for _, g := range groups {
		if len(g) == 0 {
			continue
		}
		used++
		mean := meanOf(g)
		for _, x := range g {
			d := mean.less(x)
			within.addProduct(d, d)
		}
		d := grand.less(mean.hi) + mean.lo
		between.addProduct(float64(len(g))*d, d)
	}
	v = Variance{Between: between.value(), Within: within.value(), FreeBetween: used - 1, Free: len(all) - used}
	if used < 2 || v.Free < 1 || !(v.Within > 0) {
		return v, false
	}
	v.Residual = math.Sqrt(v.Within / float64(v.Free))
	v.F = v.Between / float64(v.FreeBetween) / (v.Within / float64(v.Free))
	v.P = distuv.F{D1: float64(v.FreeBetween), D2: float64(v.Free)}.Survival(v.F)
	v.Explained = v.Between / (v.Between + v.Within)
	return v, true
}
