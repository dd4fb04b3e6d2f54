package conformity_test

import (
	"math"
	"math/rand/v2"
	"testing"
	"time"

	"ratehouse/trial"
	"ratehouse/trial/conformity"
)

// lot draws n movements of which many come near some limit: position spread of 2 s/d, day noise
// of 0.5 s/d, thermal slope of 0.25 s/d per °C, means about 2 s/d.
func lot(n int) [][]int64 {
	rng := rand.New(rand.NewPCG(5, 5))
	out := make([][]int64, n)
	p := trial.ISO3159()
	for i := range out {
		mean, slope := 2+2*rng.NormFloat64(), 0.25*rng.NormFloat64()
		pos := map[trial.Position]float64{}
		for _, q := range trial.Positions() {
			pos[q] = 2 * rng.NormFloat64()
		}
		out[i] = make([]int64, 15)
		for d, day := range p.Days {
			x := mean + pos[day.Position] + slope*(day.TemperatureC.Exact().Float()-23) + 0.5*rng.NormFloat64()
			out[i][d] = 100 * int64(math.Round(10*x))
		}
	}
	return out
}

// BenchmarkAssess5000 assesses 5,000 movements and compares that with the limit of two seconds and
// with judging the same movements, in the same run.
func BenchmarkAssess5000(b *testing.B) {
	flat := lot(5000)
	for _, u := range []string{"0.1", "0.3", "1"} {
		b.Run("u="+u, func(b *testing.B) {
			j := newJudge(b, "1")
			a := chained(j, exact(b, u))
			var r trial.Result
			var out conformity.Chances
			rates := make([]float64, 15)
			worked, judged := time.Hour, time.Hour
			var doubtful int
			for b.Loop() {
				start := time.Now()
				for _, m := range flat {
					j.Milli(m, 1<<15-1, &r)
				}
				mid := time.Now()
				doubtful = 0
				for _, m := range flat {
					j.Milli(m, 1<<15-1, &r)
					for d, x := range m {
						rates[d] = float64(x) / 1000
					}
					a.Assess(rates, &r, &out)
					if p, ok := out.Doubt(r.Verdict); ok && p > 0.001 {
						doubtful++
					}
				}
				judged, worked = min(judged, mid.Sub(start)), min(worked, time.Since(mid))
			}
			b.ReportMetric(worked.Seconds()/2, "of-2-s")
			b.ReportMetric(float64(worked)/float64(judged), "times-judging")
			b.ReportMetric(float64(doubtful), "doubtful")
			b.ReportMetric(0, "ns/op")
		})
	}
}

// BenchmarkHinges5000 finds the hinges of 5,000 movements and compares with judging each of them
// once a reading and direction, the least any search must do.
func BenchmarkHinges5000(b *testing.B) {
	flat := lot(5000)
	j := newJudge(b, "1")
	chain := conformity.Chain(trial.ISO3159())
	rates := make([]trial.Rate, 15)
	var r trial.Result
	searched, judged := time.Hour, time.Hour
	for b.Loop() {
		start := time.Now()
		for _, m := range flat {
			for d, x := range m {
				rates[d] = trial.RateOf(x)
			}
			for range 32 {
				j.Rates(rates, &r)
			}
		}
		mid := time.Now()
		for _, m := range flat {
			for d, x := range m {
				rates[d] = trial.RateOf(x)
			}
			conformity.Hinges(j, rates, chain)
		}
		judged, searched = min(judged, mid.Sub(start)), min(searched, time.Since(mid))
	}
	b.ReportMetric(float64(searched)/float64(judged), "times-judging-32")
	b.ReportMetric(float64(searched.Nanoseconds())/5000, "ns/movement")
	b.ReportMetric(0, "ns/op")
}
