package balance_test

import (
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"ratehouse/trial"
	"ratehouse/trial/balance"
)

// values is testdata/balance/physics.json; its _source says where the numbers come from.
func values(t testing.TB) map[string]any {
	t.Helper()
	data, err := os.ReadFile(filepath.Join("..", "..", "testdata", "balance", "physics.json"))
	if err != nil {
		t.Fatal(err)
	}
	var v map[string]any
	if err := json.Unmarshal(data, &v); err != nil {
		t.Fatal(err)
	}
	return v
}

// at follows names into the file; numbers there are numbers or decimals.
func at(t testing.TB, v any, names ...string) float64 {
	t.Helper()
	for _, n := range names {
		m, ok := v.(map[string]any)
		if !ok || m[n] == nil {
			t.Fatalf("%v: no %s", names, n)
		}
		v = m[n]
	}
	switch x := v.(type) {
	case float64:
		return x
	case string:
		f, err := strconv.ParseFloat(x, 64)
		if err != nil {
			t.Fatal(err)
		}
		return f
	}
	t.Fatalf("%v is %T", names, v)
	return 0
}

// near compares to a relative error.
func near(t testing.TB, name string, got, want, relative float64) {
	t.Helper()
	if !(math.Abs(got-want) <= relative*math.Max(math.Abs(want), 1e-300)) && got != want {
		t.Errorf("%s: %.16g, want %.16g", name, got, want)
	}
}

const degree = math.Pi / 180

func TestRateOfPeriod(t *testing.T) {
	t.Parallel()
	rows := values(t)["rate_exact_vs_linear"].([]any)
	if len(rows) != 8 {
		t.Fatalf("%d rows", len(rows))
	}
	for _, row := range rows {
		m, ratio := at(t, row, "M_exact"), at(t, row, "T_over_T0")
		near(t, "ratio", balance.PeriodRatio(m), ratio, 1e-15)
		within(t, "exact", balance.RateOfPeriod(ratio, 1), m, 1e-9)
		within(t, "linear", balance.LinearRateOfPeriod(ratio, 1), at(t, row, "M_linear_86400*(T0-T)/T0"), 1e-9)
	}
}

func within(t testing.TB, name string, got, want, most float64) {
	t.Helper()
	if !(math.Abs(got-want) <= most) {
		t.Errorf("%s: %.16g, want %.16g", name, got, want)
	}
}

func TestSpring(t *testing.T) {
	t.Parallel()
	v := values(t)
	k := balance.Stiffness(210e9, 1e-4, 3e-5, 0.06)
	near(t, "k", k, at(t, v, "spring_example_2", "k"), 1e-12)
	period := balance.Period(1.2e-9, k)
	near(t, "T", period, at(t, v, "spring_example_2", "T_s"), 1e-12)
	near(t, "rate against 0.25 s", balance.RateOfPeriod(period, 0.25), at(t, v, "spring_example_2", "rate_vs_T0_0.25"), 1e-9)
	wanted := balance.StiffnessFor(1.2e-9, 0.25)
	near(t, "k for 0.25 s", wanted, at(t, v, "spring_example", "k_target"), 1e-12)
	near(t, "stiffness at that length", balance.Stiffness(210e9, 1e-4, 3e-5, at(t, v, "spring_example", "L_m")), wanted, 1e-12)
	// Sensitivities, and one second a day in each.
	for name, c := range map[string]balance.Relative{"L": {Length: 1e-5}, "I": {Inertia: 1e-5}, "E": {Modulus: 1e-5}, "b": {Height: 1e-5}, "t": {Thickness: 1e-5}} {
		near(t, name, balance.RateShift(c), at(t, v, "rate_per_relative_change_s_per_d_per_1e-5", name), 1e-12)
	}
	one := balance.RelativeFor(1)
	near(t, "dL/L", -one.Length, at(t, v, "one_s_per_d_relative", "dL/L"), 1e-12)
	near(t, "dt/t", one.Thickness, at(t, v, "one_s_per_d_relative", "dt/t"), 1e-12)
	within(t, "all at once", balance.RateShift(one), 5, 1e-12)
	// The sensitivity is the slope of the exact formula.
	exact := balance.RateOfPeriod(balance.Period(1.2e-9, balance.Stiffness(210e9, 1e-4, 3e-5*(1+1e-7), 0.06)), period)
	within(t, "thickness by the exact formula", exact, balance.RateShift(balance.Relative{Thickness: 1e-7}), 1e-8)
}

