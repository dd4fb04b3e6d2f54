package sheet

import (
	"encoding/json"
	"errors"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"github.com/santhosh-tekuri/jsonschema/v6"

	"ratehouse/trial"
)

// schemaOf compiles the schema by a general-purpose validator.
func schemaOf(t *testing.T) *jsonschema.Schema {
	t.Helper()
	doc, err := jsonschema.UnmarshalJSON(strings.NewReader(string(Schema())))
	if err != nil {
		t.Fatal(err)
	}
	c := jsonschema.NewCompiler()
	if err := c.AddResource("programme.schema.json", doc); err != nil {
		t.Fatal(err)
	}
	s, err := c.Compile("programme.schema.json")
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// accepts tells whether the schema takes a file.
func accepts(t *testing.T, s *jsonschema.Schema, file string) bool {
	t.Helper()
	doc, err := jsonschema.UnmarshalJSON(strings.NewReader(file))
	if err != nil {
		return false
	}
	return s.Validate(doc) == nil
}

// house is the example of a laboratory's own programme.
func house(t *testing.T) string {
	t.Helper()
	data, err := os.ReadFile(filepath.Join("..", "..", "testdata", "programmes", "house6.json"))
	if err != nil {
		t.Fatal(err)
	}
	return string(data)
}

func TestShippedProgrammesAreRight(t *testing.T) {
	t.Parallel()
	s := schemaOf(t)
	files := map[string]string{"house6": house(t)}
	for _, code := range BuiltinCodes() {
		file, ok := BuiltinFile(code)
		if !ok {
			t.Fatal(code)
		}
		files[code] = string(file)
		if p, ok := Builtin(code); !ok || p.Code != code {
			t.Errorf("%s is not found under its code", code)
		}
	}
	for name, file := range files {
		if !accepts(t, s, file) {
			t.Errorf("the schema refuses %s", name)
		}
		p, err := ParseProgramme([]byte(file))
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if !accepts(t, s, string(Canonical(p))) {
			t.Errorf("the schema refuses the canonical form of %s", name)
		}
		for _, c := range p.Categories {
			if _, err := trial.NewJudge(p, c.Code); err != nil {
				t.Errorf("%s: %v", name, err)
			}
		}
	}
	if p, _ := Builtin("iso3159"); Hash(p) != Hash(trial.ISO3159()) {
		t.Error("the file of iso3159 is another programme than the one built in")
	}
	if _, ok := BuiltinFile("../programme"); ok {
		t.Error("a path is taken for a code")
	}
}

// Broken files. The form is refused by both, the schema and the check; what hangs together by the
// check alone.
func TestBrokenProgrammes(t *testing.T) {
	t.Parallel()
	s := schemaOf(t)
	good := house(t)
	const both, checkAlone = true, false
	for _, c := range []struct {
		old, new string
		form     bool
		path     string
	}{
		{`"code": "HOUSE6",`, ``, both, "code"},
		{`"HOUSE6"`, `"HOUSE 6"`, both, "code"},
		{`"version": "1"`, `"version": ""`, both, "version"},
		{`"version": "1"`, `"version": 1`, both, "version"},
		{`"version": "1"`, `"version": "1", "author": "x"`, both, "author"},
		{`"version": "1"`, `"version": "1", "text_checked": {"by": "x", "date": "1.12.2026", "edition": "y"}`, both, "text_checked.date"},
		{`"version": "1"`, `"version": "1", "text_checked": {"by": "", "date": "2026-12-01", "edition": "y"}`, both, "text_checked.by"},
		{`"as_performed"`, `"as_found"`, both, "measurand"},
		{`{"day": 6, "position": "12H"`, `{"day": 6, "position": "1H"`, both, "days[5].position"},
		{`"temperature_c": 38`, `"temperature_c": 380`, both, "days[7].temperature_c"},
		{`"temperature_c": 38`, `"temperature_c": 38.0001`, both, "days[7].temperature_c"},
		{`{"day": 2,`, `{"day": 3,`, checkAlone, "days[1].day"},
		{`"min_hours": 12`, `"min_hours": -1`, both, "conditioning.min_hours"},
		{`"wind": true`, `"wind": "yes"`, both, "conditioning.wind"},
		{`"interval_s": 43200`, `"interval_s": 0`, both, "reading.interval_s"},
		{`"tolerance_s": 1800`, `"tolerance_s": 43200`, checkAlone, "reading.tolerance_s"},
		{`"agree": "0.3"`, `"agree": 0.3`, both, "reading.second_look.agree"},
		{`"agree": "0.3"`, `"agree": "-0.3"`, checkAlone, "reading.second_look.agree"},
		{`"median_of_three"`, `"mean"`, both, "reading.second_look.then"},
		{`"outside_minutes": 10`, `"outside_minutes": -10`, both, "environment.outside_minutes"},
		{`"min": 30, "max": 60`, `"min": 60, "max": 30`, checkAlone, "environment.humidity_percent.max"},
		{`[7, 8, 9]`, `[7, 8, 11]`, checkAlone, "recovery.groups[1][2]"},
		{`"max_repeats": 1`, `"max_repeats": 1.5`, both, "recovery.max_repeats"},
		{`"max_total_days": 18`, `"max_total_days": 9`, checkAlone, "recovery.max_total_days"},
		{`{"code": "SMALL"`, `{"code": "LARGE"`, checkAlone, "categories[1].code"},
		{`"symbol": "X"`, `"symbol": "serial"`, both, "criteria[2].symbol"},
		{`"symbol": "X"`, `"symbol": "M"`, checkAlone, "criteria[2].symbol"},
		{`"symbol": "X"`, `"symbol": "pM"`, checkAlone, "criteria[2].symbol"},
		{`"symbol": "X"`, `"symbol": "X1 "`, both, "criteria[2].symbol"},
		{`"kind": "range"`, `"kind": "spread"`, both, "criteria[2].formula.kind"},
		{`"kind": "range", "days"`, `"days"`, both, "criteria[2].formula.kind"},
		{`"kind": "range", "days"`, `"kind": "range", "periods": [[1], [2]], "days"`, both, "criteria[2].formula.periods"},
		{`"kind": "range", "days": [1, 2, 3, 4, 5, 6]`, `"kind": "range", "days": []`, both, "criteria[2].formula.days"},
		{`"kind": "range", "days": [1, 2, 3, 4, 5, 6]`, `"kind": "range", "days": [1, 1]`, both, "criteria[2].formula.days[1]"},
		{`"kind": "range", "days": [1, 2, 3, 4, 5, 6]`, `"kind": "range", "days": [1, 11]`, checkAlone, "criteria[2].formula.days[1]"},
		{`"kind": "range", "days": [1, 2, 3, 4, 5, 6]`, `"kind": "period_range", "periods": [[1, 2]]`, both, "criteria[2].formula.periods"},
		{`"kind": "range", "days": [1, 2, 3, 4, 5, 6]`, `"kind": "greatest_variation", "pairs": [[1, 2, 3]]`, both, "criteria[2].formula.pairs[0]"},
		{`"divisor": "n-1"`, `"divisor": "n-2"`, both, "criteria[1].formula.divisor"},
		{`"days": [1, 2, 3, 4, 5, 6], "divisor"`, `"days": [1], "divisor"`, checkAlone, "criteria[1].formula.days"},
		{`"of": [8], "from": [7]`, `"of": [8], "from": [8]`, checkAlone, "criteria[4].formula"},
		{`"weight": "2"`, `"weight": 2`, both, "criteria[6].formula.terms[1].weight"},
		{`"weight": "2"`, `"weight": "2e0"`, both, "criteria[6].formula.terms[1].weight"},
		{`"weight": "2"`, `"weight": "2/0"`, both, "criteria[6].formula.terms[1].weight"},
		{`"weight": "2", "symbol": "S"`, `"weight": "2", "symbol": "Q"`, checkAlone, "criteria[6].formula.terms[1].symbol"},
		{`{"max": "2.5"}`, `{"max": 2.5}`, both, "criteria[1].limits.LARGE.max"},
		{`{"max": "2.5"}`, `{"most": "2.5"}`, both, "criteria[1].limits.LARGE.most"},
		{`{"max": "2.5"}`, `{"min": "3", "max": "2.5"}`, checkAlone, "criteria[1].limits.LARGE"},
		{`{"LARGE": {"max": "2.5"}`, `{"HUGE": {"max": "2.5"}`, checkAlone, "criteria[1].limits.HUGE"},
		{`"rule": "simple"`, `"rule": "strict"`, both, "decision.rule"},
		{`"rule": "simple"`, `"rule": "guarded"`, checkAlone, "decision.guard"},
		{`"rule": "simple"`, `"rule": "simple", "guard": "1"`, checkAlone, "decision.guard"},
	} {
		file := strings.Replace(good, c.old, c.new, 1)
		if file == good {
			t.Errorf("%s is not in the file", c.old)
			continue
		}
		_, err := ParseProgramme([]byte(file))
		if f := (*trial.Fault)(nil); !errors.As(err, &f) || f.Path != c.path || strings.HasSuffix(f.Error(), ": "+f.Code) {
			t.Errorf("%s: %v, want a fault at %s", c.new, err, c.path)
		}
		if accepts(t, s, file) == c.form {
			t.Errorf("%s: the schema accepts it: %v", c.new, !c.form)
		}
	}
	deep := strings.Repeat("[", 100_000)
	if _, err := ParseProgramme([]byte(deep)); err == nil || !strings.Contains(err.Error(), "brackets within brackets") {
		t.Errorf("of a hundred thousand brackets: %.200v", err)
	}
}

// published is testdata/othertrials.json; its _source says where each part comes from.
type published struct {
	Weekly struct {
		Sums  []json.Number `json:"weekly_sums"`
		A     float64       `json:"a"`
		B     float64       `json:"b"`
		Trial float64       `json:"trial_number"`
	} `json:"greenwich_a_plus_2b"`
	Deck struct {
		Rates   []json.Number `json:"rates"`
		Changes []json.Number `json:"changes"`
		S1      float64       `json:"S1"`
		S2      float64       `json:"S2"`
		Less    float64       `json:"S_sd_of_20_changes_n-1"`
		N       float64       `json:"S_rms_about_mean_n"`
	} `json:"german_rate_test_22_states"`
	Contest struct {
		Typical float64 `json:"example_typical_pass_Vc_0.5"`
	} `json:"contest_2013"`
	Geneva struct {
		Example map[string]any         `json:"example"`
		F       map[string]json.Number `json:"f"`
	} `json:"geneva_1953_1968"`
}

func readPublished(t *testing.T, name string, into any) {
	t.Helper()
	data, err := os.ReadFile(filepath.Join("..", "..", "testdata", name))
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(data, into); err != nil {
		t.Fatal(err)
	}
}

func milli(t *testing.T, s string) int64 {
	t.Helper()
	v, err := ParseMilli(s, false)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// six prints a published float as judge prints its numbers.
func six(x float64) string { return strconv.FormatFloat(x, 'f', 6, 64) }

// judged gives the criteria of a movement read in full, by symbol, with 6 decimals.
func judged(t *testing.T, p *trial.Programme, rates []int64) map[string]string {
	t.Helper()
	j, err := trial.NewJudge(p, p.Categories[0].Code)
	if err != nil {
		t.Fatal(err)
	}
	var r trial.Result
	known := make([]uint64, (len(p.Days)+63)/64)
	for i := range known {
		known[i] = ^uint64(0)
	}
	j.MilliLong(rates, known, &r)
	out := map[string]string{"verdict": r.Verdict.String()}
	for i, c := range p.Criteria {
		out[c.Symbol] = r.Values[i].Decimal(6)
	}
	return out
}

func want(t *testing.T, name string, got map[string]string, want map[string]string) {
	t.Helper()
	for symbol, w := range want {
		if got[symbol] != w {
			t.Errorf("%s: %s is %s, want %s", name, symbol, got[symbol], w)
		}
	}
}

// The check values of other trials, by programme files.
func TestPublishedValuesOfOtherTrials(t *testing.T) {
	t.Parallel()
	var v published
	readPublished(t, "othertrials.json", &v)
	weekly, _ := Builtin("weekly")
	rates := make([]int64, 203)
	for w := range 29 { // eight weeks are published; the others go on like the eighth
		sum := milli(t, string(v.Weekly.Sums[min(w, 7)]))
		for d := range 7 {
			rates[7*w+d] = int64(d-3) * 100
		}
		rates[7*w] += sum
	}
	want(t, "weekly", judged(t, weekly, rates), map[string]string{"a": six(v.Weekly.A), "b": six(v.Weekly.B), "T": six(v.Weekly.Trial), "verdict": "-"})

	contest, _ := Builtin("contest")
	typical := []int64{1200, 1600, 400, -300, 2900, 2500, 3800, 3300, 2100, 2600, 4900, 2400, -1700, 1500, 1900}
	// Across the changes of position the variations are 1.2, 3.2, 1.3 and 1.2, their mean 1.725; with
	// the published assumption of 0.5 the score is 45 · 1.225 higher.
	got := judged(t, contest, typical)
	want(t, "contest", got, map[string]string{"Vmoyc": "1.725000", "M": "2.010000", "C": "-0.220000", "N": "685.983333", "verdict": "pass"})
	contest.Criteria[7].Formula = contest.Criteria[1].Formula // V is 0.5
	want(t, "contest with Vmoyc 0.5", judged(t, contest, typical), map[string]string{"Vmoyc": "0.500000", "N": six(v.Contest.Typical)})
	want(t, "contest of a perfect watch", judged(t, contest, make([]int64, 15)), map[string]string{"N": "1000.000000"})
}

// The deck-watch test: its rates for the greatest change and the range, its changes for the standard
// deviations.
func TestPublishedDeckWatchTest(t *testing.T) {
	t.Parallel()
	var v published
	readPublished(t, "othertrials.json", &v)
	p := trial.ISO3159()
	p.Days, p.Recovery = nil, trial.Recovery{}
	var all []int
	var steps [][2]int
	rates := []int64{}
	for d := range v.Deck.Rates {
		p.Days = append(p.Days, trial.Day{N: d + 1, Position: trial.CH, TemperatureC: 20_000})
		all = append(all, d+1)
		rates = append(rates, milli(t, string(v.Deck.Rates[d])))
		if d > 0 {
			steps = append(steps, [2]int{d, d + 1})
		}
	}
	p.Criteria = []trial.Criterion{
		{Symbol: "S1", Formula: trial.Formula{Kind: trial.GreatestVariation, Pairs: steps}},
		{Symbol: "S2", Formula: trial.Formula{Kind: trial.RangeOf, Days: all}},
	}
	want(t, "rates", judged(t, p, rates), map[string]string{"S1": six(v.Deck.S1), "S2": six(v.Deck.S2)})
	p.Days, all = p.Days[:20], all[:20]
	for d := range 20 {
		rates[d] = milli(t, string(v.Deck.Changes[d]))
	}
	p.Criteria = []trial.Criterion{
		{Symbol: "S", Formula: trial.Formula{Kind: trial.StandardDeviation, Days: all, Divisor: "n-1"}},
		{Symbol: "Sn", Formula: trial.Formula{Kind: trial.StandardDeviation, Days: all, Divisor: "n"}},
	}
	want(t, "changes", judged(t, p, rates[:20]), map[string]string{"S": six(v.Deck.Less), "Sn": six(v.Deck.N)})
}

// The observatory's score of 1953 to 1968, its five figures given as rates of five days.
func TestPublishedObservatoryScore(t *testing.T) {
	t.Parallel()
	var v published
	readPublished(t, "othertrials.json", &v)
	p := trial.ISO3159()
	p.Criteria = nil
	exact := func(s string) trial.Exact {
		e, err := trial.ParseExact(s)
		if err != nil {
			t.Fatal(err)
		}
		return e
	}
	rates := make([]int64, 15)
	for i, name := range []string{"S", "Sp", "e", "F", "r"} {
		p.Criteria = append(p.Criteria, trial.Criterion{Symbol: name, Formula: trial.Formula{Kind: trial.Mean, Days: []int{i + 1}}})
		rates[i] = milli(t, strconv.FormatFloat(v.Geneva.Example[name].(float64), 'f', 3, 64))
	}
	for class, f := range v.Geneva.F {
		sum := trial.Formula{Kind: trial.WeightedSum, Constant: exact("60")}
		for i, w := range []string{"40", "10", "100", "2", "2"} {
			sum.Terms = append(sum.Terms, trial.Term{Weight: exact("-" + w).Times(exact(string(f))), Symbol: p.Criteria[i].Symbol})
		}
		p.Criteria = append(p.Criteria[:5], trial.Criterion{Symbol: "N", Formula: sum})
		points := v.Geneva.Example["points"].(map[string]any)[class].(float64)
		want(t, "class "+class, judged(t, p, rates), map[string]string{"N": six(points)})
	}
}

// testdata/kinds.json: by the statistics module of Python, see tools/kind_vectors.py.
func TestKindsAgainstReferenceLibrary(t *testing.T) {
	t.Parallel()
	var v struct {
		Cases []struct {
			Rates []int64 `json:"rates_thousandths"`
			N     string  `json:"deviation_n"`
			Less  string  `json:"deviation_n-1"`
			Range int64   `json:"range_thousandths"`
			Sums  int64   `json:"pair_sums_range_thousandths"`
			Step  int64   `json:"pair_sums_step_thousandths"`
		} `json:"cases"`
	}
	readPublished(t, "kinds.json", &v)
	if len(v.Cases) < 40 {
		t.Fatal(len(v.Cases), "cases")
	}
	for _, c := range v.Cases {
		p := trial.ISO3159()
		p.Days, p.Recovery = nil, trial.Recovery{}
		var all []int
		var periods [][]int
		for d := 1; d <= len(c.Rates); d++ {
			p.Days = append(p.Days, trial.Day{N: d, Position: trial.CH, TemperatureC: 20_000})
			if all = append(all, d); d%2 == 0 {
				periods = append(periods, []int{d - 1, d})
			}
		}
		p.Criteria = []trial.Criterion{
			{Symbol: "N", Formula: trial.Formula{Kind: trial.StandardDeviation, Days: all, Divisor: "n"}},
			{Symbol: "L", Formula: trial.Formula{Kind: trial.StandardDeviation, Days: all, Divisor: "n-1"}},
			{Symbol: "X", Formula: trial.Formula{Kind: trial.RangeOf, Days: all}},
			{Symbol: "S", Formula: trial.Formula{Kind: trial.PeriodRange, Periods: periods}},
			{Symbol: "B", Formula: trial.Formula{Kind: trial.GreatestStep, Periods: periods}},
		}
		want(t, "kinds", judged(t, p, c.Rates), map[string]string{"N": sixOf(t, c.N), "L": sixOf(t, c.Less),
			"X": trial.Ratio(c.Range, 1000).Decimal(6), "S": trial.Ratio(c.Sums, 1000).Decimal(6), "B": trial.Ratio(c.Step, 1000).Decimal(6)})
	}
}

func sixOf(t *testing.T, s string) string {
	t.Helper()
	e, err := trial.ParseExact(s)
	if err != nil {
		t.Fatal(err)
	}
	return e.Decimal(6)
}
