package balance

import "math"

// NeutralAmplitude is the amplitude at which a poise error does not change the rate, radians: the
// first zero of the Bessel function J1, 219.54°. The next is SecondNeutralAmplitude, 401.96°.
const (
	NeutralAmplitude       = 3.831705970207512315614436
	SecondNeutralAmplitude = 7.015586669815618753537050
)

// AmplitudeFactor is 2 J1(φ)/φ, which scales the effect of a poise error with the amplitude φ in
// radians: 1 at rest, zero at NeutralAmplitude, least (-0.132) at 294°. First-harmonic average of
// I d²θ/dt² + k θ + m r g sin(θ + β) = 0; from memory, checked against a numeric integration of that
// equation (domain notes 4.4).
func AmplitudeFactor(amplitude float64) float64 {
	if amplitude == 0 {
		return 1
	}
	return 2 * math.J1(amplitude) / amplitude
}

// PoiseAmplitude is the size of the vertical pattern a poise error makes, s/d with its sign: 86,400
// (m r g/k) J1(φ)/φ, with the moment m·r in kg m, g in m/s², the spring's stiffness k in N m/rad and
// the amplitude φ in radians. The rate shift in one position is this times cos β, β being the angle
// of the heavy point from straight down with the balance at rest. Valid while m r g is small
// against k.
func PoiseAmplitude(moment, g, stiffness, amplitude float64) float64 {
	return secondsPerDay * moment * g / stiffness * AmplitudeFactor(amplitude) / 2
}
