package conformity_test

import (
	"fmt"
	"math"
	"testing"

	"ratehouse/trial"
	"ratehouse/trial/conformity"
)

// measured is one movement's rates, as the assessor and as the judge take them.
type measured struct {
	rates []float64
	exact []trial.Rate
}

func measure(t testing.TB, decimals []string) measured {
	t.Helper()
	m := measured{make([]float64, 15), make([]trial.Rate, 15)}
	for i, s := range decimals {
		if s == "" {
			continue
		}
		e := exact(t, s)
		m.rates[i] = e.Float()
		m.exact[i] = trial.RateOf(e.Times(trial.Ratio(1000, 1)).Rat().Num().Int64())
	}
	return m
}

func assess(j *trial.Judge, a *conformity.Assessor, m measured) conformity.Chances {
	var r trial.Result
	var out conformity.Chances
	j.Rates(m.exact, &r)
	a.Assess(m.rates, &r, &out)
	return out
}

func chained(j *trial.Judge, u trial.Exact) *conformity.Assessor {
	return conformity.NewAssessor(j, conformity.Propagate(j.Programme(), conformity.Chain(trial.ISO3159()), trial.ReadingOnly(u), conformity.Movement{}))
}

type vectors struct {
	Cases []struct {
		Name, Category string
		U              *float64
		Budget         map[string]float64
		Rates          []string
		Each           map[string]float64
		All            float64
		Linear         map[string]float64
		Box            float64 `json:"box_MDCR"`
	}
}

func decimal(t testing.TB, x float64) trial.Exact { return exact(t, fmt.Sprintf("%.6f", x)) }

// Every figure of testdata/conformity/vectors.json, written by tools/conformity_vectors.py with
// scipy and numpy: linear criteria to 2e-6, the others to what the contract allows, of which the
// reference's own trials may use 0.00025.
func TestAgainstReference(t *testing.T) {
	t.Parallel()
	var file vectors
	readJSON(t, "vectors.json", &file)
	if len(file.Cases) < 50 {
		t.Fatalf("%d cases", len(file.Cases))
	}
	var worst, squares, n float64
	for _, c := range file.Cases {
		j := newJudge(t, c.Category)
		a := assessorOf(t, j, c.U, c.Budget)
		got := assess(j, a, measure(t, c.Rates))
		compare := func(name string, p conformity.Chance, want, most float64) {
			off := math.Abs(p.P - want)
			if !p.Known || !(off <= most) {
				t.Errorf("%s: p%s = %.6f, want %.6f, off by %.1e", c.Name, name, p.P, want, off)
			}
			if most > 1e-3 {
				worst, squares, n = max(worst, off), squares+off*off, n+1
			}
		}
		for i, crit := range j.Programme().Criteria {
			if p, linear := c.Linear[crit.Symbol]; linear {
				compare(crit.Symbol, got.Each[i], p, 2e-6)
			} else {
				compare(crit.Symbol, got.Each[i], c.Each[crit.Symbol], 0.002)
			}
		}
		compare("All", got.All, c.All, 0.002)
	}
	t.Logf("%v figures by integration: greatest difference %.5f, root mean square %.5f", n, worst, math.Sqrt(squares/n))
}

func assessorOf(t *testing.T, j *trial.Judge, u *float64, b map[string]float64) *conformity.Assessor {
	if u != nil {
		return chained(j, decimal(t, *u))
	}
	p := *j.Programme()
	p.Measurand = trial.AtNominal
	full := trial.Budget{Read: decimal(t, b["read"]), Common: decimal(t, b["common"]), ChamberSystematic: decimal(t, b["chamber"]),
		ChamberRandom: decimal(t, b["weather"]), Frequency: decimal(t, b["frequency"]), Handling: decimal(t, b["handling"])}
	cov := conformity.Propagate(&p, conformity.Chain(trial.ISO3159()), full, conformity.Movement{Slope: b["slope"]})
	return conformity.NewAssessor(j, cov)
}

