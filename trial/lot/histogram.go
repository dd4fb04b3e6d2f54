package lot

import "math"

// Sample is one movement's value of a criterion. Outside is the engine's exact word on the limits; the
// float only says in which column of which side it lies.
type Sample struct {
	X       float64
	Outside bool
}

// Bounds are the ends that columns of a histogram fall on: limits, or the zero of a magnitude.
type Bounds struct {
	HasMin, HasMax bool
	Min, Max       float64
}

type histogram struct {
	Bounds
	samples []Sample
}

// Column is one column: a range of values and how many fell into it. The first and the last take in
// everything beyond.
type Column struct {
	From, To float64
	N        int
	Outside  bool
	Beyond   bool
}

// Histogram lays out the columns of numbers against their bounds: between two of them a number of
// equal ones with a round width, about 10, or 20 from 80 numbers on, and as many of them outside as
// the numbers need, at most the width of the interval again. A number equal to a limit stands inside.
// Without numbers it has the columns between the bounds, or around 0. Common practice, no source.
func Histogram(samples []Sample, b Bounds) []Column {
	d := histogram{b, samples}
	lo, hi, step := d.grid()
	first, last := 0, int(math.Round((hi-lo)/step))
	within := last
	for _, s := range d.samples {
		k := d.column(s, lo, step, within)
		first, last = min(first, max(k, -within)), max(last, min(k+1, 2*within))
	}
	out := make([]Column, last-first)
	for i := range out {
		k := first + i
		out[i] = Column{From: lo + float64(k)*step, To: lo + float64(k+1)*step, Outside: d.HasMin && k < 0 || d.HasMax && k >= within}
	}
	for _, s := range d.samples {
		k := d.column(s, lo, step, within) - first
		c := min(max(k, 0), len(out)-1)
		out[c].N++
		out[c].Beyond = out[c].Beyond || c != k
	}
	return out
}

// column is the column of a value counted from the lower limit; the engine's word decides at a limit.
func (d histogram) column(s Sample, lo, step float64, within int) int {
	k := int(math.Floor((s.X - lo) / step))
	switch {
	case d.HasMin && !s.Outside && k < 0:
		return 0
	case d.HasMax && !s.Outside && k >= within:
		return within - 1
	case s.Outside && d.HasMax && s.X >= d.Max && k < within:
		return within
	case s.Outside && d.HasMin && s.X <= d.Min && k >= 0:
		return -1
	}
	return k
}

// grid is the interval and the width of its columns: the limits where there are two, else what the
// values span.
func (d histogram) grid() (lo, hi, step float64) {
	if d.HasMin && d.HasMax && d.Max > d.Min {
		lo, hi = d.Min, d.Max
	} else {
		lo, hi = math.Inf(1), math.Inf(-1)
		for _, s := range d.samples {
			lo, hi = math.Min(lo, s.X), math.Max(hi, s.X)
		}
		switch {
		case len(d.samples) == 0:
			lo, hi = -1, 1
		case !(hi > lo):
			lo, hi = lo-1, lo+1
		}
		lo, hi = widen(lo, hi)
	}
	want := 10
	if len(d.samples) >= 80 {
		want = 20
	}
	return lo, hi, (hi - lo) / float64(roundParts(hi-lo, want))
}

// roundParts is the number of parts near want that divide the span into steps of one, two, two and a
// half or five times a power of ten; want itself where there is none.
func roundParts(span float64, want int) int {
	for off := 0; off <= want/2; off++ {
		for _, n := range []int{want + off, want - off} {
			m := span / float64(n)
			m /= math.Pow10(int(math.Floor(math.Log10(m) + 1e-9)))
			for _, nice := range []float64{1, 2, 2.5, 5, 10} {
				if math.Abs(m-nice) < 1e-6 {
					return n
				}
			}
		}
	}
	return want
}

// widen gives the least range that holds [lo, hi] and ends on whole multiples of a step of one, two or
// five times a power of ten, of which at most eleven fit in.
func widen(lo, hi float64) (float64, float64) {
	for exp := int(math.Floor(math.Log10(hi-lo))) - 2; ; exp++ {
		for _, m := range []float64{1, 2, 5} {
			step := m * math.Pow10(exp)
			if from, to := math.Floor(lo/step+1e-9), math.Ceil(hi/step-1e-9); to-from <= 11 {
				return from * step, to * step
			}
		}
	}
}
