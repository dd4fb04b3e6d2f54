package main

import (
	"context"
	"io"
	"strings"
	"testing"
)

// What simulate prints is what judge reads: rates and states of one seed lead to the same verdicts.
func TestSimulateFeedsJudge(t *testing.T) {
	t.Parallel()
	var verdicts []string
	for _, form := range [][]string{nil, {"-states"}} {
		drawn, stderr, code := runWith(t, "", append([]string{"simulate", "-n", "450", "-seed", "7", "-category", "2", "-calibre", "KW-21"}, form...)...)
		if code != exitDone || stderr != "" {
			t.Fatalf("%v: exit %d, %s", form, code, stderr)
		}
		judged, stderr, code := runWith(t, drawn, append([]string{"judge"}, form...)...)
		if code != exitDone || stderr != "" {
			t.Fatalf("judge %v: exit %d, %s", form, code, stderr)
		}
		verdicts = append(verdicts, judged)
	}
	sameLines(t, "from states", verdicts[1], verdicts[0])
	lines := strings.Split(strings.TrimSpace(verdicts[0]), "\n")
	if len(lines) != 451 || !strings.HasPrefix(lines[1], "SIM-0000001,2,") || !strings.HasSuffix(lines[1], ",KW-21") {
		t.Errorf("%d lines, the first %q", len(lines), lines[1])
	}
	for _, verdict := range []string{",pass,", ",fail,"} {
		if !strings.Contains(verdicts[0], verdict) {
			t.Errorf("no %s among 450", verdict)
		}
	}
}

// A seed is a promise: the same movements, and the first ones whatever follows.
func TestSimulateBySeed(t *testing.T) {
	t.Parallel()
	text := func(args ...string) string {
		out, _, _ := runWith(t, "", append([]string{"simulate"}, args...)...)
		return out
	}
	long := text("-n", "300", "-seed", "5")
	if again := text("-n", "300", "-seed", "5"); again != long {
		t.Error("one seed, two answers")
	}
	if short := text("-n", "40", "-seed", "5"); !strings.HasPrefix(long, short) {
		t.Error("the first 40 of 300 are not those of 40")
	}
	if text("-n", "300", "-seed", "6") == long {
		t.Error("two seeds, one answer")
	}
	if none := text("-n", "0"); none != "serial,category,d1,d2,d3,d4,d5,d6,d7,d8,d9,d10,d11,d12,d13,d14,d15\n" {
		t.Errorf("none: %q", none)
	}
}

// -days leaves later days blank, and judge leaves such movements open.
func TestSimulateOpenMovements(t *testing.T) {
	t.Parallel()
	for form, blanks := range map[string]int{"": 6, "-states": 6} {
		args := []string{"simulate", "-n", "5", "-days", "9"}
		if form != "" {
			args = append(args, form)
		}
		drawn, _, _ := runWith(t, "", args...)
		for row := range strings.Lines(drawn) {
			if strings.HasPrefix(row, "SIM-") && !strings.HasSuffix(row, strings.Repeat(",", blanks)+"\n") {
				t.Errorf("%s %q: want %d blanks at the end", form, row, blanks)
			}
		}
		judged, stderr, code := runWith(t, drawn, append([]string{"judge"}, args[5:]...)...)
		if code != exitDone || strings.Contains(judged, ",pass,") {
			t.Errorf("%s: exit %d %s\n%s", form, code, stderr, judged)
		}
	}
}

func TestSimulateRefuses(t *testing.T) {
	t.Parallel()
	for _, args := range [][]string{{"-n", "-1"}, {"-n", "many"}, {"-seed", "-3"}, {"-days", "16"}, {"-days", "-1"}, {"-category", "3"}, {"-calibre", " X"},
		{"-programme", "winter.json"}, {"5"}, {"-unknown"}} {
		stdout, stderr, code := runWith(t, "", append([]string{"simulate"}, args...)...)
		if code != exitUsage || stdout != "" || stderr == "" {
			t.Errorf("%v: exit %d, %q, %q", args, code, stdout, stderr)
		}
	}
	full := program{func(string) string { return "" }, strings.NewReader(""), fullDisk{}, io.Discard}
	if code := runSimulate(t.Context(), full, []string{"-n", "5"}); code != exitUsage {
		t.Errorf("output that cannot be written: exit %d", code)
	}
	stopped, stop := context.WithCancel(t.Context())
	stop()
	full.stdout = io.Discard
	if code := runSimulate(stopped, full, []string{"-n", "5"}); code != exitUsage {
		t.Errorf("interrupted: exit %d", code)
	}
}
