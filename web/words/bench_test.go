package words

import (
	"go/ast"
	"go/parser"
	"go/token"
	"strconv"
	"strings"
	"testing"

	"ratehouse/trial"
	"ratehouse/trial/balance"
)

// findingCodes reads the codes out of the source of trial/balance, so that a new one is missed here.
func findingCodes(t *testing.T) (codes []balance.Code) {
	t.Helper()
	tree, err := parser.ParseFile(token.NewFileSet(), "../../trial/balance/note.go", nil, 0)
	if err != nil {
		t.Fatal(err)
	}
	ast.Inspect(tree, func(n ast.Node) bool {
		if spec, ok := n.(*ast.ValueSpec); ok {
			if name, ok := spec.Type.(*ast.Ident); ok && name.Name == "Code" {
				code, err := strconv.Unquote(spec.Values[0].(*ast.BasicLit).Value)
				if err != nil {
					t.Fatal(err)
				}
				codes = append(codes, balance.Code(code))
			}
		}
		return true
	})
	return codes
}

func TestEveryFindingHasASentence(t *testing.T) {
	t.Parallel()
	codes := findingCodes(t)
	if len(codes) < 30 {
		t.Fatalf("only %d codes found; this test looks in the wrong place", len(codes))
	}
	for _, lang := range Langs {
		p, seen := New(lang, nil), map[string]balance.Code{}
		for _, code := range codes {
			got := p.BenchFinding(balance.Finding{Code: code, Symbols: []string{"M"}, Days: []int{3, 4}, Position: trial.CH, Organ: "index",
				Values: []trial.Milli{1000, 2000, 3000, 4000}})
			if got == string(code) || strings.ContainsAny(got, "{}") || got == "" {
				t.Errorf("%s: %s says %q", lang, code, got)
			}
			if other, twice := seen[got]; twice {
				t.Errorf("%s: %s and %s both say %q", lang, code, other, got)
			}
			seen[got] = code
		}
	}
}

// The numbers of a finding stand in its sentence, intervals drawn inwards, units beside them.
func TestFindingsAsSaid(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		lang Lang
		f    balance.Finding
		want string
	}{
		{EN, balance.Finding{Code: balance.Regulate, Values: []trial.Milli{3460, 5040, 4250}},
			"Regulating alone is enough: shift the rate by +3.5 … +5.0 s/d, best by +4.25 s/d. Plus gains."},
		{EN, balance.Finding{Code: balance.Units, Organ: "index", Values: []trial.Milli{1384, 2016}}, "At the index: +1.4 … +2.0 divisions."},
		{DE, balance.Finding{Code: balance.Units, Organ: "screws", Values: []trial.Milli{-2016, -1384}}, "An den Regulierschrauben: −2,0 … −1,4 Umdrehungen."},
		{FR, balance.Finding{Code: balance.FarPosition, Days: []int{7}, Position: trial.FH, Values: []trial.Milli{-11_300}},
			"Jour 7, fond haut, est le plus loin de la moyenne : −11,30 s/d."},
		{EN, balance.Finding{Code: balance.OneVariation, Days: []int{3, 4}, Position: "3H", Values: []trial.Milli{6000, 500}},
			"Days 3, 4, 3 up: the rate changed by 6.00 s/d, where the other pairs change by 0.50 s/d (median)."},
		{EN, balance.Finding{Code: balance.Thermal, Symbols: []string{"C"}, Values: []trial.Milli{712, 16_481}},
			"C: +0.712 s/d per °C, which is an error of compensation of +16.5 10⁻⁶/°C."},
		{EN, balance.Finding{Code: balance.LookHeavy, Values: []trial.Milli{211_400}},
			"Poise of the balance: if poise alone makes the pattern, its heavy side is at 211° from 12, seen from the dial."},
	} {
		if got := strings.Join(strings.Fields(New(c.lang, nil).BenchFinding(c.f)), " "); got != c.want {
			t.Errorf("%q, want %q", got, c.want)
		}
	}
}
