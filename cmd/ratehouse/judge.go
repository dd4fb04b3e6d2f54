package main

import (
	"context"
	"errors"
	"flag"
	"fmt"
	"io"
	"io/fs"
	"os"
	"strings"

	"ratehouse/trial"
	"ratehouse/trial/sheet"
)

func runJudge(_ context.Context, p program, args []string) int {
	return judge(args, p.stdin, p.stdout, p.stderr)
}

// judgeJob is one run of judge.
type judgeJob struct {
	prog           *trial.Programme
	states         bool
	budget         *trial.Budget // nil: no probabilities are wanted
	format         sheet.VerdictFormat
	stdout, stderr io.Writer
}

// judge reads rates or states and prints a verdict a movement. It streams: memory grows only by
// what tells duplicate serials apart.
func judge(args []string, stdin io.Reader, stdout, stderr io.Writer) int {
	flags := flag.NewFlagSet("ratehouse judge", flag.ContinueOnError)
	flags.SetOutput(stderr)
	flags.Usage = func() { judgeFlags(stderr) }
	code := flags.String("programme", "iso3159", "")
	states := flags.Bool("states", false, "")
	uncertainty := flags.String("uncertainty", "", "")
	budget := flags.String("budget", "", "")
	format := flags.String("format", "csv", "")
	if err := flags.Parse(args); errors.Is(err, flag.ErrHelp) {
		return exitDone
	} else if err != nil {
		return exitUsage
	}
	job := judgeJob{states: *states, format: sheet.VerdictFormat(*format), stdout: stdout, stderr: stderr}
	if err := job.wantDoubt(flags, *uncertainty, *budget); err != nil {
		return job.fail(err.Error())
	}
	switch {
	case job.format != sheet.CSV && job.format != sheet.JSON:
		return job.fail(fmt.Sprintf("-format %q: csv and json are known", *format))
	case flags.NArg() > 1:
		return job.fail("one file at a time, and flags stand before it")
	case *code == "-" && (flags.NArg() == 0 || flags.Arg(0) == "-"):
		return job.fail("standard input cannot be both the programme and the rows")
	}
	var err error
	if job.prog, err = programmeNamed(*code, stdin); err != nil {
		return job.fail("-programme " + *code + ": " + err.Error())
	}
	switch {
	case job.prog.Decision.Rule == trial.Guarded && job.budget == nil:
		return job.fail("-programme " + *code + ": its guarded decision rule needs an uncertainty: give -uncertainty or -budget")
	case flags.NArg() == 1 && flags.Arg(0) != "-":
		return job.file(flags.Arg(0))
	}
	return job.run(stdin)
}

// programmeNamed is a built-in programme by its code, else one from a file.
func programmeNamed(name string, stdin io.Reader) (*trial.Programme, error) {
	if p, ok := sheet.Builtin(name); ok {
		return p, nil
	}
	p, err := readProgramme(name, stdin)
	if errors.Is(err, fs.ErrNotExist) {
		return nil, fmt.Errorf("neither a built-in programme (%s) nor a file", strings.Join(sheet.BuiltinCodes(), ", "))
	}
	return p, err
}

// judgeFlags lists what judge takes.
func judgeFlags(w io.Writer) {
	fmt.Fprint(w, `Usage: ratehouse judge [flags] [FILE|-]

Reads rows serial,category,d1..d15 (rates in s/d) and prints a verdict a row. With
another programme there are as many columns d as it has days.

  -programme P     test programme: the code of one built in, or a file (default
                   iso3159; "ratehouse programme -h" lists them)
  -states          rows are serial,category,s0..s15: states in s, one a programme
                   day, as far apart as the programme reads (24 h)
  -format FORMAT   csv (default) or json, one object a line
  -uncertainty U   standard uncertainty of one state reading in s: adds pM, pV, ... pAll, the
                   probability that true values lie within limits (reading only: other
                   sources of uncertainty are not in it)
  -budget FILE     the same for a whole uncertainty budget, a JSON file

Refused rows are named on standard error; the exit code is then 1.

`)
}

// fail reports what keeps the job from being done at all.
func (j judgeJob) fail(reason string) int {
	fmt.Fprintln(j.stderr, "ratehouse judge: "+reason)
	return exitUsage
}

func (j judgeJob) file(name string) int {
	f, err := os.Open(name)
	if err != nil {
		return j.fail(err.Error())
	}
	defer f.Close()
	return j.run(f)
}

func (j judgeJob) run(in io.Reader) int {
	movements, err := sheet.OpenMovements(in, j.prog, j.states)
	if err != nil {
		return j.unreadable(err)
	}
	judges := make([]*trial.Judge, len(j.prog.Categories))
	for i, c := range j.prog.Categories {
		if judges[i], err = trial.NewJudge(j.prog, c.Code); err != nil {
			return j.fail(err.Error())
		}
	}
	open, doubts := sheet.NewVerdicts, j.doubt(judges)
	if doubts != nil {
		open = sheet.NewVerdictsWithChances
	}
	if j.prog.Decision.Rule == trial.Guarded {
		if judges, err = doubts.guarded(); err != nil {
			return j.fail(err.Error())
		}
	}
	verdicts := open(j.stdout, j.prog, j.format, movements.HasCalibre)
	refused, err := j.rows(movements, judges, doubts, verdicts)
	if closing := verdicts.Close(); closing != nil {
		return j.fail("cannot write: " + closing.Error())
	}
	switch {
	case err != nil:
		return j.unreadable(err)
	case refused:
		return exitRefused
	}
	return exitDone
}

// rows judges row after row. An error is the reader's: the writer keeps its own until Close.
func (j judgeJob) rows(movements *sheet.Movements, judges []*trial.Judge, doubts *doubt, verdicts *sheet.Verdicts) (refused bool, err error) {
	results := make([]trial.Result, len(judges))
	for {
		m, fault, err := movements.Next()
		switch {
		case errors.Is(err, io.EOF):
			return refused, nil
		case err != nil:
			return refused, err
		case fault != nil:
			refused = true
			fmt.Fprintln(j.stderr, fault)
			continue
		}
		result := &results[m.Category]
		judges[m.Category].MilliLong(m.Rates, m.Known, result)
		if doubts != nil {
			doubts.add(m, verdicts)
		}
		category := j.prog.Categories[m.Category].Code
		if verdicts.Write(m.Serial, []byte(category), m.Calibre, result) != nil {
			return refused, nil
		}
	}
}

// unreadable reports a header or file that cannot be read.
func (j judgeJob) unreadable(err error) int {
	var fault *sheet.Refusal
	if errors.As(err, &fault) {
		fmt.Fprintln(j.stderr, fault)
		return exitUsage
	}
	return j.fail("cannot read: " + err.Error())
}
