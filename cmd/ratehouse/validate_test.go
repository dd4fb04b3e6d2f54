package main

import (
	"crypto/sha256"
	"encoding/json"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"ratehouse/store"
	"ratehouse/store/proof"
	"ratehouse/store/storetest"
	"ratehouse/testdata"
)

// validated runs validate and reads its record.
func validated(t *testing.T, environment []string, args ...string) (v validation, stderr string, code int) {
	t.Helper()
	var out, said strings.Builder
	getenv := func(name string) string {
		for _, e := range environment {
			if value, ok := strings.CutPrefix(e, name+"="); ok {
				return value
			}
		}
		return ""
	}
	code = run(t.Context(), append([]string{"validate"}, args...), getenv, strings.NewReader(""), &out, &said)
	var file struct {
		Record json.RawMessage
		SHA256 string
	}
	if err := json.Unmarshal([]byte(out.String()), &file); err != nil {
		t.Fatalf("%v: %s %s", err, out.String(), said.String())
	}
	canonical, err := proof.CanonicalJSON(file.Record)
	if err != nil {
		t.Fatal(err)
	}
	if sum := fmt.Sprintf("%x", sha256.Sum256(canonical)); sum != file.SHA256 {
		t.Errorf("the record hashes to %s, it says %s", sum, file.SHA256)
	}
	if err := json.Unmarshal(file.Record, &v); err != nil {
		t.Fatal(err)
	}
	return v, said.String(), code
}

