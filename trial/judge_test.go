package trial_test

import (
	"encoding/json"
	"math/rand/v2"
	"os"
	"path/filepath"
	"slices"
	"testing"

	"pgregory.net/rapid"

	"ratehouse/trial"
)

func newJudge(t testing.TB, category string) *trial.Judge {
	t.Helper()
	j, err := trial.NewJudge(trial.ISO3159(), category)
	if err != nil {
		t.Fatal(err)
	}
	return j
}

// vectorFile is testdata/iso3159.json; its _source says where each part comes from.
type vectorFile struct {
	Vectors map[string]struct {
		Rates    []*string          `json:"rates_s_per_d"`
		Criteria map[string]*string `json:"criteria_exact"`
		Cat1     map[string]*bool   `json:"cat1"`
		Cat2     map[string]*bool   `json:"cat2"`
		Pass1    *bool              `json:"cat1_pass"`
		Pass2    *bool              `json:"cat2_pass"`
	} `json:"vectors"`
	Traps []struct {
		Kind  string   `json:"kind"`
		Rates []string `json:"rates"`
	} `json:"binary_float_traps"`
	States struct {
		States []string `json:"states_s"`
		Rates  []string `json:"rates"`
	} `json:"states_to_rates"`
	Elapsed struct {
		From string `json:"state0_s"`
		To   string `json:"state1_s"`
		Rate string `json:"rate_s_per_d"`
	} `json:"elapsed_time_example"`
}

func readJSON(t testing.TB, name string, into any) {
	t.Helper()
	data, err := os.ReadFile(filepath.Join("..", "testdata", name))
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(data, into); err != nil {
		t.Fatal(err)
	}
}

// milli reads a decimal of the test data as thousandths.
func milli(t testing.TB, s string) int64 {
	t.Helper()
	e, err := trial.ParseExact(s)
	if err != nil {
		t.Fatal(err)
	}
	n := e.Times(trial.Ratio(1000, 1)).Rat()
	if !n.IsInt() {
		t.Fatalf("%s is finer than a thousandth", s)
	}
	return n.Num().Int64()
}

func TestPublishedVectors(t *testing.T) {
	t.Parallel()
	var file vectorFile
	readJSON(t, "iso3159.json", &file)
	if len(file.Vectors) != 23 {
		t.Fatalf("%d vectors, want 23", len(file.Vectors))
	}
	for name, v := range file.Vectors {
		rates := make([]trial.Rate, 15)
		for i, s := range v.Rates {
			if s != nil {
				rates[i] = trial.RateOf(milli(t, *s))
			}
		}
		for category, want := range map[string]map[string]*bool{"1": v.Cat1, "2": v.Cat2} {
			j := newJudge(t, category)
			var got trial.Result
			j.Rates(rates, &got)
			for i, c := range j.Programme().Criteria {
				value := got.Values[i]
				exact := v.Criteria[c.Symbol]
				if value.Known != (exact != nil) {
					t.Errorf("%s category %s: %s known %v", name, category, c.Symbol, value.Known)
					continue
				}
				if exact == nil {
					continue
				}
				if e, err := trial.ParseExact(*exact); err != nil || value.Cmp(e) != 0 {
					t.Errorf("%s: %s = %s, want %s", name, c.Symbol, value.Exact.String(), *exact)
				}
				if inside := value.Outcome == trial.Inside; inside != *want[c.Symbol] {
					t.Errorf("%s category %s: %s %s, want inside %v", name, category, c.Symbol, value.Outcome, *want[c.Symbol])
				}
			}
			pass := map[string]*bool{"1": v.Pass1, "2": v.Pass2}[category]
			switch {
			case pass == nil && (got.Verdict == trial.Pass):
				t.Errorf("%s category %s: %s though days are missing", name, category, got.Verdict)
			case pass != nil && *pass != (got.Verdict == trial.Pass):
				t.Errorf("%s category %s: %s, want pass %v", name, category, got.Verdict, *pass)
			}
		}
	}
}

