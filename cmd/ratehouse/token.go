package main

import (
	"context"
	"fmt"
	"io"
	"strings"
	"text/tabwriter"
	"time"

	"github.com/google/uuid"

	"ratehouse/store"
)

func tokenFlags(w io.Writer) {
	fmt.Fprint(w, `Usage:
  ratehouse token add -account ACCOUNT -scope SCOPE [-scope SCOPE] [-station CODE] [-ends DATE] TITLE   prints the secret, once
  ratehouse token list
  ratehouse token revoke ID

  -account   whom the token acts for
  -scope     read, readings, batches or climate; may be given several times
  -station   code of the station it stands at; written beside every reading
  -ends      last day on which it works, like 2027-01-31 (UTC)
`)
	listSettings(w, databaseSettings())
}

// scopesFlag gathers -scope flags.
type scopesFlag []store.Scope

func (s *scopesFlag) String() string { return fmt.Sprint(*s) }

// Set takes one scope, or several separated by commas.
func (s *scopesFlag) Set(text string) error {
	for one := range strings.SplitSeq(text, ",") {
		*s = append(*s, store.Scope(strings.TrimSpace(one)))
	}
	return nil
}

// runToken adds, lists or revokes tokens for the API.
func runToken(ctx context.Context, p program, args []string) int {
	var c config
	var n store.NewToken
	flags := flagsOf(p, "token", &c, databaseSettings())
	flags.StringVar(&n.Account, "account", "", "")
	flags.Var((*scopesFlag)(&n.Scopes), "scope", "")
	flags.StringVar(&n.Station, "station", "", "")
	ends := flags.String("ends", "", "")
	flags.Usage = func() { tokenFlags(p.stderr) }
	verb, rest := verbOf(args)
	if code, ok := parsed(flags.Parse(rest)); !ok {
		return code
	}
	if *ends != "" {
		last, err := time.Parse(time.DateOnly, *ends)
		if err != nil {
			return p.fail("token", fmt.Errorf("-ends %q: it must be a date like 2027-01-31", *ends))
		}
		n.EndsAt = last.AddDate(0, 0, 1)
	}
	switch {
	case verb == "list" && flags.NArg() == 0:
		return withLab(ctx, p, "token", &c, func(l *store.Lab) error { return listTokens(ctx, p, l) })
	case verb == "add" && flags.NArg() == 1:
		n.Title = flags.Arg(0)
		return withLab(ctx, p, "token", &c, func(l *store.Lab) error { return addToken(ctx, p, l, n) })
	case verb == "revoke" && flags.NArg() == 1:
		id, err := uuid.Parse(flags.Arg(0))
		if err != nil {
			return p.fail("token", fmt.Errorf("%q is no token's ID: 'ratehouse token list' shows them", flags.Arg(0)))
		}
		return withLab(ctx, p, "token", &c, func(l *store.Lab) error { return l.RevokeToken(ctx, store.Program, id) })
	}
	tokenFlags(p.stderr)
	return exitUsage
}

// addToken prints the secret alone on standard output, so that it can go straight into a file.
func addToken(ctx context.Context, p program, l *store.Lab, n store.NewToken) error {
	secret, t, err := l.AddToken(ctx, store.Program, n)
	if err != nil {
		return err
	}
	fmt.Fprintf(p.stderr, "token %s; its secret is shown this once:\n", t.ID)
	fmt.Fprintln(p.stdout, secret)
	return nil
}

func listTokens(ctx context.Context, p program, l *store.Lab) error {
	list, err := l.Tokens(ctx, store.Program)
	if err != nil {
		return err
	}
	w := tabwriter.NewWriter(p.stdout, 0, 0, 2, ' ', 0)
	fmt.Fprintln(w, "ID\tTITLE\tACCOUNT\tSCOPES\tSTATION\tMADE\tSTATE")
	for _, t := range list {
		scopes := make([]string, len(t.Scopes))
		for i, s := range t.Scopes {
			scopes[i] = string(s)
		}
		fmt.Fprintf(w, "%s\t%s\t%s\t%s\t%s\t%s\t%s\n", t.ID, t.Title, t.Account, strings.Join(scopes, ","), t.Station, t.MadeAt.Format(time.DateOnly), tokenState(t, l.Now()))
	}
	return w.Flush()
}

func tokenState(t store.Token, now time.Time) string {
	switch {
	case !t.Revoked.IsZero():
		return "revoked " + t.Revoked.Format(time.DateOnly)
	case !t.EndsAt.IsZero() && !now.Before(t.EndsAt):
		return "ended"
	case !t.EndsAt.IsZero():
		return "ends " + t.EndsAt.Format(time.RFC3339)
	}
	return "open"
}
