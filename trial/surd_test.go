package trial_test

import (
	"math/big"
	"testing"

	"ratehouse/trial"
)

func root(p, q int64) trial.Exact { return trial.Root(big.NewRat(p, q)) }

// Sums of square roots that cancel, meet a rational number, or miss it by little.
func TestRootsAreExact(t *testing.T) {
	t.Parallel()
	nothing := root(2, 1).Add(root(8, 1)).Sub(root(18, 1))
	if nothing.Sign() != 0 || nothing.Decimal(6) != "0.000000" {
		t.Errorf("√2 + √8 - √18 is %s", nothing)
	}
	if got := root(2, 1).Times(root(8, 1)); got.Cmp(trial.Ratio(4, 1)) != 0 {
		t.Errorf("√2 · √8 is %s", got)
	}
	if got := root(9, 4); got.String() != "3/2" {
		t.Errorf("√(9/4) is %s", got)
	}
	// (√2 + √3)² - √24 = 5.
	five := root(2, 1).Add(root(3, 1))
	if five = five.Times(five).Sub(root(24, 1)); five.Cmp(trial.Ratio(5, 1)) != 0 {
		t.Errorf("(√2 + √3)² - √24 is %s", five)
	}
	// 577/408 is above √2 by 2.1e-6; six steps of the same kind on, by 3e-392.
	p, q := big.NewInt(577), big.NewInt(408)
	for range 6 {
		p, q = new(big.Int).Add(new(big.Int).Mul(p, p), new(big.Int).Mul(big.NewInt(2), new(big.Int).Mul(q, q))),
			new(big.Int).Mul(big.NewInt(2), new(big.Int).Mul(p, q))
	}
	near := trial.FromRat(new(big.Rat).SetFrac(p, q))
	if root(2, 1).Cmp(near) != -1 || near.Cmp(root(2, 1)) != 1 || near.Sub(root(2, 1)).Sign() != 1 {
		t.Error("a fraction just above √2 is not seen to be above it")
	}
	for places, want := range map[int]string{0: "1", 6: "1.414214", 30: "1.414213562373095048801688724210"} {
		if got := root(2, 1).Decimal(places); got != want {
			t.Errorf("√2 to %d places is %s", places, got)
		}
		if got := root(2, 1).Neg().Decimal(places); got != "-"+want {
			t.Errorf("-√2 to %d places is %s", places, got)
		}
	}
	// A hair from the middle between two decimals: the square of 1.0000005, and 1e-40 beside it.
	middle, hair := big.NewRat(10_000_005, 10_000_000), new(big.Rat).SetFrac(big.NewInt(1), new(big.Int).Exp(big.NewInt(10), big.NewInt(40), nil))
	square := new(big.Rat).Mul(middle, middle)
	for want, r := range map[string]*big.Rat{"1.000001": new(big.Rat).Add(square, hair), "1.000000": new(big.Rat).Sub(square, hair)} {
		if got := trial.Root(r).Decimal(6); got != want {
			t.Errorf("a hair beside 1.0000005 rounds to %s, want %s", got, want)
		}
	}
}
