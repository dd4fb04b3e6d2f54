package conformity_test

import (
	"math"
	"testing"

	"ratehouse/trial"
	"ratehouse/trial/conformity"
)

// within tells two numbers at most so far apart.
func within(t *testing.T, name string, got, want, most float64) {
	t.Helper()
	if !(math.Abs(got-want) <= most) {
		t.Errorf("%s: %.12g, want %.12g", name, got, want)
	}
}

type jcgm struct {
	JCGM struct {
		Zener struct {
			Y, U, PC float64
			TU       float64 `json:"T_U"`
		}
		Container struct {
			Y, U, PC float64
			TL       float64 `json:"T_L"`
		}
		Resistors risks            `json:"resistors_g0"`
		Guarded   map[string]risks `json:"resistors_guard_w=r*U"`
		ILAC      map[string]struct {
			W    float64 `json:"w_over_U"`
			Risk float64 `json:"specific_risk_at_AL"`
		} `json:"ilac_g8_guard"`
		C struct{ Y, U, PC float64 } `json:"pc_two_sided_C"`
		M struct{ Y, U, PC float64 } `json:"pc_formula_two_sided_example_M"`
		A struct {
			K float64 `json:"k"`
		} `json:"acceptance_limit_for_pc95_one_sided"`
	} `json:"jcgm106"`
}

type risks struct {
	RC float64 `json:"RC"`
	RP float64 `json:"RP"`
	N  float64 `json:"p_nonconforming"`
	W  float64 `json:"w"`
}

// The worked examples of the check values, topic 5.
func TestGuides(t *testing.T) {
	t.Parallel()
	var file jcgm
	readJSON(t, "published.json", &file)
	g := file.JCGM
	inf := math.Inf(1)
	within(t, "zener diode", conformity.Probability(g.Zener.Y, g.Zener.U, -inf, g.Zener.TU), g.Zener.PC, 1e-12)
	within(t, "container", conformity.Probability(g.Container.Y, g.Container.U, g.Container.TL, inf), g.Container.PC, 1e-12)
	within(t, "C of 0.595", conformity.Probability(g.C.Y, g.C.U, -.6, .6), g.C.PC, 1e-12)
	within(t, "M of 5.9", conformity.Probability(g.M.Y, g.M.U, -4, 6), g.M.PC, 1e-12)
	within(t, "95 % one-sided", conformity.AcceptanceLimitFor(0.95), g.A.K, 1e-12)
	if len(g.ILAC) != 5 || len(g.Guarded) != 5 {
		t.Fatalf("%d rows, %d guards", len(g.ILAC), len(g.Guarded))
	}
	for name, row := range g.ILAC {
		within(t, "worst risk at w = "+name, conformity.WorstRisk(row.W), row.Risk, 1e-12)
	}
	p := conformity.Production{Mean: 1500, SD: 0.12}
	r := conformity.GlobalRisks(p, 0.04, 1499.8, 1500.2, 0)
	within(t, "resistors, consumer", r.Consumer, g.Resistors.RC, 1e-10)
	within(t, "resistors, producer", r.Producer, g.Resistors.RP, 1e-10)
	within(t, "resistors, nonconforming", r.Nonconforming, g.Resistors.N, 1e-12)
	for name, want := range g.Guarded {
		r := conformity.GlobalRisks(p, 0.04, 1499.8, 1500.2, want.W)
		within(t, "consumer, guard "+name, r.Consumer, want.RC, 1e-9)
		within(t, "producer, guard "+name, r.Producer, want.RP, 1e-9)
	}
	// M of a lot, the error 170 times smaller than the spread: acceptance turns within 0.1 s/d.
	r = conformity.GlobalRisks(conformity.Production{Mean: 1, SD: 2.5}, math.Sqrt2*0.1/10, -4, 6, 0)
	within(t, "M of a lot, consumer", r.Consumer, 0.0002419692005187807, 1e-9)
	within(t, "M of a lot, producer", r.Producer, 0.0002454246500176705, 1e-9)
	one := conformity.GlobalRisks(conformity.Production{Mean: 0, SD: 1}, 0, -inf, 0, 0)
	within(t, "one-sided, exact measuring", one.Consumer+one.Producer, 0, 1e-12)
	within(t, "one-sided, nonconforming", one.Nonconforming, 0.5, 1e-12)
}

func TestAcceptance(t *testing.T) {
	t.Parallel()
	limit := trial.Limit{HasMin: true, HasMax: true, Min: exact(t, "-4"), Max: exact(t, "6")}
	a, ok := conformity.Acceptance(limit, exact(t, "0.5"))
	if !ok || a.Min.Cmp(exact(t, "-3.5")) != 0 || a.Max.Cmp(exact(t, "5.5")) != 0 {
		t.Errorf("%v to %v, %v", a.Min, a.Max, ok)
	}
	if _, ok := conformity.Acceptance(limit, exact(t, "5")); !ok {
		t.Error("one point is left")
	}
	if _, ok := conformity.Acceptance(limit, exact(t, "5.001")); ok {
		t.Error("crossed limits accept nothing")
	}
	a, ok = conformity.Acceptance(trial.Limit{HasMax: true, Max: exact(t, "2")}, exact(t, "5"))
	if !ok || a.HasMin || a.Max.Cmp(exact(t, "-3")) != 0 {
		t.Errorf("one-sided: %v %v", a, ok)
	}
	w, _ := conformity.GuardBand(trial.Decision{Rule: trial.Guarded, Guard: trial.Ratio(1, 1)}, 0.0141421356)
	if w.Cmp(exact(t, "0.028285")) != 0 { // 0.0282842712 rounded up
		t.Errorf("guard band %v", w)
	}
	if w, ok := conformity.GuardBand(trial.Decision{Rule: trial.Simple, Guard: trial.Ratio(1, 1)}, 1); !ok || w.Sign() != 0 {
		t.Errorf("simple acceptance keeps a band of %v", w)
	}
}

