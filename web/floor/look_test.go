package floor_test

import (
	"fmt"
	"testing"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/web/webtest"
)

var landscape = webtest.Size{Width: 1180, Height: 820, Touch: true}

// fits fails unless everything of the round page down to the last key lies within the window, and every
// target is large enough for gloves.
func fits(t *testing.T, tab *webtest.Tab, what string) {
	t.Helper()
	got := webtest.Eval[[]float64](tab, `[Math.max(...[...document.querySelectorAll(".reading button, .reading .also a, .holder:not([hidden] *) a")].map(e => e.getBoundingClientRect().bottom)), innerHeight, document.documentElement.scrollWidth, innerWidth]`)
	if got[0] > got[1] {
		t.Errorf("%s: the last key ends at %.0f px, the screen at %.0f", what, got[0], got[1])
	}
	if got[2] > got[3] {
		t.Errorf("%s: the page is %.0f px wide, the screen %.0f", what, got[2], got[3])
	}
	small := webtest.Eval[[]string](tab, `[...document.querySelectorAll("main a, main button")].filter(e => e.offsetParent).map(e => [e, e.getBoundingClientRect()])
		.filter(([e, r]) => r.height < (e.closest(".keys, .holder") ? 68 : 44) || r.width < 44).map(([e, r]) => e.textContent.trim() + " " + r.width + "x" + r.height)`)
	for _, s := range small {
		t.Errorf("%s: too small for gloves: %s", what, s)
	}
}

func TestRoundFitsTheTablet(t *testing.T) {
	t.Parallel()
	h, tab := bench(t)
	kinds := []string{"STRIP5", "TRAY10", "TRAY20"}
	for i, kind := range kinds {
		code := fmt.Sprintf("26-%03d", i+1)
		h.Batch(t, code, 40, in(kind))
		if err := h.OpenRound(t.Context(), h.Technician, code, 0); err != nil {
			t.Fatal(err)
		}
	}
	tab.SignIn("technician", storetest.Password)
	for i, kind := range kinds {
		tab.Go(fmt.Sprintf("/batches/26-%03d/rounds/0", i+1))
		for name, size := range map[string]webtest.Size{"upright": webtest.Tablet, "lying": landscape, "bench": webtest.Wide} {
			tab.Resize(size)
			tab.Shot("round-" + kind + "-" + name)
			fits(t, tab, kind+" "+name)
		}
	}
	for _, lang := range []string{"fr", "de"} { // longer words
		tab.Resize(webtest.Wide)
		tab.Press(`button[value=` + lang + `]`)
		for name, size := range map[string]webtest.Size{"upright": webtest.Tablet, "lying": landscape} {
			tab.Resize(size)
			tab.Shot("round-" + lang + "-" + name)
			fits(t, tab, lang+" "+name)
		}
	}
}

// Two hundred movements in forty strips, with long numbers: every holder stays in reach of one touch.
func TestRoundOfForty(t *testing.T) {
	t.Parallel()
	h, tab := ready(t, 200, in("STRIP5"), func(n *store.NewBatch) {
		n.Calibre, n.Depositor = "AVERLOU-FONTENAY-CALIBRE-4410-LONGUE", "MANUFACTURE-AVERLOU-FONTENAY-ET-ASSOCIES"
		for i := range n.Pieces {
			n.Pieces[i].Serial = "AVERLOU-FONTENAY/KW21 " + n.Pieces[i].Serial
		}
	})
	if err := h.EndMovement(t.Context(), h.Lead, "26-001", "AVERLOU-FONTENAY/KW21 "+storetest.Serial(2), store.Void, "dropped here", store.Dropped); err != nil {
		t.Fatal(err)
	}
	tab.Go("/batches/26-001/rounds/0")
	tab.Keys("+1.0\r+2.0\r+3.0\r+4.0\r") // over the hole and the end of the strip
	settled(tab)
	if got := tab.Text("#which"); got != "2 of 40: STRIP5-0002" {
		t.Errorf("after four readings over a hole: %q", got)
	}
	for name, size := range map[string]webtest.Size{"upright": webtest.Tablet, "lying": landscape, "bench": webtest.Wide} {
		tab.Resize(size)
		tab.Shot("round-forty-" + name)
		fits(t, tab, "forty strips "+name)
	}
	tab.Click(`[data-tab="39"]`)
	if got := tab.Text("#serial"); got != "AVERLOU-FONTENAY/KW21 S-0196" {
		t.Errorf("at the last strip: %q", got)
	}
	tab.Shots("round-forty-last")
	tab.AxeBoth()
}
