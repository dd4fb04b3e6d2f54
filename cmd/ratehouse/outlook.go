package main

import (
	"context"
	"errors"
	"flag"
	"fmt"
	"io"
	"os"
	"strconv"

	"ratehouse/trial"
	"ratehouse/trial/outlook"
	"ratehouse/trial/sheet"
)

// outlookJob is one run of outlook.
type outlookJob struct {
	prog           *trial.Programme
	judges         []*trial.Judge          // by category
	all            *trial.Prior            // the history
	own            map[string]*trial.Prior // the same by calibre
	ready          map[string]*outlook.Forecast
	stdin          io.Reader
	stdout, stderr io.Writer
	refused        bool
}

func runOutlook(_ context.Context, p program, args []string) int {
	flags := flag.NewFlagSet("ratehouse outlook", flag.ContinueOnError)
	flags.SetOutput(p.stderr)
	flags.Usage = func() { outlookFlags(p.stderr) }
	past := flags.String("history", "", "")
	code := flags.String("programme", "iso3159", "")
	if code, ok := parsed(flags.Parse(args)); !ok {
		return code
	}
	j := &outlookJob{stdin: p.stdin, stdout: p.stdout, stderr: p.stderr}
	file := flags.Arg(0)
	if flags.NArg() == 0 {
		file = "-"
	}
	switch {
	case *past == "":
		return j.fail(errors.New("-history wants a file of past movements"))
	case flags.NArg() > 1:
		return j.fail(errors.New("one file at a time, and flags stand before it"))
	case *code == "-" && *past == "-", file == "-" && (*code == "-" || *past == "-"):
		return j.fail(errors.New("standard input can be one thing only: history, programme or the rows"))
	}
	if err := j.prepare(*code); err != nil {
		return j.fail(fmt.Errorf("-programme %s: %w", *code, err))
	}
	return j.run(*past, file)
}

// outlookFlags lists what outlook takes.
func outlookFlags(w io.Writer) {
	fmt.Fprint(w, `Usage: ratehouse outlook -history HISTORY.csv [flags] [FILE|-]

Reads rows serial,category,d1..d15 (rates in s/d, optional calibre) of open movements, their later
days blank, and prints serial,read,pass_probability: how many days are there, and how probable it is
that the movement will pass. An estimate from the history and the movement's own days; 0 where it
has failed or cannot pass any more, 1 where it has passed, blank in a category without limits.

  -history FILE    past movements in the same form, by calibre where both have the column;
                   movements that were taken out early belong into it, their later days blank
  -programme P     test programme: the code of one built in, or a file (default
                   iso3159; "ratehouse programme -h" lists them)

Refused rows are named on standard error, those of the history with "history: " before; the exit
code is then 1.

`)
}

// prepare makes a judge for each category.
func (j *outlookJob) prepare(code string) (err error) {
	if j.prog, err = programmeNamed(code, j.stdin); err != nil {
		return err
	}
	if j.prog.Decision.Rule == trial.Guarded {
		return errors.New("its guarded decision rule needs an uncertainty: not built yet")
	}
	for _, c := range j.prog.Categories {
		one, err := trial.NewJudge(j.prog, c.Code)
		if err != nil {
			return err
		}
		j.judges = append(j.judges, one)
	}
	return nil
}

// fail reports what keeps the job from being done at all; a refusal of a header or file names line and
// column.
func (j *outlookJob) fail(err error) int {
	fmt.Fprintln(j.stderr, "ratehouse outlook: "+err.Error())
	return exitUsage
}

func (j *outlookJob) run(past, file string) int {
	j.all, j.own, j.ready = trial.NewPrior(len(j.prog.Days)), map[string]*trial.Prior{}, map[string]*outlook.Forecast{}
	movements, close, err := j.open(past)
	if err == nil {
		defer close()
		err = j.rows(movements, "history: ", j.learn)
	}
	if err != nil {
		return j.unreadable("history: ", err)
	}
	if movements, close, err = j.open(file); err != nil {
		return j.unreadable("", err)
	}
	defer close()
	return j.forecasts(movements)
}

