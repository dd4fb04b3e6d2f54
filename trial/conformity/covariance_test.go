package conformity_test

import (
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"testing"

	"ratehouse/trial"
	"ratehouse/trial/conformity"
)

func readJSON(t testing.TB, name string, into any) {
	t.Helper()
	data, err := os.ReadFile(filepath.Join("..", "..", "testdata", "conformity", name))
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(data, into); err != nil {
		t.Fatal(err)
	}
}

func exact(t testing.TB, s string) trial.Exact {
	t.Helper()
	e, err := trial.ParseExact(s)
	if err != nil {
		t.Fatal(err)
	}
	return e
}

func newJudge(t testing.TB, category string) *trial.Judge {
	t.Helper()
	j, err := trial.NewJudge(trial.ISO3159(), category)
	if err != nil {
		t.Fatal(err)
	}
	return j
}

// weights writes a figure as day: weight.
func weights(days map[int]float64) []float64 {
	w := make([]float64, 15)
	for d, x := range days {
		w[d-1] = x
	}
	return w
}

// figures are the quantities of the table in the domain notes, section 5.2, written out by hand.
func figures() map[string][]float64 {
	mean := map[int]float64{}
	for d := 1; d <= 10; d++ {
		mean[d] = 0.1
	}
	off := func(day int) []float64 {
		w := weights(mean)
		for d := range w {
			w[d] = -w[d]
		}
		w[day-1]++
		return w
	}
	return map[string][]float64{
		"R_single": weights(map[int]float64{4: 1}), "M": weights(mean),
		"D":             weights(map[int]float64{1: .5, 2: .5, 9: -.5, 10: -.5}),
		"C":             weights(map[int]float64{13: 1. / 30, 11: -1. / 30}),
		"R_resumption":  weights(map[int]float64{15: 1, 1: -.5, 2: -.5}),
		"V_pair_signed": weights(map[int]float64{2: 1, 1: -1}),
		"P_R1-M":        off(1), "P_R5-M": off(5), "P_R10-M": off(10),
	}
}

// setAtChanges is the layout of case B: at every change of position or temperature the hands are
// set, so that one state is read as found and another as left.
func setAtChanges() conformity.Layout {
	p := trial.ISO3159()
	steps := []trial.Step{{}}
	cells := []trial.Cell{{HasFound: true, At: 1}}
	for d := 1; d <= 15; d++ {
		steps = append(steps, trial.Step{Day: d})
		cells = append(cells, trial.Cell{HasFound: true, At: int64(1 + d*trial.SecondsPerDay)})
	}
	for _, r := range p.Rounds() {
		turned := r.Has(trial.ActTurn) || r.Has(trial.ActMove)
		cells[r.K].HasLeft = turned && r.K > 0
	}
	return conformity.Recorded(p, steps, cells)
}

// separate is the layout of case C: every day has its own two readings.
func separate() conformity.Layout {
	l := conformity.Chain(trial.ISO3159())
	for d := range l {
		l[d].From.Step, l[d].To.Step = 100+2*d, 101+2*d
	}
	return l
}

func TestSharedStates(t *testing.T) {
	t.Parallel()
	var file struct {
		Table map[string]map[string]string `json:"table"`
	}
	readJSON(t, "published.json", &file)
	one := trial.ReadingOnly(trial.Ratio(1, 1))
	cases := map[string]conformity.Layout{"chained_states": conformity.Chain(trial.ISO3159()),
		"two_readings_at_each_position_change": setAtChanges(), "independent_rates_sqrt2": separate()}
	if len(file.Table) != len(figures()) {
		t.Fatalf("%d rows", len(file.Table))
	}
	for column, layout := range cases {
		cov := conformity.Propagate(trial.ISO3159(), layout, one, conformity.Movement{})
		for name, w := range figures() {
			want := exact(t, file.Table[name][column]).Float()
			if got := math.Sqrt(cov.Of(w, w)); math.Abs(got-want) > 1e-12 {
				t.Errorf("%s, %s: %.13f, want %.12f", name, column, got, want)
			}
		}
	}
	cov := conformity.Propagate(trial.ISO3159(), conformity.Chain(trial.ISO3159()), one, conformity.Movement{})
	f := figures()
	for _, c := range []struct {
		a, b string
		want float64
	}{{"M", "D", 0}, {"M", "C", 1. / 300}, {"M", "R_resumption", -.05}, {"D", "C", -1. / 60},
		{"D", "R_resumption", -.5}, {"C", "R_resumption", 0}} {
		if got := cov.Of(f[c.a], f[c.b]); math.Abs(got-c.want) > 1e-12 {
			t.Errorf("cov(%s, %s) = %v, want %v", c.a, c.b, got, c.want)
		}
	}
}

