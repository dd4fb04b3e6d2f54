package main

import (
	"encoding/json"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// The joint example of the domain notes, 5.3: rates, and the same movement by states.
func TestJudgeUncertainty(t *testing.T) {
	t.Parallel()
	data, err := os.ReadFile(filepath.Join("..", "..", "testdata", "conformity", "published.json"))
	if err != nil {
		t.Fatal(err)
	}
	var file struct {
		Joint struct {
			Rates  []string
			Linear map[string]float64 `json:"p_each_analytic_linear"`
			Joint  float64            `json:"p_joint_mc"`
		}
	}
	if err := json.Unmarshal(data, &file); err != nil {
		t.Fatal(err)
	}
	rates, states, milli := []string{"A", "1"}, []string{"A", "1", "100"}, int64(100_000)
	for _, s := range file.Joint.Rates {
		x, err := strconv.ParseFloat(s, 64)
		if err != nil {
			t.Fatal(err)
		}
		milli += int64(math.Round(1000 * x))
		rates, states = append(rates, s), append(states, strconv.FormatFloat(float64(milli)/1000, 'f', 1, 64))
	}
	stateHeader := "serial,category,s0," + strings.ReplaceAll(strings.TrimPrefix(header, "serial,category,"), "d", "s")
	byRates, stderr, code := runWith(t, header+"\n"+strings.Join(rates, ",")+"\n", "judge", "-uncertainty", "0.1")
	if code != 0 || stderr != "" {
		t.Fatalf("%d %s", code, stderr)
	}
	lines := strings.Split(byRates, "\n")
	const want = "serial,category,verdict,M,V,Vmax,D,P,C,R,failed,unreachable,pM,pV,pVmax,pD,pP,pC,pR,pAll"
	if lines[0] != want {
		t.Errorf("%s", lines[0])
	}
	if got, want := strings.Split(lines[1], ",")[12:19], "0.997661 1.000000 1.000000 1.000000 1.000000 0.841345 0.971110"; strings.Join(got, " ") != want {
		t.Errorf("%s, want %s", got, want)
	}
	if p, err := strconv.ParseFloat(strings.Split(lines[1], ",")[19], 64); err != nil || math.Abs(p-file.Joint.Joint) > 0.002 {
		t.Errorf("pAll %v, want %v", p, file.Joint.Joint)
	}
	byStates, _, code := runWith(t, stateHeader+"\n"+strings.Join(states, ",")+"\n", "judge", "-states", "-uncertainty", "0.1")
	if byStates != byRates || code != 0 {
		t.Errorf("by states, exit %d:\n%s\nby rates:\n%s", code, byStates, byRates)
	}
}

// Blanks, calibre last, and JSON.
func TestJudgeUncertaintyBlanks(t *testing.T) {
	t.Parallel()
	input := header + ",calibre\n" + row("A1", "1", map[int]string{13: ""}) + ",K\n" + row("A2", "2", map[int]string{15: "60"}) + ",\n"
	stdout, _, _ := runWith(t, input, "judge", "-uncertainty", ".1")
	want := "serial,category,verdict,M,V,Vmax,D,P,C,R,failed,unreachable,pM,pV,pVmax,pD,pP,pC,pR,pAll,calibre\n" +
		"A1,1,open,0.000000,0.000000,0.000000,0.000000,0.000000,,0.000000,,,1.000000,1.000000,1.000000,1.000000,1.000000,,1.000000,,K\n" +
		"A2,2,fail,0.000000,0.000000,0.000000,0.000000,0.000000,0.000000,60.000000,R,,1.000000,1.000000,1.000000,1.000000,1.000000,1.000000,0.000000,0.000000,\n"
	if stdout != want {
		t.Errorf("%s", stdout)
	}
	stdout, _, _ = runWith(t, input, "judge", "-uncertainty", "0.1", "-format", "json")
	line, _, _ := strings.Cut(stdout, "\n")
	const tail = `"failed":null,"unreachable":null,"pM":"1.000000","pV":"1.000000","pVmax":"1.000000","pD":"1.000000",` +
		`"pP":"1.000000","pC":null,"pR":"1.000000","pAll":null,"calibre":"K"}`
	if !strings.HasSuffix(line, tail) {
		t.Errorf("%s", line)
	}
}

func TestJudgeUncertaintyValue(t *testing.T) {
	t.Parallel()
	const refused = "ratehouse judge: -uncertainty wants a decimal above 0 with at most 9 decimals: the standard uncertainty of one state reading in s\n"
	for _, u := range []string{"", "0", "0.0", "0.000000000", "-0.1", "-1", "1e-3", "1/10", "0.0000000001", "1.0000000000", "x", "NaN", "inf", "0,1", "0.1 s", "0x1", ".", "+", "1_0"} {
		stdout, stderr, code := runWith(t, header+"\n"+row("A", "1", nil)+"\n", "judge", "-uncertainty="+u)
		if stdout != "" || stderr != refused || code != exitUsage {
			t.Errorf("%q: exit %d, %q, %q", u, code, stdout, stderr)
		}
	}
	for _, u := range []string{"0.000000001", "5", ".5", "5.", "007", "+0.1", "0.123456789", strings.Repeat("9", 190)} {
		stdout, stderr, code := runWith(t, header+"\n"+row("A", "1", nil)+"\n", "judge", "-uncertainty", u)
		if stderr != "" || code != 0 || strings.Contains(stdout, "NaN") || len(strings.Split(strings.Split(stdout, "\n")[1], ",")) != 20 {
			t.Errorf("%q: exit %d, %s%s", u, code, stdout, stderr)
		}
	}
}

// At a limit a probability is one half however small the uncertainty: differences are exact.
func TestJudgeUncertaintyAtTheLimit(t *testing.T) {
	t.Parallel()
	rng := rand.New(rand.NewPCG(60, 60))
	input := header + "\n"
	for n := range 50 {
		days, sum := map[int]string{}, int64(0)
		for d := 1; d <= 10; d++ {
			tenths := rng.Int64N(100)
			if sum += tenths; d == 10 { // M is 6
				tenths += 600 - sum
			}
			days[d] = strconv.FormatFloat(float64(tenths)/10, 'f', 1, 64)
		}
		input += row("A"+strconv.Itoa(n), "1", days) + "\n"
	}
	stdout, _, _ := runWith(t, input, "judge", "-uncertainty", "0.000000001")
	lines := strings.Split(strings.TrimSpace(stdout), "\n")
	for _, line := range lines[1:] {
		if got := strings.Split(line, ",")[12]; got != "0.500000" {
			t.Errorf("pM %s: %s", got, line)
		}
	}
	if len(lines) != 51 {
		t.Errorf("%d lines", len(lines))
	}
}

// A budget of reading alone is the same as -uncertainty; a full one leaves more doubt.
func TestJudgeBudget(t *testing.T) {
	t.Parallel()
	write := func(text string) string {
		name := filepath.Join(t.TempDir(), "budget.json")
		if err := os.WriteFile(name, []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
		return name
	}
	days := map[int]string{}
	for d := 1; d <= 10; d++ {
		days[d] = "5.98"
	}
	input := header + "\n" + row("A", "1", days) + "\n"
	alone, _, _ := runWith(t, input, "judge", "-uncertainty", "0.1")
	same, stderr, code := runWith(t, input, "judge", "-budget", write(`{"title": "reading", "read_s": "0.1"}`))
	if alone != same || code != 0 || stderr != "" {
		t.Errorf("%d %s%s, want %s", code, stderr, same, alone)
	}
	// u(M) of the worked file as performed: u_s² = 0.1² + 0.2²/12 + 0.05² + 0.16²/2 over fifty, handling
	// 0.05²/10, frequency 0.001²: 0.028700; 0.02 s/d to the limit make Φ(0.69687).
	full, _, code := runWith(t, input, "judge", "-budget", filepath.Join("..", "..", "testdata", "conformity", "budget.json"))
	if got := strings.Split(strings.Split(full, "\n")[1], ",")[12]; code != 0 || got != "0.757059" {
		t.Errorf("%d %s", code, got)
	}
	for _, c := range []struct {
		args []string
		want string
	}{
		{[]string{"-budget", "no-such-file"}, "no-such-file"},
		{[]string{"-budget", write(`{"read_s": "-1"}`)}, "budget.read_s: -1 is outside what is allowed"},
		{[]string{"-budget", write(`{"read_s": "1"}`), "-uncertainty", "0.1"}, "exclude each other"},
	} {
		stdout, stderr, code := runWith(t, input, append([]string{"judge"}, c.args...)...)
		if stdout != "" || code != exitUsage || !strings.Contains(stderr, c.want) {
			t.Errorf("%v: %d %q %q", c.args, code, stdout, stderr)
		}
	}
}
