package page

import (
	"context"
	"net/http"
	"time"

	"ratehouse/store"
	"ratehouse/web/words"
)

// Context is what a page knows about its request. The printer is embedded, so that templates write
// c.Say(words.NavToday) and c.Signed(rate, 1).
type Context struct {
	*words.Printer
	Actor    store.Actor
	SignedIn bool
	House    store.House
	Now      time.Time // the laboratory's clock when the request came in
	ID       string    // of the request: in the log, and on a fault page for people to quote
	Theme    string    // "light", "dark" or "" for the device's
	Path     string    // of the request, with its query: where a change of language returns to
	Base     string    // public base address, without a slash at its end; never from the Host header
	Nav      []NavItem // what the house bar offers to this actor
}

// NavItem is one word of the house bar.
type NavItem struct {
	URL   string
	Label words.Text
	Right store.Right
}

// Navigation is the whole house bar. The server leaves out what has no route or what the actor may
// not see.
var Navigation = []NavItem{
	{TodayURL, words.NavToday, store.RightToday},
	{BatchesURL, words.NavBatches, store.RightBatches},
	{TrendsURL, words.NavTrends, store.RightVerdicts},
	{BenchURL, words.NavBench, store.RightBench},
	{ChambersURL, words.NavChambers, store.RightToday},
	{ProgrammesURL, words.NavProgrammes, store.RightSetup},
	{JournalURL, words.NavJournal, store.RightJournal},
	{AccountsURL, words.NavAccounts, store.RightAccounts},
	{SettingsURL, words.NavSettings, store.RightSetup},
}

type contextKey struct{}

// With puts the page context into a request's context.
func With(ctx context.Context, c *Context) context.Context {
	return context.WithValue(ctx, contextKey{}, c)
}

// From takes it out again. The server puts one into every request, so a missing one is a defect.
func From(ctx context.Context) *Context {
	c, ok := ctx.Value(contextKey{}).(*Context)
	if !ok {
		panic("page: a handler ran outside the server's middleware")
	}
	return c
}

// Of is From for a request.
func Of(r *http.Request) *Context { return From(r.Context()) }

// Start is the page the actor sees first: the readers what is due, everybody else the batches. It is
// the log-in while nobody is signed in.
func (c *Context) Start() NavItem {
	if !c.SignedIn || len(c.Nav) == 0 {
		return NavItem{URL: LoginURL, Label: words.SignIn}
	}
	home := HomeOf(c.Actor.Role)
	for _, n := range c.Nav {
		if n.URL == home.URL {
			return n
		}
	}
	return c.Nav[0]
}

// HomeOf is the page that an account of this role sees first.
func HomeOf(r store.Role) NavItem {
	if r == store.Technician {
		return Navigation[0]
	}
	return Navigation[1]
}
