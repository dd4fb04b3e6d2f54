package chart

import (
	"math"
	"strings"
	"testing"

	"ratehouse/trial"
	"ratehouse/web/words"
)

func mJudge(t *testing.T) *trial.Judge {
	t.Helper()
	j, err := trial.NewJudge(trial.ISO3159(), "1")
	if err != nil {
		t.Fatal(err)
	}
	return j
}

// flat judges a movement whose every rate is so many thousandths of s/d.
func flat(j *trial.Judge, milli int64) trial.Result {
	var r trial.Result
	rates := make([]trial.Rate, 15)
	for i := range rates {
		rates[i] = trial.RateOf(milli)
	}
	j.Rates(rates, &r)
	return r
}

func TestColumnsAgreeWithTheEngineAtTheLimit(t *testing.T) {
	t.Parallel()
	j, p := mJudge(t), words.New(words.EN, nil)
	var results []trial.Result
	for _, m := range []int64{-4001, -4000, -3999, 0, 5999, 6000, 6001, 90_000, -90_000} {
		results = append(results, flat(j, m))
	}
	d := DistributionOf(p, j, 0, results)
	in, out, beyond := 0, 0, 0
	for _, b := range d.bins() {
		if b.Outside {
			out += b.N
		} else {
			in += b.N
		}
		if b.Beyond {
			beyond++
		}
		if b.Outside && b.From < 6 && b.To > -4 {
			t.Errorf("the column from %v to %v lies within the limits and is called outside", b.From, b.To)
		}
	}
	if in != 5 || out != 4 {
		t.Errorf("%d inside and %d outside, want 5 and 4", in, out)
	}
	if beyond != 2 {
		t.Errorf("%d columns take in what lies far beyond, want the first and the last", beyond)
	}
}

func TestEverySampleIsDrawnOnce(t *testing.T) {
	t.Parallel()
	j, p := mJudge(t), words.New(words.DE, nil)
	for _, n := range []int{1, 2, 79, 80, 500} {
		var results []trial.Result
		for i := range n {
			results = append(results, flat(j, int64(i*7919%24_000-12_000)))
		}
		for crit := range j.Programme().Criteria {
			d := DistributionOf(p, j, crit, results)
			sum := 0
			for _, b := range d.bins() {
				sum += b.N
			}
			if sum != n {
				t.Errorf("%s of %d movements: %d are drawn", d.Symbol, n, sum)
			}
			checkPixels(t, d.Symbol, d.view(p))
		}
	}
}

func checkPixels(t *testing.T, what string, v histogramView) {
	t.Helper()
	if len(v.cols) == 0 || len(v.ticks) < 2 {
		t.Errorf("%s: %d columns, %d ticks", what, len(v.cols), len(v.ticks))
	}
	for _, c := range v.cols {
		for _, s := range []string{c.X, c.Y, c.W, c.H, c.HitX, c.HitW} {
			if strings.Contains(s, "NaN") || strings.Contains(s, "Inf") || strings.HasPrefix(s, "-") {
				t.Errorf("%s: a column at %+v", what, c)
			}
		}
	}
}

func TestParetoCountsAloneAndTogether(t *testing.T) {
	t.Parallel()
	j, p := mJudge(t), words.New(words.EN, nil)
	one := flat(j, 7000) // M alone
	var both trial.Result
	rates := make([]trial.Rate, 15)
	for i := range rates {
		rates[i] = trial.RateOf(7000 + int64(i%2)*6000) // M, V, Vmax and R
	}
	j.Rates(rates, &both)
	c := ParetoOf(p, j, []trial.Result{one, both, flat(j, 0)}, 3, ParetoRow{Symbol: "S", Title: "stopped", Alone: 5})
	if c.Rows[0].Symbol != "S" || c.Rows[1].Symbol != "M" || c.Rows[1].Alone != 1 || c.Rows[1].Together != 1 {
		t.Errorf("rows %+v", c.Rows[:2])
	}
	if failed := both.Failed(); len(failed) < 2 {
		t.Fatalf("the second movement fails in %v only", failed)
	}
	v := c.view(p)
	if v.bars[1].Share == "" || v.bars[len(v.bars)-1].Share != "" {
		t.Errorf("shares %q and %q: none is shown where none failed", v.bars[1].Share, v.bars[len(v.bars)-1].Share)
	}
	if !(Pareto{Rows: []ParetoRow{{Symbol: "M"}}}).Empty() || c.Empty() {
		t.Error("empty is told wrongly")
	}
}

func TestRatesAreJoinedWithinAPositionOnly(t *testing.T) {
	t.Parallel()
	j, p := mJudge(t), words.New(words.EN, nil)
	var res trial.Result
	rates := make([]trial.Rate, 15)
	for i := range rates {
		if i != 4 {
			rates[i] = trial.RateOf(int64(i) * 100)
		}
	}
	j.Rates(rates, &res)
	c := RatesOf(p, j, "S-1", rates, &res, map[int][]trial.Rate{6: {trial.RateOf(40_000)}})
	v := c.sized(leafWidth, leafHeight).view(p)
	var solid, dotted int
	for _, l := range v.lines {
		if l.Class == "line" {
			solid++
		} else {
			dotted++
		}
	}
	// Day 5 is missing: of the six pairs in one position 5-6 is not drawn, of the eight turns 4-5 is not.
	if solid != 5 || dotted != 7 {
		t.Errorf("%d solid and %d dotted lines, want 5 and 7", solid, dotted)
	}
	if len(v.points) != 14 || len(v.old) != 1 {
		t.Errorf("%d points and %d crosses, want 14 and 1", len(v.points), len(v.old))
	}
	free := 0
	for _, k := range v.points {
		if k.Class == "dot free" {
			free++
		}
	}
	if free != 2 {
		t.Errorf("%d hollow points, want days 12 and 14", free)
	}
	if lo, hi := c.span(); lo > 0 || hi < 40 {
		t.Errorf("the axis runs from %v to %v: zero or the replaced value is out of sight", lo, hi)
	}
	if c.Empty() || !(Rates{Days: make([]RateDay, 15)}).Empty() {
		t.Error("empty is told wrongly")
	}
}

func TestPLinesFollowTheMean(t *testing.T) {
	t.Parallel()
	j, p := mJudge(t), words.New(words.EN, nil)
	res := flat(j, 1265)
	rates := make([]trial.Rate, 15)
	for i := range rates {
		rates[i] = trial.RateOf(1265)
	}
	c := RatesOf(p, j, "S-1", rates, &res, nil)
	if len(c.Lines) != 2 || math.Abs(c.Lines[0].Rate-11.265) > 1e-9 || c.Lines[1].Text != "P limit −8.74" {
		t.Errorf("lines %+v, want 11.265 and −8.735 (half to even: −8.74)", c.Lines)
	}
	if c.Mean == nil || c.Mean.Text != "M +1.26" || c.Mean.MinText != "−4" || c.Mean.MaxText != "+6" {
		t.Errorf("mean %+v", c.Mean)
	}
}
