package trial_test

import (
	"testing"

	"ratehouse/trial"
)

func TestElapsedTimeExample(t *testing.T) {
	t.Parallel()
	var file vectorFile
	readJSON(t, "iso3159.json", &file)
	from, to := trial.State(milli(t, file.Elapsed.From)), trial.State(milli(t, file.Elapsed.To))
	if r := trial.RateBetween(from, to, 23*3600+1800); r.Decimal(12) != file.Elapsed.Rate {
		t.Errorf("%s, want %s", r.Decimal(12), file.Elapsed.Rate)
	}
}

func TestStatesGiveThePublishedRates(t *testing.T) {
	t.Parallel()
	var file vectorFile
	readJSON(t, "iso3159.json", &file)
	p := trial.ISO3159()
	steps, cells := make([]trial.Step, 16), make([]trial.Cell, 16)
	for k, s := range file.States.States {
		steps[k].Day = k
		cells[k] = trial.Cell{HasFound: true, Found: trial.State(milli(t, s)), At: 1_750_000_000 + int64(k)*86_400}
	}
	for d, r := range p.Assemble(steps, cells) {
		if m, ok := r.Thousandths(); !ok || m != milli(t, file.States.Rates[d]) {
			t.Errorf("day %d: %s, want %s", d+1, r.Decimal(3), file.States.Rates[d])
		}
	}
}

func TestRateBetween(t *testing.T) {
	t.Parallel()
	if trial.RateBetween(0, 5, 0).Known() || trial.RateBetween(0, 5, -1).Known() || trial.RateBetween(-1<<62, 1<<62, 86_400).Known() {
		t.Error("a rate without interval")
	}
	if r := trial.RateBetween(1000, 500, 43_200); r.Decimal(3) != "-1.000" {
		t.Error(r.Decimal(3))
	}
	if m, ok := trial.RateBetween(0, 1, 7).Thousandths(); ok {
		t.Error(m)
	}
	var none trial.Rate
	if none.Known() || none.Decimal(1) != "" || trial.RateOf(0).Decimal(1) != "0.0" || !trial.RateOf(0).Known() {
		t.Error("not read and zero are not told apart")
	}
}

// Each rule of Assemble by itself. A cell is written rate, found, left; - is not there.
func TestAssemble(t *testing.T) {
	t.Parallel()
	at := func(k int, c trial.Cell) trial.Cell { c.At = 1_000_000 + int64(k)*86_400; return c }
	found := func(s trial.State) trial.Cell { return trial.Cell{HasFound: true, Found: s} }
	rate := func(r trial.Milli) trial.Cell { return trial.Cell{HasRate: true, Rate: r} }
	set := func(c trial.Cell, left trial.State) trial.Cell { c.HasLeft, c.Left = true, left; return c }
	both := found(3000)
	both.HasRate, both.Rate = true, 9999
	for _, c := range []struct {
		name  string
		days  []int
		cells []trial.Cell
		want  map[int]string
	}{
		{"states", []int{0, 1, 2}, []trial.Cell{at(0, found(1000)), at(1, found(2500)), at(2, found(2000))}, map[int]string{1: "1.500", 2: "-0.500"}},
		{"typed rate", []int{0, 1}, []trial.Cell{{}, rate(1234)}, map[int]string{1: "1.234"}},
		{"states before the typed rate", []int{0, 1}, []trial.Cell{at(0, found(1000)), at(1, both)}, map[int]string{1: "2.000"}},
		{"typed rate where one state is missing", []int{0, 1}, []trial.Cell{{}, at(1, both)}, map[int]string{1: "9.999"}},
		{"a missing state blanks both its days", []int{0, 1, 2, 3}, []trial.Cell{at(0, found(0)), {}, at(2, found(0)), at(3, found(1))}, map[int]string{3: "0.001"}},
		{"as left opens the next day", []int{0, 1, 2}, []trial.Cell{at(0, found(0)), at(1, set(found(1000), -500)), at(2, found(500))}, map[int]string{1: "1.000", 2: "1.000"}},
		{"set without being found", []int{0, 1, 2}, []trial.Cell{at(0, found(0)), at(1, set(trial.Cell{}, 0)), at(2, found(700))}, map[int]string{2: "0.700"}},
		{"no instant, no rate", []int{0, 1}, []trial.Cell{found(0), at(1, found(1000))}, map[int]string{}},
		{"idle days serve no day", []int{0, 1, 0, 2}, []trial.Cell{at(0, found(0)), at(1, found(100)), at(2, found(300)), at(3, found(700))}, map[int]string{1: "0.100", 2: "0.400"}},
		{"a repeat replaces", []int{0, 1, 2, 1, 2}, []trial.Cell{at(0, found(0)), at(1, found(1)), at(2, found(3)), at(3, found(8)), at(4, found(17))}, map[int]string{1: "0.005", 2: "0.009"}},
		{"a repeat not read yet is blank", []int{0, 1, 2, 1, 2}, []trial.Cell{at(0, found(0)), at(1, found(1)), at(2, found(3))}, map[int]string{}},
		{"days outside the programme", []int{0, 16, -1}, []trial.Cell{at(0, found(0)), at(1, found(1)), at(2, found(3))}, map[int]string{}},
	} {
		var steps []trial.Step
		for _, d := range c.days {
			steps = append(steps, trial.Step{Day: d})
		}
		for d, r := range trial.ISO3159().Assemble(steps, c.cells) {
			if got := r.Decimal(3); got != c.want[d+1] {
				t.Errorf("%s: day %d is %q, want %q", c.name, d+1, got, c.want[d+1])
			}
		}
	}
}