type published struct {
	Joint struct {
		Rates  []string
		Each   map[string]float64 `json:"p_each_mc"`
		Linear map[string]float64 `json:"p_each_analytic_linear"`
		Joint  float64            `json:"p_joint_mc"`
	}
	Folding map[string]any
}

// The joint example of the domain notes, 5.3.
func TestPublishedJoint(t *testing.T) {
	t.Parallel()
	var file published
	readJSON(t, "published.json", &file)
	j := newJudge(t, "1")
	got := assess(j, chained(j, exact(t, "0.1")), measure(t, file.Joint.Rates))
	for i, c := range j.Programme().Criteria {
		if want, linear := file.Joint.Linear[c.Symbol]; linear && math.Abs(got.Each[i].P-want) > 1e-9 {
			t.Errorf("p%s = %.10f, want %.10f", c.Symbol, got.Each[i].P, want)
		}
		if math.Abs(got.Each[i].P-file.Joint.Each[c.Symbol]) > 0.001 {
			t.Errorf("p%s = %.4f, want %.4f", c.Symbol, got.Each[i].P, file.Joint.Each[c.Symbol])
		}
	}
	if math.Abs(got.All.P-file.Joint.Joint) > 0.001 {
		t.Errorf("joint %.4f, want %.4f", got.All.P, file.Joint.Joint)
	}
	if p, ok := got.Doubt(trial.Pass); !ok || math.Abs(p-(1-got.All.P)) > 1e-15 {
		t.Errorf("doubt of a pass %v %v", p, ok)
	}
	if p, ok := got.Doubt(trial.Fail); !ok || p != got.All.P {
		t.Errorf("doubt of a fail %v %v", p, ok)
	}
	if _, ok := got.Doubt(trial.Open); ok {
		t.Error("an open movement has no verdict to doubt")
	}
}

// What is not decided has no probability, and far from all limits there is nothing to integrate.
func TestBlanks(t *testing.T) {
	t.Parallel()
	j := newJudge(t, "1")
	a := chained(j, exact(t, "0.1"))
	rates := []string{"1", "1", "1", "1", "1", "1", "1", "1", "1", "1", "1", "1", "", "1", "1"}
	got := assess(j, a, measure(t, rates))
	for i, c := range j.Programme().Criteria {
		if want := c.Symbol != "C"; got.Each[i].Known != want || want && got.Each[i].P != 1 {
			t.Errorf("p%s: %+v", c.Symbol, got.Each[i])
		}
	}
	if got.All.Known {
		t.Error("pAll though C is undecided")
	}
	rates[12] = "40"
	got = assess(j, a, measure(t, rates))
	if got.Each[5].P != 0 || !got.All.Known || got.All.P != 0 {
		t.Errorf("far outside: %+v", got)
	}
}

// Shared states and independent rates give another probability: the error of M is the end states'.
func TestNotIndependent(t *testing.T) {
	t.Parallel()
	j := newJudge(t, "1")
	m := measure(t, []string{"5.7", "5.7", "5.7", "5.7", "5.7", "5.7", "5.7", "5.7", "5.7", "5.7", "5.7", "5.7", "5.7", "5.7", "5.7"})
	one := trial.ReadingOnly(exact(t, "1"))
	shared := assess(j, chained(j, exact(t, "1")), m).Each[0].P
	apart := assess(j, conformity.NewAssessor(j, conformity.Propagate(j.Programme(), separate(), one, conformity.Movement{})), m).Each[0].P
	if math.Abs(shared-0.98305) > 1e-5 || math.Abs(apart-0.748826) > 1e-5 { // Φ(0.3/0.141421), Φ(0.3/0.447214)
		t.Errorf("pM shared %.5f, apart %.5f", shared, apart)
	}
}

