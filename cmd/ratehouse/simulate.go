package main

import (
	"context"
	"flag"
	"fmt"
	"io"
	"strconv"
	"strings"

	"ratehouse/trial"
	"ratehouse/trial/sheet"
	"ratehouse/trial/simulate"
)

// simulation is what simulate was asked for.
type simulation struct {
	prog              *trial.Programme
	movements, days   int
	seed              uint64
	category, calibre string
	states            bool
}

func runSimulate(ctx context.Context, p program, args []string) int {
	s, code, ok := simulationOf(p, args)
	if !ok {
		return code
	}
	if err := s.write(ctx, p.stdout); err != nil {
		return p.fail("simulate", fmt.Errorf("cannot write: %w", err))
	}
	return exitDone
}

// simulationOf reads the arguments; without ok the program ends with the code.
func simulationOf(p program, args []string) (s simulation, code int, ok bool) {
	flags := flag.NewFlagSet("ratehouse simulate", flag.ContinueOnError)
	flags.SetOutput(p.stderr)
	flags.Usage = func() { simulateFlags(p.stderr) }
	s.prog = trial.ISO3159()
	flags.IntVar(&s.movements, "n", 100, "")
	flags.Uint64Var(&s.seed, "seed", 1, "")
	flags.IntVar(&s.days, "days", len(s.prog.Days), "")
	flags.StringVar(&s.category, "category", s.prog.Categories[0].Code, "")
	flags.StringVar(&s.calibre, "calibre", "", "")
	flags.BoolVar(&s.states, "states", false, "")
	programme := flags.String("programme", s.prog.Code, "")
	if code, ok = parsed(flags.Parse(args)); !ok {
		return s, code, false
	}
	wrong := ""
	switch {
	case *programme != s.prog.Code:
		wrong = "-programme with another programme than " + s.prog.Code + ": not built yet"
	case flags.NArg() > 0:
		wrong = "no file is read: " + strconv.Quote(flags.Arg(0)) + " is one argument too many"
	case s.movements < 0:
		wrong = "-n must not be negative"
	case s.days < 0 || s.days > len(s.prog.Days):
		wrong = fmt.Sprintf("-days must be 0 to %d", len(s.prog.Days))
	case !s.prog.HasCategory(s.category):
		wrong = fmt.Sprintf("-category %q: the programme does not know it", s.category)
	case strings.TrimSpace(s.calibre) != s.calibre || strings.ContainsAny(s.calibre, "\r\n"):
		wrong = "-calibre must be one line without blanks around it"
	default:
		return s, exitDone, true
	}
	fmt.Fprintln(p.stderr, "ratehouse simulate: "+wrong)
	return s, exitUsage, false
}

// simulateFlags lists what simulate takes.
func simulateFlags(w io.Writer) {
	fmt.Fprint(w, `Usage: ratehouse simulate [flags]

Prints invented movements in the form that judge reads, drawn from a stated model: mean of the
calibre, vertical pattern, flat positions, temperature, day noise, drift, some faulty ones, the
seconds hand's eccentricity, errors common to a round. The same seed prints the same movements.

  -n N             how many (default 100)
  -seed S          whole number, 0 or more (default 1)
  -states          states s0..s15 in s instead of rates d1..d15 in s/d
  -days K          leave the days after K blank (default: all are there)
  -category CODE   category of every movement (default 1)
  -calibre CODE    add a column calibre
  -programme CODE  test programme (default iso3159)

`)
}

// write prints the movements, each as soon as it is drawn.
func (s simulation) write(ctx context.Context, w io.Writer) error {
	out := sheet.NewWriter(w)
	if err := out.Row(s.header()...); err != nil {
		return err
	}
	run := simulate.Default().Run(s.prog, s.seed)
	for i := range s.movements {
		if err := ctx.Err(); err != nil {
			return err
		}
		cells := append([]string{fmt.Sprintf("SIM-%07d", i+1), s.category}, s.numbers(run.Next())...)
		if err := out.Row(s.withCalibre(cells, s.calibre)...); err != nil {
			return err
		}
	}
	return out.Flush()
}

func (s simulation) header() []string {
	cells := []string{"serial", "category"}
	if s.states {
		cells = append(cells, "s0")
	}
	for d := range s.prog.Days {
		cells = append(cells, map[bool]string{true: "s", false: "d"}[s.states]+strconv.Itoa(d+1))
	}
	return s.withCalibre(cells, "calibre")
}

func (s simulation) withCalibre(cells []string, cell string) []string {
	if s.calibre == "" {
		return cells
	}
	return append(cells, cell)
}

// numbers prints a movement's states, or its rates, blank after the last day wanted.
func (s simulation) numbers(states []trial.State) []string {
	var cells []string
	if s.states {
		cells = append(cells, states[0].String())
	}
	for d := 1; d < len(states); d++ {
		switch {
		case d > s.days:
			cells = append(cells, "")
		case s.states:
			cells = append(cells, states[d].String())
		default:
			cells = append(cells, trial.RateBetween(states[d-1], states[d], s.prog.Reading.IntervalS).Decimal(3))
		}
	}
	return cells
}
