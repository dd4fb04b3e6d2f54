package lot_test

import (
	"fmt"
	"testing"

	"ratehouse/trial"
	"ratehouse/trial/lot"
)

// vectors is testdata/lot/vectors.json, written by tools/lot_vectors.py with numpy, scipy and mpmath.
type vectors struct {
	Proportions []struct {
		X, N           int
		Confidence     float64
		Wilson         [2]float64
		ClopperPearson [2]float64 `json:"clopper_pearson"`
	}
	Grubbs []struct {
		N, Sides        int
		Alpha, Critical float64
	}
	Quantiles []struct {
		X, P, Quantiles []float64
	}
	Capability []struct {
		Mean, S, Lo, Hi, Confidence, Cp, Cpk float64
		N                                    int
		CpRange                              [2]float64 `json:"cp_range"`
		CpkRange                             [2]float64 `json:"cpk_range"`
	}
	OneWay []struct {
		Groups [][]float64
		F, P   float64
	} `json:"one_way"`
	Repeatability struct {
		Groups         [][]float64
		Free           int
		SD, Confidence float64
		Range          [2]float64
	}
	Comparison struct {
		Rows []struct {
			Value                     float64
			Level, Calibre, Depositor string
			Round                     int
		}
		FreeLevels     int `json:"free_levels"`
		Free           int
		F, P, Residual float64
		Effects, U     map[string]float64
	}
	Noise struct {
		States    [][][]string
		Variance  float64
		Movements int
	}
}

func reference(t testing.TB) (v vectors) {
	t.Helper()
	readJSON(t, "vectors.json", &v)
	return v
}

func TestReference(t *testing.T) {
	t.Parallel()
	v := reference(t)
	for _, c := range v.Proportions {
		name := fmt.Sprintf("%d of %d at %v", c.X, c.N, c.Confidence)
		w, e := lot.Wilson(c.X, c.N, c.Confidence), lot.ClopperPearson(c.X, c.N, c.Confidence)
		near(t, name+" Wilson", w.Lo, c.Wilson[0], 1e-13)
		near(t, name+" Wilson", w.Hi, c.Wilson[1], 1e-13)
		near(t, name+" exact", e.Lo, c.ClopperPearson[0], 1e-12)
		near(t, name+" exact", e.Hi, c.ClopperPearson[1], 1e-12)
	}
	for _, c := range v.Grubbs {
		sides := map[int]lot.Sides{1: lot.Low, 2: lot.EitherSide}[c.Sides]
		near(t, fmt.Sprint("Grubbs ", c.N, c.Sides, c.Alpha), lot.GrubbsCritical(c.N, sides, c.Alpha), c.Critical, 1e-12)
	}
	for _, c := range v.Quantiles {
		for i, p := range c.P {
			near(t, fmt.Sprintf("quantile %v of %d", p, len(c.X)), lot.Quantile(c.X, p), c.Quantiles[i], 1e-14)
		}
	}
	for _, c := range v.Capability {
		got, ok := lot.CapabilityOf(c.Mean, c.S, c.N, c.Lo, c.Hi, c.Confidence)
		if !ok {
			t.Errorf("%+v: none", c)
		}
		for i, pair := range [][2]float64{{got.Cp, c.Cp}, {got.Cpk, c.Cpk}, {got.CpRange.Lo, c.CpRange[0]}, {got.CpRange.Hi, c.CpRange[1]},
			{got.CpkRange.Lo, c.CpkRange[0]}, {got.CpkRange.Hi, c.CpkRange[1]}} {
			near(t, fmt.Sprintf("capability %d", i), pair[0], pair[1], 1e-10)
		}
	}
	for _, c := range v.OneWay {
		got, ok := lot.OneWay(c.Groups)
		if !ok {
			t.Errorf("no analysis")
		}
		near(t, "F", got.F, c.F, 1e-12)
		near(t, "P", got.P, c.P, 1e-11)
	}
	c := v.Repeatability
	r, ok := lot.RepeatabilityOf(c.Groups, c.Confidence)
	if !ok || r.Free != c.Free {
		t.Fatalf("%v %+v", ok, r)
	}
	near(t, "repeatability", r.SD, c.SD, 1e-13)
	near(t, "its low end", r.Range.Lo, c.Range[0], 1e-10)
	near(t, "its high end", r.Range.Hi, c.Range[1], 1e-10)
}

