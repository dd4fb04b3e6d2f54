package conformity

import (
	"math"
	"math/rand/v2"

	"ratehouse/trial"
)

// draws is the number of trials where a region is not described by linear forms: the standard error
// of a probability is then at most 0.5/√draws = 0.00195.
const draws = 65_536

// seed makes the trials the same every time.
const seed = 3159

// sample draws true rates about measured ones (JCGM 101, propagation of distributions).
type sample struct {
	root []float64 // lower triangular, root·rootᵀ is the covariance
	z    []float64
	r    []float64
}

// each calls visit with rates drawn about the measured ones; the slice is used again.
func (s *sample) each(c *Covariance, rates []float64, visit func(r []float64)) {
	if s.root == nil {
		s.root = root(c)
		s.z, s.r = make([]float64, c.days), make([]float64, c.days)
	}
	rng := rand.New(rand.NewPCG(seed, draws))
	for range draws {
		for d := range s.z {
			s.z[d] = rng.NormFloat64()
			s.r[d] = rates[d] + dot(s.root[d*c.days:d*c.days+d+1], s.z[:d+1])
		}
		visit(s.r)
	}
}

// root is the Cholesky factor of a covariance that may be singular.
func root(c *Covariance) []float64 {
	n := c.days
	l := make([]float64, n*n)
	for j := range n {
		for i := j; i < n; i++ {
			v := c.cells[i*n+j] - dot(l[i*n:i*n+j], l[j*n:j*n+j])
			switch {
			case i == j && v > 1e-12*c.cells[j*n+j]:
				l[i*n+j] = math.Sqrt(v)
			case i > j && l[j*n+j] > 0:
				l[i*n+j] = v / l[j*n+j]
			}
		}
	}
	return l
}

// sampled is the share of trials inside criterion i, or inside all limited ones for everything.
func (a *Assessor) sampled(rates []float64, i int) float64 {
	inside := 0
	values := make([]float64, len(a.region.parts))
	a.sample.each(a.cov, rates, func(r []float64) {
		ok := true
		for k := range a.region.parts {
			values[k] = a.region.value(k, r, values)
			p := &a.region.parts[k]
			if (i == everything || i == k) && p.shape != unlimited && (values[k] < p.floor || values[k] > p.ceiling) {
				ok = false
			}
		}
		if ok {
			inside++
		}
	})
	return float64(inside) / draws
}

// Moments describe where the true value of a criterion lies.
type Moments struct{ Mean, SD, Low, High float64 } // Low and High: the middle 95 %

// Moments propagates the covariance through criterion i about measured rates by trials (JCGM 101
// clause 7, from memory): for magnitudes a linear formula would be wrong near zero, where reading
// noise alone makes V, Vmax and P greater than nothing (domain notes 5.2, folding bias).
func (a *Assessor) Moments(rates []float64, i int) Moments {
	list := make([]float64, 0, draws)
	values := make([]float64, len(a.region.parts))
	a.sample.each(a.cov, rates, func(r []float64) {
		for k := range i + 1 {
			values[k] = a.region.value(k, r, values)
		}
		list = append(list, values[i])
	})
	return momentsOf(list)
}

// value computes criterion k; values holds those before it.
func (r *region) value(k int, rates, values []float64) float64 {
	f := r.prog.Criteria[k].Formula
	switch f.Kind {
	case trial.WeightedSum:
		sum := f.Constant.Float()
		for _, t := range f.Terms {
			x := values[r.index(t.Symbol)]
			if t.Absolute {
				x = math.Abs(x)
			}
			sum += t.Weight.Float() * x
		}
		return sum
	case trial.StandardDeviation:
		return deviation(f, rates)
	}
	return r.parts[k].evaluate(rates)
}

func (r *region) index(symbol string) int {
	for i, c := range r.prog.Criteria {
		if c.Symbol == symbol {
			return i
		}
	}
	return 0
}

// deviation is the standard deviation of the days of a formula.
func deviation(f trial.Formula, rates []float64) float64 {
	var mean, sum float64
	for _, d := range f.Days {
		mean += rates[d-1]
	}
	mean /= float64(len(f.Days))
	for _, d := range f.Days {
		sum += (rates[d-1] - mean) * (rates[d-1] - mean)
	}
	n := float64(len(f.Days))
	if f.Divisor == "n-1" {
		n--
	}
	return math.Sqrt(sum / n)
}