// The worked budget of the practice notes, U1: its figures are printed there to three decimals.
func TestFullBudget(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	p.Measurand = trial.AtNominal
	b := trial.Budget{Read: exact(t, "0.1"), Common: exact(t, "0.05"), ChamberSystematic: exact(t, "0.3"), Handling: exact(t, "0.05")}
	f := figures()
	check := func(slope float64, name string, want float64) {
		t.Helper()
		cov := conformity.Propagate(p, conformity.Chain(trial.ISO3159()), b, conformity.Movement{Slope: slope})
		if got := math.Sqrt(cov.Of(f[name], f[name])); math.Abs(got-want) > 0.0005 {
			t.Errorf("u(%s) at slope %v: %.4f, want %.3f", name, slope, got, want)
		}
	}
	check(0.2, "M", 0.064)
	check(0.2, "D", 0.122)
	check(0.2, "C", 0.008)
	check(0.6, "C", 0.0115) // printed as 0.011
	check(0.2, "R_resumption", 0.187)
	check(0.2, "R_single", 0.176)
	// As performed, temperature inside its tolerance is part of the method (U2).
	p.Measurand = trial.AsPerformed
	cov := conformity.Propagate(p, conformity.Chain(trial.ISO3159()), b, conformity.Movement{Slope: 0.2})
	if got, want := math.Sqrt(cov.Of(f["M"], f["M"])), math.Sqrt(0.0125*0.02+0.0025/10); math.Abs(got-want) > 1e-12 {
		t.Errorf("u(M) as performed %v, want %v", got, want)
	}
}

// The other terms, each by itself against its formula written out.
func TestBudgetTerms(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	of := func(b trial.Budget, l conformity.Layout, m conformity.Movement, figure string) float64 {
		w := figures()[figure]
		return math.Sqrt(conformity.Propagate(p, l, b, m).Of(w, w))
	}
	close := func(name string, got, want float64) {
		t.Helper()
		if math.Abs(got-want) > 1e-12 {
			t.Errorf("%s: %v, want %v", name, got, want)
		}
	}
	chain := conformity.Chain(trial.ISO3159())
	none := conformity.Movement{}
	// U4: a fifth of a second at 2.5 Hz is 0.058 s.
	close("resolution", of(trial.Budget{Resolution: exact(t, "0.2")}, chain, none, "R_single"), math.Sqrt2*0.2/math.Sqrt(12))
	close("frequency enters M in full", of(trial.Budget{Frequency: exact(t, "0.02")}, chain, none, "M"), 0.02)
	close("frequency cancels in D", of(trial.Budget{Frequency: exact(t, "0.02")}, chain, none, "D"), 0)
	// U12: 5 s/d and 2 degrees off is 0.17 s/d; alike within one position, so it cancels in R.
	tilt := trial.Budget{Tilt: exact(t, "2")}
	close("tilt", of(tilt, chain, conformity.Movement{Pattern: 5}, "R_single"), 5*2*math.Pi/180)
	close("tilt within a position", of(tilt, chain, conformity.Movement{Pattern: 5}, "R_resumption"), 0)
	// U5, U6: the hand at the same mark each day leaves nothing of an eccentric dial; at marks not
	// known a rate carries √2 · a/√2.
	wobble := trial.Budget{Eccentricity: exact(t, "0.4")}
	close("hand not known", of(wobble, chain, none, "R_single"), 0.4)
	same := conformity.Chain(trial.ISO3159())
	for d := range same {
		same[d].From.HasHand, same[d].To.HasHand = true, true
	}
	close("hand at the same mark", of(wobble, same, none, "M"), 0)
	// U3: one round read by another method.
	mixed := conformity.Chain(trial.ISO3159())
	mixed[3].To.Method, mixed[4].From.Method = "B", "B"
	b := trial.Budget{Read: exact(t, "0.1"), Methods: map[string]trial.Exact{"B": exact(t, "0.3")}}
	close("another method", of(b, mixed, none, "R_single"), math.Sqrt(0.01+0.09))
	// What a round shares is one error for the state as found and the one as left.
	b = trial.Budget{Common: exact(t, "0.1")}
	close("common error, hands set", of(b, setAtChanges(), none, "M"), 0.1*math.Sqrt(0.02))
	close("common error, chain", of(b, chain, none, "M"), 0.1*math.Sqrt(0.02))
}