// guarded is the built-in programme judged with a guard band of so many U.
func guarded(t *testing.T, guard, u string) (*trial.Programme, error) {
	t.Helper()
	p := trial.ISO3159()
	p.Decision = trial.Decision{Rule: trial.Guarded, Guard: exact(t, guard)}
	j, err := trial.NewJudge(p, "1")
	if err != nil {
		t.Fatal(err)
	}
	return chained(j, exact(t, u)).Guarded()
}

// M of 5.99 and u_s of 0.1: U(M) is 0.0282843, so 0.01 s/d to the limit are 0.3536 of it.
func TestGuarded(t *testing.T) {
	t.Parallel()
	rates := make([]trial.Rate, 15)
	for d := range rates {
		rates[d] = trial.RateOf(5_990)
	}
	for guard, want := range map[string]trial.Verdict{"0.1": trial.Pass, "0.3": trial.Pass, "0.36": trial.Fail, "1": trial.Fail} {
		p, err := guarded(t, guard, "0.1")
		if err != nil {
			t.Fatal(err)
		}
		j, err := trial.NewJudge(p, "1")
		if err != nil {
			t.Fatal(err)
		}
		var r trial.Result
		if j.Rates(rates, &r); r.Verdict != want {
			t.Errorf("guard %s: %s, want %s", guard, r.Verdict, want)
		}
	}
	p, err := guarded(t, "1", "0.1")
	if err != nil {
		t.Fatal(err)
	}
	// Vmax: 2·√6·0.1 = 0.4898979 rounded up; V: 2·√38/5·0.1 = 0.2465766; R: 2·√2.5·0.1 = 0.3162278.
	for symbol, want := range map[string][2]string{"Vmax": {"0", "4.510102"}, "V": {"0", "1.753423"}, "R": {"-4.683772", "4.683772"}, "M": {"-3.971715", "5.971715"}} {
		c, _ := p.Criterion(symbol)
		l := c.Limits["1"]
		if l.Max.Cmp(exact(t, want[1])) != 0 || l.HasMin && l.Min.Cmp(exact(t, want[0])) != 0 {
			t.Errorf("%s: %s to %s, want %s", symbol, l.Min.Decimal(6), l.Max.Decimal(6), want)
		}
	}
	if trial.ISO3159().Criteria[0].Limits["1"].Max.Cmp(exact(t, "6")) != 0 || len(p.Criteria[0].Limits) != 1 {
		t.Error("the programme itself was changed, or another category kept")
	}
	for guard, want := range map[string]string{"20": "criteria[1].limits.1", "1": ""} {
		_, err := guarded(t, guard, "0.1")
		if fault, ok := err.(*trial.Fault); want != "" && (!ok || fault.Path != want || fault.Code != "crossed") || want == "" && err != nil {
			t.Errorf("guard %s: %v", guard, err)
		}
	}
	j := newJudge(t, "1")
	if p, err := chained(j, exact(t, "0.1")).Guarded(); err != nil || p != j.Programme() {
		t.Errorf("simple acceptance: %v", err)
	}
}

// For a magnitude the uncertainty is that of the figure which decides it.
func TestUncertainty(t *testing.T) {
	t.Parallel()
	j := newJudge(t, "1")
	a := chained(j, exact(t, "1"))
	rates := measure(t, []string{"9", "0", "0", "0", "0", "0", "0", "0", "0", "0", "0", "0", "0", "0", "0"}).rates
	for i, want := range []float64{math.Sqrt(0.02), -1, math.Sqrt(6), 1, 1.349073756323, 1. / 15, math.Sqrt(2.5)} {
		if u, ok := a.Uncertainty(rates, i); want > 0 && (!ok || math.Abs(u-want) > 1e-12) {
			t.Errorf("criterion %d: %v %v, want %v", i, u, ok, want)
		}
	}
	// V with all five variations upwards: (30 + 2·4)/25, neighbours sharing a state with weight 1.
	up := measure(t, []string{"0", "9", "0", "9", "0", "9", "0", "9", "0", "9", "0", "0", "0", "0", "0"}).rates
	if u, ok := a.Uncertainty(up, 1); !ok || math.Abs(u-math.Sqrt(38./25)) > 1e-12 {
		t.Errorf("u(V) %v %v, want %v", u, ok, math.Sqrt(38./25))
	}
}

// With a prior: Bayes' rule by plain summing over true values.
func TestProbabilityOfProduction(t *testing.T) {
	t.Parallel()
	p := conformity.Production{Mean: 1, SD: 0.5}
	const y, u, lo, hi = 1.9, 0.3, -4, 1.7
	gauss := func(x, m, s float64) float64 { return math.Exp(-(x - m) * (x - m) / (2 * s * s)) }
	var inside, all float64
	const step = 0.0001
	for x := -4 + step/2; x < 6; x += step {
		w := gauss(x, p.Mean, p.SD) * gauss(y, x, u)
		all += w
		if x <= hi {
			inside += w
		}
	}
	within(t, "posterior", p.Probability(y, u, lo, hi), inside/all, 1e-7)
	wide := conformity.Production{Mean: 0, SD: 1e6}
	within(t, "a prior that says nothing", wide.Probability(y, u, lo, hi), conformity.Probability(y, u, lo, hi), 1e-9)
}