// forecasts prints one a movement.
func (j *outlookJob) forecasts(movements *sheet.Movements) int {
	out := sheet.NewWriter(j.stdout)
	wrong := out.Row("serial", "read", "pass_probability")
	err := j.rows(movements, "", func(m *sheet.Movement, rates []trial.Rate) error {
		f, err := j.forecast(string(m.Calibre), m.Category)
		if err != nil || wrong != nil {
			return err
		}
		p, ok := f.Chance(rates)
		wrong = out.Row(string(m.Serial), strconv.Itoa(daysRead(rates)), probability(p, ok))
		return nil
	})
	if closing := out.Flush(); closing != nil {
		return j.fail(fmt.Errorf("cannot write: %w", closing))
	}
	switch {
	case err != nil:
		return j.unreadable("", err)
	case j.refused:
		return exitRefused
	}
	return exitDone
}

// learn counts a past movement.
func (j *outlookJob) learn(m *sheet.Movement, rates []trial.Rate) error {
	if len(m.Calibre) > 0 {
		own := j.own[string(m.Calibre)]
		if own == nil {
			own = trial.NewPrior(len(j.prog.Days))
			j.own[string(m.Calibre)] = own
		}
		if err := own.Add(rates); err != nil {
			return err
		}
	}
	return j.all.Add(rates)
}

// forecast is kept by category and calibre; calibres without history are one.
func (j *outlookJob) forecast(calibre string, category int) (*outlook.Forecast, error) {
	own := j.own[calibre]
	if own == nil {
		calibre = ""
	}
	key := strconv.Itoa(category) + " " + calibre
	if f, ok := j.ready[key]; ok {
		return f, nil
	}
	f, err := outlook.New(j.judges[category], j.all, own)
	j.ready[key] = f
	return f, err
}

// open reads the header of a file.
func (j *outlookJob) open(name string) (m *sheet.Movements, close func() error, err error) {
	if name == "-" {
		m, err = sheet.OpenMovements(j.stdin, j.prog, false)
		return m, func() error { return nil }, err
	}
	f, err := os.Open(name)
	if err != nil {
		return nil, nil, err
	}
	if m, err = sheet.OpenMovements(f, j.prog, false); err != nil {
		return nil, nil, errors.Join(err, f.Close())
	}
	return m, f.Close, nil
}

// rows gives each movement of a file with its rates, and names the rows refused.
func (j *outlookJob) rows(movements *sheet.Movements, where string, each func(*sheet.Movement, []trial.Rate) error) error {
	rates := make([]trial.Rate, len(j.prog.Days))
	for {
		m, fault, err := movements.Next()
		switch {
		case errors.Is(err, io.EOF):
			return nil
		case err != nil:
			return err
		case fault != nil:
			j.refused = true
			fmt.Fprintf(j.stderr, "%s%v\n", where, fault)
			continue
		}
		for d := range rates {
			rates[d] = trial.Rate{}
			if m.Known[d/64]>>(d%64)&1 == 1 {
				rates[d] = trial.RateOf(m.Rates[d])
			}
		}
		if err := each(m, rates); err != nil {
			return err
		}
	}
}

// unreadable reports a header or file that cannot be read.
func (j *outlookJob) unreadable(where string, err error) int {
	var fault *sheet.Refusal
	if errors.As(err, &fault) {
		fmt.Fprintf(j.stderr, "%s%v\n", where, fault)
		return exitUsage
	}
	return j.fail(fmt.Errorf("cannot read: %s%w", where, err))
}

func daysRead(rates []trial.Rate) (n int) {
	for _, r := range rates {
		if r.Known() {
			n++
		}
	}
	return n
}

// probability prints one, blank where there is none.
func probability(p float64, ok bool) string {
	if !ok {
		return ""
	}
	const decimals = 6
	return strconv.FormatFloat(p, 'f', decimals, 64)
}