// A stretch longer than a day carries the error of a state as less of a rate.
func TestIntervals(t *testing.T) {
	t.Parallel()
	l := conformity.Chain(trial.ISO3159())
	l[3].Seconds = 2 * trial.SecondsPerDay
	cov := conformity.Propagate(trial.ISO3159(), l, trial.ReadingOnly(trial.Ratio(1, 1)), conformity.Movement{})
	if got := cov.At(4, 4); got != 0.5 {
		t.Errorf("variance over two days %v, want 0.5", got)
	}
	if got := cov.At(4, 5); got != -0.5 {
		t.Errorf("covariance with the next day %v, want -0.5", got)
	}
	p := trial.ISO3159()
	p.Reading.IntervalS = trial.SecondsPerDay / 2
	cov = conformity.Propagate(p, conformity.Chain(p), trial.ReadingOnly(trial.Ratio(1, 1)), conformity.Movement{})
	if got := cov.At(4, 4); got != 8 {
		t.Errorf("variance over half a day %v, want 8", got)
	}
}

func TestRecorded(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	steps := []trial.Step{{}, {Day: 1}, {Day: 0}, {Day: 2}, {Day: 2}, {Day: 3}}
	cells := []trial.Cell{
		{HasFound: true, Found: 500, At: 90},
		{HasFound: true, Found: 3_000, HasLeft: true, Left: -200, At: 90 + 86_400},
		{HasFound: true, At: 90 + 2*86_400},
		{HasFound: true, At: 90 + 3*86_400},
		{HasFound: true, At: 90 + 4*86_400 + 60},
		{HasRate: true, Rate: 1_000},
	}
	got := conformity.Recorded(p, steps, cells)
	if len(got) != 15 || got[3].Seconds != 0 {
		t.Fatalf("%d days, day 4 of %d s", len(got), got[3].Seconds)
	}
	if s := got[0]; s.From.Step != 0 || s.To.Step != 1 || s.To.Left || s.Seconds != 86_400 {
		t.Errorf("day 1: %+v", s)
	}
	// At 90 s past the minute the hand of a movement 0.5 s ahead stands at 30.5.
	if h := got[0].From; !h.HasHand || h.Hand != 30_500 {
		t.Errorf("hand %v", h.Hand)
	}
	if s := got[1]; s.From.Step != 3 || s.To.Step != 4 || s.Seconds != 86_460 {
		t.Errorf("day 2 takes the latest step that closes it: %+v", s)
	}
	if s := got[2]; !s.Typed || s.Seconds != 86_400 || s.From.Step != 4 {
		t.Errorf("day 3 is typed: %+v", s)
	}
	// The state as left opens the next stretch.
	idle := conformity.Recorded(p, []trial.Step{{}, {Day: 1}, {Day: 2}}, cells[:3])
	if f := idle[1].From; !f.Left || f.Step != 1 || f.Hand != 29_800 {
		t.Errorf("day 2 starts as left: %+v", f)
	}
}
