package sheet

import (
	"crypto/sha256"
	"encoding/json"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"ratehouse/trial"
)

// Canonical is the canonical JSON form of a programme: keys sorted, no white space, only what is
// set, numbers in their shortest decimal form. The same programme always gives the same bytes, and
// ParseProgramme reads them back.
func Canonical(p *trial.Programme) []byte {
	var b []byte
	return appendTree(b, programmeTree(p))
}

// Hash is the SHA-256 of the canonical form: the identity of a programme's version.
func Hash(p *trial.Programme) [32]byte { return sha256.Sum256(Canonical(p)) }

// object is one JSON object; keys with an absent value are left out.
type object map[string]any

// number is a JSON number as written.
type number string

// appendTree writes a tree with sorted keys. All keys are ASCII, so that byte order is also the
// order of RFC 8785.
func appendTree(b []byte, v any) []byte {
	switch v := v.(type) {
	case object:
		keys := make([]string, 0, len(v))
		for k := range v {
			keys = append(keys, k)
		}
		slices.Sort(keys)
		b = append(b, '{')
		for i, k := range keys {
			if i > 0 {
				b = append(b, ',')
			}
			b = append(appendText(b, k), ':')
			b = appendTree(b, v[k])
		}
		return append(b, '}')
	case []any:
		b = append(b, '[')
		for i, x := range v {
			if i > 0 {
				b = append(b, ',')
			}
			b = appendTree(b, x)
		}
		return append(b, ']')
	case string:
		return appendText(b, v)
	case number:
		return append(b, v...)
	case int:
		return strconv.AppendInt(b, int64(v), 10)
	case int64:
		return strconv.AppendInt(b, v, 10)
	case bool:
		return strconv.AppendBool(b, v)
	}
	panic(fmt.Sprintf("sheet: no canonical form for %T", v)) // a caller's bug: this package builds all trees
}

// appendText writes a string as RFC 8785 does: only what must be escaped is.
func appendText(b []byte, s string) []byte {
	b = append(b, '"')
	for _, r := range s {
		switch {
		case r == '"' || r == '\\':
			b = append(b, '\\', byte(r))
		case r == '\b':
			b = append(b, '\\', 'b')
		case r == '\t':
			b = append(b, '\\', 't')
		case r == '\n':
			b = append(b, '\\', 'n')
		case r == '\f':
			b = append(b, '\\', 'f')
		case r == '\r':
			b = append(b, '\\', 'r')
		case r < ' ':
			b = fmt.Appendf(b, "\\u%04x", r)
		default:
			b = append(b, string(r)...)
		}
	}
	return append(b, '"')
}

// programmeTree is the file form of a programme.
func programmeTree(p *trial.Programme) object {
	tree := object{
		"code": p.Code, "version": p.Version, "title": p.Title, "source": p.Source,
		"measurand": string(p.Measurand),
		"reading": object{
			"interval_s": p.Reading.IntervalS, "tolerance_s": p.Reading.ToleranceS,
			"second_look": object{"agree": p.Reading.SecondLook.Agree.String(), "then": p.Reading.SecondLook.Then},
		},
		"recovery": object{
			"groups": dayLists(p.Recovery.Groups), "max_repeats": p.Recovery.MaxRepeats,
			"idle_days_allowed": p.Recovery.IdleDaysAllowed, "max_total_days": p.Recovery.MaxTotalDays,
		},
	}
	if t := p.TextChecked; t != nil {
		tree["text_checked"] = object{"by": t.By, "date": t.Date, "edition": t.Edition}
	}
	conditioning := object{"temperature_c": celsius(p.Conditioning.TemperatureC),
		"min_hours": p.Conditioning.MinHours, "wind": p.Conditioning.Wind}
	if p.Conditioning.Position != "" {
		conditioning["position"] = string(p.Conditioning.Position)
	}
	tree["conditioning"] = conditioning
	environment := object{"temperature_tolerance_c": celsius(p.Environment.TemperatureToleranceC),
		"outside_minutes": p.Environment.OutsideMinutes}
	if p.Environment.HumidityMin != 0 || p.Environment.HumidityMax != 0 {
		environment["humidity_percent"] = object{"min": celsius(p.Environment.HumidityMin), "max": celsius(p.Environment.HumidityMax)}
	}
	tree["environment"] = environment
	decision := object{"rule": string(p.Decision.Rule)}
	if p.Decision.Guard.Sign() != 0 {
		decision["guard"] = p.Decision.Guard.String()
	}
	tree["decision"] = decision
	tree["days"], tree["categories"], tree["criteria"] = dayTrees(p), categoryTrees(p), criterionTrees(p)
	return tree
}

// celsius writes thousandths as a JSON number.
func celsius(m trial.Milli) number { return number(m.String()) }

func dayTrees(p *trial.Programme) (list []any) {
	for _, d := range p.Days {
		day := object{"day": d.N, "position": string(d.Position), "temperature_c": celsius(d.TemperatureC)}
		if d.Accessory {
			day["accessory"] = true
		}
		list = append(list, day)
	}
	return list
}

func categoryTrees(p *trial.Programme) (list []any) {
	for _, c := range p.Categories {
		list = append(list, object{"code": c.Code, "title": c.Title})
	}
	return list
}

