package sheet

import (
	"fmt"
	"strconv"

	"ratehouse/trial"
)

// walker reads a tree into a programme and keeps the first fault it meets.
type walker struct{ fault *trial.Fault }

// node is one value of the tree and its path.
type node struct {
	path string
	v    any
}

func (w *walker) fail(path, code string, args ...string) {
	if w.fault == nil {
		w.fault = &trial.Fault{Path: path, Code: code, Args: args}
	}
}

// fields takes an object apart: required names, then optional ones. Unknown names are faults.
func (w *walker) fields(n node, required, optional []string) func(name string) (node, bool) {
	tree, ok := n.v.(object)
	if !ok {
		w.fail(orTop(n.path), "wrong_type", "an object")
		tree = object{}
	}
	known := map[string]bool{}
	for _, name := range optional {
		known[name] = true
	}
	for _, name := range required {
		known[name] = true
		if _, there := tree[name]; !there && ok {
			w.fail(join(n.path, name), "missing")
		}
	}
	for _, name := range sortedNames(tree) {
		if !known[name] {
			w.fail(join(n.path, name), "unknown_name")
		}
	}
	return func(name string) (node, bool) {
		v, there := tree[name]
		return node{join(n.path, name), v}, there
	}
}

func orTop(path string) string {
	if path == "" {
		return "programme"
	}
	return path
}

func (w *walker) text(n node, there bool) string {
	s, ok := n.v.(string)
	if there && !ok {
		w.fail(n.path, "wrong_type", "a text")
	}
	return s
}

func (w *walker) flag(n node, there bool) bool {
	b, ok := n.v.(bool)
	if there && !ok {
		w.fail(n.path, "wrong_type", "true or false")
	}
	return b
}

func (w *walker) whole(n node, there bool) int {
	s, _ := n.v.(number)
	i, err := strconv.ParseInt(string(s), 10, 32)
	if there && err != nil {
		w.fail(n.path, "wrong_type", "a whole number")
	}
	return int(i)
}

// milli reads a JSON number with at most three decimals.
func (w *walker) milli(n node, there bool) trial.Milli {
	s, ok := n.v.(number)
	if !ok {
		if there {
			w.fail(n.path, "wrong_type", "a number")
		}
		return 0
	}
	return w.thousandths(n.path, string(s))
}

// milliText is milli for a decimal in a string.
func (w *walker) milliText(n node, there bool) trial.Milli {
	s := w.text(n, there)
	if s == "" && !there {
		return 0
	}
	return w.thousandths(n.path, s)
}

func (w *walker) thousandths(path, s string) trial.Milli {
	v, err := ParseMilli(s, false)
	if err != nil {
		w.fail(path, "wrong_type", "a decimal number with at most three decimals")
	}
	return trial.Milli(v)
}

// exact reads a decimal or p/q in a string.
func (w *walker) exact(n node, there bool) trial.Exact {
	s := w.text(n, there)
	if !there {
		return trial.Exact{}
	}
	e, err := trial.ParseExact(s)
	if err != nil {
		w.fail(n.path, "wrong_type", `a text with a decimal number or p/q, such as "-0.6" or "1/3"`)
	}
	return e
}

func (w *walker) list(n node, there bool) []node {
	list, ok := n.v.([]any)
	if there && !ok {
		w.fail(n.path, "wrong_type", "a list")
	}
	nodes := make([]node, len(list))
	for i, v := range list {
		nodes[i] = node{fmt.Sprintf("%s[%d]", n.path, i), v}
	}
	return nodes
}

func (w *walker) days(n node, there bool) []int {
	var days []int
	for _, d := range w.list(n, there) {
		days = append(days, w.whole(d, true))
	}
	return days
}

func (w *walker) dayLists(n node, there bool) [][]int {
	var lists [][]int
	for _, l := range w.list(n, there) {
		lists = append(lists, w.days(l, true))
	}
	return lists
}

func (w *walker) programme(n node) *trial.Programme {
	get := w.fields(n, []string{"code", "version", "title", "source", "measurand", "days", "conditioning", "reading",
		"environment", "recovery", "categories", "criteria", "decision"}, []string{"text_checked"})
	p := &trial.Programme{
		Code: w.text(get("code")), Version: w.text(get("version")), Title: w.text(get("title")),
		Source: w.text(get("source")), Measurand: trial.Measurand(w.text(get("measurand"))),
	}
	if checked, there := get("text_checked"); there {
		get := w.fields(checked, []string{"by", "date", "edition"}, nil)
		p.TextChecked = &trial.TextChecked{By: w.text(get("by")), Date: w.text(get("date")), Edition: w.text(get("edition"))}
	}
	for _, d := range w.list(get("days")) {
		get := w.fields(d, []string{"day", "position", "temperature_c"}, []string{"accessory"})
		p.Days = append(p.Days, trial.Day{N: w.whole(get("day")), Position: w.position(get("position")),
			TemperatureC: w.milli(get("temperature_c")), Accessory: w.flag(get("accessory"))})
	}
	w.rules(p, get)
	for _, c := range w.list(get("categories")) {
		get := w.fields(c, []string{"code", "title"}, nil)
		p.Categories = append(p.Categories, trial.Category{Code: w.text(get("code")), Title: w.text(get("title"))})
	}
	for _, c := range w.list(get("criteria")) {
		p.Criteria = append(p.Criteria, w.criterion(c))
	}
	return p
}

