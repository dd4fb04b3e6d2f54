package simulate

import (
	"math"
	"math/rand/v2"
	"testing"

	"ratehouse/trial"
)

func rngOf(seed uint64) *rand.Rand { return rand.New(rand.NewPCG(seed, 3159)) }

func day24(n int) []float64 {
	h := make([]float64, n)
	for i := range h {
		h[i] = 24
	}
	return h
}

func series(m Model, p *trial.Programme, rng *rand.Rand) []trial.State {
	v := m.Draw(rng)
	return m.States(&v, v.Rates(p, rng), m.Rounds(len(p.Days)+1, rng), day24(len(p.Days)), rng)
}

func TestSameSeedSameMovements(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	a, b := series(Default(), p, rngOf(7)), series(Default(), p, rngOf(7))
	other := series(Default(), p, rngOf(8))
	same := true
	for k := range a {
		if a[k] != b[k] {
			t.Fatalf("state %d: %d and %d from one seed", k, a[k], b[k])
		}
		same = same && a[k] == other[k]
	}
	if same {
		t.Error("two seeds gave the same movement")
	}
}

// The yield and the spreads of 5,000 movements stay where the demo and the engine's tests want them;
// the figures are the model's own, not those of a real lot.
func TestDefaultLot(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	judge, err := trial.NewJudge(p, "1")
	if err != nil {
		t.Fatal(err)
	}
	const n = 5000
	rng, pass := rngOf(1), 0
	var result trial.Result
	var turns, warm float64
	for range n {
		s := series(Default(), p, rng)
		rates := make([]trial.Rate, len(p.Days))
		for d := range rates {
			rates[d] = trial.RateBetween(s[d], s[d+1], trial.SecondsPerDay)
		}
		judge.Rates(rates, &result)
		if result.Verdict == trial.Pass {
			pass++
		}
		turn := rates[2].Exact().Sub(rates[1].Exact()).Float() // 6H to 3H
		heat := rates[12].Exact().Sub(rates[10].Exact()).Float() / 30
		turns, warm = turns+turn*turn, warm+heat*heat
	}
	yield, turn, slope := float64(pass)/n, math.Sqrt(turns/n), math.Sqrt(warm/n)
	t.Logf("yield %.3f, change of position %.2f s/d, thermal slope %.3f s/d per °C (root mean square of %d)", yield, turn, slope, n)
	if yield < 0.75 || yield > 0.93 {
		t.Errorf("yield %.3f outside 0.75 to 0.93", yield)
	}
	if turn < 2 || slope < 0.2 {
		t.Errorf("too kind: change of position %.2f, thermal slope %.3f", turn, slope)
	}
}

// The vertical pattern is the published one: domain notes 4.5, check value with angle 125°, size 6.5,
// mean 2.0.
func TestVerticalPattern(t *testing.T) {
	t.Parallel()
	angle := 125 * math.Pi / 180
	v := Movement{mean: 2, cos: 6.5 * math.Cos(angle), sin: 6.5 * math.Sin(angle)}
	for p, want := range map[trial.Position]float64{trial.H12: 5.728246836282, trial.H3: -3.324488287878, trial.H6: -1.728246836282, trial.H9: 7.324488287878} {
		if got := v.at(p, 23); math.Abs(got-want) > 1e-10 {
			t.Errorf("%s: %.12f, want %.12f", p, got, want)
		}
	}
}
