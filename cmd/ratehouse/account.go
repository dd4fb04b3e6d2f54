package main

import (
	"bufio"
	"context"
	"errors"
	"fmt"
	"io"
	"strings"
	"text/tabwriter"
	"time"

	"ratehouse/store"
)

func accountFlags(w io.Writer) {
	fmt.Fprint(w, `Usage:
  ratehouse account add -role ROLE -title NAME [-language en|fr|de] ACCOUNT   the password is read from standard input
  ratehouse account list
  ratehouse account disable ACCOUNT

  -role      technician, lead, adjuster or manager
  -title     the name that is printed on papers
`)
	listSettings(w, databaseSettings())
}

// runAccount adds, lists or disables accounts, as the program itself: who may run it has the database.
func runAccount(ctx context.Context, p program, args []string) int {
	var c config
	var n store.NewAccount
	flags := flagsOf(p, "account", &c, databaseSettings())
	flags.StringVar((*string)(&n.Role), "role", "", "")
	flags.StringVar(&n.Title, "title", "", "")
	flags.StringVar(&n.Language, "language", "", "")
	flags.Usage = func() { accountFlags(p.stderr) }
	verb, rest := verbOf(args)
	if code, ok := parsed(flags.Parse(rest)); !ok {
		return code
	}
	switch {
	case verb == "list" && flags.NArg() == 0:
		return withLab(ctx, p, "account", &c, func(l *store.Lab) error { return listAccounts(ctx, p, l) })
	case verb == "add" && flags.NArg() == 1:
		n.Name = flags.Arg(0)
		return addAccount(ctx, p, &c, n)
	case verb == "disable" && flags.NArg() == 1:
		return withLab(ctx, p, "account", &c, func(l *store.Lab) error {
			return l.DisableAccount(ctx, store.Program, flags.Arg(0))
		})
	}
	accountFlags(p.stderr)
	return exitUsage
}

// verbOf takes the word that says what to do; flags follow it.
func verbOf(args []string) (verb string, rest []string) {
	if len(args) == 0 {
		return "", nil
	}
	return args[0], args[1:]
}

func addAccount(ctx context.Context, p program, c *config, n store.NewAccount) int {
	var err error
	if n.Password, err = readPassword(p.stdin); err != nil {
		return p.fail("account", err)
	}
	return withLab(ctx, p, "account", c, func(l *store.Lab) error {
		made, err := l.AddAccount(ctx, store.Program, n)
		if err == nil {
			fmt.Fprintf(p.stdout, "%s (%s) may now sign in as %s\n", made.Title, made.Role, made.Name)
		}
		return err
	})
}

// readPassword takes the first line of standard input, without its end; blanks belong to a password.
func readPassword(in io.Reader) (string, error) {
	line, err := bufio.NewReader(io.LimitReader(in, 4096)).ReadString('\n')
	if err != nil && !errors.Is(err, io.EOF) {
		return "", fmt.Errorf("password from standard input: %w", err)
	}
	line = strings.TrimSuffix(strings.TrimSuffix(line, "\n"), "\r")
	if line == "" {
		return "", errors.New("no password on standard input: write it there, on one line")
	}
	return line, nil
}

func listAccounts(ctx context.Context, p program, l *store.Lab) error {
	list, err := l.Accounts(ctx, store.Program)
	if err != nil {
		return err
	}
	w := tabwriter.NewWriter(p.stdout, 0, 0, 2, ' ', 0)
	fmt.Fprintln(w, "ACCOUNT\tROLE\tNAME\tSINCE\tSTATE")
	for _, a := range list {
		state := "open"
		if a.Disabled {
			state = "disabled"
		}
		fmt.Fprintf(w, "%s\t%s\t%s\t%s\t%s\n", a.Name, a.Role, a.Title, a.MadeAt.UTC().Format(time.DateOnly), state)
	}
	return w.Flush()
}
