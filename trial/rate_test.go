package trial_test

import (
	"math/big"
	"math/rand/v2"
	"testing"

	"ratehouse/trial"
)

// A changed state changes the rate as if it had been read so, whatever the intervals.
func TestShifted(t *testing.T) {
	t.Parallel()
	rng := rand.New(rand.NewPCG(1, 8))
	for range 1000 {
		from, to, by := rng.Int64N(100_000), rng.Int64N(100_000), rng.Int64N(20_001)-10_000
		seconds := trial.SecondsPerDay + rng.Int64N(7_200) - 3_600
		if rng.IntN(4) == 0 {
			seconds = trial.SecondsPerDay
		}
		got := trial.RateBetween(trial.State(from), trial.State(to), seconds).Shifted(by, seconds)
		if want := trial.RateBetween(trial.State(from), trial.State(to+by), seconds); got.Exact().Cmp(want.Exact()) != 0 {
			t.Fatalf("%d to %d in %d s shifted by %d: %v, want %v", from, to, seconds, by, got.Exact(), want.Exact())
		}
		other := seconds + rng.Int64N(500) + 1
		got = trial.RateBetween(trial.State(from), trial.State(to), seconds).Shifted(by, other)
		want := big.NewRat((to-from)*86_400, seconds*1000)
		if want.Add(want, big.NewRat(by*86_400, other*1000)); got.Exact().Rat().Cmp(want) != 0 {
			t.Fatalf("over another interval: %v, want %v", got.Exact(), want)
		}
	}
	if (trial.Rate{}).Shifted(1, 86_400).Known() || trial.RateOf(1).Shifted(1, 0).Known() {
		t.Error("a rate of nothing")
	}
}