func observations(v vectors) (list []lot.Observation) {
	for _, r := range v.Comparison.Rows {
		list = append(list, lot.Observation{Value: r.Value, Level: r.Level, Block: lot.Block{Round: r.Round, Calibre: r.Calibre, Depositor: r.Depositor}})
	}
	return list
}

// Two sets of holders that meet within and never between, and a holder that is a depositor's only one.
func TestCompareAgainstLeastSquares(t *testing.T) {
	t.Parallel()
	v := reference(t)
	want := v.Comparison
	c, ok := lot.Compare(observations(v))
	if !ok || !c.Separable() || c.FreeLevels != want.FreeLevels || c.Free != want.Free {
		t.Fatalf("%v %+v", ok, c)
	}
	near(t, "F", c.F, want.F, 1e-10)
	near(t, "P", c.P, want.P, 1e-10)
	near(t, "residual", c.Residual, want.Residual, 1e-12)
	if len(c.Sets) != 3 || len(c.Sets[0]) != 3 || len(c.Sets[1]) != 3 || len(c.Sets[2]) != 1 {
		t.Fatalf("sets %+v", c.Sets)
	}
	for _, set := range c.Sets[:2] {
		for _, l := range set {
			near(t, l.Name, l.Effect, want.Effects[l.Name], 1e-11)
			near(t, "u of "+l.Name, l.U, want.U[l.Name], 1e-11)
		}
	}
	if alone := c.Sets[2][0]; alone.Name != "h7" || alone.Effect != 0 || alone.U != 0 {
		t.Errorf("a holder that meets no other: %+v", alone)
	}
}

// Person is day, chamber is kind of day, tray is depositor's box: nothing tells them apart, and a
// plain analysis of the same numbers would be sure that they differ.
func TestNotSeparable(t *testing.T) {
	t.Parallel()
	var list []lot.Observation
	groups := make([][]float64, 3)
	for day := range 3 {
		for k := range 20 {
			x := float64(5*day) + float64(k%7)
			groups[day] = append(groups[day], x)
			list = append(list, lot.Observation{Value: x, Level: fmt.Sprint("reader ", day), Block: lot.Block{Round: day, Calibre: "K", Depositor: "A"}})
		}
	}
	if v, ok := lot.OneWay(groups); !ok || v.P > 1e-6 {
		t.Fatalf("the plain analysis: %v %+v", ok, v)
	}
	c, ok := lot.Compare(list)
	if ok || c.Separable() || len(c.Sets) != 3 || c.P != 1 {
		t.Errorf("%v %+v", ok, c)
	}
	// Depositor and calibre part blocks as days do.
	for i := range list {
		list[i].Block.Round = 0
	}
	if c, ok := lot.Compare(list); !ok || !c.Separable() {
		t.Errorf("on one day: %v %+v", ok, c)
	}
	for i := range list {
		list[i].Block.Depositor = list[i].Level
	}
	if c, ok := lot.Compare(list); ok || c.Separable() {
		t.Errorf("a depositor each: %v %+v", ok, c)
	}
}

func ratesOf(t testing.TB, states []string) (rates []trial.Rate) {
	t.Helper()
	for d := 1; d < len(states); d++ {
		from, err := trial.ParseExact(states[d-1])
		if err != nil {
			t.Fatal(err)
		}
		to, err := trial.ParseExact(states[d])
		if err != nil {
			t.Fatal(err)
		}
		rates = append(rates, trial.RateOf(to.Sub(from).Times(trial.Ratio(1000, 1)).Rat().Num().Int64()))
	}
	return rates
}

var pairs = [][2]int{{1, 2}, {3, 4}, {5, 6}, {7, 8}, {9, 10}}

func TestReadingNoiseAgainstCovariance(t *testing.T) {
	t.Parallel()
	v := reference(t).Noise
	var lots [][][]trial.Rate
	for _, states := range v.States {
		var one [][]trial.Rate
		for _, s := range states {
			one = append(one, ratesOf(t, s))
		}
		lots = append(lots, one)
	}
	lots[0] = append(lots[0], lots[0][3][:7], nil) // without all pairs: not used
	n, ok := lot.ReadingNoise(lots, pairs, 0.95)
	if !ok || n.Movements != v.Movements {
		t.Fatalf("%v %+v", ok, n)
	}
	near(t, "variance", n.Variance, v.Variance, 1e-12)
}
