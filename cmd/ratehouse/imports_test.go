package main

import (
	"encoding/json"
	"errors"
	"go/ast"
	"go/parser"
	"go/token"
	"io"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

const module = "ratehouse"

// imports says which package of the house may import which others; a name that ends in /... stands
// for the package and all below it. The first rule that fits a package counts, and every package
// needs one.
var imports = []struct {
	from string
	to   []string
}{
	{"cmd/ratehouse", []string{"store/...", "trial/...", "web/...", "migrations", "testdata"}},
	{"tools/...", nil},
	{"migrations", nil},

	{"web/webtest", []string{"web/...", "store/...", "trial/..."}}, // tests only
	{"web/static", nil},
	{"web/words", []string{"store", "trial/..."}},
	{"web/chart", []string{"web/words", "store", "trial/..."}},
	{"web/part", []string{"web/words", "store", "trial/..."}},
	{"web/page", []string{"web/words", "web/static", "store", "trial/..."}},
	{"web", []string{"web/...", "store", "store/proof", "trial/..."}},
	// The rooms, never each other.
	{"web/...", []string{"web/page", "web/part", "web/chart", "web/words", "web/static", "store", "store/proof", "trial/..."}},

	{"store", []string{"store/rows", "store/proof", "trial/..."}},
	{"store/rows", []string{"trial/..."}},
	{"store/cluster", nil},
	{"store/proof", nil},
	{"store/storetest", []string{"store", "store/proof", "store/cluster", "migrations", "trial/..."}}, // tests only

	{"trial/outlook", []string{"trial", "trial/conformity"}},
	{"trial/entry", []string{"trial", "trial/conformity"}},
	{"trial/lot", []string{"trial", "trial/conformity"}},
	{"trial/...", []string{"trial"}},
}

// reserved says who may use a module; every other package does without.
var reserved = map[string][]string{
	"github.com/jackc/pgx":        {"store", "store/rows", "store/cluster", "store/storetest", "migrations", "cmd/ratehouse"},
	"github.com/pressly/goose":    {"migrations"},
	"github.com/xuri/excelize":    {"trial/sheet"},
	"gonum.org/v1/gonum":          {"trial/..."},
	"github.com/go-chi/chi":       {"web/..."},
	"github.com/a-h/templ":        {"web/..."},
	"github.com/danielgtaylor":    {"web/..."},
	"github.com/boombuler":        {"web/..."},
	"github.com/chromedp":         {"web/webtest"},
	"github.com/getkin":           nil, // tests only
	"pgregory.net/rapid":          nil,
	"github.com/google/go-cmp":    nil,
	"github.com/a-h/templ/parser": nil,
}

// testOnly packages are never part of the program.
var testOnly = []string{"store/storetest", "web/webtest", "trial/simulate/rival"}

// drawn movements may be used by the tests of every room of the engine.
var drawn = []string{module + "/trial/simulate", module + "/trial/simulate/rival"}

// pure is what the engine may use of the standard library: no clock, no context, no files, no
// network, no log. Its one room for tables and numbers reads and writes, and parses instants.
var (
	pure = []string{"cmp", "encoding/binary", "errors", "fmt", "iter", "maps", "math", "math/...", "slices", "sort", "strconv", "strings", "sync", "unicode", "unicode/utf8"}
	room = map[string][]string{
		"trial/sheet": {"bufio", "bytes", "crypto/sha256", "embed", "encoding/csv", "encoding/hex", "encoding/json", "hash/...", "io", "time", "unicode/..."},
	}
	// clocks and shared dice, whatever imports them: a result hangs on the arguments alone.
	impure = map[string][]string{
		"time":         {"Now", "Since", "Until", "Sleep", "After", "AfterFunc", "Tick", "NewTimer", "NewTicker", "Local"},
		"math/rand":    {""},
		"math/rand/v2": {"Int", "IntN", "Int32", "Int32N", "Int64", "Int64N", "Uint", "Uint32", "Uint64", "UintN", "Uint32N", "Uint64N", "N", "Float32", "Float64", "NormFloat64", "ExpFloat64", "Perm", "Shuffle"},
	}
)

// listed is what go list tells of a package.
type listed struct {
	ImportPath, Dir                    string
	Standard                           bool
	Imports, TestImports, XTestImports []string
	GoFiles                            []string
}

func goList(t *testing.T, args ...string) []listed {
	t.Helper()
	cmd := exec.Command("go", append([]string{"list", "-json=ImportPath,Dir,Standard,Imports,TestImports,XTestImports,GoFiles"}, args...)...)
	cmd.Dir = filepath.Join("..", "..")
	out, err := cmd.Output()
	if err != nil {
		if said, ok := errors.AsType[*exec.ExitError](err); ok {
			t.Fatalf("go list: %v\n%s", err, said.Stderr)
		}
		t.Fatal(err)
	}
	var all []listed
	for d := json.NewDecoder(strings.NewReader(string(out))); ; {
		var p listed
		if err := d.Decode(&p); errors.Is(err, io.EOF) {
			return all
		} else if err != nil {
			t.Fatal(err)
		}
		all = append(all, p)
	}
}

// fits reports whether a name is one of the patterns.
func fits(name string, patterns []string) bool {
	return slices.ContainsFunc(patterns, func(p string) bool {
		if folder, below := strings.CutSuffix(p, "/..."); below {
			return name == folder || strings.HasPrefix(name, folder+"/")
		}
		return name == p
	})
}

// ours is the name inside the module, if it is of the module.
func ours(path string) (string, bool) { return strings.CutPrefix(path, module+"/") }

func TestImports(t *testing.T) {
	t.Parallel()
	for _, p := range goList(t, "./...") {
		name, ok := ours(p.ImportPath)
		if !ok {
			t.Errorf("%s is outside the house", p.ImportPath)
			continue
		}
		for _, fault := range append(edges(name, p.Imports), modules(name, p.Imports)...) {
			t.Errorf("%s imports %s", name, fault)
		}
		tests := slices.Concat(p.TestImports, p.XTestImports)
		if fits(name, []string{"trial/...", "store/proof"}) {
			others := slices.DeleteFunc(slices.Clone(tests), func(i string) bool { return i == p.ImportPath || slices.Contains(drawn, i) })
			for _, fault := range edges(name, others) {
				t.Errorf("a test of %s imports %s", name, fault)
			}
		}
		// Fixtures are made by the laboratory's verbs, never by SQL.
		for _, path := range tests {
			if strings.HasPrefix(path, "github.com/jackc/pgx") && !fits(name, reserved["github.com/jackc/pgx"]) {
				t.Errorf("a test of %s imports %s", name, path)
			}
		}
	}
}

// edges lists the imports of a package that the rules do not allow.
func edges(name string, paths []string) (faults []string) {
	at := slices.IndexFunc(imports, func(r struct {
		from string
		to   []string
	}) bool {
		return fits(name, []string{r.from})
	})
	if at < 0 {
		return []string{"nothing yet: there is no rule for it"}
	}
	for _, path := range paths {
		to, ok := ours(path)
		if !ok {
			continue
		}
		if !fits(to, imports[at].to) || fits(to, testOnly) && !fits(name, testOnly) {
			faults = append(faults, to)
		}
	}
	return faults
}

// modules lists the imports of modules that are reserved for others; the longest name counts.
func modules(name string, paths []string) (faults []string) {
	for _, path := range paths {
		rule := ""
		for prefix := range reserved {
			if len(prefix) > len(rule) && (path == prefix || strings.HasPrefix(path, prefix+"/")) {
				rule = prefix
			}
		}
		if rule != "" && !fits(name, reserved[rule]) {
			faults = append(faults, path)
		}
	}
	return faults
}

// The engine uses little of the standard library, and nothing of it that a second run could answer
// otherwise.
func TestEngineIsPure(t *testing.T) {
	t.Parallel()
	for _, p := range goList(t, "./trial/...") {
		name, _ := ours(p.ImportPath)
		for _, path := range p.Imports {
			if !strings.Contains(strings.Split(path, "/")[0], ".") && !strings.HasPrefix(path, module+"/") && !fits(path, slices.Concat(pure, room[name])) {
				t.Errorf("%s imports %s", name, path)
			}
		}
		for _, file := range p.GoFiles {
			for _, fault := range uses(t, filepath.Join(p.Dir, file)) {
				t.Errorf("%s/%s uses %s", name, file, fault)
			}
		}
	}
}

// uses lists the impure functions that a file names.
func uses(t *testing.T, file string) (faults []string) {
	t.Helper()
	set := token.NewFileSet()
	parsed, err := parser.ParseFile(set, file, nil, 0)
	if err != nil {
		t.Fatal(err)
	}
	known := map[string]string{} // by the name used in this file
	for _, spec := range parsed.Imports {
		path := strings.Trim(spec.Path.Value, `"`)
		if _, watched := impure[path]; !watched {
			continue
		}
		if slices.Equal(impure[path], []string{""}) {
			faults = append(faults, path)
		}
		short := strings.TrimSuffix(path, "/v2")
		short = short[strings.LastIndexByte(short, '/')+1:]
		if spec.Name != nil {
			short = spec.Name.Name
		}
		known[short] = path
	}
	ast.Inspect(parsed, func(n ast.Node) bool {
		if s, ok := n.(*ast.SelectorExpr); ok {
			if x, ok := s.X.(*ast.Ident); ok && slices.Contains(impure[known[x.Name]], s.Sel.Name) {
				faults = append(faults, x.Name+"."+s.Sel.Name)
			}
		}
		return true
	})
	return faults
}

// What the program links, directly or not, holds nothing that is for tests.
func TestProgramHoldsNoTestCode(t *testing.T) {
	t.Parallel()
	for _, p := range goList(t, "-deps", "./cmd/ratehouse") {
		name, _ := ours(p.ImportPath)
		if fits(name, testOnly) || p.ImportPath == "testing" {
			t.Errorf("the program links %s", p.ImportPath)
		}
		for prefix, users := range reserved {
			if users == nil && strings.HasPrefix(p.ImportPath, prefix) || strings.HasPrefix(p.ImportPath, "github.com/chromedp") {
				t.Errorf("the program links %s", p.ImportPath)
				break
			}
		}
	}
}

// The rules themselves: each kind of fault is seen.
func TestImportRules(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		name, path string
		allowed    bool
	}{
		{"web/floor", module + "/web/desk", false},
		{"web/floor", module + "/web/page", true},
		{"web/floor", module + "/store/rows", false},
		{"web/page", module + "/web/part", false},
		{"web", module + "/web/floor", true},
		{"web", module + "/store/rows", false},
		{"store", module + "/web", false},
		{"store", module + "/store/storetest", false},
		{"cmd/ratehouse", module + "/web/webtest", false},
		{"trial/sheet", module + "/trial/entry", false},
		{"trial/lot", module + "/trial/conformity", true},
		{"trial", module + "/trial/sheet", false},
		{"trial/entry", module + "/trial/simulate/rival", false}, // but in its tests
		{"trial/simulate/rival", module + "/trial/simulate", false},
		{"cmd/ratehouse", module + "/trial/simulate/rival", false},
		{"attic", module + "/trial", false},
		{"web/desk", "github.com/jackc/pgx/v5", false},
		{"store/rows", "github.com/jackc/pgx/v5/pgtype", true},
		{"store/proof", "gonum.org/v1/gonum/stat", false},
		{"trial/lot", "gonum.org/v1/gonum/stat", true},
		{"web/words", "github.com/a-h/templ/parser/v2", false},
		{"store", "github.com/xuri/excelize/v2", false},
	} {
		faults := append(edges(c.name, []string{c.path}), modules(c.name, []string{c.path})...)
		if (len(faults) == 0) != c.allowed {
			t.Errorf("%s -> %s: faults %v", c.name, c.path, faults)
		}
	}
}