func criterionTrees(p *trial.Programme) (list []any) {
	for _, c := range p.Criteria {
		tree := object{"symbol": c.Symbol, "title": c.Title, "unit": c.Unit, "decimals": c.Decimals,
			"formula": formulaTree(c.Formula)}
		limits := object{}
		for code, l := range c.Limits {
			sides := object{}
			if l.HasMin {
				sides["min"] = l.Min.String()
			}
			if l.HasMax {
				sides["max"] = l.Max.String()
			}
			if l.Any() {
				limits[code] = sides
			}
		}
		if len(limits) > 0 {
			tree["limits"] = limits
		}
		list = append(list, tree)
	}
	return list
}

// formulaFields are the arguments of each kind, in the order of the contract.
var formulaFields = map[trial.Kind][]string{
	trial.Mean:              {"days"},
	trial.MeanVariation:     {"pairs"},
	trial.GreatestVariation: {"pairs"},
	trial.Difference:        {"of", "from"},
	trial.GreatestDeviation: {"days"},
	trial.PerDegree:         {"of", "from"},
	trial.RangeOf:           {"days"},
	trial.StandardDeviation: {"days", "divisor"},
	trial.PeriodRange:       {"periods"},
	trial.GreatestStep:      {"periods"},
	trial.WeightedSum:       {"constant", "terms"},
}

func formulaTree(f trial.Formula) object {
	tree := object{"kind": string(f.Kind)}
	for _, field := range formulaFields[f.Kind] {
		switch field {
		case "days":
			tree[field] = dayList(f.Days)
		case "of":
			tree[field] = dayList(f.Of)
		case "from":
			tree[field] = dayList(f.From)
		case "divisor":
			tree[field] = f.Divisor
		case "pairs":
			pairs := []any{}
			for _, pair := range f.Pairs {
				pairs = append(pairs, dayList(pair[:]))
			}
			tree[field] = pairs
		case "periods":
			tree[field] = dayLists(f.Periods)
		case "constant":
			if f.Constant.Sign() != 0 {
				tree[field] = f.Constant.String()
			}
		case "terms":
			tree[field] = termTrees(f.Terms)
		}
	}
	return tree
}

func termTrees(terms []trial.Term) []any {
	list := []any{}
	for _, t := range terms {
		term := object{"weight": t.Weight.String(), "symbol": t.Symbol}
		if t.Absolute {
			term["absolute"] = true
		}
		list = append(list, term)
	}
	return list
}

func dayList(days []int) []any {
	list := []any{}
	for _, d := range days {
		list = append(list, d)
	}
	return list
}

func dayLists(lists [][]int) []any {
	out := []any{}
	for _, days := range lists {
		out = append(out, dayList(days))
	}
	return out
}

// ParseProgramme reads a programme file. The error is a *trial.Fault that names the path in the
// file, such as criteria[2].formula.days[0]. Names that are not known, or appear twice, are
// faults; so is everything Programme.Check finds.
func ParseProgramme(data []byte) (*trial.Programme, error) {
	dec := json.NewDecoder(strings.NewReader(string(data)))
	dec.UseNumber()
	tree, err := readTree(dec, "programme", deepest)
	if err != nil {
		return nil, err
	}
	if dec.More() {
		return nil, &trial.Fault{Path: "programme", Code: "not_json", Args: []string{"something follows the object"}}
	}
	w := &walker{}
	p := w.programme(node{"", tree})
	if w.fault != nil {
		return nil, w.fault
	}
	if err := p.Check(); err != nil {
		return nil, err
	}
	return p, nil
}

// deepest is how many brackets may stand within each other; a programme file has six.
const deepest = 20

// readTree reads one JSON value into object, []any, string, number, bool or nil, and refuses
// names that appear twice, which encoding/json would let pass.
func readTree(dec *json.Decoder, path string, levels int) (any, error) {
	if levels == 0 {
		return nil, &trial.Fault{Path: path, Code: "not_json", Args: []string{"too many brackets within brackets"}}
	}
	token, err := dec.Token()
	if err != nil {
		return nil, &trial.Fault{Path: path, Code: "not_json", Args: []string{err.Error()}}
	}
	switch t := token.(type) {
	case json.Number:
		return number(t), nil
	case json.Delim:
		if t == '[' {
			return readList(dec, path, levels-1)
		}
		return readObject(dec, path, levels-1)
	}
	return token, nil
}

func readList(dec *json.Decoder, path string, levels int) (any, error) {
	list := []any{}
	for dec.More() {
		x, err := readTree(dec, fmt.Sprintf("%s[%d]", path, len(list)), levels)
		if err != nil {
			return nil, err
		}
		list = append(list, x)
	}
	return list, endOf(dec, path)
}

func readObject(dec *json.Decoder, path string, levels int) (any, error) {
	tree := object{}
	for dec.More() {
		token, err := dec.Token()
		key, ok := token.(string)
		if err != nil || !ok {
			return nil, &trial.Fault{Path: path, Code: "not_json", Args: []string{fmt.Sprint(err)}}
		}
		at := join(path, key)
		if _, twice := tree[key]; twice {
			return nil, &trial.Fault{Path: at, Code: "repeated", Args: []string{Visible(key)}}
		}
		if tree[key], err = readTree(dec, at, levels); err != nil {
			return nil, err
		}
	}
	return tree, endOf(dec, path)
}

func endOf(dec *json.Decoder, path string) error {
	if _, err := dec.Token(); err != nil {
		return &trial.Fault{Path: path, Code: "not_json", Args: []string{err.Error()}}
	}
	return nil
}

func join(path, key string) string {
	if path == "" || path == "programme" {
		return key
	}
	return path + "." + key
}

func sortedNames(tree object) []string {
	names := make([]string, 0, len(tree))
	for name := range tree {
		names = append(names, name)
	}
	slices.Sort(names)
	return names
}
