package conformity

// Sampled is sampled for tests outside.
func (a *Assessor) Sampled(rates []float64, i int) float64 { return a.sampled(rates, i) }

// Everything is everything.
const Everything = everything

// Lattices gives the integration rules: points and generating vector.
func Lattices() map[int][]int {
	return map[int][]int{tiny.n: tiny.z[:], short.n: short.z[:], long.n: long.z[:]}
}

// The tables and the functions.
func QuickPhi(x float64) float64 { return quickPhi(x) }

func QuickQuantile(p float64) float64 { return quickQuantile(p) }

func Quantile(p float64) float64 { return quantile(p) }

func Phi(x float64) float64 { return phi(x) }