// All vectors carried are run, none twice under one name, and all hold.
func TestValidate(t *testing.T) {
	t.Parallel()
	v, stderr, code := validated(t, nil, "-no-database")
	if code != exitDone || stderr != "" || !v.Right || v.Failed != 0 || v.Passed < 2000 || v.Database != "none" {
		t.Errorf("exit %d, passed %d, failed %d, database %q: %s", code, v.Passed, v.Failed, v.Database, stderr)
	}
	if v.At.IsZero() || v.Build == "" || len(v.Programmes) != 3 {
		t.Errorf("at %v, build %q, programmes %v", v.At, v.Build, v.Programmes)
	}
	err := fs.WalkDir(testdata.Files, ".", func(name string, d fs.DirEntry, err error) error {
		if err == nil && !d.IsDir() && v.Files[name] == "" {
			t.Errorf("%s is carried and not run", name)
		}
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	t.Logf("%d comparisons of %d files", v.Passed, len(v.Files))
}

// copyVectors writes the vectors into a folder, one of them changed.
func copyVectors(t *testing.T, file, old, changed string) (dir string) {
	t.Helper()
	dir = t.TempDir()
	if err := os.CopyFS(dir, testdata.Files); err != nil {
		t.Fatal(err)
	}
	path := filepath.Join(dir, filepath.FromSlash(file))
	text, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if strings.Count(string(text), old) == 0 {
		t.Fatalf("%s holds no %q", file, old)
	}
	if err := os.WriteFile(path, []byte(strings.Replace(string(text), old, changed, 1)), 0o600); err != nil {
		t.Fatal(err)
	}
	return dir
}

// One wrong figure in any kind of vector, and the record says what and where.
func TestValidateFindsWrongVectors(t *testing.T) {
	t.Parallel()
	for _, c := range []struct{ check, file, old, changed string }{
		{"numbers", "numbers.json", `"thousandths": 1200`, `"thousandths": 1201`},
		{"rounding", "rounding.json", `"ruleA_half_even": "12.3"`, `"ruleA_half_even": "12.4"`},
		{"positions", "positions.json", `"crown": "left"`, `"crown": "right"`},
		{"criteria", "iso3159.json", `"0.6"`, `"0.7"`},
		{"kinds of formula", "kinds.json", `"deviation_n": "5`, `"deviation_n": "6`},
		{"judge", "judge/limit.want.csv", ",pass,", ",fail,"},
		{"covariance", "conformity/published.json", `"chained_states": "1.414213562373"`, `"chained_states": "1.414213562473"`},
		{"probability", "conformity/vectors.json", `"V": 0.0583265`, `"V": 0.0683265`},
		{"budget file", "conformity/budget.json", `"read_s": "0.1"`, `"read_s": "0.2"`},
		{"balance", "balance/physics.json", `"90": "0.72`, `"90": "0.73`},
		{"statistics", "lot/published.json", `"0.263313617188"`, `"0.263313618188"`},
		{"reference statistics", "lot/vectors.json", `"h1": 0.88`, `"h1": 0.87`},
		{"canonical JSON and trees", "proof/vectors.json", "fac54203e7cc696c", "fac54203e7cc696d"},
		{"signatures", "proof/rejection.jws", ".", ".A"},
	} {
		v, files := newValidation(storetest.Start), os.DirFS(copyVectors(t, c.file, c.old, c.changed))
		for _, check := range vectorChecks() {
			if check.name == c.check {
				check.run(v.checker(check.name, files))
			}
		}
		if len(v.Checks) != 1 || v.Checks[0].Failed == 0 || len(v.Checks[0].Faults) == 0 {
			t.Errorf("%s with %s is not noticed", c.file, c.changed)
		}
	}
	dir := copyVectors(t, "iso3159.json", `"M": "601/100"`, `"M": "602/100"`)
	v, stderr, code := validated(t, nil, "-no-database", "-vectors", dir)
	if code != exitRefused || v.Right || v.Failed == 0 || !strings.Contains(stderr, "ratehouse validate: criteria: ") {
		t.Errorf("exit %d, %d failed: %s", code, v.Failed, stderr)
	}
	for _, one := range v.Checks {
		if (one.Failed > 0) != (one.Name == "criteria") {
			t.Errorf("%s has %d faults %v", one.Name, one.Failed, one.Faults)
		}
	}
	v, _, code = validated(t, nil, "-no-database", "-vectors", t.TempDir())
	for _, one := range v.Checks {
		if code != exitRefused || v.Right || one.Failed == 0 {
			t.Errorf("no vectors at all: exit %d, %s is right", code, one.Name)
		}
	}
}

// The vectors through the laboratory's verbs: all come back right but the one made wrong.
func TestValidateLaboratory(t *testing.T) {
	t.Parallel()
	v := newValidation(storetest.Start)
	wrong := v.checker("wrong", os.DirFS(copyVectors(t, "iso3159.json", `"M": "601/100"`, `"M": "602/100"`)))
	if err := wrong.laboratory(t.Context(), storetest.Database(t).App); err != nil || wrong.Failed != 1 || wrong.Passed < 600 {
		t.Errorf("%v %+v", err, wrong.checked)
	}
	// A role that could rewrite evidence is not right, and neither is a database without the schema.
	for _, dsn := range []string{storetest.Database(t).Owner, storetest.Empty(t).App} {
		c := v.checker("database named", testdata.Files)
		if c.named(t.Context(), dsn); c.Failed != 1 {
			t.Errorf("%+v", c.checked)
		}
	}
}

// The database of the user is looked at and not written; movements go through a throw-away one.
func TestValidateDatabase(t *testing.T) {
	t.Parallel()
	if os.Getenv("RATEHOUSE_SOAK") == "" {
		t.Skip("makes a PostgreSQL of its own: RATEHOUSE_SOAK=1")
	}
	h := storetest.New(t)
	before, err := h.Batches(t.Context(), h.Lead, store.BatchFilter{}, "")
	if err != nil {
		t.Fatal(err)
	}
	v, stderr, code := validated(t, []string{"DATABASE_URL=" + h.DB.App})
	if code != exitDone || !v.Right || stderr != "" {
		t.Errorf("exit %d: %s", code, stderr)
	}
	names := map[string]int{}
	for _, c := range v.Checks {
		names[c.Name] = c.Passed
	}
	if names["database named"] != 2 || names["database made"] != 2 || names["through the laboratory"] < 600 {
		t.Errorf("checks of databases: %v", names)
	}
	after, err := h.Batches(t.Context(), h.Lead, store.BatchFilter{}, "")
	if err != nil || len(after.Lines) != len(before.Lines) {
		t.Errorf("batches: %d before, %d after, %v", len(before.Lines), len(after.Lines), err)
	}
}

func TestValidateRefuses(t *testing.T) {
	t.Parallel()
	for _, args := range [][]string{{"-unknown"}, {"extra"}, {"-vectors", filepath.Join(t.TempDir(), "none")}} {
		stdout, stderr, code := runWith(t, "", append([]string{"validate"}, args...)...)
		if code != exitUsage || stdout != "" || stderr == "" {
			t.Errorf("%v: exit %d, %q, %q", args, code, stdout, stderr)
		}
	}
}
