package main

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/trial"
	"ratehouse/trial/sheet"
)

var houseFile = filepath.Join("..", "..", "testdata", "programmes", "house6.json")

func TestProgrammeCheck(t *testing.T) {
	t.Parallel()
	data, err := os.ReadFile(houseFile)
	if err != nil {
		t.Fatal(err)
	}
	p, err := sheet.ParseProgramme(data)
	if err != nil {
		t.Fatal(err)
	}
	stdout, stderr, code := runWith(t, "", "programme", "check", houseFile)
	for _, want := range []string{"HOUSE6 version 1", fmt.Sprintf("%x", sheet.Hash(p)), "day 6         12H 23 °C", "day 7         CH 8 °C",
		"S = √(Σ (Ri - (R1+...+R6)/6)²/5), i = 1...6; LARGE: ...2.5; SMALL: ...3.5", "Q = |M| + 2·S + 10·|C|\n"} {
		if !strings.Contains(stdout, want) {
			t.Errorf("%q is not in\n%s", want, stdout)
		}
	}
	if code != exitDone || stderr != "" {
		t.Errorf("exit %d, %s", code, stderr)
	}
	if again, _, code := runWith(t, string(data), "programme", "check", "-"); again != stdout || code != exitDone {
		t.Errorf("from standard input: exit %d\n%s", code, again)
	}
	broken := strings.Replace(string(data), `"of": [8]`, `"of": [18]`, 1)
	for name, c := range map[string]struct {
		input, stderr string
		code          int
		args          []string
	}{
		"broken":      {broken, "-: criteria[4].formula.of[0]: day 18 is not a day of the programme\n", 1, []string{"check", "-"}},
		"not JSON":    {"days: 15", "-: programme: is not JSON: invalid character 'd' looking for beginning of value\n", 1, []string{"check", "-"}},
		"empty":       {"", "-: programme: is not JSON: EOF\n", 1, []string{"check", "-"}},
		"no file":     {"", "ratehouse programme: open none.json: no such file or directory\n", 2, []string{"check", "none.json"}},
		"too large":   {strings.Repeat(" ", mostProgramme+1), "ratehouse programme: - is longer than 1048576 bytes\n", 2, []string{"check", "-"}},
		"no built-in": {"", "ratehouse programme: \"winter\" is not built in (iso3159, contest, weekly)\n", 2, []string{"show", "winter"}},
		"add broken":  {broken, "-: criteria[4].formula.of[0]: day 18 is not a day of the programme\n", 1, []string{"add", "-"}},
	} {
		stdout, stderr, code := runWith(t, c.input, append([]string{"programme"}, c.args...)...)
		if stdout != "" || stderr != c.stderr || code != c.code {
			t.Errorf("%s: exit %d, %q, %q", name, code, stdout, stderr)
		}
	}
	for _, args := range [][]string{{}, {"check"}, {"check", "a", "b"}, {"show"}, {"mend", "x"}} {
		if _, stderr, code := runWith(t, "", append([]string{"programme"}, args...)...); code != exitUsage || !strings.Contains(stderr, "programme check FILE") {
			t.Errorf("%v: exit %d, %s", args, code, stderr)
		}
	}
	if help, _, code := runWith(t, "", "programme", "-h"); code != exitDone || !strings.Contains(help, "Example:\n  ratehouse programme check") {
		t.Errorf("help: exit %d\n%s", code, help)
	}
}

func TestProgrammeShowAndSchema(t *testing.T) {
	t.Parallel()
	for _, code := range sheet.BuiltinCodes() {
		shown, _, exit := runWith(t, "", "programme", "show", code)
		if _, stderr, again := runWith(t, shown, "programme", "check", "-"); exit != exitDone || again != exitDone {
			t.Errorf("%s: %s", code, stderr)
		}
	}
	if schema, _, exit := runWith(t, "", "programme", "schema"); exit != exitDone || !strings.Contains(schema, "json-schema.org/draft/2020-12") {
		t.Errorf("exit %d\n%.200s", exit, schema)
	}
}

// judge by other programmes than the built-in one; figures as in store/programme_test.go.
func TestJudgeOtherProgrammes(t *testing.T) {
	t.Parallel()
	const head = "serial,category,verdict,M,S,X,D,C,R,Q,failed,unreachable\n"
	rates := "serial,category,d1,d2,d3,d4,d5,d6,d7,d8,d9,d10\n" +
		"A,LARGE,1.0,1.4,0.6,2.1,0.2,1.5,-1.1,2.3,1.2,1.0\n" +
		"B,LARGE,0,0,0,0,0,8.198,0,0,0,0\n" +
		"C,SMALL,0,70,-70,,,,,,,\n" +
		"D,LARGE,,,,,,,0,9,0,\n"
	want := head + "A,LARGE,pass,1.133333,0.680196,1.900000,-0.100000,0.113333,0.400000,3.627059,,\n" +
		"B,LARGE,fail,1.366333,3.346819,8.198000,2.049500,0.000000,0.000000,8.059972,S X,\n" +
		"C,SMALL,open,,,,,,,,,S X D R\n" + // too far apart for S and X; D is -7.5 at most; no R10 comes near -70
		"D,LARGE,open,,,,,0.300000,,,,\n"
	stdout, stderr, code := runWith(t, rates, "judge", "-programme", houseFile)
	if code != exitDone || stderr != "" {
		t.Errorf("exit %d, %s", code, stderr)
	}
	sameLines(t, "house", stdout, want)
	// States twelve hours apart are half a day's rate apart.
	states := "serial,category,s0,s1,s2,s3,s4,s5,s6,s7,s8,s9,s10\nA,LARGE,0,0.5,1.2,1.5,2.55,2.65,3.4,2.85,4,4.6,5.1\n"
	stdout, _, _ = runWith(t, states, "judge", "-states", "-programme", houseFile)
	sameLines(t, "states", stdout, strings.Join(strings.SplitAfter(want, "\n")[:2], ""))
	if _, stderr, code := runWith(t, strings.Replace(states, ",0.5,", ",301,", 1), "judge", "-states", "-programme", houseFile); code != exitRefused || !strings.Contains(stderr, "beyond ±600 s/d") {
		t.Errorf("301 s in twelve hours: exit %d, %s", code, stderr)
	}
	stdout, _, _ = runWith(t, rates, "judge", "-programme", houseFile, "-format", "json")
	if !strings.Contains(stdout, `"S":"3.346819",`) || !strings.Contains(stdout, `"failed":["S","X"]`) || !strings.Contains(stdout, `"Q":null`) {
		t.Error(stdout)
	}
}

