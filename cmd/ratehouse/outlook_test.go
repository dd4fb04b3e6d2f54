package main

import (
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// pastFile writes a history of drawn movements.
func pastFile(t *testing.T, text string) string {
	t.Helper()
	name := filepath.Join(t.TempDir(), "past.csv")
	if err := os.WriteFile(name, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	return name
}

func simulated(t *testing.T, args ...string) string {
	t.Helper()
	out, stderr, code := runWith(t, "", append([]string{"simulate"}, args...)...)
	if code != exitDone {
		t.Fatal(stderr)
	}
	return out
}

// What simulate draws is what outlook reads: as many rows, how many days are there, probabilities of six
// decimals; certain where the judge is; twice the same.
func TestOutlook(t *testing.T) {
	t.Parallel()
	past := pastFile(t, simulated(t, "-n", "400", "-seed", "3"))
	input := simulated(t, "-n", "60", "-seed", "4", "-days", "6")
	stdout, stderr, code := runWith(t, input, "outlook", "-history", past)
	if code != exitDone || stderr != "" {
		t.Fatalf("exit %d, %s", code, stderr)
	}
	verdicts, _, _ := runWith(t, input, "judge")
	lines, judged := strings.Split(stdout, "\n"), strings.Split(verdicts, "\n")
	if lines[0] != "serial,read,pass_probability" || len(lines) != 62 || lines[61] != "" {
		t.Fatalf("%d lines, header %q", len(lines), lines[0])
	}
	for i, line := range lines[1:61] {
		cells := strings.Split(line, ",")
		p, err := strconv.ParseFloat(cells[2], 64)
		if err != nil || cells[0] != strings.Split(judged[i+1], ",")[0] || cells[1] != "6" || len(cells[2]) != 8 || p < 0 || p >= 1 {
			t.Errorf("%q", line)
		}
		if fails := strings.Contains(judged[i+1], ",fail,"); fails && p != 0 {
			t.Errorf("%q has failed: %s", line, judged[i+1])
		}
	}
	again, _, _ := runWith(t, "", "outlook", "-history", past, pastFile(t, input))
	if again != stdout {
		t.Error("the same movements from a file, another answer")
	}
}

// Certain ones, blanks anywhere, order kept.
func TestOutlookCertain(t *testing.T) {
	t.Parallel()
	past := pastFile(t, simulated(t, "-n", "100", "-seed", "3"))
	blank := func(from int, more map[int]string) map[int]string {
		days := map[int]string{}
		for d := from; d <= 15; d++ {
			days[d] = ""
		}
		for d, v := range more {
			days[d] = v
		}
		return days
	}
	input := strings.Join([]string{header,
		row("passed", "1", nil),
		row("failed", "2", blank(11, map[int]string{1: "90"})),
		row("cannot", "1", blank(5, map[int]string{1: "-12", 2: "-12", 3: "12", 4: "12"})),
		row("open", "1", blank(11, map[int]string{3: ""})),
		row("new", "2", blank(1, nil))}, "\n") + "\n"
	stdout, stderr, code := runWith(t, input, "outlook", "-history", past)
	if code != exitDone || stderr != "" {
		t.Fatalf("exit %d, %s", code, stderr)
	}
	lines := strings.Split(stdout, "\n")
	if lines[1] != "passed,15,1.000000" || lines[2] != "failed,10,0.000000" || lines[3] != "cannot,4,0.000000" ||
		!strings.HasPrefix(lines[4], "open,9,0.") || !strings.HasPrefix(lines[5], "new,0,0.") ||
		strings.HasSuffix(lines[4], ",0.000000") || strings.HasSuffix(lines[5], ",0.000000") {
		t.Errorf("%s", stdout)
	}
}

// A calibre is forecast by its own history, whatever the others are.
func TestOutlookByCalibre(t *testing.T) {
	t.Parallel()
	history := header + ",calibre\n"
	for i := range 300 {
		days := map[int]string{}
		for d := 1; d <= 15; d++ {
			days[d] = strconv.Itoa(i%3 + 1)
		}
		history += row("A"+strconv.Itoa(i), "1", days) + ",QUIET\n"
		days[4], days[9] = strconv.Itoa(i%20-7), strconv.Itoa(8-i%17)
		history += row("B"+strconv.Itoa(i), "1", days) + ",WILD\n"
	}
	blank := strings.Repeat(",", 15)
	input := header + ",calibre\nA,1" + blank + ",QUIET\nB,1" + blank + ",WILD\nC,1" + blank + ",\nD,1" + blank + ",NEVER\n"
	stdout, stderr, code := runWith(t, input, "outlook", "-history", pastFile(t, history))
	if code != exitDone || stderr != "" {
		t.Fatalf("exit %d, %s", code, stderr)
	}
	var p []float64
	for _, line := range strings.Split(strings.TrimSpace(stdout), "\n")[1:] {
		x, err := strconv.ParseFloat(strings.Split(line, ",")[2], 64)
		if err != nil {
			t.Fatal(line)
		}
		p = append(p, x)
	}
	if p[0] < 0.9 || p[1] > 0.6 || p[2] < p[1] || p[2] > p[0] || p[3] != p[2] {
		t.Errorf("quiet, wild, not said, never seen: %v", p)
	}
}

// Rows are refused as by judge, those of the history with its name before; what keeps the job from being
// done prints nothing else and exits 2.
func TestOutlookRefuses(t *testing.T) {
	t.Parallel()
	past := pastFile(t, header+"\n"+row("A", "1", nil)+"\n"+row("A", "1", nil)+"\n"+row("B", "1", map[int]string{3: "601"})+"\n")
	stdout, stderr, code := runWith(t, header+"\n"+row("A", "1", nil)+"\n"+row("B", "3", nil)+"\n", "outlook", "-history", past)
	if code != exitRefused || stdout != "serial,read,pass_probability\nA,15,1.000000\n" {
		t.Errorf("exit %d, %q", code, stdout)
	}
	faults := strings.Split(strings.TrimSpace(stderr), "\n")
	for i, want := range []string{"history: line 3, column serial: ", "history: line 4, column d3: ", "line 3, column category: "} {
		if len(faults) != 3 || !strings.HasPrefix(faults[i], want) {
			t.Errorf("%q, want %q", stderr, want)
		}
	}
	empty := pastFile(t, header+"\n")
	if stdout, stderr, code := runWith(t, header+"\n", "outlook", "-history", empty); stdout != "serial,read,pass_probability\n" || stderr != "" || code != exitDone {
		t.Errorf("headers only: exit %d, %q, %q", code, stdout, stderr)
	}
	broken := pastFile(t, "{}")
	for _, c := range []struct {
		input string
		args  []string
		want  string
	}{
		{"", nil, "ratehouse outlook: -history wants a file"},
		{"", []string{"-history", "no-such-file"}, "no-such-file"},
		{"", []string{"-history", empty}, "line 1, column serial: "},
		{"serial,category,d1\n", []string{"-history", empty}, "line 1, column d2: "},
		{header + "\n", []string{"-history", pastFile(t, "serial\n")}, "history: line 1, column category: "},
		{header + "\n", []string{"-history", empty, "no-such-file"}, "no-such-file"},
		{header + "\n", []string{"-history", empty, "a", "b"}, "one file at a time"},
		{header + "\n", []string{"-history", "-"}, "standard input can be one thing only"},
		{header + "\n", []string{"-history", empty, "-programme", "-"}, "standard input can be one thing only"},
		{header + "\n", []string{"-history", empty, "-programme", "nothing"}, "-programme nothing: neither a built-in programme"},
		{header + "\n", []string{"-history", empty, "-programme", broken}, "-programme " + broken},
		{header + "\n", []string{"-history", empty, "-states"}, "-states"},
	} {
		stdout, stderr, code := runWith(t, c.input, append([]string{"outlook"}, c.args...)...)
		if stdout != "" || code != exitUsage || !strings.Contains(stderr, c.want) {
			t.Errorf("%v: exit %d, %q, %q, want %q", c.args, code, stdout, stderr, c.want)
		}
	}
}
