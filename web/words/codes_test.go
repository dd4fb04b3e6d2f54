package words

import (
	"go/ast"
	"go/parser"
	"go/token"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"

	"ratehouse/store"
)

// codesIn reads the refusal codes out of the sources of store: the string literals given to the
// functions that make one, with the argument names beside them.
func codesIn(t *testing.T) map[string][]string {
	t.Helper()
	files, err := filepath.Glob("../../store/*.go")
	if err != nil || len(files) == 0 {
		t.Fatal("no sources of store: ", err)
	}
	codes := map[string][]string{}
	for _, f := range files {
		if strings.HasSuffix(f, "_test.go") {
			continue
		}
		tree, err := parser.ParseFile(token.NewFileSet(), f, nil, 0)
		if err != nil {
			t.Skipf("store does not parse at the moment: %v", err)
		}
		ast.Inspect(tree, func(n ast.Node) bool {
			switch n := n.(type) {
			case *ast.CallExpr:
				name, ok := n.Fun.(*ast.Ident)
				if at := map[string]int{"failure": 1, "invalid": 1}; ok && at[name.Name] > 0 && len(n.Args) > 1 {
					note(codes, n.Args[1], n.Args[2:])
				}
				if sel, ok := n.Fun.(*ast.SelectorExpr); ok && sel.Sel.Name == "refuse" && len(n.Args) > 1 {
					note(codes, n.Args[1], n.Args[2:])
				}
			case *ast.CompositeLit:
				if name, ok := n.Type.(*ast.Ident); ok && name.Name == "no" && len(n.Elts) > 0 {
					noteNo(codes, n.Elts)
				}
			}
			return true
		})
	}
	return codes
}

func noteNo(codes map[string][]string, elts []ast.Expr) {
	first := elts[0]
	if kv, ok := first.(*ast.KeyValueExpr); ok {
		first = kv.Value
	}
	var args []ast.Expr
	if len(elts) > 1 {
		if list, ok := elts[1].(*ast.CompositeLit); ok {
			args = list.Elts
		}
	}
	note(codes, first, args)
}

func note(codes map[string][]string, code ast.Expr, args []ast.Expr) {
	lit, ok := code.(*ast.BasicLit)
	if !ok {
		return
	}
	c, err := strconv.Unquote(lit.Value)
	if err != nil {
		return
	}
	names := codes[c]
	for i := 0; i < len(args); i += 2 {
		if l, ok := args[i].(*ast.BasicLit); ok {
			if s, err := strconv.Unquote(l.Value); err == nil {
				names = append(names, s)
			}
		}
	}
	codes[c] = names
}

func TestEveryRefusalHasItsSentence(t *testing.T) {
	t.Parallel()
	codes := codesIn(t)
	if len(codes) < 60 {
		t.Fatalf("only %d codes found in store; this test looks in the wrong place", len(codes))
	}
	for c, given := range codes {
		e := faults[c]
		if e == nil {
			t.Errorf("the code %q of store has no sentence (words/refusals.go)", c)
			continue
		}
		for _, name := range placeholders(e.forms[EN][0]) {
			if !slices.Contains(given, name) {
				t.Errorf("the sentence for %q names {%s}, which store never gives", c, name)
			}
		}
	}
	for _, c := range store.HoldCodes {
		if faults["hold:"+c] == nil {
			t.Errorf("the held release %q has no sentence", c)
		}
	}
}