// What reading noise alone makes of true zeros, per u_s (domain notes 5.2, a million trials there).
func TestFoldingBias(t *testing.T) {
	t.Parallel()
	var file published
	readJSON(t, "published.json", &file)
	j := newJudge(t, "1")
	a := chained(j, exact(t, "1"))
	zero := make([]float64, 15)
	near := func(name string, got, want float64) {
		t.Helper()
		if math.Abs(got-want) > 0.012 { // 4 standard errors of 65,536 trials of the widest
			t.Errorf("%s: %.4f, want %.4f", name, got, want)
		}
	}
	of := func(name string) float64 { return file.Folding[name].(float64) }
	v, most, p := a.Moments(zero, 1), a.Moments(zero, 2), a.Moments(zero, 4)
	near("E[V]", v.Mean, math.Sqrt(6)*math.Sqrt(2/math.Pi))
	near("sd[V]", v.SD, of("sd_V/us"))
	near("E[Vmax]", most.Mean, of("E_Vmax/us_true0"))
	near("sd[Vmax]", most.SD, of("sd_Vmax/us"))
	near("E[P]", p.Mean, of("E_P/us_true0"))
	m := a.Moments(zero, 0)
	near("97.5 % of M", m.High, 1.959964*math.Sqrt(0.02))
	near("2.5 % of M", m.Low, -1.959964*math.Sqrt(0.02))
}

// A region no linear forms describe is sampled; where forms do describe it both must agree.
func TestSampledAgrees(t *testing.T) {
	t.Parallel()
	var file vectors
	readJSON(t, "vectors.json", &file)
	for _, c := range file.Cases {
		if c.Name != "VXPCR u=0.3" && c.Name != "MVXDPCR u=1.0" {
			continue
		}
		j := newJudge(t, c.Category)
		a := assessorOf(t, j, c.U, c.Budget)
		m := measure(t, c.Rates)
		if got := a.Sampled(m.rates, conformity.Everything); math.Abs(got-c.All) > 0.008 { // 4 standard errors
			t.Errorf("%s: sampled %.4f, reference %.4f", c.Name, got, c.All)
		}
	}
}

func TestSameInputSameOutput(t *testing.T) {
	t.Parallel()
	var file vectors
	readJSON(t, "vectors.json", &file)
	c := file.Cases[len(file.Cases)-5]
	j := newJudge(t, c.Category)
	m := measure(t, c.Rates)
	used := assessorOf(t, j, c.U, c.Budget)
	for _, other := range file.Cases[:10] { // what came before leaves no trace
		assess(j, used, measure(t, other.Rates))
	}
	fresh := assess(j, assessorOf(t, j, c.U, c.Budget), m)
	again := assess(j, used, m)
	if fresh.All != again.All || fmt.Sprint(fresh.Each) != fmt.Sprint(again.Each) {
		t.Errorf("%v, then %v", fresh, again)
	}
}

// Where every term of the budget cancels a limit met exactly is met for certain: the frequency of the
// reference enters M in full and a difference not at all, though its weights of a third and an eleventh
// leave rounding.
func TestNothingLeft(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	p.Criteria = p.Criteria[3:4]
	p.Criteria[0].Formula = trial.Formula{Kind: trial.Difference, Of: []int{1, 2, 3}, From: []int{4, 5, 6, 7, 8, 9, 10, 11, 12, 13, 14}}
	j, err := trial.NewJudge(p, "1")
	if err != nil {
		t.Fatal(err)
	}
	b := trial.Budget{Frequency: exact(t, "0.1")}
	a := conformity.NewAssessor(j, conformity.Propagate(p, conformity.Chain(p), b, conformity.Movement{}))
	for day3, want := range map[string]float64{"8": 1, "8.003": 0} {
		got := assess(j, a, measure(t, []string{"8", "8", day3, "0", "0", "0", "0", "0", "0", "0", "0", "0", "0", "0", "0"}))
		if got.Each[0].P != want || got.All.P != want {
			t.Errorf("difference of 8, day 3 at %s: %+v, all %+v", day3, got.Each[0], got.All)
		}
	}
}
