package paper

import (
	"context"
	"fmt"
	"io"
	"regexp"
	"strconv"
	"strings"

	"github.com/a-h/templ"

	"ratehouse/store/proof"
	"ratehouse/trial"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// gauge draws a criterion to scale from what the record says of it; nothing is judged here.
func gauge(k proof.Criterion) part.Gauge {
	c := trial.Criterion{Formula: trial.Formula{Kind: trial.Mean}}
	if unsigned(k) {
		c.Formula.Kind = trial.GreatestDeviation
	}
	var l trial.Limit
	l.Min, l.HasMin = exact(string(k.Min))
	l.Max, l.HasMax = exact(string(k.Max))
	v := trial.Value{}
	v.Exact, v.Known = exact(string(k.Value))
	switch k.Verdict {
	case proof.VerdictPass:
		v.Outcome = trial.Inside
	case proof.VerdictFail:
		v.Outcome = trial.Outside
	}
	return part.GaugeOf(c, l, v)
}

func exact(text string) (trial.Exact, bool) {
	e, err := trial.ParseExact(text)
	return e, err == nil && text != ""
}

// definition is how a criterion is computed, in signs.
type definition struct {
	Symbol string
	Runs   []run
}

// run is a piece of a formula with what stands below the line after it.
type run struct{ Text, Sub string }

var (
	index = regexp.MustCompile(`R(\d+|i\b)`)
	signs = strings.NewReplacer(" - ", " − ", "-", "−", "...", "…")
)

// define sets the definitions in type. A record that names a definition by a code alone shows the code.
func (s *sheet) define() {
	for _, k := range s.Record.Criteria {
		s.Defs = append(s.Defs, definition{k.Symbol, append([]run{{Text: " = "}}, runs(k.Definition)...)})
	}
	first, last := s.Record.Days[0].Day, s.Record.Days[len(s.Record.Days)-1].Day
	s.DefNote = definition{Runs: append(runs(fmt.Sprintf("R%d ... R%d", first, last)), run{Text: ": " + s.say(words.PaperDefined)})}
}

func runs(formula string) (out []run) {
	for formula != "" {
		at := index.FindStringSubmatchIndex(formula)
		if at == nil {
			return append(out, run{Text: signs.Replace(formula)})
		}
		out = append(out, run{signs.Replace(formula[:at[0]] + "R"), formula[at[2]:at[3]]})
		formula = formula[at[1]:]
	}
	return out
}

// formula sets a definition without blanks between a sign and what stands below it; templates put
// some there.
func formula(d definition) templ.Component {
	return templ.ComponentFunc(func(_ context.Context, w io.Writer) error {
		var b strings.Builder
		for _, r := range d.Runs {
			b.WriteString(templ.EscapeString(r.Text))
			if r.Sub != "" {
				b.WriteString("<sub>" + templ.EscapeString(r.Sub) + "</sub>")
			}
		}
		_, err := io.WriteString(w, b.String())
		return err
	})
}

// float places a number on a drawing; no figure is printed from it.
func float(dec string) float64 {
	f, _ := ratOf(dec).Float64()
	return f
}

// ranges lists numbers, runs of three and more with a dash: 1–8, 10.
func ranges(list []int) string {
	var parts []string
	for i := 0; i < len(list); {
		j := i
		for j+1 < len(list) && list[j+1] == list[j]+1 {
			j++
		}
		switch {
		case j-i >= 2:
			parts = append(parts, strconv.Itoa(list[i])+"–"+strconv.Itoa(list[j]))
		case j-i == 1:
			parts = append(parts, strconv.Itoa(list[i]), strconv.Itoa(list[j]))
		default:
			parts = append(parts, strconv.Itoa(list[i]))
		}
		i = j + 1
	}
	return strings.Join(parts, ", ")
}
