package outlook_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/stat/distmv"

	"ratehouse/trial"
)

// The model by plain trials: conditional distributions as the reference library makes them from the
// joint one, day after day, random draws, criteria by the exact judge. Only how the kinds of news of the
// built-in days follow one another is written down here.
func TestJointAgainstTrials(t *testing.T) {
	t.Parallel()
	const trials = 8000
	news := []string{"place", "day", "place", "day", "place", "day", "place", "day", "place", "day", "warmth", "day", "warmth", "day", "day"}
	history := priorOf(t, drawn(500, 61, 0))
	f, j, n := forecastOf(t, history, nil), judgeOf(t, trial.ISO3159()), normalOf(history)
	rng, regressions := rand.New(rand.NewPCG(8, 8)), map[int][]float64{}
	each := 0.0 // variance of each day: half that of differences within pairs alike, the accessory's apart
	for _, d := range []int{1, 3, 5, 7, 14} {
		each += (n.Cov[d-1][d-1] + n.Cov[d][d] - 2*n.Cov[d-1][d]) / 2 / 5
	}
	for c, k := range []int{0, 2, 3, 5, 6, 10, 11} {
		rates := first(drawn(1, 70+uint64(c), 3500)[0], k)
		x := make([]float64, 0, 15)
		far, of, others := map[string]float64{}, map[string]float64{}, 0.0
		for i := 2; i < k; i++ {
			if news[i] == "place" {
				others++
			}
		}
		for d := range k {
			mean, variance := step(t, n, x)
			share := 1.0
			if d == 0 {
				share = 1 / (1 + others)
			}
			off := float64(rates[d].Milli())/1000 - mean
			far[news[d]], of[news[d]] = far[news[d]]+share*off*off/variance, of[news[d]]+share
			x = append(x, mean+off)
		}
		var stdev []float64
		for full := append([]float64(nil), x...); len(full) < 15; full = append(full, 0) {
			_, v := step(t, n, full)
			stdev = append(stdev, math.Sqrt(v))
		}
		passed := 0
		var r trial.Result
		for range trials {
			scale := map[string]float64{}
			for _, kind := range []string{"day", "place", "warmth"} {
				scale[kind] = math.Sqrt((2 + far[kind]) / (4 + of[kind]) / (2 * gamma(rng, (4+of[kind])/2) / (4 + of[kind])))
			}
			full, all := append([]float64(nil), x...), append([]trial.Rate(nil), rates...)
			for d := k; d < 15; d++ {
				mean, s := meanAfter(n, regressions, full), stdev[d-k]
				own := min(s, math.Sqrt(each))
				if news[d] == "day" {
					own = s
				}
				v := mean + own*scale["day"]*rng.NormFloat64() + math.Sqrt(s*s-own*own)*scale[news[d]]*rng.NormFloat64()
				full, all[d] = append(full, v), trial.RateOf(int64(math.Round(1000*v)))
			}
			if j.Rates(all, &r); r.Verdict == trial.Pass {
				passed++
			}
		}
		p, want := chance(t, f, rates), float64(passed)/trials
		if want < 0.05 || want > 0.99 {
			t.Errorf("%d days read: %.4f tells nothing", k, want)
		}
		if math.Abs(p-want) > 0.01+3*math.Sqrt(want*(1-want)/trials) {
			t.Errorf("%d days read: %.4f, by trials %.4f", k, p, want)
		}
		t.Logf("%d days read: %.4f, by trials %.4f", k, p, want)
	}
}

// step is the next day's mean and variance after days read in order, by the reference library.
func step(t testing.TB, n trial.Normal, x []float64) (mean, variance float64) {
	t.Helper()
	days := len(x) + 1
	cov := mat.NewSymDense(days, nil)
	for i := range days {
		for j := range i + 1 {
			cov.SetSym(i, j, n.Cov[i][j])
		}
	}
	joint, ok := distmv.NewNormal(n.Mean[:days], cov, nil)
	if !ok {
		t.Fatal("not positive definite")
	}
	if len(x) == 0 {
		return n.Mean[0], n.Cov[0][0]
	}
	at := make([]int, len(x))
	for i := range at {
		at[i] = i
	}
	next, ok := joint.ConditionNormal(at, x, nil)
	if !ok {
		t.Fatal("no conditional distribution")
	}
	var one mat.SymDense
	next.CovarianceMatrix(&one)
	return next.Mean(nil)[0], one.At(0, 0)
}

// meanAfter is step's mean with regressions solved once for each number of days.
func meanAfter(n trial.Normal, regressions map[int][]float64, x []float64) float64 {
	b, ok := regressions[len(x)]
	if !ok && len(x) > 0 {
		a, c := mat.NewSymDense(len(x), nil), mat.NewVecDense(len(x), nil)
		for i := range x {
			c.SetVec(i, n.Cov[i][len(x)])
			for j := range i + 1 {
				a.SetSym(i, j, n.Cov[i][j])
			}
		}
		var out mat.VecDense
		if err := out.SolveVec(a, c); err != nil {
			panic(err)
		}
		b = out.RawVector().Data
		regressions[len(x)] = b
	}
	m := n.Mean[len(x)]
	for i, v := range x {
		m += b[i] * (v - n.Mean[i])
	}
	return m
}

// gamma draws by Marsaglia and Tsang's method (2000, from memory); shape at least 1.
func gamma(rng *rand.Rand, shape float64) float64 {
	d := shape - 1.0/3
	c := 1 / math.Sqrt(9*d)
	for {
		z := rng.NormFloat64()
		v := math.Pow(1+c*z, 3)
		if v > 0 && math.Log(rng.Float64()) < z*z/2+d-d*v+d*math.Log(v) {
			return d * v
		}
	}
}
