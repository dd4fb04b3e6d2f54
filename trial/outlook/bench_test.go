package outlook_test

import (
	"testing"
	"time"

	"ratehouse/trial"
	"ratehouse/trial/simulate/rival"
)

// BenchmarkChance500 forecasts 500 movements of one batch, the first days of them read, and compares with
// judging each of them as often as there are draws, which is the least that drawing and judging can
// take; ready: what depends only on which days are read is kept, as for all movements of a round.
func BenchmarkChance500(b *testing.B) {
	p, m := trial.ISO3159(), rival.New(6)
	past, _ := lotsOf(b, m, 20, 50)
	f, j := forecastOf(b, priorOf(b, past), nil), judgeOf(b, p)
	lot := m.Lot(p, 500)
	var flat [][]int64
	var r trial.Result
	for _, s := range lot {
		var milli []int64
		for _, rate := range ratesOf(s) {
			milli = append(milli, int64(rate.Milli()))
		}
		flat = append(flat, milli)
	}
	for name, k := range map[string]int{"day2": 2, "day6": 6, "day10": 10, "day13": 13} {
		b.Run(name, func(b *testing.B) {
			open := make([][]trial.Rate, len(lot))
			for i, s := range lot {
				open[i] = first(ratesOf(s), k)
			}
			chance(b, f, open[0])
			judged, spent := time.Hour, time.Hour
			for b.Loop() {
				start := time.Now()
				for _, milli := range flat {
					for range 1024 {
						j.Milli(milli, 1<<15-1, &r)
					}
				}
				mid := time.Now()
				for _, rates := range open {
					chance(b, f, rates)
				}
				judged, spent = min(judged, mid.Sub(start)), min(spent, time.Since(mid))
			}
			b.ReportMetric(float64(spent)/float64(judged), "times-judging-each-draw")
			b.ReportMetric(500/spent.Seconds(), "movements/s")
			b.ReportMetric(0, "ns/op")
		})
	}
}
