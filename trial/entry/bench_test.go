package entry_test

import (
	"testing"
	"time"

	"ratehouse/trial"
	"ratehouse/trial/entry"
	"ratehouse/trial/simulate/rival"
)

// ratio times two passes alternately in one run and reports how many times the second takes, by the
// shortest time of each: other work on the machine only ever adds.
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

var sink int64

// round14 is a large round late in the trial: 600 places that know 13 days each.
func round14(b *testing.B) (*entry.Forecast, []entry.Place, [][]trial.State) {
	b.Helper()
	p, m := trial.ISO3159(), rival.New(1)
	f := forecastOf(b, p, historyOf(b, p, m, 5, 100))
	states := m.Lot(p, 600)
	return f, places(states, 14, false), states
}

// sums is what expectations are measured against: of every past day of every place a product with
// every other is added up, as the distance of a past from the lot's needs them.
func sums(places []entry.Place) {
	s := int64(0)
	for i := range places {
		for _, a := range places[i].Rates {
			for _, c := range places[i].Rates {
				s += int64(a.Milli()) * int64(c.Milli())
			}
		}
	}
	sink += s
}

func BenchmarkExpect600(b *testing.B) {
	f, here, _ := round14(b)
	r := entry.Round{Day: 14}
	f.Expect(r, here)
	b.ReportAllocs()
	ratio(b, "times-the-products", func() { sums(here) }, func() { sink += f.Expect(r, here)[0].Centre })
}

// BenchmarkCheck compares the check of right values with a plain comparison of each with two bounds;
// of slips with the same, which is what a second look costs.
func BenchmarkCheck(b *testing.B) {
	f, here, states := round14(b)
	list := f.Expect(entry.Round{Day: 14}, here)
	for name, by := range map[string]int64{"right": 0, "slip": 30_000} {
		values := make([]int64, len(states))
		for i, s := range states {
			values[i] = int64(s[14]) + by
		}
		bounds := func() {
			for range 100 {
				for i, v := range values {
					if e := &list[i]; v < e.Centre-e.Band || v > e.Centre+e.Band {
						sink++
					}
				}
			}
		}
		b.Run(name, func(b *testing.B) {
			ratio(b, "times-two-bounds", bounds, func() {
				for range 100 {
					for i, v := range values {
						if entry.Check(&list[i], v) != nil {
							sink++
						}
					}
				}
			})
		})
	}
}
