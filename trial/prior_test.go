package trial_test

import (
	"errors"
	"math"
	"math/rand/v2"
	"reflect"
	"testing"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distmv"

	"ratehouse/trial"
)

// rows draws movements with correlated days, the last days of some blank.
func rows(n, days int, seed uint64) [][]trial.Rate {
	rng := rand.New(rand.NewPCG(seed, 3))
	out := make([][]trial.Rate, n)
	for i := range out {
		out[i] = make([]trial.Rate, days)
		level, read := rng.NormFloat64()*3000, days
		if rng.IntN(4) == 0 {
			read = rng.IntN(days + 1)
		}
		for d := range read {
			out[i][d] = trial.RateOf(int64(level + 900*rng.NormFloat64() + 200*float64(d)))
		}
	}
	return out
}

func priorOf(t *testing.T, days int, all [][]trial.Rate) *trial.Prior {
	t.Helper()
	p := trial.NewPrior(days)
	for _, r := range all {
		if err := p.Add(r); err != nil {
			t.Fatal(err)
		}
	}
	return p
}

// Sums are whole numbers: built in another order, from parts, or with movements put in and taken out
// again, a history is the same to the last digit.
func TestPriorRebuilt(t *testing.T) {
	t.Parallel()
	all := rows(400, 15, 1)
	want := priorOf(t, 15, all)
	parts := priorOf(t, 15, all[250:])
	if err := parts.Merge(priorOf(t, 15, all[:250])); err != nil {
		t.Fatal(err)
	}
	changed := trial.NewPrior(15)
	for _, i := range rand.New(rand.NewPCG(4, 4)).Perm(len(all)) {
		open := make([]trial.Rate, 15)
		for d := range 15 { // day after day, as a laboratory keeps it up
			if d > 0 {
				if err := changed.Remove(open); err != nil {
					t.Fatal(err)
				}
			}
			open[d] = all[i][d]
			if err := changed.Add(open); err != nil {
				t.Fatal(err)
			}
		}
	}
	for name, got := range map[string]*trial.Prior{"merged": parts, "kept up": changed} {
		if !reflect.DeepEqual(clean(got), clean(want)) {
			t.Errorf("%s differs from rebuilt", name)
		}
	}
	read := int64(0)
	for _, r := range all {
		if r[0].Known() {
			read++
		}
	}
	if want.N() != read {
		t.Errorf("N %d, want %d", want.N(), read)
	}
}

// clean makes empty and nil lists alike.
func clean(p *trial.Prior) []trial.Moments {
	out := append([]trial.Moments(nil), p.Runs...)
	for i := range out {
		if len(out[i].Sum) == 0 {
			out[i] = trial.Moments{}
		}
	}
	return out
}

func TestPriorRefuses(t *testing.T) {
	t.Parallel()
	p := trial.NewPrior(2)
	one := []trial.Rate{trial.RateOf(600_000), trial.RateOf(-600_000)}
	if err := p.Add(one); err != nil {
		t.Fatal(err)
	}
	before := clean(p)
	full := &trial.Prior{Days: 2, Runs: []trial.Moments{{}, {N: 1, Sum: []int64{0, 0}, Cross: []int64{math.MaxInt64 - 5, 0, 0}}}}
	for _, c := range []struct {
		got, want error
	}{
		{p.Add(one[:1]), trial.ErrPriorDays},
		{p.Add([]trial.Rate{trial.RateOf(600_001), {}}), trial.ErrPriorRate},
		{p.Add([]trial.Rate{trial.RateOf(1), trial.RateOf(-600_001)}), trial.ErrPriorRate},
		{p.Remove([]trial.Rate{trial.RateOf(1), {}}), trial.ErrPriorFull},
		{p.Merge(trial.NewPrior(3)), trial.ErrPriorDays},
		{p.Merge(full), trial.ErrPriorFull},
		{p.Add([]trial.Rate{{}, trial.RateOf(5)}), nil}, // nothing read of day 1: counts nowhere
	} {
		if !errors.Is(c.got, c.want) {
			t.Errorf("%v, want %v", c.got, c.want)
		}
	}
	if !reflect.DeepEqual(clean(p), before) {
		t.Error("a refusal changed the history")
	}
	if m := trial.RateBetween(0, 5, 86_400*2).Milli(); m != 2 { // 2.5 half to even
		t.Errorf("rounded %d", m)
	}
	if m := trial.RateBetween(0, -7, 86_400*2).Milli(); m != -4 {
		t.Errorf("rounded %d", m)
	}
}

func nearly(t *testing.T, name string, got, want, tolerance float64) {
	t.Helper()
	if math.Abs(got-want) > tolerance*max(1, math.Abs(want)) {
		t.Errorf("%s: %.15g, want %.15g", name, got, want)
	}
}

