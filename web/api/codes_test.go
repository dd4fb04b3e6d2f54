package api_test

import (
	"bytes"
	"go/ast"
	"go/parser"
	"go/token"
	"log/slog"
	"net/http"
	"net/http/httptest"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
	"time"

	"ratehouse/store"
	"ratehouse/trial/sheet"
	"ratehouse/web/api"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

// codesIn are the code literals that the sources given hand to the functions named.
func codesIn(t *testing.T, glob string, at map[string]int) map[string]bool {
	t.Helper()
	files, err := filepath.Glob(glob)
	if err != nil || len(files) == 0 {
		t.Fatalf("no sources %s: %v", glob, err)
	}
	codes := map[string]bool{}
	for _, f := range files {
		if strings.HasSuffix(f, "_test.go") {
			continue
		}
		tree, err := parser.ParseFile(token.NewFileSet(), f, nil, 0)
		if err != nil {
			t.Fatal(err)
		}
		ast.Inspect(tree, func(n ast.Node) bool {
			if lit, ok := n.(*ast.CompositeLit); ok {
				noteNo(codes, lit)
			}
			call, ok := n.(*ast.CallExpr)
			if !ok {
				return true
			}
			name := ""
			switch fun := call.Fun.(type) {
			case *ast.Ident:
				name = fun.Name
			case *ast.SelectorExpr:
				name = fun.Sel.Name
			}
			if i, ok := at[name]; ok && i < len(call.Args) {
				if lit, ok := call.Args[i].(*ast.BasicLit); ok {
					if code, err := strconv.Unquote(lit.Value); err == nil {
						codes[code] = true
					}
				}
			}
			return true
		})
	}
	return codes
}

// noteNo takes the code of a refusal that is written as no{"code", ...}.
func noteNo(codes map[string]bool, lit *ast.CompositeLit) {
	name, ok := lit.Type.(*ast.Ident)
	if !ok || name.Name != "no" || len(lit.Elts) == 0 {
		return
	}
	first := lit.Elts[0]
	if kv, ok := first.(*ast.KeyValueExpr); ok {
		first = kv.Value
	}
	if text, ok := first.(*ast.BasicLit); ok {
		if code, err := strconv.Unquote(text.Value); err == nil {
			codes[code] = true
		}
	}
}

// The lists are closed: every code this package makes, and every one that registering and looking can
// meet in the laboratory, is in them; and no list holds a code that nobody makes.
func TestCodesAreClosed(t *testing.T) {
	t.Parallel()
	made := codesIn(t, "*.go", map[string]int{"problem": 1, "wrong": 1, "sane": 1, "count": 1})
	both := slices.Concat(api.Codes(), api.RefusalCodes())
	for code := range made {
		if !slices.Contains(both, code) {
			t.Errorf("the code %s is made and stands in no list", code)
		}
	}
	lab := codesIn(t, "../../store/*.go", map[string]int{"failure": 1, "invalid": 1})
	registering := codesIn(t, "../../store/batch.go", map[string]int{"failure": 1, "invalid": 1})
	if len(registering) < 15 {
		t.Fatalf("only %d codes found in registering; this test looks in the wrong place", len(registering))
	}
	for code := range registering {
		if !slices.Contains(api.Codes(), code) {
			t.Errorf("registering can answer %s, which is not in the list", code)
		}
	}
	// Those that are made by constraints, by Fault literals or by the schema of parameters.
	elsewhere := []string{"batch_code_taken", "serial_repeated", "place_taken", "movement_placed_twice", "depositor_code_taken", "calibre_code_taken",
		"holder_code_taken", "reading_changed_meanwhile", "unknown_field", "parameter"}
	for _, code := range api.Codes() {
		if !made[code] && !lab[code] && !slices.Contains(elsewhere, code) {
			t.Errorf("the list holds %s, which nobody makes", code)
		}
	}
	refusing := codesIn(t, "../../store/*.go", map[string]int{"refuse": 1})
	for code := range sheet.Codes() {
		refusing[string(code)] = true
	}
	for _, code := range api.RefusalCodes() {
		if !made[code] && !refusing[code] && !slices.Contains(elsewhere, code) && code != "number_form" {
			t.Errorf("the list of refusals holds %s, which nobody makes", code)
		}
	}
	for code := range codesIn(t, "../../store/decide.go", map[string]int{"refuse": 1}) {
		if !slices.Contains(api.RefusalCodes(), code) {
			t.Errorf("saving can refuse with %s, which is not in the list", code)
		}
	}
}

// Every code has its sentence in every language.
func TestEveryCodeHasItsSentence(t *testing.T) {
	t.Parallel()
	for _, lang := range words.Langs {
		p := words.New(lang, time.UTC)
		for _, code := range slices.Concat(api.Codes(), api.RefusalCodes()) {
			if s := p.Fault(code, nil); s == "" || strings.Contains(s, "("+code+")") {
				t.Errorf("%s: the code %s has no sentence: %q", lang, code, s)
			}
		}
	}
}

// Whatever a number's reader refuses, the list of refusals names it.
func FuzzNumbersAreRefusedByKnownCodes(f *testing.F) {
	for _, s := range []string{"", "1e5", "1,5", "1,234", "- 5", "\u20135", "=1", "0.0005", "1 000", "9999999999999999999999", "n/a", "\xff", "5\x00"} {
		f.Add(s)
	}
	codes := api.RefusalCodes()
	f.Fuzz(func(t *testing.T, s string) {
		_, err := sheet.ParseMilli(s, false)
		if r, ok := err.(*sheet.Refusal); ok && !slices.Contains(codes, string(r.Code)) {
			t.Errorf("%q is refused as %s, which is not in the list", s, r.Code)
		}
	})
}

// A handler that panics answers with a problem, and the log says what happened.
func TestPanicIsAProblem(t *testing.T) {
	t.Parallel()
	var log bytes.Buffer
	a := api.New(api.Config{Logger: slog.New(slog.NewTextHandler(&log, nil))}) // no laboratory: every handler panics
	for _, one := range a.Routes() {
		if one.Pattern != "/api/v1/batches" || one.Method != http.MethodGet {
			continue
		}
		r := httptest.NewRequest("GET", one.Pattern, nil)
		c := &page.Context{Printer: words.New(words.EN, time.UTC), ID: "ABC-123", SignedIn: true, Actor: store.Program}
		w := httptest.NewRecorder()
		one.Handle.ServeHTTP(w, r.WithContext(page.With(r.Context(), c)))
		p := answer{w.Code, w.Header(), w.Body.Bytes()}.want(t, 500, "fault").problem(t)
		if p.Request != "ABC-123" || !strings.Contains(log.String(), "ABC-123") || !strings.Contains(log.String(), "nil pointer") {
			t.Errorf("problem %+v, log %.300s", p, log.String())
		}
		return
	}
	t.Error("the route is gone")
}

// A session is no token: by itself, whatever the server around it lets through, the API takes none for
// anything that changes something.
func TestSessionChangesNothing(t *testing.T) {
	t.Parallel()
	for _, one := range api.New(api.Config{}).Routes() {
		if one.Method == http.MethodGet {
			continue
		}
		r := httptest.NewRequest(one.Method, "/", strings.NewReader("{}"))
		c := &page.Context{Printer: words.New(words.EN, time.UTC), SignedIn: true, Actor: store.Program, ID: "ABC-123"}
		w := httptest.NewRecorder()
		one.Handle.ServeHTTP(w, r.WithContext(page.With(r.Context(), c)))
		answer{w.Code, w.Header(), w.Body.Bytes()}.want(t, 401, "token_missing")
	}
}