// The sums that go wrong in binary floating point (domain notes, 1.7).
func TestBinaryFloatTraps(t *testing.T) {
	t.Parallel()
	var file vectorFile
	readJSON(t, "iso3159.json", &file)
	j := newJudge(t, "1")
	seen := 0
	for _, trap := range file.Traps {
		if trap.Rates == nil {
			continue
		}
		seen++
		rates := make([]trial.Rate, 15)
		for i, s := range trap.Rates {
			rates[i] = trial.RateOf(milli(t, s))
		}
		var got trial.Result
		j.Rates(rates, &got)
		if got.Values[0].Cmp(trial.Ratio(6, 1)) != 0 || got.Values[0].Outcome != trial.Inside {
			t.Errorf("%v: M = %s, %s; want 6, inside", trap.Rates, got.Values[0].Exact.String(), got.Values[0].Outcome)
		}
	}
	if seen == 0 {
		t.Fatal("no trap in the file")
	}
	for _, pair := range [][2]int64{{8300, 3300}, {8800, 3800}} {
		rates := make([]trial.Rate, 15)
		for i := range rates {
			rates[i] = trial.RateOf(pair[0])
		}
		rates[0] = trial.RateOf(pair[1])
		var got trial.Result
		j.Rates(rates, &got)
		if v := got.Values[2]; v.Cmp(trial.Ratio(5, 1)) != 0 || v.Outcome != trial.Inside {
			t.Errorf("%v: Vmax = %s, %s", pair, v.Exact.String(), v.Outcome)
		}
	}
}

// draw makes a movement whose rates hover around the limits.
func draw(rng *rand.Rand, spread int64) []int64 {
	r := make([]int64, 15)
	base := rng.Int64N(12000) - 5000
	for i := range r {
		if i%2 == 0 {
			base += rng.Int64N(2*spread+1) - spread
		}
		r[i] = base + rng.Int64N(spread+1) - spread/2
	}
	return r
}

// check compares both paths of the engine with the oracle.
func check(t *testing.T, judges map[string]*trial.Judge, r []int64, known uint64) {
	t.Helper()
	rates := make([]trial.Rate, 15)
	for i := range rates {
		if known>>i&1 == 1 {
			rates[i] = trial.RateOf(r[i])
		}
	}
	for category, j := range judges {
		var byMilli, byRates trial.Result
		j.Milli(r, known, &byMilli)
		j.Rates(rates, &byRates)
		sameAsOracle(t, "milli", j, &byMilli, rates)
		same := byMilli.Verdict == byRates.Verdict && slices.Equal(byMilli.Unreachable(), byRates.Unreachable())
		for i, v := range byMilli.Values {
			w := byRates.Values[i]
			same = same && v.Known == w.Known && v.Outcome == w.Outcome && v.Cmp(w.Exact) == 0
		}
		if !same {
			t.Errorf("%v category %s: by thousandths %+v, by rates %+v", r, category, byMilli.Values, byRates.Values)
		}
	}
}

func sameAsOracle(t *testing.T, what string, j *trial.Judge, got *trial.Result, rates []trial.Rate) {
	t.Helper()
	want := askOracle(fromRates(rates), j.Category())
	if got.Verdict.String() != want.verdict {
		t.Errorf("%s %v category %s: %s, want %s", what, rates, j.Category(), got.Verdict, want.verdict)
	}
	for i, s := range symbols {
		v := got.Values[i]
		exact := want.values[s]
		if v.Known != (exact != nil) {
			t.Fatalf("%s: %s known %v", what, s, v.Known)
		}
		if exact == nil {
			continue
		}
		if v.Rat().Cmp(exact) != 0 {
			t.Errorf("%s: %s = %s, want %s", what, s, v.Exact.String(), exact.RatString())
		}
		if v.Decimal(6) != evenDecimal(exact, 6) {
			t.Errorf("%s: %s prints %s, want %s", what, s, v.Decimal(6), evenDecimal(exact, 6))
		}
		if inside := v.Outcome == trial.Inside; inside != want.inside[s] {
			t.Errorf("%s category %s: %s = %s is %s", what, j.Category(), s, exact.RatString(), v.Outcome)
		}
	}
}

func bothJudges(t *testing.T) map[string]*trial.Judge {
	return map[string]*trial.Judge{"1": newJudge(t, "1"), "2": newJudge(t, "2")}
}

