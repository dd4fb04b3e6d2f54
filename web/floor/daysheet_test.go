package floor_test

import (
	"fmt"
	"strings"
	"testing"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/web/webtest"
)

// Forty movements in strips of five make whole leaves, print on as many, and keep every hole.
func TestDaySheet(t *testing.T) {
	t.Parallel()
	h, tab := bench(t)
	h.Batch(t, "26-001", 40, in("STRIP5"), func(n *store.NewBatch) { n.Depositor = "KESTWICK" })
	if err := h.EndMovement(t.Context(), h.Lead, "26-001", storetest.Serial(3), store.Withdrawn, "asked back", ""); err != nil {
		t.Fatal(err)
	}
	tab.SignIn("technician", storetest.Password)
	tab.Go("/batches/26-001/rounds/0/sheet")
	if got := len(tab.Texts(".paper tbody th")); got != 40 {
		t.Errorf("%d movements on paper, want 40", got)
	}
	if got := tab.Texts(".paper .off th"); len(got) != 1 || got[0] != "S-0003" {
		t.Errorf("struck: %q", got)
	}
	if strings.Contains(tab.Text("main"), "KESTWICK") {
		t.Error("the day sheet names the depositor")
	}
	if got, want := tab.PDF("daysheet"), tab.Count(".paper"); got != want {
		t.Errorf("printed on %d leaves, want %d", got, want)
	}
	tab.Shots("daysheet")
	tab.Axe()
	for i, kind := range []string{"TRAY10", "TRAY20", "RACK60"} {
		code := fmt.Sprintf("26-%03d", i+2)
		if kind == "RACK60" {
			if err := h.AddHolderType(t.Context(), h.Lead, store.HolderType{Code: kind, Title: "Rack of sixty", Rows: 6, Columns: 10, Blocked: []int{7}}); err != nil {
				t.Fatal(err)
			}
		}
		h.Batch(t, code, 59, in(kind), func(n *store.NewBatch) {
			for i := range n.Pieces {
				n.Pieces[i].Serial = "AVERLOU-FONTENAY-2026-KW21-" + n.Pieces[i].Serial
			}
		})
		tab.Go("/batches/" + code + "/rounds/0/sheet")
		if got := len(tab.Texts(".paper tbody th")); got != 59 {
			t.Errorf("%s: %d movements on paper, want 59", kind, got)
		}
		for _, mm := range webtest.Eval[[]float64](tab, `[...document.querySelectorAll(".paper")].map(e => e.getBoundingClientRect().height * 25.4 / 96)`) {
			if mm > 297.2 {
				t.Errorf("%s: a leaf is %.1f mm long, its sheet 297", kind, mm)
			}
		}
	}
	tab.Shot("daysheet-rack")
}
