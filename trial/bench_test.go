package trial_test

import (
	"math/rand/v2"
	"testing"
	"time"

	"ratehouse/trial"
)

// movements makes n movements in one flat array, as a series is fetched.
func movements(n int) []int64 {
	rng := rand.New(rand.NewPCG(1, 2))
	flat := make([]int64, 15*n)
	for i := range flat {
		flat[i] = rng.Int64N(6000) - 2000
	}
	return flat
}

var sink int64

// summing is the pass everything is measured against: it reads each rate once.
func summing(flat []int64) {
	var s int64
	for i := 0; i+15 <= len(flat); i += 15 {
		for _, x := range flat[i : i+15] {
			s += x
		}
	}
	sink += s
}

// ratio times two passes alternately in one run and reports how many times the second takes, by
// the shortest time of each: other work on the machine only ever adds.
func ratio(b *testing.B, name string, base, work func()) {
	t0, t1 := time.Hour, time.Hour
	for b.Loop() {
		start := time.Now()
		base()
		mid := time.Now()
		work()
		t0, t1 = min(t0, mid.Sub(start)), min(t1, time.Since(mid))
	}
	b.ReportMetric(float64(t1)/float64(t0), name)
}

// benchJudge compares judging n movements in full with one summing pass (targets: 8 in cache, 4
// out of it, no allocation).
func benchJudge(b *testing.B, n int) {
	j := newJudge(b, "1")
	flat := movements(n)
	var r trial.Result
	pass := func() {
		for i := 0; i+15 <= len(flat); i += 15 {
			j.Milli(flat[i:i+15], allDays, &r)
			sink += int64(r.Verdict)
		}
	}
	if allocs := testing.AllocsPerRun(1, pass); allocs > 0 {
		b.Fatalf("%v allocations", allocs)
	}
	b.ReportAllocs()
	ratio(b, "times-a-sum", func() { summing(flat) }, pass)
}

func BenchmarkJudge5000(b *testing.B) { benchJudge(b, 5000) }
func BenchmarkJudge2M(b *testing.B)   { benchJudge(b, 2_000_000) }

// oddRates makes 5,000 movements with intervals some minutes off 24 h, the first days of them read.
func oddRates(days int) [][]trial.Rate {
	rng := rand.New(rand.NewPCG(1, 3))
	batch := make([][]trial.Rate, 5000)
	for i := range batch {
		batch[i] = make([]trial.Rate, 15)
		base := rng.Int64N(8000) - 3000
		for d := range days {
			batch[i][d] = trial.RateBetween(0, trial.State(base+rng.Int64N(3000)), 86_400+rng.Int64N(1200)-600)
		}
	}
	return batch
}

func benchBatch(b *testing.B, days int, each func(*trial.Judge, []trial.Rate)) {
	j := newJudge(b, "1")
	batch := oddRates(days)
	b.ReportAllocs()
	for b.Loop() {
		for _, rates := range batch {
			each(j, rates)
		}
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/5000, "ns/movement")
}

func BenchmarkRatesOddIntervals(b *testing.B) {
	var r trial.Result
	for _, days := range []int{9, 15} {
		b.Run(map[int]string{9: "open", 15: "full"}[days], func(b *testing.B) {
			benchBatch(b, days, func(j *trial.Judge, rates []trial.Rate) { j.Rates(rates, &r) })
		})
	}
}

func BenchmarkCannotPass(b *testing.B) {
	for name, days := range map[string]int{"day0": 0, "day2": 2, "day5": 5, "day9": 9, "day13": 13} {
		b.Run(name, func(b *testing.B) {
			benchBatch(b, days, func(j *trial.Judge, rates []trial.Rate) {
				if j.CannotPass(rates) {
					sink++
				}
			})
		})
	}
}
