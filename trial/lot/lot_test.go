package lot_test

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"ratehouse/trial"
	"ratehouse/trial/lot"
	"ratehouse/trial/simulate"
)

// judged draws a lot and judges it; some movements are left with days not read.
func judged(t testing.TB, n int, seed uint64) (j *trial.Judge, rates [][]trial.Rate, results []trial.Result) {
	t.Helper()
	p := trial.ISO3159()
	j, err := trial.NewJudge(p, "1")
	if err != nil {
		t.Fatal(err)
	}
	run := simulate.Default().Run(p, seed)
	for i := range n {
		states := run.Next()
		row := make([]trial.Rate, 15)
		for d := range row {
			if i%20 != 7 || d < 11 {
				row[d] = trial.RateBetween(states[d], states[d+1], trial.SecondsPerDay)
			}
		}
		var r trial.Result
		j.Rates(row, &r)
		rates, results = append(rates, row), append(results, r)
	}
	return j, rates, results
}

func TestYield(t *testing.T) {
	t.Parallel()
	y := lot.YieldOf(173, 27, 0.95)
	if y.Pass != 173 || y.Judged != 200 || y.Share != 0.865 || y.Wilson != lot.Wilson(173, 200, 0.95) || y.Exact != lot.ClopperPearson(173, 200, 0.95) {
		t.Errorf("%+v", y)
	}
	if y := lot.YieldOf(0, 0, 0.95); y.Share != 0 || y.Wilson.Hi != 1 {
		t.Errorf("nothing judged: %+v", y)
	}
}

// Failures against a recount by the symbols each movement failed by.
func TestFailures(t *testing.T) {
	t.Parallel()
	j, _, results := judged(t, 600, 5)
	crit := j.Programme().Criteria
	f := lot.NewFailures(len(crit))
	for i := range results {
		f.Add(&results[i])
	}
	together := 0
	for i, a := range crit {
		for k, b := range crit {
			n, alone := 0, 0
			for m := range results {
				failed := results[m].Failed()
				if slices.Contains(failed, a.Symbol) && slices.Contains(failed, b.Symbol) {
					n++
					if len(failed) == 1 {
						alone++
					}
				}
			}
			if f.Together[i][k] != n || i == k && (f.Outside[i] != n || f.Alone[i] != alone) {
				t.Errorf("%s with %s: %d, alone %d of %d; want %d, %d", a.Symbol, b.Symbol, f.Together[i][k], f.Alone[i], f.Outside[i], n, alone)
			}
			if i != k {
				together += n
			}
		}
	}
	if together == 0 {
		t.Error("no two criteria failed together: nothing was tested")
	}
}

// Cpk for M, D, C and R alone; the others have an upper index where the lot is large enough. Each is
// measured on those that have it.
func TestCriteria(t *testing.T) {
	t.Parallel()
	for _, n := range []int{200, 900} {
		j, _, results := judged(t, n, 7)
		for i, c := range lot.CriteriaOf(j, results, 0.95) {
			linear := slices.Contains([]string{"M", "D", "C", "R"}, c.Symbol)
			if (c.Cpk != nil) != linear || (c.Upper != nil) != (!linear && c.N >= 741) {
				t.Errorf("%s of %d: Cpk %v, upper index %v", c.Symbol, c.N, c.Cpk, c.Upper)
			}
			missing := map[string]int{"C": n / 20, "R": n / 20}[c.Symbol] // day 12 on was not read
			outside, in := 0, 0
			for k := range results {
				if results[k].Values[i].Outcome == trial.Outside {
					outside++
				}
			}
			for _, b := range c.Columns {
				in += b.N
			}
			if c.Of != n || c.N != n-missing || c.Outside != outside || in != c.N || c.Range != lot.ClopperPearson(outside, c.N, 0.95) {
				t.Errorf("%s: %d of %d, outside %d (want %d), in columns %d", c.Symbol, c.N, c.Of, c.Outside, outside, in)
			}
			if !slices.IsSorted(c.Quantiles[:]) || c.Quantiles[0] < c.Min || c.Quantiles[4] > c.Max || c.Quantiles[2] == c.Min {
				t.Errorf("%s: quantiles %v within %v to %v", c.Symbol, c.Quantiles, c.Min, c.Max)
			}
		}
	}
	j, _, _ := judged(t, 0, 1)
	for _, c := range lot.CriteriaOf(j, nil, 0.95) {
		if c.N != 0 || c.Cpk != nil || c.Upper != nil || c.Range.Hi != 1 {
			t.Errorf("of nothing: %+v", c)
		}
	}
}