const allDays = 1<<15 - 1

func TestRandomMovementsAgainstOracle(t *testing.T) {
	t.Parallel()
	judges := bothJudges(t)
	rng := rand.New(rand.NewPCG(3159, 1))
	for range 20_000 {
		check(t, judges, draw(rng, 1+rng.Int64N(6000)), allDays)
	}
}

func TestPartialMovementsAgainstOracle(t *testing.T) {
	t.Parallel()
	judges := bothJudges(t)
	rng := rand.New(rand.NewPCG(3159, 2))
	for range 3000 {
		check(t, judges, draw(rng, 1+rng.Int64N(9000)), rng.Uint64()&rng.Uint64N(allDays+1))
	}
}

// Movements with one criterion exactly on a limit, a thousandth inside and a thousandth outside.
func TestMovementsOnTheLimit(t *testing.T) {
	t.Parallel()
	judges := bothJudges(t)
	rng := rand.New(rand.NewPCG(3159, 3))
	hits := map[string]int{}
	n := 0
	for n < 940 {
		r := draw(rng, 1+rng.Int64N(1500))
		category := []string{"1", "2"}[rng.IntN(2)]
		symbol := symbols[rng.IntN(len(symbols))]
		side := rng.IntN(2)
		bound := milli(t, oracleLimits[category][symbol][side])
		if bound == 0 || !onLimit(r, symbol, bound, rng) {
			continue
		}
		n++
		check(t, judges, r, allDays)
		for _, step := range []int64{-1, 1} {
			d := rng.IntN(15)
			r[d] += step
			check(t, judges, r, allDays)
			r[d] -= step
		}
		var got trial.Result
		judges[category].Milli(r, allDays, &got)
		i := slices.Index(symbols, symbol)
		if got.Values[i].Cmp(trial.Ratio(bound, 1000)) == 0 && got.Values[i].Outcome == trial.Inside {
			hits[symbol]++
		}
	}
	for _, s := range symbols {
		if hits[s] == 0 {
			t.Errorf("%s never stood exactly on a limit", s)
		}
	}
}

// onLimit bends r so that the criterion equals bound thousandths; false if it did not work out.
func onLimit(r []int64, symbol string, bound int64, rng *rand.Rand) bool {
	sum := func(days ...int) (s int64) {
		for _, d := range days {
			s += r[d]
		}
		return s
	}
	switch symbol {
	case "M":
		r[rng.IntN(10)] += 10*bound - sum(0, 1, 2, 3, 4, 5, 6, 7, 8, 9)
	case "V":
		left := 5 * bound
		for k := 0; k < 4; k++ {
			d := rng.Int64N(left/2 + 1)
			r[2*k+1] = r[2*k] + d
			left -= d
		}
		r[9] = r[8] - left
	case "Vmax":
		for k := range 5 {
			r[2*k+1] = r[2*k]
		}
		k := rng.IntN(5)
		r[2*k+1] = r[2*k] - bound
	case "D":
		r[0] += 2*bound - (sum(0, 1) - sum(8, 9))
	case "P":
		// Nine rates equal, the tenth 10/9 of the bound away: whole thousandths if 9 divides.
		if 10*bound%9 != 0 {
			for i := range 10 { // five high, five low by the bound
				r[i] = r[0] - r[0]%2
			}
			for i := range 5 {
				r[2*i], r[2*i+1] = r[0], r[0]
			}
			base := r[0]
			for i := range 10 {
				r[i] = base + bound*int64(1-2*(i/5))
			}
			return true
		}
		for i := 1; i < 10; i++ {
			r[i] = r[0]
		}
		r[0] += 10 * bound / 9
	case "C":
		r[12] = r[10] + 30*bound
	case "R":
		if sum(0, 1)%2 != 0 {
			r[1]++
		}
		r[14] = bound + sum(0, 1)/2
	}
	return true
}

