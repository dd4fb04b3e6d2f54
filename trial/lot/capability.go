package lot

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// Capability compares the spread of a roughly normal figure with its limits.
type Capability struct {
	Cp, Cpu, Cpl, Cpk float64  // Cp and the side without limit are +Inf where a limit is missing
	CpRange           Interval // by chi-square of the standard deviation
	CpkRange          Interval // by the normal approximation
}

// CapabilityOf computes the indices of a figure with mean and standard deviation s of n values
// between limits in the same unit; a side without limit is ±Inf.
//
//	Cp = (hi - lo)/6s   Cpu = (hi - mean)/3s   Cpl = (mean - lo)/3s   Cpk = the smaller of both
//	Cp's interval: Cp √(χ²(n-1)/(n-1)) at both tails
//	Cpk's interval: Cpk ± z √(1/9n + Cpk²/(2(n-1)))
//
// With s over a whole lot this is what some call Ppk. Only for figures that are signed and linear in
// the rates: means, differences, per degree. Magnitudes are folded and one-sided (Criterion.Upper).
// ok is false for fewer than two values, s = 0 or no limit. Source: NIST/SEMATECH e-Handbook 6.1.6.
func CapabilityOf(mean, s float64, n int, lo, hi, confidence float64) (c Capability, ok bool) {
	if n < 2 || !(s > 0) || math.IsInf(lo, -1) && math.IsInf(hi, 1) {
		return c, false
	}
	c.Cp, c.Cpu, c.Cpl = (hi-lo)/(6*s), (hi-mean)/(3*s), (mean-lo)/(3*s)
	c.Cpk = math.Min(c.Cpu, c.Cpl)
	free := float64(n - 1)
	chi, tail := distuv.ChiSquared{K: free}, (1-confidence)/2
	c.CpRange = Interval{c.Cp * math.Sqrt(chi.Quantile(tail)/free), c.Cp * math.Sqrt(chi.Quantile(1-tail)/free)}
	half := distuv.UnitNormal.Quantile(1-tail) * math.Sqrt(1/(9*float64(n))+c.Cpk*c.Cpk/(2*free))
	c.CpkRange = Interval{c.Cpk - half, c.Cpk + half}
	return c, true
}

// UpperIndex is the one-sided index of a figure that is not normal, from its own quantiles:
// (hi - median) / (q - median) with q the 99.865 % quantile, which for a normal figure is Cpu. ok is
// false below 741 values, where no quantile that far out can be seen, and where the figure does not
// vary. sorted is in rising order. Source: after ISO 22514-4, from memory.
func UpperIndex(sorted []float64, hi float64) (index float64, ok bool) {
	const far, fewest = 0.99865, 741
	if len(sorted) < fewest {
		return 0, false
	}
	median := Quantile(sorted, 0.5)
	spread := Quantile(sorted, far) - median
	return (hi - median) / spread, spread > 0
}
