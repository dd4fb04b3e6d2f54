package main

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// A module with a test of each kind is run for real.
func TestRun(t *testing.T) {
	t.Parallel()
	dir := t.TempDir()
	for name, text := range map[string]string{
		"go.mod":            "module m\n\ngo 1.26\n",
		"good/a_test.go":    "package a\nimport \"testing\"\nfunc TestOne(t *testing.T) {}\nfunc TestTwo(t *testing.T) { t.Skip(\"no browser here\") }\nfunc TestThree(t *testing.T) { t.Skip(\"no browser here\") }\n",
		"bad/a_test.go":     "package a\nimport \"testing\"\nfunc TestOne(t *testing.T) { t.Error(\"seven is not eight\") }\n",
		"panics/a_test.go":  "package a\nimport \"testing\"\nfunc TestOne(t *testing.T) { panic(\"out of luck\") }\n",
		"unbuilt/a_test.go": "package a\nimport \"testing\"\nfunc TestOne(t *testing.T) { undefined() }\n",
		"without/a.go":      "package without\n",
		"exits/a_test.go":   "package a\nimport (\"os\"; \"testing\")\nfunc TestMain(m *testing.M) { os.Exit(3) }\n",
	} {
		path := filepath.Join(dir, name)
		if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	for _, c := range []struct {
		pkgs  string
		code  int
		words []string
	}{
		{"./good ./without", 0, []string{"ok", "no test files", "SKIPPED 2: no browser here\n", "m/good TestTwo\n", "\n1 passed, 0 failed, 2 skipped\n"}},
		{"./bad ./panics ./exits", 1, []string{"seven is not eight", "out of luck", "exit status 3", "0 passed, 2 failed, 0 skipped\n"}},
		{"./unbuilt", 1, []string{"undefined: undefined", "0 passed, 0 failed, 0 skipped\n"}},
		{"./exits", 1, []string{"0 passed, 0 failed, 0 skipped\n"}},
	} {
		var out strings.Builder
		code, err := run(dir, strings.Fields(c.pkgs), &out)
		if err != nil || code != c.code {
			t.Errorf("%s: code %d, want %d, %v\n%s", c.pkgs, code, c.code, err, &out)
		}
		for _, w := range c.words {
			if !strings.Contains("\n"+out.String(), w) {
				t.Errorf("%s does not say %q:\n%s", c.pkgs, w, &out)
			}
		}
	}
}
