package balance

import (
	"math"

	"ratehouse/trial"
)

// Pattern is how the rate turns with the vertical position: R = Mean + Size·cos(Direction - δ), δ
// being the clock angle of the lowest point of the dial. Hairspring and pivots make the same
// pattern as a heavy point, so it names no cause.
type Pattern struct {
	Mean      float64 // s/d
	Size      float64 // s/d, not below zero
	Direction float64 // degrees clockwise from 12 as seen from the dial, 0 to 360: the position gains most with this point down
	USize     float64 // standard uncertainties, from that of each position's rate
	UAngle    float64 // degrees
	UMean     float64
	// Closure is R12H + R6H - R3H - R9H: zero but for noise if the pattern is all there is. It needs
	// all four positions; UClosure is its standard uncertainty.
	HasClosure bool
	Closure    float64
	UClosure   float64
}

// VerticalPattern computes the pattern of rates in the positions 3H, 6H, 9H and, if there, 12H, s/d;
// u is the standard uncertainty of each, taken as independent. ok is false if one of the three is
// missing. Formulas: domain notes 4.5 (computed there); uncertainties by JCGM 100:2008 5.1.2.
//
//	four positions   A cos ψ = (R6H - R12H)/2, A sin ψ = (R9H - R3H)/2, mean of four
//	three            A sin ψ = (R9H - R3H)/2, mean (R3H + R9H)/2, A cos ψ = R6H - mean
func VerticalPattern(rates map[trial.Position]float64, u float64) (p Pattern, ok bool) {
	for _, need := range []trial.Position{trial.H3, trial.H6, trial.H9} {
		if _, there := rates[need]; !there {
			return Pattern{}, false
		}
	}
	r3, r6, r9 := rates[trial.H3], rates[trial.H6], rates[trial.H9]
	r12, four := rates[trial.H12]
	sin := (r9 - r3) / 2
	varSin, varCos := u*u/2, u*u/2
	var cos float64
	if four {
		p.Mean, p.UMean = (r3+r6+r9+r12)/4, u/2
		cos = (r6 - r12) / 2
		p.HasClosure, p.Closure, p.UClosure = true, r12+r6-r3-r9, 2*u
	} else {
		p.Mean, p.UMean = (r3+r9)/2, u/math.Sqrt2
		cos, varCos = r6-p.Mean, 1.5*u*u
	}
	p.Size = math.Hypot(cos, sin)
	angle := math.Atan2(sin, cos)
	s2, c2 := math.Sin(angle)*math.Sin(angle), math.Cos(angle)*math.Cos(angle)
	p.Direction = turn(angle * 180 / math.Pi)
	p.USize = math.Sqrt(c2*varCos + s2*varSin)
	p.UAngle = 180
	if p.Size > 0 {
		p.UAngle = math.Min(180, math.Sqrt(s2*varCos+c2*varSin)/p.Size*180/math.Pi)
	}
	return p, true
}

// turn brings an angle into [0, 360).
func turn(degrees float64) float64 {
	degrees = math.Mod(degrees, 360)
	if degrees < 0 {
		degrees += 360
	}
	return degrees
}

// FromTheBack mirrors a clock angle seen from the dial to how it is seen from the movement side.
func FromTheBack(degrees float64) float64 { return turn(-degrees) }

// Amplitude is what is known of the amplitude over the days of a pattern, degrees: a range, or one
// value, From being To then. The zero value is nothing known.
type Amplitude struct{ From, To float64 }

// safeAmplitude is how far a single measured amplitude must stay below the neutral 219.54° to tell
// the heavy side: over a day it only falls. Practice notes, X4.
const safeAmplitude = 200

// HeavyPoint is the direction of the heavy side of the balance if the pattern were all poise: the
// clock angle in degrees, seen from the dial with the balance at rest. ok is false without an
// amplitude, with one that does not keep the sign of the factor, or if the size is not above twice its
// uncertainty: a mean over 24 h runs through amplitudes on both sides of the neutral one, where the
// direction turns about.
func (p Pattern) HeavyPoint(a Amplitude) (degrees float64, ok bool) {
	const neutral = NeutralAmplitude * 180 / math.Pi
	const second = SecondNeutralAmplitude * 180 / math.Pi
	if p.Size <= 2*p.USize || a.From <= 0 || a.To < a.From || a.To >= second {
		return 0, false
	}
	switch {
	case a.From == a.To && a.To < safeAmplitude, a.From < a.To && a.To < neutral:
		return p.Direction, true
	case a.From < a.To && a.From > neutral:
		return turn(p.Direction + 180), true
	}
	return 0, false
}
