package main

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"math"
	"strconv"
	"strings"

	"ratehouse/store/proof"
	"ratehouse/trial"
	"ratehouse/trial/balance"
	"ratehouse/trial/conformity"
	"ratehouse/trial/sheet"
)

func checkNumbers(c *checker) {
	var v struct {
		Read []struct {
			Text         string
			Thousandths  int64
			DecimalComma bool `json:"decimal_comma"`
		}
		Refused []struct {
			Text         string
			DecimalComma bool `json:"decimal_comma"`
		}
	}
	c.readJSON("numbers.json", &v)
	for _, n := range v.Read {
		got, err := sheet.ParseMilli(n.Text, n.DecimalComma)
		c.hold(err == nil && got == n.Thousandths, "%q: %d %v, want %d", n.Text, got, err, n.Thousandths)
	}
	for _, n := range v.Refused {
		got, err := sheet.ParseMilli(n.Text, n.DecimalComma)
		c.hold(err != nil, "%q is read as %d, want it refused", n.Text, got)
	}
}

func checkRounding(c *checker) {
	var v struct {
		Rows []struct {
			Value, Step string
			Even        string `json:"ruleA_half_even"`
		}
	}
	c.readJSON("rounding.json", &v)
	for _, row := range v.Rows {
		e, err := trial.ParseExact(row.Value)
		got := ""
		switch row.Step {
		case "1E1":
			got = e.Times(trial.Ratio(1, 10)).Decimal(0) + "0"
		case "1":
			got = e.Decimal(0)
		default:
			got = e.Decimal(len(row.Step) - len("0."))
		}
		c.hold(err == nil && got == row.Even, "%s to %s: %s %v, want %s", row.Value, row.Step, got, err, row.Even)
	}
}

func checkPositions(c *checker) {
	var v struct {
		Positions map[string]struct {
			Crown   string
			Aliases []string
		}
	}
	c.readJSON("positions.json", &v)
	for _, name := range sortedKeys(v.Positions) {
		w := v.Positions[name]
		for _, alias := range append(w.Aliases, name) {
			got, ok := trial.ParsePosition(alias)
			c.hold(ok && string(got) == name, "%s is %q", alias, got)
		}
		if w.Crown != "" {
			c.same(name, trial.Position(name).Crown(), w.Crown)
		}
	}
}

// criterionVectors are movements with their criteria and what these say in each category.
type criterionVectors struct {
	Limits  map[string]map[string]any
	Vectors map[string]struct {
		Rates    []*string          `json:"rates_s_per_d"`
		Criteria map[string]*string `json:"criteria_exact"`
		Cat1     map[string]*bool   `json:"cat1"`
		Cat2     map[string]*bool   `json:"cat2"`
	}
}

func (c *checker) exact(s string) trial.Exact {
	e, err := trial.ParseExact(s)
	if err != nil {
		c.hold(false, "%q: %v", s, err)
	}
	return e
}

// rates reads decimals, nil or blank where not read.
func (c *checker) rates(decimals []*string) []trial.Rate {
	out := make([]trial.Rate, len(decimals))
	for i, s := range decimals {
		if s == nil || *s == "" {
			continue
		}
		n, err := sheet.ParseMilli(*s, false)
		if err != nil {
			c.hold(false, "%q: %v", *s, err)
		}
		out[i] = trial.RateOf(n)
	}
	return out
}

func (c *checker) judge(category string) *trial.Judge {
	j, err := trial.NewJudge(trial.ISO3159(), category)
	c.hold(err == nil, "category %s: %v", category, err)
	return j
}

func checkCriteria(c *checker) {
	var v criterionVectors
	c.readJSON("iso3159.json", &v)
	one, two := c.judge("1"), c.judge("2")
	c.limits(one, v.Limits["category_1"])
	c.limits(two, v.Limits["category_2"])
	for _, name := range sortedKeys(v.Vectors) {
		w := v.Vectors[name]
		for j, inside := range map[*trial.Judge]map[string]*bool{one: w.Cat1, two: w.Cat2} {
			var r trial.Result
			j.Rates(c.rates(w.Rates), &r)
			c.criteria(name+" category "+j.Category(), j, &r, w.Criteria, inside)
		}
	}
}

// limits compares those of the built-in programme.
func (c *checker) limits(j *trial.Judge, want map[string]any) {
	for i, crit := range j.Programme().Criteria {
		ends, ok := want[crit.Symbol].([]any)
		if !ok || len(ends) != 2 {
			c.hold(false, "category %s: no limits of %s", j.Category(), crit.Symbol)
			continue
		}
		l := j.Limit(i)
		least, most := c.exact(fmt.Sprint(ends[0])), c.exact(fmt.Sprint(ends[1]))
		c.hold(l.Max.Cmp(most) == 0 && l.Min.Cmp(least) == 0, "category %s: limits of %s are %s and %s", j.Category(), crit.Symbol, l.Min, l.Max)
	}
}

