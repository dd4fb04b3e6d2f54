package conformity_test

import (
	"math"
	"testing"

	"ratehouse/trial/conformity"
)

// The first components are the ones that a search component by component finds.
func TestLattice(t *testing.T) {
	t.Parallel()
	for n, vector := range conformity.Lattices() {
		search(t, n, vector[:4])
	}
}

func search(t *testing.T, n int, vector []int) {
	kernel := make([]float64, n)
	product := make([]float64, n)
	for k := range n {
		x := float64(k) / float64(n)
		kernel[k], product[k] = 2*math.Pi*math.Pi*(x*x-x+1./6), 1
	}
	for j := range vector {
		weight := 1 / float64((j+1)*(j+1))
		best, least := 1, math.Inf(1)
		for z := 1; z <= n/2; z++ {
			var sum float64
			for k := range n {
				sum += product[k] * (1 + weight*kernel[k*z%n])
			}
			if sum < least-1e-7 {
				best, least = z, sum
			}
		}
		if j == 0 {
			best = 1 // any does alone
		}
		if vector[j] != best {
			t.Errorf("%d points, component %d is %d, the search finds %d", n, j, vector[j], best)
		}
		for k := range n {
			product[k] *= 1 + weight*kernel[k*best%n]
		}
	}
}

func TestQuickPhi(t *testing.T) {
	t.Parallel()
	for x := -9.0; x < 9; x += 0.00371 {
		if off := math.Abs(conformity.QuickPhi(x) - conformity.Phi(x)); off > 1e-9 {
			t.Fatalf("at %v off by %v", x, off)
		}
	}
}

func TestQuickQuantile(t *testing.T) {
	t.Parallel()
	for p := 1e-6; p < 1; p += 0.0000917 {
		if off := math.Abs(conformity.QuickQuantile(p) - conformity.Quantile(p)); off > 1e-7 {
			t.Fatalf("at %v off by %v", p, off)
		}
	}
}
