package lot

import (
	"math"
	"slices"
)

// sum adds floats as if with twice their digits: every rounding error of an addition is itself a
// float, and kept (error-free transformations of Knuth and Dekker, from memory).
type sum struct{ hi, lo float64 }

func (s *sum) add(x float64) {
	t := s.hi + x
	b := t - s.hi
	s.lo += (s.hi - (t - b)) + (x - b)
	s.hi = t
}

// addProduct adds a·b.
func (s *sum) addProduct(a, b float64) { s.add(a * b) }

func (s sum) value() float64 { return s.hi + s.lo }

// over is the sum divided by n, to twice the digits of a float.
func (s sum) over(n int) sum {
	hi := s.value() / float64(n)
	rest := math.FMA(-hi, float64(n), s.hi) + s.lo
	return sum{hi, rest / float64(n)}
}

// less is x minus the sum, rounded once.
func (s sum) less(x float64) float64 {
	var d sum
	d.add(x)
	d.add(-s.hi)
	d.add(-s.lo)
	return d.value()
}

// Moments are what is told of numbers of any unit.
type Moments struct {
	N        int
	Mean, SD float64 // SD with divisor n-1; 0 for fewer than two
	Lag1     float64 // autocorrelation of neighbours; 0 where SD is
	Min, Max float64
}

// MomentsOf computes mean, standard deviation and Lag1 in two passes with sums of twice the digits:
// right to all digits that the float64 numbers given can carry, also where they agree in the first
// seven (NIST StRD, univariate). Lag1 is the sum of products of neighbours' deviations over the sum
// of squares (NIST/SEMATECH e-Handbook 1.3.5.12, from memory). The zero value for no numbers.
func MomentsOf(x []float64) Moments {
	if len(x) == 0 {
		return Moments{}
	}
	mean := meanOf(x)
	m := Moments{N: len(x), Mean: mean.value(), Min: slices.Min(x), Max: slices.Max(x)}
	var squares, products sum
	before := 0.0
	for _, v := range x {
		d := mean.less(v)
		squares.addProduct(d, d)
		products.addProduct(d, before)
		before = d
	}
	if s := squares.value(); m.N > 1 && s > 0 {
		m.SD, m.Lag1 = math.Sqrt(s/float64(m.N-1)), products.value()/s
	}
	return m
}

func meanOf(x []float64) sum {
	var s sum
	for _, v := range x {
		s.add(v)
	}
	return s.over(len(x))
}

// Quantile is the p-quantile of sorted numbers, 0 <= p <= 1, linear between the points (i-1)/(n-1) of
// the i-th of n (definition 7 of Hyndman and Fan 1996, from memory). NaN for no numbers.
func Quantile(sorted []float64, p float64) float64 {
	if len(sorted) == 0 {
		return math.NaN()
	}
	at := p * float64(len(sorted)-1)
	i := min(int(at), len(sorted)-1)
	if i == len(sorted)-1 {
		return sorted[i]
	}
	return sorted[i] + (at-float64(i))*(sorted[i+1]-sorted[i])
}
