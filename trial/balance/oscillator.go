package balance

import "math"

// secondsPerDay is the length of the day a rate is referred to.
const secondsPerDay = 86_400

// RateOfPeriod is the exact rate of an oscillator of period t counted as one of period t0, s/d:
// 86,400 (t0 - t)/t, which is linear in frequency. Elementary mechanics.
func RateOfPeriod(t, t0 float64) float64 { return secondsPerDay * (t0 - t) / t }

// LinearRateOfPeriod is 86,400 (t0 - t)/t0, which is linear in the period: at ±6 s/d it differs from
// RateOfPeriod by 0.0004 s/d, at ±600 by 4.
func LinearRateOfPeriod(t, t0 float64) float64 { return secondsPerDay * (t0 - t) / t0 }

// PeriodRatio is t/t0 of an oscillator with the exact rate, the inverse of RateOfPeriod.
func PeriodRatio(rate float64) float64 { return secondsPerDay / (secondsPerDay + rate) }

// Stiffness of a flat spiral of rectangular section, N m/rad: E b t³/(12 L), with the elastic modulus
// in Pa and height, thickness and active length in m. Elementary mechanics.
func Stiffness(modulus, height, thickness, length float64) float64 {
	return modulus * height * thickness * thickness * thickness / (12 * length)
}

// Period of a balance of inertia i (kg m²) on a spring of stiffness k (N m/rad), s: 2π√(I/k).
func Period(i, k float64) float64 { return 2 * math.Pi * math.Sqrt(i/k) }

// StiffnessFor is the stiffness that gives a balance a period: 4π² I/T².
func StiffnessFor(i, period float64) float64 { return 4 * math.Pi * math.Pi * i / (period * period) }

// Relative changes of what makes the period; each a ratio, such as 1e-5.
type Relative struct {
	Length, Inertia, Modulus, Height, Thickness float64
}

// RateShift is what small relative changes do to the rate, s/d: 43,200 (-dL/L - dI/I + dE/E + db/b +
// 3 dt/t), the differential of the formulas above.
func RateShift(c Relative) float64 {
	return secondsPerDay / 2 * (-c.Length - c.Inertia + c.Modulus + c.Height + 3*c.Thickness)
}

// RelativeFor is the relative change of one of them that shifts the rate by so much, to first order.
// Of the period it is -rate/86,400.
func RelativeFor(rate float64) Relative {
	x := rate / (secondsPerDay / 2)
	return Relative{Length: -x, Inertia: -x, Modulus: x, Height: x, Thickness: x / 3}
}

// ThermalSlope is the change of rate with temperature, s/d per °C: 43,200 (β + 3α_s - 2α_b), with β
// the relative change of the spring's modulus per °C, α_s and α_b the linear expansions of spring
// and balance per °C. k goes with E b t³/L, so with β + α + 3α - α, and I with 2 α_b.
func ThermalSlope(modulus, spring, balance float64) float64 {
	return secondsPerDay / 2 * (modulus + 3*spring - 2*balance)
}

// ThermalError is the error per °C in β + 3α_s - 2α_b behind a thermal slope in s/d per °C: what a
// change of spring or balance would have to make up for.
func ThermalError(slope float64) float64 { return slope / (secondsPerDay / 2) }

// PendulumLength of a simple pendulum of that period under gravity g (m/s²), m: g T²/(4π²).
func PendulumLength(period, g float64) float64 { return g * period * period / (4 * math.Pi * math.Pi) }

// CircularRatio is T/T0 of a pendulum that swings to an angle (radians from the vertical, below π):
// 1/AGM(1, cos(θ/2)).
func CircularRatio(angle float64) float64 {
	a, b := 1.0, math.Cos(angle/2)
	for a-b > 1e-15 { // the digits double at each step
		a, b = (a+b)/2, math.Sqrt(a*b)
	}
	return 2 / (a + b)
}

// CircularRateSmall is the circular error for small angles, s/d: -86,400 θ²/16.
func CircularRateSmall(angle float64) float64 { return -secondsPerDay * angle * angle / 16 }
