package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"strings"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/trial/sheet"
	"ratehouse/web/words"
)

func programmeFlags(w io.Writer) {
	fmt.Fprint(w, `Usage:
  ratehouse programme check FILE   tell what is wrong with a programme file, or what is in it
  ratehouse programme show CODE    print a built-in programme, to start an own one from
  ratehouse programme schema       print the JSON Schema of programme files
  ratehouse programme add FILE     add a programme, or a new version of one, to the laboratory

FILE may be - for standard input. A programme that was added is never changed: a
new version takes its place for batches to come. Built in: `+strings.Join(sheet.BuiltinCodes(), ", ")+`.

Exit status of check: 0 right; 1 not right; 2 a file that cannot be read.

`)
	listSettings(w, databaseSettings())
}

// runProgramme checks, shows or adds programmes.
func runProgramme(ctx context.Context, p program, args []string) int {
	var c config
	flags := flagsOf(p, "programme", &c, databaseSettings())
	flags.Usage = func() { programmeFlags(p.stderr) }
	verb, rest := verbOf(args)
	if code, ok := parsed(flags.Parse(rest)); !ok {
		return code
	}
	switch {
	case verb == "check" && flags.NArg() == 1:
		return checkProgramme(p, flags.Arg(0))
	case verb == "show" && flags.NArg() == 1:
		file, ok := sheet.BuiltinFile(flags.Arg(0))
		if !ok {
			return p.fail("programme", fmt.Errorf("%q is not built in (%s)", flags.Arg(0), strings.Join(sheet.BuiltinCodes(), ", ")))
		}
		return printAll(p, file)
	case verb == "schema" && flags.NArg() == 0:
		return printAll(p, sheet.Schema())
	case verb == "add" && flags.NArg() == 1:
		return addProgramme(ctx, p, &c, flags.Arg(0))
	}
	programmeFlags(p.stderr)
	return exitUsage
}

func printAll(p program, text []byte) int {
	if _, err := p.stdout.Write(text); err != nil {
		return p.fail("programme", fmt.Errorf("cannot write: %w", err))
	}
	return exitDone
}

// mostProgramme bounds a programme file, in bytes.
const mostProgramme = 1 << 20

// readProgramme reads a programme file. An error that is a *trial.Fault is the file's own.
func readProgramme(name string, stdin io.Reader) (*trial.Programme, error) {
	if name != "-" {
		file, err := os.Open(name)
		if err != nil {
			return nil, err
		}
		defer file.Close()
		stdin = file
	}
	data, err := io.ReadAll(io.LimitReader(stdin, mostProgramme+1))
	switch {
	case err != nil:
		return nil, err
	case len(data) > mostProgramme:
		return nil, fmt.Errorf("%s is longer than %d bytes", name, mostProgramme)
	}
	prog, err := sheet.ParseProgramme(data)
	if err != nil {
		return nil, err
	}
	for _, category := range prog.Categories {
		if _, err := trial.NewJudge(prog, category.Code); err != nil {
			return nil, err
		}
	}
	return prog, nil
}

func checkProgramme(p program, name string) int {
	prog, err := readProgramme(name, p.stdin)
	if fault := (*trial.Fault)(nil); errors.As(err, &fault) {
		fmt.Fprintf(p.stderr, "%s: %v\n", name, fault)
		return exitRefused
	} else if err != nil {
		return p.fail("programme", err)
	}
	return printAll(p, []byte(programmeSummary(prog)))
}

// programmeSummary says what a programme holds, a few lines.
func programmeSummary(p *trial.Programme) string {
	var b strings.Builder
	fmt.Fprintf(&b, "code:     %s version %s\ntitle:    %q\nhash:     %x\n", p.Code, p.Version, p.Title, sheet.Hash(p))
	checked := "nobody; papers cannot bear a standard's number as their method"
	if t := p.TextChecked; t != nil {
		checked = fmt.Sprintf("%q by %q on %s", t.Edition, t.By, t.Date)
	}
	fmt.Fprintf(&b, "checked:  %s\nreading:  every %d s\n", checked, p.Reading.IntervalS)
	for from := 0; from < len(p.Days); {
		to := from
		for to+1 < len(p.Days) && sameConditions(p.Days[to+1], p.Days[from]) {
			to++
		}
		d := p.Days[from]
		fmt.Fprintf(&b, "day %-9s %s %s °C", daySpan(from+1, to+1), d.Position, d.TemperatureC)
		if d.Accessory {
			b.WriteString(" with accessory")
		}
		b.WriteByte('\n')
		from = to + 1
	}
	for _, c := range p.Criteria {
		fmt.Fprintf(&b, "%s = %s%s\n", c.Symbol, p.Expression(c.Formula), limitsOf(p, c))
	}
	return b.String()
}

func sameConditions(a, b trial.Day) bool {
	return a.Position == b.Position && a.TemperatureC == b.TemperatureC && a.Accessory == b.Accessory
}

func daySpan(from, to int) string {
	if from == to {
		return fmt.Sprint(from)
	}
	return fmt.Sprintf("%d-%d", from, to)
}

// limitsOf lists the limits of a criterion by category.
func limitsOf(p *trial.Programme, c trial.Criterion) (text string) {
	for _, category := range p.Categories {
		l := c.Limits[category.Code]
		least, most := "", ""
		if l.HasMin {
			least = words.Shortest(l.Min)
		}
		if l.HasMax {
			most = words.Shortest(l.Max)
		}
		if l.Any() {
			text += fmt.Sprintf("; %s: %s...%s", category.Code, least, most)
		}
	}
	return text
}

func addProgramme(ctx context.Context, p program, c *config, name string) int {
	prog, err := readProgramme(name, p.stdin)
	if fault := (*trial.Fault)(nil); errors.As(err, &fault) {
		fmt.Fprintf(p.stderr, "%s: %v\n", name, fault)
		return exitRefused
	} else if err != nil {
		return p.fail("programme", err)
	}
	return withLab(ctx, p, "programme", c, func(l *store.Lab) error {
		if err := l.AddProgramme(ctx, store.Program, prog); err != nil {
			return err
		}
		_, err := fmt.Fprintf(p.stdout, "%s version %s added, hash %x\n", prog.Code, prog.Version, sheet.Hash(prog))
		return err
	})
}