// Complete movements: mean and covariance (divisor n) as the reference library computes them from the
// rates themselves; and the conditional distribution as it computes it from these.
func TestNormalAgainstReference(t *testing.T) {
	t.Parallel()
	const days, n = 6, 300
	rng := rand.New(rand.NewPCG(9, 9))
	p, data := trial.NewPrior(days), mat.NewDense(n, days, nil)
	for i := range n {
		r, level := make([]trial.Rate, days), rng.NormFloat64()*3000
		for d := range r {
			r[d] = trial.RateOf(int64(level + 1500*rng.NormFloat64()))
			data.Set(i, d, float64(r[d].Milli())/1000)
		}
		if err := p.Add(r); err != nil {
			t.Fatal(err)
		}
	}
	got := p.Normal(trial.Normal{Mean: make([]float64, days), Cov: unit(days)}, 1e-9)
	var cov mat.SymDense
	stat.CovarianceMatrix(&cov, data, nil)
	for i := range days {
		nearly(t, "mean", got.Mean[i], stat.Mean(mat.Col(nil, i, data), nil), 1e-9)
		for j := range days {
			nearly(t, "covariance", got.Cov[i][j], cov.At(i, j)*(n-1)/n, 1e-9)
		}
	}
	sym := mat.NewSymDense(days, nil)
	for i := range days {
		for j := range i + 1 {
			sym.SetSym(i, j, got.Cov[i][j])
		}
	}
	joint, ok := distmv.NewNormal(got.Mean, sym, nil)
	if !ok {
		t.Fatal("not positive definite")
	}
	x := []float64{2.5, -1, 0.7}
	given, _ := joint.ConditionNormal([]int{4, 0, 2}, x, nil) // leaves days 2, 4, 6
	c := got.Given([]int{5, 1, 3})
	var left mat.SymDense
	given.CovarianceMatrix(&left)
	for i, d := range []int{2, 4, 6} {
		nearly(t, "conditional mean", c.Mean(d, x), given.Mean(nil)[i], 1e-9)
		nearly(t, "conditional covariance", c.Cov(d, 2), left.At(i, 0), 1e-9)
	}
	marginal, _ := joint.MarginalNormal([]int{4, 0, 2}, nil)
	var block mat.SymDense
	marginal.CovarianceMatrix(&block)
	var chol mat.Cholesky
	chol.Factorize(&block)
	nearly(t, "distance", c.Distance(x), math.Pow(stat.Mahalanobis(mat.NewVecDense(3, x), mat.NewVecDense(3, marginal.Mean(nil)), &chol), 2), 1e-9)
}

func unit(n int) [][]float64 {
	a := make([][]float64, n)
	for i := range a {
		a[i] = make([]float64, n)
		a[i][i] = 1
	}
	return a
}

// No history is the base itself.
func TestNormalOfNothing(t *testing.T) {
	t.Parallel()
	base := trial.Normal{Mean: []float64{1, -2, 3}, Cov: [][]float64{{4, 1, 0.5}, {1, 3, -1}, {0.5, -1, 5}}}
	got := trial.NewPrior(3).Normal(base, 30)
	for i := range 3 {
		nearly(t, "mean", got.Mean[i], base.Mean[i], 1e-12)
		for j := range 3 {
			nearly(t, "covariance", got.Cov[i][j], base.Cov[i][j], 1e-12)
		}
	}
}

// Movements taken out because of what day 1 showed would bias day 2 by what is left; as runs they do
// not. The true mean of day 2 is 0; among those left it is far from it.
func TestNormalOfCensored(t *testing.T) {
	t.Parallel()
	rng, p, left, n := rand.New(rand.NewPCG(2, 7)), trial.NewPrior(2), 0.0, 0
	for range 40_000 {
		level := rng.NormFloat64() * 3000
		r := []trial.Rate{trial.RateOf(int64(level + 500*rng.NormFloat64())), {}}
		if r[0].Milli() < 2000 {
			r[1] = trial.RateOf(int64(level + 500*rng.NormFloat64()))
			left, n = left+float64(r[1].Milli())/1000, n+1
		}
		if err := p.Add(r); err != nil {
			t.Fatal(err)
		}
	}
	got := p.Normal(trial.Normal{Mean: []float64{0, 0}, Cov: unit(2)}, 1)
	if naive := left / float64(n); naive > -0.8 {
		t.Fatalf("the test is too kind: mean of those left %.3f", naive)
	}
	if math.Abs(got.Mean[1]) > 0.06 || math.Abs(got.Cov[1][1]-9.25) > 0.3 {
		t.Errorf("day 2: mean %.3f, variance %.3f; want 0 and 9.25", got.Mean[1], got.Cov[1][1])
	}
}
