package web_test

import (
	"strings"
	"testing"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/web/webtest"
)

func demoAccounts() []store.DemoAccount {
	return []store.DemoAccount{
		{Name: "technician", Password: storetest.Password, Role: store.Technician}, {Name: "lead", Password: storetest.Password, Role: store.Lead},
		{Name: "adjuster", Password: storetest.Password, Role: store.Adjuster}, {Name: "manager", Password: storetest.Password, Role: store.Manager},
	}
}

func TestLoginPage(t *testing.T) {
	t.Parallel()
	house := storetest.New(t)
	house.ShowAccounts(demoAccounts())
	tab := webtest.Start(t, webtest.Serve(t, house.Lab))
	tab.Go("/login")
	tab.Shots("login")
	tab.AxeBoth()
	if got := webtest.Eval[string](tab, `document.activeElement.name`); got != "name" {
		t.Errorf("the focus is on %q, want the account's field", got)
	}
	tab.Allow("status of 422")
	tab.Type(`input[name=name]`, "lead")
	tab.Type(`input[name=password]`, "wrong")
	tab.Press(`main form button[type=submit]`)
	if got := tab.Text(".faults"); !strings.Contains(got, "do not belong together") {
		t.Errorf("a wrong password says %q", got)
	}
	if name, pass := tab.Value(`input[name=name]`), tab.Value(`input[name=password]`); name != "lead" || pass != "" {
		t.Errorf("after a wrong password the fields hold %q and %q, want the account and nothing", name, pass)
	}
	if got := webtest.Eval[string](tab, `document.activeElement.className`); got != "faults" {
		t.Errorf("the focus is on %q, want the list of faults", got)
	}
	tab.Shot("login-fault")
	tab.Axe()
	tab.Press(`button[value=de]`)
	if got := tab.Text("h1"); got != "Anmelden" {
		t.Errorf("in German the page is headed %q", got)
	}
	tab.Press(`button[value=dark]`)
	if got := webtest.Eval[string](tab, `getComputedStyle(document.body.parentElement).backgroundColor`); got != "rgb(14, 19, 17)" {
		t.Errorf("the dark appearance is not kept: background %s", got)
	}
}

func TestErrorPages(t *testing.T) {
	t.Parallel()
	tab := webtest.Start(t, webtest.Serve(t, storetest.New(t).Lab))
	tab.Allow("status of 404")
	tab.Go("/no/such/page")
	if got := tab.Text("h1"); got != "There is nothing at this address" {
		t.Errorf("headed %q", got)
	}
	tab.Shots("error-404")
	tab.AxeBoth()
}