// criteria compares one judgement with its vector.
func (c *checker) criteria(name string, j *trial.Judge, r *trial.Result, want map[string]*string, inside map[string]*bool) {
	for i, crit := range j.Programme().Criteria {
		value, w := r.Values[i], want[crit.Symbol]
		c.same(name+" "+crit.Symbol+" known", value.Known, w != nil)
		if w == nil || !value.Known {
			continue
		}
		c.hold(value.Cmp(c.exact(*w)) == 0, "%s: %s = %s, want %s", name, crit.Symbol, value.Exact.String(), *w)
		if in := inside[crit.Symbol]; in != nil {
			c.same(name+" "+crit.Symbol+" inside", value.Outcome == trial.Inside, *in)
		}
	}
}

func checkKinds(c *checker) {
	var v struct {
		Cases []struct {
			Rates []int64 `json:"rates_thousandths"`
			N     string  `json:"deviation_n"`
			Less  string  `json:"deviation_n-1"`
			Range int64   `json:"range_thousandths"`
			Sums  int64   `json:"pair_sums_range_thousandths"`
			Step  int64   `json:"pair_sums_step_thousandths"`
		}
	}
	c.readJSON("kinds.json", &v)
	milli := func(n int64) string { return trial.Ratio(n, 1000).Decimal(6) }
	for i, w := range v.Cases {
		j, err := trial.NewJudge(kindsProgramme(len(w.Rates)), "1")
		if err != nil {
			c.hold(false, "case %d: %v", i, err)
			continue
		}
		rates := make([]trial.Rate, len(w.Rates))
		for d, n := range w.Rates {
			rates[d] = trial.RateOf(n)
		}
		var r trial.Result
		j.Rates(rates, &r)
		for k, want := range []string{w.N, w.Less, milli(w.Range), milli(w.Sums), milli(w.Step)} {
			c.same(fmt.Sprintf("case %d %s", i, j.Programme().Criteria[k].Symbol), r.Values[k].Decimal(6), want)
		}
	}
}

// kindsProgramme has the kinds of formula that the built-in trial has not, over so many days.
func kindsProgramme(days int) *trial.Programme {
	p := trial.ISO3159()
	p.Days, p.Recovery = nil, trial.Recovery{}
	var all []int
	var periods [][]int
	for d := 1; d <= days; d++ {
		p.Days = append(p.Days, trial.Day{N: d, Position: trial.CH, TemperatureC: 20_000})
		if all = append(all, d); d%2 == 0 {
			periods = append(periods, []int{d - 1, d})
		}
	}
	p.Criteria = []trial.Criterion{
		{Symbol: "deviation_n", Formula: trial.Formula{Kind: trial.StandardDeviation, Days: all, Divisor: "n"}},
		{Symbol: "deviation_n1", Formula: trial.Formula{Kind: trial.StandardDeviation, Days: all, Divisor: "n-1"}},
		{Symbol: "range", Formula: trial.Formula{Kind: trial.RangeOf, Days: all}},
		{Symbol: "period_range", Formula: trial.Formula{Kind: trial.PeriodRange, Periods: periods}},
		{Symbol: "greatest_step", Formula: trial.Formula{Kind: trial.GreatestStep, Periods: periods}},
	}
	return p
}

// checkJudge runs the command itself and compares line by line.
func checkJudge(c *checker) {
	for _, name := range []string{"random", "limit", "partial", "states"} {
		rows, ok1 := c.read("judge/" + name + ".csv")
		want, ok2 := c.read("judge/" + name + ".want.csv")
		if !ok1 || !ok2 {
			continue
		}
		var args []string
		if name == "states" {
			args = []string{"-states"}
		}
		var out, said bytes.Buffer
		code := judge(args, bytes.NewReader(rows), &out, &said)
		c.hold(code == exitDone && said.Len() == 0, "%s: exit %d, %.200s", name, code, said.String())
		got, lines := strings.Split(out.String(), "\n"), strings.Split(string(want), "\n")
		c.same(name+": lines", len(got), len(lines))
		for i := range min(len(got), len(lines)) {
			c.hold(got[i] == lines[i], "%s line %d: %s, want %s", name, i+1, got[i], lines[i])
		}
	}
}

func checkCovariance(c *checker) {
	var v struct {
		Table map[string]map[string]string
	}
	c.readJSON("conformity/published.json", &v)
	cov := conformity.Propagate(trial.ISO3159(), conformity.Chain(trial.ISO3159()), trial.ReadingOnly(trial.Ratio(1, 1)), conformity.Movement{})
	weights := func(days ...float64) []float64 { return append(days, make([]float64, 15-len(days))...) }
	mean := weights(.1, .1, .1, .1, .1, .1, .1, .1, .1, .1)
	for name, w := range map[string][]float64{"R_single": weights(0, 0, 0, 1), "M": mean, "V_pair_signed": weights(-1, 1),
		"D":            weights(.5, .5, 0, 0, 0, 0, 0, 0, -.5, -.5),
		"C":            weights(0, 0, 0, 0, 0, 0, 0, 0, 0, 0, -1./30, 0, 1./30),
		"R_resumption": weights(-.5, -.5, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 1)} {
		c.near("u of "+name, math.Sqrt(cov.Of(w, w)), c.exact(v.Table[name]["chained_states"]).Float(), 1e-11)
	}
}