func (w *walker) position(n node, there bool) trial.Position {
	s := w.text(n, there)
	if p, ok := trial.ParsePosition(s); ok || !there {
		return p
	}
	w.fail(n.path, "position", Visible(s))
	return ""
}

// rules reads the parts that are one object each.
func (w *walker) rules(p *trial.Programme, get func(string) (node, bool)) {
	n, _ := get("conditioning")
	c := w.fields(n, []string{"temperature_c", "min_hours", "wind"}, []string{"position"})
	p.Conditioning = trial.Conditioning{TemperatureC: w.milli(c("temperature_c")), MinHours: w.whole(c("min_hours")), Wind: w.flag(c("wind"))}
	if pos, there := c("position"); there {
		p.Conditioning.Position = w.position(pos, true)
	}
	n, _ = get("reading")
	r := w.fields(n, []string{"interval_s", "tolerance_s", "second_look"}, nil)
	p.Reading = trial.Reading{IntervalS: int64(w.whole(r("interval_s"))), ToleranceS: int64(w.whole(r("tolerance_s")))}
	n, _ = r("second_look")
	s := w.fields(n, []string{"agree", "then"}, nil)
	p.Reading.SecondLook = trial.SecondLook{Agree: w.milliText(s("agree")), Then: w.text(s("then"))}
	n, _ = get("environment")
	e := w.fields(n, nil, []string{"temperature_tolerance_c", "outside_minutes", "humidity_percent"})
	p.Environment = trial.Environment{TemperatureToleranceC: w.milli(e("temperature_tolerance_c")), OutsideMinutes: w.whole(e("outside_minutes"))}
	if n, there := e("humidity_percent"); there {
		h := w.fields(n, []string{"min", "max"}, nil)
		p.Environment.HumidityMin, p.Environment.HumidityMax = w.milli(h("min")), w.milli(h("max"))
	}
	n, _ = get("recovery")
	y := w.fields(n, []string{"groups", "max_repeats", "idle_days_allowed", "max_total_days"}, nil)
	p.Recovery = trial.Recovery{Groups: w.dayLists(y("groups")), MaxRepeats: w.whole(y("max_repeats")),
		IdleDaysAllowed: w.whole(y("idle_days_allowed")), MaxTotalDays: w.whole(y("max_total_days"))}
	n, _ = get("decision")
	d := w.fields(n, []string{"rule"}, []string{"guard"})
	p.Decision = trial.Decision{Rule: trial.DecisionRule(w.text(d("rule"))), Guard: w.exact(d("guard"))}
}

func (w *walker) criterion(n node) trial.Criterion {
	get := w.fields(n, []string{"symbol", "title", "unit", "decimals", "formula"}, []string{"limits"})
	c := trial.Criterion{Symbol: w.text(get("symbol")), Title: w.text(get("title")), Unit: w.text(get("unit")), Decimals: w.whole(get("decimals"))}
	if f, there := get("formula"); there {
		c.Formula = w.formula(f)
	}
	limits, there := get("limits")
	if !there {
		return c
	}
	tree, ok := limits.v.(object)
	if !ok {
		w.fail(limits.path, "wrong_type", "an object")
	}
	c.Limits = map[string]trial.Limit{}
	for _, code := range sortedNames(tree) {
		get := w.fields(node{join(limits.path, code), tree[code]}, nil, []string{"min", "max"})
		var l trial.Limit
		if low, there := get("min"); there {
			l.HasMin, l.Min = true, w.exact(low, true)
		}
		if high, there := get("max"); there {
			l.HasMax, l.Max = true, w.exact(high, true)
		}
		c.Limits[code] = l
	}
	return c
}

func (w *walker) formula(n node) trial.Formula {
	tree, _ := n.v.(object)
	kind, _ := tree["kind"].(string)
	names, known := formulaFields[trial.Kind(kind)]
	if !known {
		if _, there := tree["kind"]; !there {
			w.fail(join(n.path, "kind"), "missing")
		}
		w.fail(join(n.path, "kind"), "unknown_kind", Visible(kind))
		return trial.Formula{}
	}
	required, optional := []string{"kind"}, []string{}
	for _, name := range names {
		if name == "constant" {
			optional = append(optional, name)
		} else {
			required = append(required, name)
		}
	}
	get := w.fields(n, required, optional)
	f := trial.Formula{Kind: trial.Kind(kind), Days: w.days(get("days")), Of: w.days(get("of")), From: w.days(get("from")),
		Divisor: w.text(get("divisor")), Periods: w.dayLists(get("periods")), Constant: w.exact(get("constant"))}
	for _, pair := range w.list(get("pairs")) {
		days := w.days(pair, true)
		if len(days) != 2 {
			w.fail(pair.path, "wrong_type", "a pair of days")
			continue
		}
		f.Pairs = append(f.Pairs, [2]int{days[0], days[1]})
	}
	for _, term := range w.list(get("terms")) {
		get := w.fields(term, []string{"weight", "symbol"}, []string{"absolute"})
		f.Terms = append(f.Terms, trial.Term{Weight: w.exact(get("weight")), Symbol: w.text(get("symbol")), Absolute: w.flag(get("absolute"))})
	}
	return f
}