func TestThermalSlope(t *testing.T) {
	t.Parallel()
	v := values(t)
	near(t, "brass", balance.ThermalSlope(0, 0, 19e-6), at(t, v, "thermal_balance_only", "brass_alpha_19e-6"), 1e-12)
	near(t, "steel", balance.ThermalSlope(0, 0, 11e-6), at(t, v, "thermal_balance_only", "steel_alpha_11e-6"), 1e-12)
	near(t, "full", balance.ThermalSlope(-2.4e-4, 11e-6, 19e-6), at(t, v, "thermal_full_example", "dM_dT"), 1e-12)
	within(t, "compensated", balance.ThermalSlope(at(t, v, "thermal_zero_betaE_for_C0", "betaE_needed"), 8e-6, 17e-6), 0, 1e-12)
	near(t, "0.6", balance.ThermalError(0.6), at(t, v, "C_0.6_limit_equivalent_betaE_error"), 1e-11)
}

func TestPendulum(t *testing.T) {
	t.Parallel()
	v := values(t)
	near(t, "length", balance.PendulumLength(2, 9.80665), at(t, v, "pendulum_L_for_T2_g9.80665_m"), 1e-15)
	for _, deg := range []string{"1", "2", "3", "5"} {
		angle, _ := strconv.ParseFloat(deg, 64)
		angle *= degree
		ratio := balance.CircularRatio(angle)
		near(t, deg+"°", ratio, at(t, v, "pendulum_circular_error_ratio_"+deg+"deg"), 1e-15)
		within(t, "rate", balance.RateOfPeriod(ratio, 1), at(t, v, "pendulum_circular_error_rate_exact_s_per_d_"+deg+"deg"), 1e-10)
		within(t, "small", balance.CircularRateSmall(angle), at(t, v, "pendulum_circular_error_rate_small_angle_s_per_d_"+deg+"deg"), 1e-10)
	}
}

func TestAmplitudeFactor(t *testing.T) {
	t.Parallel()
	v := values(t)
	table := v["factor_2J1_over_phi"].(map[string]any)
	if len(table) != 16 {
		t.Fatalf("%d rows", len(table))
	}
	for deg := range table {
		phi, _ := strconv.ParseFloat(deg, 64)
		near(t, deg+"°", balance.AmplitudeFactor(phi*degree), at(t, v, "factor_2J1_over_phi", deg), 1e-12)
	}
	within(t, "at rest", balance.AmplitudeFactor(0), 1, 0)
	within(t, "first zero", balance.AmplitudeFactor(balance.NeutralAmplitude), 0, 1e-15)
	within(t, "second zero", balance.AmplitudeFactor(balance.SecondNeutralAmplitude), 0, 1e-15)
	near(t, "first zero", balance.NeutralAmplitude/degree, at(t, v, "J1_first_zero_deg"), 1e-15)
	near(t, "second zero", balance.SecondNeutralAmplitude/degree, at(t, v, "J1_second_zero_deg"), 1e-13)
	near(t, "least", balance.AmplitudeFactor(at(t, v, "factor_min_at_rad")), at(t, v, "factor_min_value"), 1e-12)
	k := balance.StiffnessFor(1.2e-9, 0.25)
	for deg := range v["poise_example"].(map[string]any)["A_s_per_d"].(map[string]any) {
		phi, _ := strconv.ParseFloat(deg, 64)
		near(t, "poise at "+deg+"°", balance.PoiseAmplitude(1e-12, 9.80665, k, phi*degree), at(t, v, "poise_example", "A_s_per_d", deg), 1e-11)
	}
	// A numeric integration of the full equation of motion, m r g/k = 1e-4.
	rows := v["poise_numeric_vs_formula"].([]any)
	for _, row := range rows {
		got := balance.PoiseAmplitude(1e-4, 1, 1, at(t, row, "phi0_deg")*degree) / 86_400
		near(t, "against integration", got, at(t, row, "dw_over_w_numeric"), 3e-5)
	}
}