// Readings almost never lie exactly 24 h apart: exact rationals with denominators up to 17 bits.
func TestOddIntervalsAgainstOracle(t *testing.T) {
	t.Parallel()
	judges := bothJudges(t)
	rng := rand.New(rand.NewPCG(3159, 4))
	for range 4000 {
		r := draw(rng, 1+rng.Int64N(5000))
		rates := make([]trial.Rate, 15)
		for i := range rates {
			if rng.IntN(12) == 0 {
				continue
			}
			secs := 86_400 + rng.Int64N(7201) - 3600
			rates[i] = trial.RateBetween(1000, trial.State(1000+r[i]*secs/86_400), secs)
		}
		for _, j := range judges {
			var got trial.Result
			j.Rates(rates, &got)
			sameAsOracle(t, "odd intervals", j, &got, rates)
		}
	}
}

// On the limit with odd intervals: the enclosure cannot decide, big numbers must.
func TestOddIntervalsOnTheLimit(t *testing.T) {
	t.Parallel()
	j := newJudge(t, "1")
	for secs := int64(82_801); secs < 90_000; secs += 37 {
		// The same rate every day, so that M is that rate: the state difference that gives 6 s/d
		// in secs is 6·secs/86,400 s, whole thousandths only if 14.4 divides secs; else one side
		// of the limit each.
		down := trial.State(6000 * secs / 86_400)
		for add := trial.State(0); add <= 1; add++ {
			rate := trial.RateBetween(0, down+add, secs)
			rates := make([]trial.Rate, 15)
			for i := range rates {
				rates[i] = rate
			}
			var got trial.Result
			j.Rates(rates, &got)
			want := trial.Inside
			if rate.Exact().Cmp(trial.Ratio(6, 1)) > 0 {
				want = trial.Outside
			}
			if got.Values[0].Outcome != want {
				t.Fatalf("%d s: M = %s is %s", secs, rate.Exact(), got.Values[0].Outcome)
			}
		}
	}
	// Exactly 6 s/d through thirds: 2·18,000/… with different intervals on every day.
	rates := make([]trial.Rate, 15)
	for i := range rates {
		secs := int64(86_400 + 144*(i-7))
		rates[i] = trial.RateBetween(0, trial.State(6000*secs/86_400), secs)
	}
	var got trial.Result
	j.Rates(rates, &got)
	if got.Verdict != trial.Pass || got.Values[0].Cmp(trial.Ratio(6, 1)) != 0 || got.Values[1].Sign() != 0 {
		t.Fatalf("%s, M = %s", got.Verdict, got.Values[0].Exact)
	}
}

// sevenths gives a rate of 8/7 thousandths of s/d a count, through an interval of 21 h: almost none
// has a finite binary form, so that fixed point never meets a limit exactly.
func sevenths(count int64) trial.Rate { return trial.RateBetween(0, trial.State(count), 75_600) }

// onLimitBySevenths makes a movement in sevenths with one criterion exactly on a limit; false if
// the limit is no whole number of sevenths there.
func onLimitBySevenths(rng *rand.Rand, symbol string, bound int64) ([]trial.Rate, bool) {
	r := draw(rng, 1+rng.Int64N(900))
	for d := range r {
		r[d] = r[d] * 7 / 8
	}
	if bound*7%8 != 0 || !onLimit(r, symbol, bound*7/8, rng) {
		return nil, false
	}
	rates := make([]trial.Rate, 15)
	for d := range r {
		rates[d] = sevenths(r[d])
	}
	return rates, true
}

func TestSeventhsOnTheLimit(t *testing.T) {
	t.Parallel()
	judges := bothJudges(t)
	rng := rand.New(rand.NewPCG(3159, 11))
	hits := map[string]int{}
	for range 3000 {
		category, symbol, side := []string{"1", "2"}[rng.IntN(2)], symbols[rng.IntN(7)], rng.IntN(2)
		bound := milli(t, oracleLimits[category][symbol][side])
		rates, ok := onLimitBySevenths(rng, symbol, bound)
		if bound == 0 || !ok {
			continue
		}
		var got trial.Result
		judges[category].Rates(rates, &got)
		sameAsOracle(t, symbol+" on the limit in sevenths", judges[category], &got, rates)
		if got.Values[slices.Index(symbols, symbol)].Cmp(trial.Ratio(bound, 1000)) == 0 {
			hits[symbol+[]string{" least", " most"}[side]]++
		}
	}
	for _, s := range []string{"M least", "M most", "D least", "R most", "V most", "Vmax most", "P most", "C least"} {
		if hits[s] < 5 {
			t.Errorf("%s: %d movements on the limit", s, hits[s])
		}
	}
}