func TestMargins(t *testing.T) {
	t.Parallel()
	j := newJudge(t, "1")
	rates := make([]int64, 15)
	for d := range rates {
		rates[d] = 5500
	}
	rates[14] = -100 // R = -5.6
	var r trial.Result
	j.Milli(rates, allDays, &r)
	for i, want := range []string{"0.5", "2.0", "5.0", "6.0", "10.0", "0.6", "-0.6"} {
		if m, ok := r.Margin(i); !ok || m.Decimal(1) != want {
			t.Errorf("%s: margin %s, want %s", symbols[i], m.Decimal(1), want)
		}
	}
	if i, m, ok := r.NearestMargin(); !ok || symbols[i] != "R" || m.Decimal(1) != "-0.6" {
		t.Errorf("nearest %d %s", i, m)
	}
	j.Milli(rates, 0, &r)
	if _, ok := r.Margin(0); ok {
		t.Error("an undecided criterion has a margin")
	}
	if _, _, ok := r.NearestMargin(); ok {
		t.Error("nothing is decided, and yet there is a margin")
	}
}

func TestUnlimitedCriteria(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	delete(p.Criteria[0].Limits, "1")
	j, err := trial.NewJudge(p, "1")
	if err != nil {
		t.Fatal(err)
	}
	rates := make([]int64, 15)
	for d := range rates {
		rates[d] = 50_000
	}
	var r trial.Result
	j.Milli(rates, allDays, &r)
	if r.Verdict != trial.Pass || r.Values[0].Outcome != trial.Unlimited || !r.Values[0].Known {
		t.Errorf("%s, M %s", r.Verdict, r.Values[0].Outcome)
	}
	j.Milli(rates, 0, &r)
	if r.Verdict != trial.Open || r.Values[0].Outcome != trial.Unlimited || r.Values[0].Unreachable {
		t.Errorf("%s, M %s", r.Verdict, r.Values[0].Outcome)
	}
	for i := range p.Criteria {
		delete(p.Criteria[i].Limits, "1")
	}
	if j, err = trial.NewJudge(p, "1"); err != nil {
		t.Fatal(err)
	}
	for _, known := range []uint64{0, allDays} {
		if j.Milli(rates, known, &r); r.Verdict != trial.None || r.Verdict.String() != "-" {
			t.Errorf("no limits at all: %s", r.Verdict)
		}
	}
	exact := make([]trial.Rate, 15)
	for d := range exact {
		exact[d] = trial.RateBetween(0, 5000, 86_401)
	}
	if j.Rates(exact, &r); r.Verdict != trial.None || j.CannotPass(exact) || r.Values[0].Rat().Cmp(exact[0].Exact().Rat()) != 0 {
		t.Errorf("no limits at all: %s, M = %s", r.Verdict, r.Values[0].Exact)
	}
}