func TestVerticalPattern(t *testing.T) {
	t.Parallel()
	v := values(t)
	positions := map[string]trial.Position{"3H": trial.H3, "6H": trial.H6, "9H": trial.H9, "12H": trial.H12}
	four := map[trial.Position]float64{}
	for name, p := range positions {
		four[p] = at(t, v, "heavy_point_example", "rates", name)
	}
	p, ok := balance.VerticalPattern(four, 0.1)
	if !ok || !p.HasClosure {
		t.Fatal("four positions close")
	}
	within(t, "size", p.Size, at(t, v, "heavy_point_example", "input", "A"), 1e-11)
	within(t, "direction", p.Direction, at(t, v, "heavy_point_example", "input", "psi_deg"), 1e-10)
	within(t, "mean", p.Mean, 2, 1e-11)
	within(t, "closure", p.Closure, 0, 1e-11)
	within(t, "u of closure", p.UClosure, 0.2, 1e-15)
	three := map[trial.Position]float64{trial.H3: -3.3, trial.H6: -1.7, trial.H9: 7.3}
	p, ok = balance.VerticalPattern(three, 0.1)
	if !ok || p.HasClosure {
		t.Fatal("three positions have no closure")
	}
	within(t, "size of three", p.Size, at(t, v, "heavy_point_three_pos_example", "A"), 1e-11)
	within(t, "direction of three", p.Direction, at(t, v, "heavy_point_three_pos_example", "psi_deg"), 1e-9)
	within(t, "from the back", balance.FromTheBack(p.Direction), 360-p.Direction, 1e-12)
	delete(three, trial.H9)
	if _, ok := balance.VerticalPattern(three, 0.1); ok {
		t.Error("two positions make no pattern")
	}
}

// Uncertainties against finite differences of the pattern itself.
func TestPatternUncertainty(t *testing.T) {
	t.Parallel()
	for _, with12 := range []bool{true, false} {
		rates := map[trial.Position]float64{trial.H3: -3.3, trial.H6: 1.2, trial.H9: 4.1}
		if with12 {
			rates[trial.H12] = -0.4
		}
		const u, h = 0.2, 1e-6
		p, _ := balance.VerticalPattern(rates, u)
		var size, angle, mean float64
		for pos := range rates {
			moved := map[trial.Position]float64{}
			for k, x := range rates {
				moved[k] = x
			}
			moved[pos] += h
			q, _ := balance.VerticalPattern(moved, u)
			size += math.Pow((q.Size-p.Size)/h*u, 2)
			angle += math.Pow((q.Direction-p.Direction)/h*u, 2)
			mean += math.Pow((q.Mean-p.Mean)/h*u, 2)
		}
		within(t, "u of size", p.USize, math.Sqrt(size), 1e-5)
		within(t, "u of angle", p.UAngle, math.Sqrt(angle), 1e-3)
		within(t, "u of mean", p.UMean, math.Sqrt(mean), 1e-7)
	}
}

// No heavy side without an amplitude that keeps the sign (practice notes, X4).
func TestHeavyPoint(t *testing.T) {
	t.Parallel()
	p := balance.Pattern{Size: 5, Direction: 125, USize: 0.2}
	for _, c := range []struct {
		a    balance.Amplitude
		want float64
		ok   bool
	}{
		{balance.Amplitude{}, 0, false},
		{balance.Amplitude{From: 190, To: 190}, 125, true},
		{balance.Amplitude{From: 200, To: 200}, 0, false},
		{balance.Amplitude{From: 210, To: 210}, 0, false},
		{balance.Amplitude{From: 280, To: 280}, 0, false}, // one value: it falls through the neutral one
		{balance.Amplitude{From: 150, To: 219}, 125, true},
		{balance.Amplitude{From: 220, To: 290}, 305, true},
		{balance.Amplitude{From: 219, To: 290}, 0, false},
		{balance.Amplitude{From: 290, To: 220}, 0, false},
		{balance.Amplitude{From: 300, To: 402}, 0, false},
	} {
		if got, ok := p.HeavyPoint(c.a); ok != c.ok || math.Abs(got-c.want) > 1e-12 {
			t.Errorf("%v: %v %v, want %v %v", c.a, got, ok, c.want, c.ok)
		}
	}
	p.USize = 2.5
	if _, ok := p.HeavyPoint(balance.Amplitude{From: 190, To: 190}); ok {
		t.Error("a size within twice its uncertainty points nowhere")
	}
}