// A tie in rounding that no enclosure can see: M is 1.5 exactly, made of sevenths.
func TestTiesOfWideNumbers(t *testing.T) {
	t.Parallel()
	j := newJudge(t, "1")
	for sum, want := range map[int64]string{13_125: "2", 21_875: "2", -4375: "0", -13_125: "-2", 13_126: "2", 13_124: "1"} {
		rates := make([]trial.Rate, 15)
		for d := range int64(10) {
			rates[d] = sevenths(sum/10 + (d%2*2-1)*d*(10-d)) // apart from each other, by amounts that cancel
		}
		rates[0] = sevenths(sum/10 + sum%10)
		var off int64
		for d := range int64(10) {
			off += (d%2*2 - 1) * d * (10 - d)
		}
		rates[9] = sevenths(sum/10 + 9 - off)
		var got trial.Result
		j.Rates(rates, &got)
		m := got.Values[0]
		if exact := trial.Ratio(8*sum, 70_000); m.Cmp(exact) != 0 {
			t.Fatalf("M = %s, want %s", m.Exact, exact)
		}
		if m.Decimal(0) != want {
			t.Errorf("%s prints %s, want %s", m.Exact, m.Decimal(0), want)
		}
	}
}

// Limits that are no decimals: no whole number of thousandths meets them.
func TestFractionalLimits(t *testing.T) {
	t.Parallel()
	third := trial.Ratio(1, 3)
	p := trial.ISO3159()
	for i := range p.Criteria {
		l := p.Criteria[i].Limits["1"]
		if l.Max = l.Max.Add(third); l.HasMin {
			l.Min = l.Min.Sub(third)
		}
		p.Criteria[i].Limits["1"] = l
	}
	j, err := trial.NewJudge(p, "1")
	if err != nil {
		t.Fatal(err)
	}
	rng := rand.New(rand.NewPCG(3159, 12))
	exactly := 0
	for range 8000 {
		rates := make([]trial.Rate, 15)
		base, known, spread := rng.Int64N(40)-20, rng.Uint64()|rng.Uint64(), 6+rng.Int64N(40)
		for d := range rates {
			if known>>d&1 == 1 { // thirds of 1 s/d, through 72 h; or whole s/d
				rates[d] = trial.RateBetween(0, trial.State(1000*(base+rng.Int64N(spread))), 3*86_400)
			}
			if known>>20&1 == 1 && rates[d].Known() {
				rates[d] = trial.RateOf(1000 * (base/3 + rng.Int64N(2)))
			}
		}
		var got trial.Result
		j.Rates(rates, &got)
		want := askOracle(fromRates(rates), "1")
		for i, s := range symbols {
			if !got.Values[i].Known {
				continue
			}
			inside := j.Limit(i).Contains(trial.FromRat(want.values[s]))
			if (got.Values[i].Outcome == trial.Inside) != inside {
				t.Fatalf("%v: %s = %s is %s", rates, s, want.values[s], got.Values[i].Outcome)
			}
			if want.values[s].Cmp(j.Limit(i).Max.Rat()) == 0 {
				exactly++
			}
		}
	}
	if exactly < 10 {
		t.Errorf("only %d times exactly on a limit", exactly)
	}
}

func TestHugeRatesAreExactToo(t *testing.T) {
	t.Parallel()
	judges := bothJudges(t)
	rng := rand.New(rand.NewPCG(3159, 5))
	for range 200 {
		r := draw(rng, 3000)
		r[rng.IntN(15)] = rng.Int64N(1<<50) - 1<<49
		check(t, judges, r, allDays)
		check(t, judges, r, rng.Uint64N(allDays+1))
	}
}

