package main

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"fmt"
	"io"
	"io/fs"
	"maps"
	"os"
	"runtime"
	"slices"
	"time"

	"ratehouse/store/proof"
	"ratehouse/testdata"
	"ratehouse/trial/sheet"
)

func validateFlags(w io.Writer) {
	fmt.Fprint(w, `Usage: ratehouse validate [settings] [-vectors DIR] [-no-database]

Runs the published check values and the vectors of reference libraries that this
program carries on this very program, writes movements into a database and reads
them back, and prints a dated record of it (JSON, sha256 over the canonical form
of its part "record") to keep as evidence. What is not right is listed on standard
error too.

Without DATABASE_URL the database is a throw-away one of its own, in a temporary
folder. With it nothing is written: version, schema and rights are looked at, and
the throw-away one is used beside it.

  -vectors DIR    take the vectors from a folder laid out like the project's testdata
  -no-database    leave the database out; the record says so

Exit status: 0 all right; 1 something is not; 2 wrong usage, or no database could be made.

`)
	listSettings(w, databaseSettings())
}

// validation is the record of one run.
type validation struct {
	Schema     string            `json:"schema"`
	At         time.Time         `json:"at"`
	Build      string            `json:"build"`
	Go         string            `json:"go"`
	System     string            `json:"system"`
	Programmes map[string]string `json:"programmes"` // by code, their content hash
	Files      map[string]string `json:"files"`      // vectors by name, SHA-256
	Checks     []*checked        `json:"checks"`
	Database   string            `json:"database"` // which one was used, never a password
	Passed     int               `json:"passed"`
	Failed     int               `json:"failed"`
	Right      bool              `json:"right"`
}

// checked is one kind of check: how many comparisons held, and what did not.
type checked struct {
	Name   string   `json:"name"`
	Passed int      `json:"passed"`
	Failed int      `json:"failed"`
	Faults []string `json:"faults"` // the first of them
}

const mostFaults = 20

func runValidate(ctx context.Context, p program, args []string) int {
	var c config
	flags := flagsOf(p, "validate", &c, databaseSettings())
	dir := flags.String("vectors", "", "")
	alone := flags.Bool("no-database", false, "")
	flags.Usage = func() { validateFlags(p.stderr) }
	if code, ok := parsed(flags.Parse(args)); !ok {
		return code
	}
	if err := c.check(); err != nil {
		return p.fail("validate", err)
	}
	if flags.NArg() > 0 {
		return p.fail("validate", fmt.Errorf("%q is one argument too many", flags.Arg(0)))
	}
	v := newValidation(time.Now())
	vectors := fs.FS(testdata.Files)
	if *dir != "" {
		if _, err := os.Stat(*dir); err != nil {
			return p.fail("validate", err)
		}
		vectors = os.DirFS(*dir)
	}
	for _, check := range vectorChecks() {
		check.run(v.checker(check.name, vectors))
	}
	v.Database = "none"
	if !*alone {
		if err := v.database(ctx, p, &c, vectors); err != nil {
			return p.fail("validate", err)
		}
	}
	return v.print(p)
}

func newValidation(at time.Time) *validation {
	v := &validation{Schema: "ratehouse-validation-record/1", At: at.UTC().Truncate(time.Second), Build: build(), Go: runtime.Version(),
		System: runtime.GOOS + "/" + runtime.GOARCH, Programmes: map[string]string{}, Files: map[string]string{}}
	for _, code := range sheet.BuiltinCodes() {
		if prog, ok := sheet.Builtin(code); ok {
			v.Programmes[code+" "+prog.Version] = fmt.Sprintf("%x", sheet.Hash(prog))
		}
	}
	return v
}

// vectorCheck compares what the program answers with some of the vectors.
type vectorCheck struct {
	name string
	run  func(*checker)
}

func vectorChecks() []vectorCheck {
	return []vectorCheck{
		{"numbers", checkNumbers}, {"rounding", checkRounding}, {"positions", checkPositions}, {"criteria", checkCriteria},
		{"kinds of formula", checkKinds}, {"judge", checkJudge}, {"covariance", checkCovariance}, {"probability", checkProbability},
		{"budget file", checkBudget}, {"balance", checkBalance}, {"statistics", checkStatistics}, {"reference statistics", checkReference},
		{"canonical JSON and trees", checkProof}, {"signatures", checkSignatures},
	}
}

// checker compares, and keeps what did not hold.
type checker struct {
	*checked
	files fs.FS
	sums  map[string]string
}

func (v *validation) checker(name string, files fs.FS) *checker {
	c := &checker{&checked{Name: name, Faults: []string{}}, files, v.Files}
	v.Checks = append(v.Checks, c.checked)
	return c
}

func (c *checker) hold(ok bool, format string, args ...any) {
	if ok {
		c.Passed++
		return
	}
	if c.Failed++; len(c.Faults) < mostFaults {
		c.Faults = append(c.Faults, fmt.Sprintf(format, args...))
	}
}

// same compares what is exact.
func (c *checker) same(name string, got, want any) {
	c.hold(got == want, "%s: %v, want %v", name, got, want)
}

// near compares floats to an error relative to the value wanted, absolute below 1.
func (c *checker) near(name string, got, want, most float64) {
	off := max(got-want, want-got)
	c.hold(off <= most*max(1, want, -want), "%s: %.15g, want %.15g", name, got, want)
}

// read gives a file of the vectors and notes its hash; a missing one is a fault.
func (c *checker) read(name string) (text []byte, ok bool) {
	text, err := fs.ReadFile(c.files, name)
	if err != nil {
		c.hold(false, "%v", err)
		return nil, false
	}
	sum := sha256.Sum256(text)
	c.sums[name] = hex.EncodeToString(sum[:])
	return text, true
}

func (c *checker) readJSON(name string, into any) (ok bool) {
	text, ok := c.read(name)
	if !ok {
		return false
	}
	err := json.Unmarshal(text, into)
	if err != nil {
		c.hold(false, "%s: %v", name, err)
	}
	return err == nil
}

// print writes the record and tells by the exit code what it says. A check that compared nothing is
// not right either.
func (v *validation) print(p program) int {
	v.Right = true
	for _, c := range v.Checks {
		if c.Passed+c.Failed == 0 {
			c.Failed, c.Faults = 1, []string{"nothing was compared"}
		}
		v.Passed, v.Failed, v.Right = v.Passed+c.Passed, v.Failed+c.Failed, v.Right && c.Failed == 0
		for _, fault := range c.Faults {
			fmt.Fprintf(p.stderr, "ratehouse validate: %s: %s\n", c.Name, fault)
		}
	}
	record, err := json.Marshal(v)
	if err != nil {
		return p.fail("validate", err)
	}
	canonical, err := proof.CanonicalJSON(record)
	if err != nil {
		return p.fail("validate", err)
	}
	out, err := json.MarshalIndent(map[string]any{"record": v, "sha256": fmt.Sprintf("%x", sha256.Sum256(canonical))}, "", "  ")
	if err == nil {
		_, err = fmt.Fprintf(p.stdout, "%s\n", out)
	}
	switch {
	case err != nil:
		return p.fail("validate", fmt.Errorf("cannot write: %w", err))
	case !v.Right:
		return exitRefused
	}
	return exitDone
}

// sortedKeys lists the names of vectors in one order, so that faults are too.
func sortedKeys[V any](m map[string]V) []string { return slices.Sorted(maps.Keys(m)) }
