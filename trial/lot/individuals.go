package lot

import "math"

// Constants of charts of moving ranges of two, as tables print them; exact they are 2/√π = 1.12838 and
// 3.26653 (NIST/SEMATECH e-Handbook 6.3.2.2).
const (
	rangeToSD = 1.128
	rangeTop  = 3.267
)

// Individuals is a chart of single values and of their moving ranges, all in the unit of the values.
type Individuals struct {
	Mean, MeanRange float64
	Lo, Hi          float64 // mean ± 3 MR̄/1.128
	RangeHi         float64 // 3.267 MR̄; a range has no lower limit
	Signals         []int   // indices of values beyond Lo or Hi
	RangeSignals    []int   // indices of values whose range to the one before is beyond RangeHi
}

// IndividualsChart charts values in the order of time, such as yesterday's check piece or the yields of
// lots. ok is false for fewer than two values. Source: NIST/SEMATECH e-Handbook 6.3.2.2.
func IndividualsChart(x []float64) (c Individuals, ok bool) {
	if len(x) < 2 {
		return c, false
	}
	c.Mean, c.MeanRange = meanOf(x).value(), meanRange(x)
	c.RangeHi = rangeTop * c.MeanRange
	half := 3 * c.MeanRange / rangeToSD
	c.Lo, c.Hi = c.Mean-half, c.Mean+half
	for i, v := range x {
		if v < c.Lo || v > c.Hi {
			c.Signals = append(c.Signals, i)
		}
		if i > 0 && math.Abs(v-x[i-1]) > c.RangeHi {
			c.RangeSignals = append(c.RangeSignals, i)
		}
	}
	return c, true
}

// meanRange is the mean difference of neighbours without sign, of at least two numbers.
func meanRange(x []float64) float64 {
	var s sum
	for i := 1; i < len(x); i++ {
		s.add(math.Abs(x[i] - x[i-1]))
	}
	return s.over(len(x) - 1).value()
}
