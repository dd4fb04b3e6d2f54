package floor_test

import (
	"strings"
	"testing"
	"time"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/web/webtest"
)

// at moves the clock and looks at Today; sessions end overnight.
func at(h *storetest.House, tab *webtest.Tab, when time.Time) {
	h.Clock.Set(when)
	if tab.Go("/today"); strings.HasPrefix(tab.Path(), "/login") {
		tab.SignIn("technician", storetest.Password)
		tab.Go("/today")
	}
}

// plain makes blanks of blanks that do not break.
func plain(s string) string { return strings.ReplaceAll(s, "\u00a0", " ") }

func TestTodayEmpty(t *testing.T) {
	t.Parallel()
	_, tab := bench(t)
	tab.SignIn("technician", storetest.Password)
	if tab.Path() != "/today" {
		t.Errorf("a technician begins at %s", tab.Path())
	}
	if got := tab.Text(".empty"); !strings.Contains(got, "Nothing to read now") {
		t.Errorf("empty Today says %q", got)
	}
	tab.Shot("today-empty")
	tab.Axe()
	tab.Press(".empty a")
	if tab.Path() != "/batches/new" {
		t.Errorf("the one act of an empty Today leads to %s", tab.Path())
	}
}

// A morning: one round late, one under way, one to come, one starting tomorrow, one done.
func TestTodayMorning(t *testing.T) {
	t.Parallel()
	h, tab := bench(t)
	start := h.Clock.Now()
	from := func(d time.Duration) func(*store.NewBatch) {
		return func(n *store.NewBatch) {
			n.StartsAt, n.Calibre = start.Add(d), "KW-21"
			n.Depositor = "MANUFACTURE-AVERLOU-FONTENAY"
		}
	}
	h.Batch(t, "26-119", 120, from(0))
	h.Batch(t, "26-124", 40, from(30*time.Minute), in("STRIP5"))
	h.Batch(t, "26-122", 30, from(80*time.Minute))
	h.Batch(t, "26-125", 10, from(24*time.Hour+2*time.Hour))
	h.Batch(t, "26-121", 2, from(-30*time.Minute))
	h.MustSave(t, h.Technician, h.State("26-121", 1, 0, "1"), h.State("26-121", 2, 0, "2"))
	h.Clock.Advance(82 * time.Minute)
	if err := h.OpenRound(t.Context(), h.Technician, "26-124", 0); err != nil {
		t.Fatal(err)
	}
	h.MustSave(t, h.Technician, h.State("26-124", 1, 0, "1"))
	tab.SignIn("technician", storetest.Password)
	if got := tab.Text(".sub"); got != "3 rounds to do, 1 of them late; 1 done" {
		t.Errorf("sum of the day: %q", got)
	}
	whens := tab.Texts(".rounds .when")
	want := "late by 1 h 22 min; under way; due for 2 min; 07:30; 10:00; done at 08:00"
	if got := plain(strings.Join(whens, "; ")); got != want {
		t.Errorf("rows: %q, want %q", got, want)
	}
	tab.Shots("today-morning")
	tab.AxeBoth()
	if got := tab.Text("main"); strings.Contains(got, "AVERLOU") {
		t.Error("Today names the depositor to who is reading")
	}
	if tab.Count(".btn.main") != 1 || !strings.Contains(tab.Text(".btn.main"), "Go on") {
		t.Errorf("main act: %q", tab.Texts(".btn.main"))
	}
	if got := tab.Text("#h-wind"); got != "Wind beforehand" || !strings.Contains(tab.Text(".band .list"), "wind before 22:00") {
		t.Errorf("reminder to wind: %q", tab.Text(".band .list"))
	}
}

// Cold, warm and weekend rounds come with words of care; a round inside its tolerance is not late.
func TestTodayCare(t *testing.T) {
	t.Parallel()
	h, tab := bench(t)
	h.Batch(t, "26-001", 2)
	b, err := h.Lab.Batch(t.Context(), h.Lead, "26-001")
	if err != nil {
		t.Fatal(err)
	}
	for k := range 11 { // until round 11 closes CH 8 and opens CH 23
		h.Clock.Set(b.Due(k))
		h.MustSave(t, h.Technician, h.State("26-001", 1, k, "0"), h.State("26-001", 2, k, "0"))
	}
	at(h, tab, b.Due(10).Add(time.Minute))
	if got := tab.Texts(".rounds .due"); len(got) != 2 || tab.Count(".empty") != 1 {
		t.Errorf("after round 10 Today shows %q", got)
	}
	at(h, tab, b.Due(11).Add(59*time.Minute)) // Saturday 12 December
	if got := plain(tab.Text(".rounds .when")); got != "due for 59 min" {
		t.Errorf("inside the tolerance: %q", got)
	}
	if got := strings.Join(tab.Texts(".tag"), ", "); got != "cold chamber, weekend" {
		t.Errorf("tags %q", got)
	}
	if got := plain(tab.Text(".care")); !strings.Contains(got, "8 °C") || !strings.Contains(got, "Saturday") {
		t.Errorf("care: %q", got)
	}
	tab.Shot("today-care")
	tab.Axe()
	at(h, tab, b.Due(11).Add(61*time.Minute))
	if got := plain(tab.Text(".rounds .when")); got != "late by 1 h 01 min" {
		t.Errorf("beyond the tolerance: %q", got)
	}
}
