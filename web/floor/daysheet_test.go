package floor_test

import (
	"strings"
	"testing"

	"ratehouse/store"
	"ratehouse/store/storetest"
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
}