// For a normal figure the upper index is Cpu; for a folded one Cpu is wrong by far.
func TestUpperIndex(t *testing.T) {
	t.Parallel()
	rng := rand.New(rand.NewPCG(3159, 1))
	normal, folded := make([]float64, 200_000), make([]float64, 200_000)
	for i := range normal {
		normal[i] = 1 + 0.5*rng.NormFloat64()
		folded[i] = math.Abs(rng.NormFloat64())
	}
	slices.Sort(normal)
	slices.Sort(folded)
	u, ok := lot.UpperIndex(normal, 4)
	if !ok || math.Abs(u-2) > 0.05 {
		t.Errorf("normal: %v, Cpu is 2", u)
	}
	// The index is 1 where 0.135 of 100 lie beyond the limit, whatever the shape.
	limit := lot.Quantile(folded, 0.99865)
	if u, _ := lot.UpperIndex(folded, limit); math.Abs(u-1) > 1e-12 {
		t.Errorf("folded: %v, want 1", u)
	}
	if _, ok := lot.UpperIndex(folded[:740], 4); ok {
		t.Error("a quantile of 99.865 % from 740 values")
	}
}

// Lots that differ as lots do: the plain chart alarms all the time, the other does not, and both see a
// lot that is far off.
func TestPChartBetweenLots(t *testing.T) {
	t.Parallel()
	rng := rand.New(rand.NewPCG(3159, 2))
	plainSignals, wideSignals, seen := 0, 0, 0
	for range 200 {
		lots := make([]lot.Sampled, 30)
		for i := range lots {
			lots[i].N = 200
			p := math.Min(0.4, math.Max(0.01, 0.13+0.05*rng.NormFloat64()))
			for range lots[i].N {
				if rng.Float64() < p {
					lots[i].X++
				}
			}
		}
		plain, ok1 := lot.PlainPChart(lots)
		wide, ok2 := lot.PChartBetweenLots(lots)
		if !ok1 || !ok2 || wide.Spread < 1 {
			t.Fatalf("%v %v %+v", ok1, ok2, wide)
		}
		plainSignals, wideSignals = plainSignals+len(plain.Signals), wideSignals+len(wide.Signals)
		lots[12].X = 120
		if wide, _ := lot.PChartBetweenLots(lots); slices.Contains(wide.Signals, 12) {
			seen++
		}
	}
	t.Logf("of 6000 lots: plain %d signals, between lots %d; a lot of 60 %% seen %d of 200 times", plainSignals, wideSignals, seen)
	if plainSignals < 500 || wideSignals > 60 || seen < 195 {
		t.Errorf("plain %d signals, between lots %d, seen %d", plainSignals, wideSignals, seen)
	}
	same, ok := lot.PChartBetweenLots([]lot.Sampled{{10, 100}, {10, 100}, {0, 0}, {10, 100}})
	if !ok || same.Spread != 1 || same.Signals != nil || same.Limits[2] != (lot.Interval{Lo: 0, Hi: 1}) {
		t.Errorf("lots all alike, one empty: %+v", same)
	}
	for _, none := range [][]lot.Sampled{nil, {{0, 0}}, {{5, 10}}, {{0, 10}, {0, 20}}, {{10, 10}, {20, 20}}} {
		if c, ok := lot.PChartBetweenLots(none); ok {
			t.Errorf("%v: %+v", none, c)
		}
	}
}

// u_s from ordinary trials, at the size practice U8 names: 5,000 movements resolve about 0.15 s. Drift
// and day noise drop out, and so does what a round shares.
func TestReadingNoise(t *testing.T) {
	t.Parallel()
	for i, u := range []float64{0, 0.15, 0.3} {
		rng := rand.New(rand.NewPCG(3159, uint64(i)))
		var lots [][][]trial.Rate
		for range 25 {
			common := make([]float64, 16)
			for k := range common {
				common[k] = 0.5 * rng.NormFloat64()
			}
			var one [][]trial.Rate
			for range 200 {
				mean, drift, state := 2*rng.NormFloat64(), 0.1*rng.NormFloat64(), 0.0
				row := make([]trial.Rate, 15)
				read := int64(math.Round(1000 * (common[0] + u*rng.NormFloat64())))
				for d := range row {
					state += mean + drift*float64(d) + 0.3*rng.NormFloat64()
					now := int64(math.Round(1000 * (state + common[d+1] + u*rng.NormFloat64())))
					row[d] = trial.RateOf(now - read)
					read = now
				}
				one = append(one, row)
			}
			lots = append(lots, one)
		}
		n, ok := lot.ReadingNoise(lots, pairs, 0.99)
		if !ok || n.Movements != 5000 || n.Range.Lo > u*u || n.Range.Hi < u*u || n.Resolved != (u > 0) {
			t.Errorf("u = %v: %v %+v", u, ok, n)
		}
		t.Logf("u %.2f: found %.3f, u² within %.4f to %.4f", u, n.U, n.Range.Lo, n.Range.Hi)
	}
	row := make([]trial.Rate, 15)
	if n, ok := lot.ReadingNoise([][][]trial.Rate{{row}}, pairs, 0.95); ok {
		t.Errorf("nothing read: %+v", n)
	}
}

