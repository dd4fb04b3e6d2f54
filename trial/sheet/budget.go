package sheet

import (
	"encoding/json"
	"strings"

	"ratehouse/trial"
)

// budgetFields are the names of a budget file and where each goes. All are decimals or p/q in
// quotation marks, none below zero, and may be left out: a term left out is neglected.
func budgetFields(b *trial.Budget) map[string]*trial.Exact {
	return map[string]*trial.Exact{
		"read_s": &b.Read, "resolution_s": &b.Resolution, "common_s": &b.Common, "eccentricity_s": &b.Eccentricity,
		"chamber_systematic_c": &b.ChamberSystematic, "chamber_random_c": &b.ChamberRandom,
		"frequency_s_per_d": &b.Frequency, "handling_s_per_d": &b.Handling, "tilt_degrees": &b.Tilt,
	}
}

// ParseBudget reads an uncertainty budget: a JSON object of "title", the terms of budgetFields and
// "methods", an object of read_s by method. The error is a *trial.Fault that names the path, such as
// budget.methods.camera. Unknown and repeated names are faults; so is a budget in which every term
// is zero, which would call every verdict certain.
func ParseBudget(data []byte) (trial.Budget, error) {
	dec := json.NewDecoder(strings.NewReader(string(data)))
	dec.UseNumber()
	v, err := readTree(dec, "budget", 3)
	if err != nil {
		return trial.Budget{}, err
	}
	tree, ok := v.(object)
	switch {
	case !ok:
		return trial.Budget{}, &trial.Fault{Path: "budget", Code: "wrong_type", Args: []string{"an object"}}
	case dec.More():
		return trial.Budget{}, &trial.Fault{Path: "budget", Code: "not_json", Args: []string{"something follows the object"}}
	}
	w := &walker{}
	b := w.budget(tree)
	if w.fault != nil {
		return trial.Budget{}, w.fault
	}
	return b, nil
}

func (w *walker) budget(tree object) (b trial.Budget) {
	fields, any := budgetFields(&b), false
	for _, name := range sortedNames(tree) {
		n := node{"budget." + name, tree[name]}
		switch into, term := fields[name]; {
		case term:
			*into = w.uncertainty(n)
			any = any || into.Sign() > 0
		case name == "title":
			b.Title = w.text(n, true)
		case name == "methods":
			b.Methods = w.methods(n)
			any = any || len(b.Methods) > 0
		default:
			w.fail("budget", "unknown_value", Visible(name))
		}
	}
	if !any {
		w.fail("budget", "empty")
	}
	return b
}

func (w *walker) methods(n node) map[string]trial.Exact {
	tree, ok := n.v.(object)
	if !ok {
		w.fail(n.path, "wrong_type", "an object")
	}
	out := map[string]trial.Exact{}
	for _, name := range sortedNames(tree) {
		out[name] = w.uncertainty(node{n.path + "." + name, tree[name]})
	}
	return out
}

// uncertainty reads a number not below zero.
func (w *walker) uncertainty(n node) trial.Exact {
	s, ok := n.v.(string)
	e, err := trial.ParseExact(s)
	switch most := trial.Ratio(1_000_000, 1); {
	case !ok || err != nil:
		w.fail(n.path, "wrong_type", "a decimal or p/q in quotation marks")
	case e.Sign() < 0 || e.Cmp(most) > 0:
		w.fail(n.path, "out_of_range", s, "0", most.String())
	}
	return e
}