func checkProbability(c *checker) {
	var v struct {
		Cases []struct {
			Name, Category string
			U              *float64
			Rates          []*string
			Each, Linear   map[string]float64
			All            float64
		}
	}
	c.readJSON("conformity/vectors.json", &v)
	for _, w := range v.Cases {
		if w.U == nil { // cases of a whole budget are built from its terms by the tests
			continue
		}
		j := c.judge(w.Category)
		u := c.exact(strconv.FormatFloat(*w.U, 'f', 6, 64))
		a := conformity.NewAssessor(j, conformity.Propagate(j.Programme(), conformity.Chain(j.Programme()), trial.ReadingOnly(u), conformity.Movement{}))
		rates := c.rates(w.Rates)
		values := make([]float64, len(rates))
		for i := range rates {
			values[i] = rates[i].Exact().Float()
		}
		var r trial.Result
		var got conformity.Chances
		j.Rates(rates, &r)
		a.Assess(values, &r, &got)
		for i, crit := range j.Programme().Criteria {
			if p, linear := w.Linear[crit.Symbol]; linear {
				c.near(w.Name+" p"+crit.Symbol, got.Each[i].P, p, 2e-6)
			} else {
				c.near(w.Name+" p"+crit.Symbol, got.Each[i].P, w.Each[crit.Symbol], 0.002)
			}
		}
		c.near(w.Name+" pAll", got.All.P, w.All, 0.002)
	}
}

func checkBudget(c *checker) {
	if text, ok := c.read("conformity/budget.json"); ok {
		b, err := sheet.ParseBudget(text)
		c.hold(err == nil, "%v", err)
		c.same("read_s", b.Read.Decimal(3), "0.100")
	}
}

func checkBalance(c *checker) {
	var v map[string]any
	c.readJSON("balance/physics.json", &v)
	number := func(x any) float64 {
		f, err := strconv.ParseFloat(fmt.Sprint(x), 64)
		c.hold(err == nil, "%v is no number", x)
		return f
	}
	rows, _ := v["rate_exact_vs_linear"].([]any)
	for _, row := range rows {
		m, ok := row.(map[string]any)
		if !ok {
			c.hold(false, "%v", row)
			continue
		}
		rate, ratio := number(m["M_exact"]), number(m["T_over_T0"])
		c.near(fmt.Sprint("period of ", rate), balance.PeriodRatio(rate), ratio, 1e-14)
		c.near(fmt.Sprint("rate of ", ratio), balance.RateOfPeriod(ratio, 1), rate, 1e-11)
	}
	factors, _ := v["factor_2J1_over_phi"].(map[string]any)
	for _, degrees := range sortedKeys(factors) {
		c.near("amplitude factor at "+degrees, balance.AmplitudeFactor(number(degrees)*math.Pi/180), number(factors[degrees]), 1e-12)
	}
}

func checkProof(c *checker) {
	var v struct {
		JCS struct {
			Sample struct{ Input, Output, SHA256 string } `json:"jcs_sample"`
			Sort   struct {
				Input string
				Sum   string `json:"output_sha256"`
			} `json:"jcs_sorting"`
		}
		Merkle struct {
			Leaves []string `json:"leaves_hex"`
			Roots  []string `json:"roots_by_size"`
		} `json:"merkle_rfc6962_9162"`
	}
	c.readJSON("proof/vectors.json", &v)
	for _, w := range [][2]string{{v.JCS.Sample.Input, v.JCS.Sample.SHA256}, {v.JCS.Sort.Input, v.JCS.Sort.Sum}} {
		out, err := proof.CanonicalJSON([]byte(w[0]))
		sum := sha256.Sum256(out)
		c.hold(err == nil && hex.EncodeToString(sum[:]) == w[1], "canonical form hashes to %x %v, want %s", sum, err, w[1])
	}
	var leaves []proof.Hash
	for n, root := range v.Merkle.Roots {
		c.same(fmt.Sprintf("root of %d leaves", n), proof.Root(leaves).String(), root)
		if n < len(v.Merkle.Leaves) {
			data, err := hex.DecodeString(v.Merkle.Leaves[n])
			c.hold(err == nil, "leaf %d: %v", n, err)
			leaves = append(leaves, proof.LeafHash(data))
		}
	}
}

// checkSignatures verifies papers signed by another program, and that one letter changed is noticed.
func checkSignatures(c *checker) {
	text, ok := c.read("proof/published-key.public.pem")
	if !ok {
		return
	}
	key, err := proof.ParsePublicKey(text)
	c.hold(err == nil, "key: %v", err)
	for _, name := range []string{"proof/certificate.jws", "proof/rejection.jws"} {
		file, ok := c.read(name)
		if !ok {
			continue
		}
		_, err := proof.VerifyFile(key, file)
		c.hold(err == nil, "%s: %v", name, err)
		altered := bytes.Clone(file)
		altered[len(altered)/2] ^= 1
		_, err = proof.VerifyFile(key, altered)
		c.hold(err != nil, "%s with one letter changed is genuine", name)
	}
}