// The weekly number: 203 columns, no limits, so no verdict.
func TestJudgeWeekly(t *testing.T) {
	t.Parallel()
	head, full, most := "serial,category", "A,1", "B,1"
	for d := 1; d <= 203; d++ {
		head += fmt.Sprintf(",d%d", d)
		full += []string{",1.5", ",1.6"}[(d-1)/7%2]
		if most += ","; d < 203 {
			most += "2"
		}
	}
	stdout, stderr, code := runWith(t, head+"\n"+full+"\n"+most+"\n", "judge", "-programme", "weekly")
	if want := "serial,category,verdict,a,b,T,failed,unreachable\nA,1,-,0.700000,0.700000,2.100000,,\nB,1,-,,,,,\n"; stdout != want || code != exitDone {
		t.Errorf("exit %d, %s\n%s", code, stderr, stdout)
	}
}

// changed writes the built-in programme with a change into a file and gives its path.
func changed(t *testing.T, change func(*trial.Programme)) string {
	t.Helper()
	p := trial.ISO3159()
	change(p)
	path := filepath.Join(t.TempDir(), "programme.json")
	if err := os.WriteFile(path, sheet.Canonical(p), 0o600); err != nil {
		t.Fatal(err)
	}
	return path
}

func guard(p *trial.Programme) {
	p.Decision = trial.Decision{Rule: trial.Guarded, Guard: trial.Ratio(1, 1)}
}

// A guard band of U = 2 u (ILAC-G8:09/2019, 4.2.2): readings of 0.1 s leave u(M) = 0.1 √2/10 s/d (domain
// notes 5.2, case A), so that M may reach 6 - 0.028284 s/d. The probabilities are those of the simple limits.
func TestJudgeGuarded(t *testing.T) {
	t.Parallel()
	row := func(serial, rate string) string { return serial + ",1" + strings.Repeat(","+rate, 15) + "\n" }
	rows := header + "\n" + row("A", "5.971") + row("B", "5.972") + row("C", "6.001")
	stdout, stderr, code := runWith(t, rows, "judge", "-programme", changed(t, guard), "-uncertainty", "0.1")
	simple, _, _ := runWith(t, rows, "judge", "-uncertainty", "0.1")
	if code != exitDone {
		t.Fatalf("exit %d: %s", code, stderr)
	}
	got, plain := strings.Split(stdout, "\n"), strings.Split(simple, "\n")
	for i, want := range []string{"A pass ", "B fail M", "C fail M"} {
		cells, simply := strings.Split(got[i+1], ","), strings.Split(plain[i+1], ",")
		if g := cells[0] + " " + cells[2] + " " + cells[10]; g != want {
			t.Errorf("%q, want %q", g, want)
		}
		if g, w := cells[12:], simply[12:]; strings.Join(g, ",") != strings.Join(w, ",") {
			t.Errorf("probabilities %v, by the simple rule %v", g, w)
		}
	}
}

func TestJudgeRefusesProgrammes(t *testing.T) {
	t.Parallel()
	guarded := changed(t, guard)
	odd := changed(t, func(p *trial.Programme) { p.Reading.IntervalS = 50_000 })
	broken := changed(t, func(p *trial.Programme) { p.Days[3].N = 7 })
	for _, c := range []struct {
		args []string
		want string
	}{
		{[]string{"-programme", guarded}, "its guarded decision rule needs an uncertainty: give -uncertainty or -budget"},
		{[]string{"-programme", odd, "-states"}, "give rates"},
		{[]string{"-programme", broken}, "days[3].day: days must be numbered 1, 2, 3, ... in order; found 7"},
		{[]string{"-programme", "-"}, "standard input cannot be both"},
	} {
		stdout, stderr, code := runWith(t, "", append([]string{"judge"}, c.args...)...)
		if code != exitUsage || stdout != "" || !strings.Contains(stderr, c.want) {
			t.Errorf("%v: exit %d, %q, %s", c.args, code, stdout, stderr)
		}
	}
}

func TestProgrammeAdd(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	env := []string{"DATABASE_URL=" + h.DB.App}
	runs(t, "", env, "programme", "add", houseFile).want(t, 0, "HOUSE6 version 1 added")
	runs(t, "", env, "programme", "add", houseFile).want(t, 1, "is there already")
	h.Batch(t, "B1", 1, func(n *store.NewBatch) { n.Programme, n.Category = "HOUSE6", "SMALL" })
	other, _ := sheet.Builtin("contest")
	other.Code, other.Version = "HOUSE6", "1"
	runs(t, string(sheet.Canonical(other)), env, "programme", "add", "-").want(t, 1, "never changed")
	runs(t, "", nil, "programme", "check", "-h").want(t, 0, "Usage")
}