// Properties that hold whatever the numbers are.
func TestProperties(t *testing.T) {
	t.Parallel()
	j := newJudge(t, "1")
	rapid.Check(t, func(t *rapid.T) {
		r := rapid.SliceOfN(rapid.Int64Range(-30_000, 30_000), 15, 15).Draw(t, "rates")
		known := rapid.Uint64Range(0, allDays).Draw(t, "known")
		var got, again trial.Result
		j.Milli(r, known, &got)

		// A missing reading never passes, unless it enters no criterion (days 12 and 14).
		const used = allDays &^ (1<<11 | 1<<13)
		if got.Verdict == trial.Pass && known&used != used {
			t.Fatalf("passes without all readings: %b", known)
		}
		// What was typed into a blank does not matter.
		junk := slices.Clone(r)
		for d := range junk {
			if known>>d&1 == 0 {
				junk[d] = rapid.Int64Range(-600_000, 600_000).Draw(t, "junk")
			}
		}
		j.Milli(junk, known, &again)
		if again.Verdict != got.Verdict || !slices.Equal(again.Failed(), got.Failed()) || !slices.Equal(again.Unreachable(), got.Unreachable()) {
			t.Fatal("a blank day decides something")
		}
		// A constant added to every rate moves M by it, and nothing else.
		shift := rapid.Int64Range(-5000, 5000).Draw(t, "shift")
		for d := range junk {
			junk[d] = r[d] + shift
		}
		j.Milli(junk, known, &again)
		for i, s := range symbols {
			want := got.Values[i].Exact
			if s == "M" {
				want = want.Add(trial.Ratio(shift, 1000))
			}
			if got.Values[i].Known && again.Values[i].Cmp(want) != 0 {
				t.Fatalf("%s moved from %s to %s by a constant", s, got.Values[i].Exact, again.Values[i].Exact)
			}
		}
	})
}

// Readings may be entered in any order: the state after all of them is the same, and a criterion
// once decided keeps its value while others come in.
func TestOrderOfEntryNeverMatters(t *testing.T) {
	t.Parallel()
	j := newJudge(t, "2")
	p := j.Programme()
	rapid.Check(t, func(t *rapid.T) {
		states := rapid.SliceOfN(rapid.Int64Range(-20_000, 20_000), 16, 16).Draw(t, "states")
		late := rapid.SliceOfN(rapid.Int64Range(-3600, 3600), 16, 16).Draw(t, "late")
		order := rapid.Permutation([]int{0, 1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 13, 14, 15}).Draw(t, "order")
		steps := make([]trial.Step, 16)
		for k := range steps {
			steps[k].Day = k
		}
		full := make([]trial.Cell, 16)
		for k := range full {
			full[k] = trial.Cell{HasFound: true, Found: trial.State(states[k]), At: 1_700_000_000 + int64(k)*86_400 + late[k]}
		}
		var want, got trial.Result
		j.Rates(p.Assemble(steps, full), &want)
		cells := make([]trial.Cell, 16)
		for _, k := range order {
			cells[k] = full[k]
			j.Rates(p.Assemble(steps, cells), &got)
			for i := range got.Values {
				if got.Values[i].Known && got.Values[i].Cmp(want.Values[i].Exact) != 0 {
					t.Fatalf("%s = %s before the last reading, %s after", symbols[i], got.Values[i].Exact, want.Values[i].Exact)
				}
			}
		}
		if got.Verdict != want.Verdict {
			t.Fatalf("%s in this order, %s in another", got.Verdict, want.Verdict)
		}
	})
}

// A result is reused for many movements and judges; values copied out of it stay right.
func TestResultsAreReusable(t *testing.T) {
	t.Parallel()
	j := newJudge(t, "1")
	odd := make([]trial.Rate, 15)
	for i := range odd {
		odd[i] = trial.RateBetween(0, trial.State(2000+100*i), 86_401+int64(i))
	}
	var r trial.Result
	j.Rates(odd, &r)
	kept := r.Values[0].Exact
	want := kept.String()
	zeros := make([]int64, 15)
	j.Milli(zeros, allDays, &r)
	if kept.String() != want {
		t.Errorf("a copied value changed from %s to %s", want, kept)
	}
	if r.Verdict != trial.Pass || r.Values[0].Decimal(6) != "0.000000" || r.Values[5].Sign() != 0 {
		t.Errorf("zeros after odd rates: %s, M = %s", r.Verdict, r.Values[0].Exact)
	}
}
