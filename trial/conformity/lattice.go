package conformity

import "math"

// lattice is a rank-1 lattice rule of n points with its generating vector, found component by
// component for the worst-case error in the Korobov space of smoothness 2 with weights 1/j² (Sloan
// and Reztsov 2002, from memory; TestLattice finds the beginnings again).
type lattice struct {
	n int
	z [mostDim]int
}

// mostDim is the number of variables the rules serve.
const mostDim = 40

// Three rules: one to see whether the answer is all but certain, one for few variables and one for
// many. Over the reference vectors the
// differences stay within the contract's 0.002 (TestAgainstReference prints them).
var (
	tiny = lattice{251, [mostDim]int{1, 70, 96, 53, 120, 79, 46, 19, 31, 104, 88, 115, 33, 82, 118, 109, 22, 57, 104, 65,
		82, 75, 118, 89, 57, 33, 49, 15, 104, 109, 22, 29, 82, 31, 75, 57, 104, 7, 89, 49}}
	short = lattice{1021, [mostDim]int{1, 374, 428, 453, 240, 251, 311, 183, 149, 42, 487, 206, 357, 393, 286, 467, 76, 69, 347, 158,
		211, 144, 175, 96, 65, 49, 293, 493, 462, 359, 228, 131, 153, 59, 200, 90, 32, 266, 317, 350}}
	long = lattice{2039, [mostDim]int{1, 462, 753, 595, 889, 968, 700, 615, 337, 837, 489, 141, 570, 773, 664, 162, 369, 118, 999, 794,
		393, 868, 49, 431, 780, 819, 550, 180, 174, 667, 276, 284, 210, 495, 56, 306, 547, 560, 91, 410}}
)

// few is the number of variables up to which the short rule serves; sure is how near 0 or 1 the
// result of the tiny rule must be to stand.
const (
	few  = 4
	sure = 0.0005
)

// coordinate is component j of point k, shifted so that no point has all components near a corner,
// and folded like a tent, so that a function that does not repeat at the borders is integrated as if
// it did (Hickernell 2002, from memory). It lies strictly between 0 and 1.
func (l *lattice) coordinate(k, j int) float64 {
	x := float64(k*l.z[j]%l.n)/float64(l.n) + shift[j]
	return 1 - math.Abs(2*(x-math.Floor(x))-1)
}

// shift moves component j by the fractional part of the square root of the j-th prime.
var shift = func() (s [mostDim]float64) {
	j := 0
	for n := 2; j < len(s); n++ {
		if prime(n) {
			_, s[j] = math.Modf(math.Sqrt(float64(n)))
			j++
		}
	}
	return s
}()

func prime(n int) bool {
	for d := 2; d*d <= n; d++ {
		if n%d == 0 {
			return false
		}
	}
	return true
}
