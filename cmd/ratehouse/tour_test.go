package main

import (
	"fmt"
	"os"
	"path/filepath"
	"testing"
	"time"

	"ratehouse/store"
	"ratehouse/store/proof"
	"ratehouse/store/storetest"
	"ratehouse/web/webtest"
)

// tour is where the README's pictures lie; RATEHOUSE_TOUR=1 makes them anew.
const tour = "../../testdata/tour"

// TestTour walks through the demonstration as its people do and leaves a picture of every page; their
// other forms, tablet, dark and as printed, come from the tests of the pages.
func TestTour(t *testing.T) {
	t.Parallel()
	now := time.Date(2026, time.December, 1, 8, 52, 0, 0, demoZone())
	lab := demoLab(t, now)
	base := webtest.Serve(t, lab)
	people := map[store.Role]string{}
	for _, a := range demoAccounts() {
		people[a.Role] = a.Password
	}
	tabs := map[string]*webtest.Tab{}
	for _, stop := range []struct {
		name, person, path string
		readme             bool
	}{
		{"login", "", "/login", false},
		{"today", "technician", "/today", true},
		{"new", "technician", "/batches/new", false},
		{"round", "technician", "/batches/" + demoRunning + "/rounds/9", true},
		{"batches", "lead", "/batches", false},
		{"batch", "lead", "/batches/" + demoFinished, false},
		{"running", "lead", "/batches/" + demoRunning, true},
		{"trouble", "lead", "/batches/" + demoTrouble, false},
		{"ratesheet", "lead", "/batches/" + demoTrouble + "/movements/OD44-119028", true},
		{"release", "lead", "/batches/" + demoFinished + "/release", true},
		{"certificate", "lead", "/certificates/" + demoFinished + "-0001", true},
	} {
		tab := tabs[stop.person]
		if tab == nil {
			tab = webtest.Start(t, base)
			tabs[stop.person] = tab
			if stop.person != "" {
				tab.SignIn(stop.person, people[store.Role(stop.person)])
			}
		}
		tab.Go(stop.path)
		if stop.name == "round" && tab.Count(`form[action$="/open"] button`) > 0 {
			tab.Press(`form[action$="/open"] button`)
		}
		if shot := tab.Shot("tour-" + stop.name); stop.readme {
			keep(t, shot, stop.name)
		}
		tab.Axe()
		if stop.name == "certificate" {
			if leaves := tab.PDF("tour-" + stop.name); leaves != 1 {
				t.Errorf("%d leaves, want one", leaves)
			}
		}
	}
}

// demoLab is the demonstration as of now, on a database of the test.
func demoLab(t *testing.T, now time.Time) *store.Lab {
	t.Helper()
	db := storetest.Database(t)
	key, err := proof.GenerateKey()
	if err != nil {
		t.Fatal(err)
	}
	if err := (&demo{now: now, key: key}).build(t.Context(), db.App); err != nil {
		t.Fatal(err)
	}
	lab, err := store.Open(t.Context(), store.Config{DSN: db.App, Clock: func() time.Time { return now }, Engine: engine(), Key: key})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(lab.Close)
	lab.ShowAccounts(demoAccounts())
	return lab
}

// keep copies a picture into the README's tour when that is asked for.
func keep(t *testing.T, file, name string) {
	t.Helper()
	if os.Getenv("RATEHOUSE_TOUR") == "" {
		return
	}
	data, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	if err := os.MkdirAll(tour, 0o755); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(filepath.Join(tour, name+".png"), data, 0o644); err != nil {
		t.Fatal(err)
	}
}

// TestDemoHasWork wants the demonstration to hold what it promises, at any hour it is started.
func TestDemoHasWork(t *testing.T) {
	t.Parallel()
	for _, hour := range []int{0, 9, 23} {
		now := time.Date(2026, time.December, 1, hour, 30, 0, 0, demoZone())
		lab := demoLab(t, now)
		accounts, err := lab.Accounts(t.Context(), store.Program)
		if err != nil {
			t.Fatal(err)
		}
		if len(accounts) != 4 || !lab.House().Demo {
			t.Errorf("%d accounts, demo %v", len(accounts), lab.House().Demo)
		}
		today, err := lab.Today(t.Context(), store.Program)
		if err != nil {
			t.Fatal(err)
		}
		due := fmt.Sprint()
		for _, r := range today.Due {
			due += fmt.Sprintf("%s:%d ", r.Batch.Code, r.K)
		}
		if want := demoTrouble + ":6 " + demoRunning + ":9 " + demoLast + ":0 "; due != want {
			t.Errorf("at %d:30 due are %q, want %q", hour, due, want)
		}
		checkTrouble(t, lab)
	}
}

// checkTrouble wants every kind of trouble in the batch that has it.
func checkTrouble(t *testing.T, lab *store.Lab) {
	t.Helper()
	s, err := lab.BatchSheet(t.Context(), store.Program, demoTrouble)
	if err != nil {
		t.Fatal(err)
	}
	sum, err := s.Summarise()
	if err != nil {
		t.Fatal(err)
	}
	all := sum.All()
	corrected := 0
	for _, m := range s.Movements {
		corrected += m.Corrections
	}
	if all.Rejected != 1 || all.Withdrawn != 1 || sum.Cannot == 0 || corrected != 1 || len(s.Remarks) != 1 {
		t.Errorf("rejected %d, withdrawn %d, cannot pass %d, corrections %d, remarks %d", all.Rejected, all.Withdrawn, sum.Cannot, corrected, len(s.Remarks))
	}
}
