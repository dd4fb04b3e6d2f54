package conformity

import (
	"math"
	"slices"
)

// momentsOf describes a sample, which it sorts.
func momentsOf(list []float64) Moments {
	var m Moments
	for i, x := range list { // Welford: no cancellation
		delta := x - m.Mean
		m.Mean += delta / float64(i+1)
		m.SD += delta * (x - m.Mean)
	}
	m.SD = math.Sqrt(m.SD / float64(len(list)-1))
	slices.Sort(list)
	tail := len(list) / 40
	m.Low, m.High = list[tail], list[len(list)-1-tail]
	return m
}
