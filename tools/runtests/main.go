// Runtests runs go test and counts: a line for each package, the output of what failed, every
// skipped test with its reason, and a closing line "N passed, N failed, N skipped". A test that was
// skipped is never passed over in silence.
//
//	go run ./tools/runtests [flags and packages of go test]
package main

import (
	"bufio"
	"encoding/json"
	"fmt"
	"io"
	"maps"
	"os"
	"os/exec"
	"slices"
	"strings"
)

// event is one line of go test -json.
type event struct {
	Action     string
	Package    string
	ImportPath string
	Test       string
	Output     string
	Elapsed    float64
}

// tally is what a run came to.
type tally struct {
	passed, failed, skipped int
	reasons                 map[string][]string // of skips: the tests by reason
	output                  map[string]string   // of unfinished tests, by package and name
	broken                  bool                // something failed that is no test: a build, a package
}

func main() {
	code, err := run(".", os.Args[1:], os.Stdout)
	if err != nil {
		fmt.Fprintln(os.Stderr, "runtests:", err)
		code = 2
	}
	os.Exit(code)
}

// run tests in the module of dir and reports the exit code that the outcome deserves.
func run(dir string, args []string, out io.Writer) (int, error) {
	cmd := exec.Command("go", append([]string{"test", "-json"}, args...)...)
	cmd.Dir, cmd.Stderr = dir, os.Stderr
	pipe, err := cmd.StdoutPipe()
	if err != nil {
		return 0, err
	}
	if err := cmd.Start(); err != nil {
		return 0, err
	}
	t, err := count(pipe, out)
	if err != nil {
		return 0, err
	}
	failed := cmd.Wait() != nil
	t.report(out)
	if failed || t.failed > 0 || t.broken {
		return 1, nil
	}
	return 0, nil
}

// count reads the events to their end.
func count(in io.Reader, out io.Writer) (*tally, error) {
	t := &tally{reasons: map[string][]string{}, output: map[string]string{}}
	lines := bufio.NewReader(in)
	for {
		line, err := lines.ReadBytes('\n')
		if len(line) > 0 {
			var e event
			if json.Unmarshal(line, &e) != nil {
				fmt.Fprint(out, string(line)) // not an event: the go command itself has something to say
			} else {
				t.take(e, out)
			}
		}
		if err == io.EOF {
			return t, nil
		}
		if err != nil {
			return nil, err
		}
	}
}

func (t *tally) take(e event, out io.Writer) {
	key := e.Package + " " + e.Test
	switch {
	case e.Action == "build-output":
		fmt.Fprint(out, e.Output)
	case e.Action == "build-fail":
		t.broken = true
	case e.Action == "output":
		t.output[key] += e.Output
	case e.Test == "":
		t.packageEnds(e, out)
	case e.Action == "pass":
		t.passed++
		delete(t.output, key)
	case e.Action == "skip":
		t.skipped++
		why := reason(t.output[key])
		t.reasons[why] = append(t.reasons[why], e.Package+" "+e.Test)
		delete(t.output, key)
	case e.Action == "fail":
		t.failed++
		fmt.Fprint(out, t.output[key])
		delete(t.output, key)
	}
}

// packageEnds prints the package's closing line; when it failed, also all that no test of it has
// answered for, such as a panic.
func (t *tally) packageEnds(e event, out io.Writer) {
	own := e.Package + " "
	switch e.Action {
	case "fail":
		t.broken = true
		for _, key := range slices.Sorted(maps.Keys(t.output)) {
			if strings.HasPrefix(key, own) && key != own {
				fmt.Fprint(out, t.output[key])
			}
		}
		fmt.Fprint(out, t.output[own])
	case "pass", "skip":
		fmt.Fprint(out, lastLine(t.output[own]))
	default:
		return
	}
	maps.DeleteFunc(t.output, func(key, _ string) bool { return strings.HasPrefix(key, own) })
}

func (t *tally) report(out io.Writer) {
	for _, why := range slices.Sorted(maps.Keys(t.reasons)) {
		tests := t.reasons[why]
		fmt.Fprintf(out, "SKIPPED %d: %s\n", len(tests), why)
		for _, name := range tests {
			fmt.Fprintln(out, "    "+name)
		}
	}
	fmt.Fprintf(out, "%d passed, %d failed, %d skipped\n", t.passed, t.failed, t.skipped)
}

// reason is what a skipped test said: the last line that it wrote itself.
func reason(output string) string {
	why := "no reason given"
	for line := range strings.Lines(output) {
		if line = strings.TrimSpace(line); line != "" && !strings.HasPrefix(line, "=== ") && !strings.HasPrefix(line, "--- ") {
			why = line
		}
	}
	if _, after, found := strings.Cut(why, ".go:"); found { // file.go:12: text
		if _, text, found := strings.Cut(after, ": "); found {
			why = text
		}
	}
	return why
}

func lastLine(text string) string {
	text = strings.TrimSuffix(text, "\n")
	return text[strings.LastIndexByte(text, '\n')+1:] + "\n"
}
