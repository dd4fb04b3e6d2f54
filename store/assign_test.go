package store_test

import (
	"testing"

	"ratehouse/store"
	"ratehouse/store/storetest"
)

func TestPlacesAreEvents(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 3, func(n *store.NewBatch) { n.HolderType = "STRIP5" })
	place := func(i int) (string, int) {
		s, err := h.MovementSheet(t.Context(), h.Lead, "26-001", storetest.Serial(i))
		must(t, err)
		return s.Movement.Holder, s.Movement.Place
	}
	move := func(i int, holder string, at int) error {
		return h.AssignPlace(t.Context(), h.Technician, "26-001", storetest.Serial(i), holder, at)
	}
	must(t, move(1, "STRIP5-0001", 5))
	if holder, at := place(1); holder != "STRIP5-0001" || at != 5 {
		t.Errorf("lies in %s, %d", holder, at)
	}
	if err := move(2, "STRIP5-0001", 5); store.KindOf(err) != store.KindConflict {
		t.Errorf("a second piece in the same place: %v", err)
	}
	if _, at := place(2); at != 2 {
		t.Errorf("a refused move moved it to %d", at)
	}
	for _, bad := range []struct {
		holder string
		at     int
		kind   store.Kind
	}{{"STRIP5-0001", 6, store.KindInvalid}, {"STRIP5-0001", 0, store.KindInvalid}, {"STRIP5-9999", 1, store.KindNotFound}} {
		if err := move(3, bad.holder, bad.at); store.KindOf(err) != bad.kind {
			t.Errorf("%s %d: %v", bad.holder, bad.at, err)
		}
	}
	must(t, move(3, "", 0))
	if holder, _ := place(3); holder != "" {
		t.Errorf("taken out, but in %s", holder)
	}
	round, err := h.RoundSheet(t.Context(), h.Technician, "26-001", 0)
	must(t, err)
	var seen []int
	for _, s := range round.Holders[0].Seats {
		seen = append(seen, s.No)
	}
	if want := []int{0, 2, 0, 0, 1}; len(round.Holders) != 1 || len(seen) != 5 || seen[1] != 2 || seen[4] != 1 || seen[2] != 0 {
		t.Errorf("seats %v, want %v: holes stay holes", seen, want)
	}
	if n := h.Count(t, "place_move"); n != 5 {
		t.Errorf("%d moves, want 3 at registration and 2 since", n)
	}
}