// The profile is each position's own mean, on those that were read there.
func TestProfile(t *testing.T) {
	t.Parallel()
	j, rates, _ := judged(t, 200, 3)
	places := lot.ProfileOf(j.Programme(), rates, 0.95)
	want := []struct {
		position trial.Position
		celsius  trial.Milli
		days     []int
		n        int
	}{{trial.H6, 23_000, []int{1, 2, 14, 15}, 190}, {trial.H3, 23_000, []int{3, 4}, 200}, {trial.H9, 23_000, []int{5, 6}, 200},
		{trial.FH, 23_000, []int{7, 8}, 200}, {trial.CH, 23_000, []int{9, 10, 12}, 190}, {trial.CH, 8_000, []int{11}, 200}, {trial.CH, 38_000, []int{13}, 190}}
	if len(places) != len(want) {
		t.Fatalf("%d places", len(places))
	}
	for i, w := range want {
		p := places[i]
		if p.Position != w.position || p.TemperatureC != w.celsius || !slices.Equal(p.Days, w.days) || p.N != w.n || p.Of != 200 {
			t.Errorf("%s %s °C days %v: %d of %d", p.Position, p.TemperatureC, p.Days, p.N, p.Of)
		}
		sum := trial.Exact{}
		for _, row := range rates {
			if row[w.days[len(w.days)-1]-1].Known() {
				for _, d := range w.days {
					sum = sum.Add(row[d-1].Exact())
				}
			}
		}
		mean := sum.Float() / float64(w.n*len(w.days))
		near(t, string(p.Position), p.Mean, mean, 1e-13)
		// Student's t of 0.975 with 189 and 199 degrees of freedom is 1.9726 and 1.9720 (tables).
		near(t, "half width", (p.Range.Hi-p.Range.Lo)/2, map[int]float64{190: 1.9726, 200: 1.9720}[w.n]*p.SD/math.Sqrt(float64(w.n)), 1e-4)
	}
	for _, p := range lot.ProfileOf(j.Programme(), nil, 0.95) {
		if p.N != 0 || p.Range != (lot.Interval{}) {
			t.Errorf("of nothing: %+v", p)
		}
	}
}

// What cannot be computed is not.
func TestTooLittle(t *testing.T) {
	t.Parallel()
	if _, ok := lot.CapabilityOf(1, 0, 50, 0, 2, 0.95); ok {
		t.Error("capability without spread")
	}
	if _, ok := lot.CapabilityOf(1, 1, 50, math.Inf(-1), math.Inf(1), 0.95); ok {
		t.Error("capability without limits")
	}
	if c, ok := lot.CapabilityOf(1, 1, 50, math.Inf(-1), 4, 0.95); !ok || c.Cpk != 1 || !math.IsInf(c.Cp, 1) {
		t.Errorf("one limit: %+v", c)
	}
	if _, ok := lot.IndividualsChart([]float64{1}); ok {
		t.Error("a chart of one")
	}
	if _, ok := lot.Grubbs([]float64{1, 1, 1}, lot.EitherSide, 0.05); ok {
		t.Error("an outlier of equal ones")
	}
	if _, ok := lot.OneWay([][]float64{{1, 2}, nil}); ok {
		t.Error("one group compared")
	}
	if _, ok := lot.RepeatabilityOf([][]float64{{1}, {2}}, 0.95); ok {
		t.Error("repeatability of what was read once")
	}
	if c, ok := lot.Compare(nil); ok || c.Separable() {
		t.Error("nothing is separable")
	}
	if m := lot.MomentsOf([]float64{3}); m.SD != 0 || m.Mean != 3 || m.Lag1 != 0 {
		t.Errorf("%+v", m)
	}
	if !math.IsNaN(lot.Quantile(nil, 0.5)) || lot.MomentsOf(nil) != (lot.Moments{}) {
		t.Error("of nothing, something")
	}
}

// The histogram's columns end on the limits, whatever else they do.
func TestHistogram(t *testing.T) {
	t.Parallel()
	samples := []lot.Sample{{-4.001, true}, {-4, false}, {6, false}, {6.0000001, true}, {90, true}, {0, false}}
	columns := lot.Histogram(samples, lot.Bounds{HasMin: true, Min: -4, HasMax: true, Max: 6})
	in, out := 0, 0
	for _, c := range columns {
		if c.Outside {
			out += c.N
		} else {
			in += c.N
		}
		if c.From < -4 != (c.To <= -4+1e-9) || c.Outside != (c.From < -4 || c.From >= 6-1e-9) {
			t.Errorf("a column from %v to %v, outside %v", c.From, c.To, c.Outside)
		}
	}
	if in != 3 || out != 3 || !columns[len(columns)-1].Beyond {
		t.Errorf("%d inside, %d outside: %+v", in, out, columns)
	}
	for _, n := range []int{0, 1, 79, 500} {
		some := make([]lot.Sample, n)
		for i := range some {
			some[i].X = float64(i*7919%997) / 100
		}
		drawn := 0
		for _, c := range lot.Histogram(some, lot.Bounds{}) {
			drawn += c.N
		}
		if drawn != n {
			t.Errorf("%d of %d are drawn", drawn, n)
		}
	}
}
