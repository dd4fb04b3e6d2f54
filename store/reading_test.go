package store_test

import (
	"testing"
	"time"

	"ratehouse/store"
	"ratehouse/store/storetest"
)

func TestSaveThenSee(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 3)
	h.MustSave(t, h.Technician, h.State("26-001", 1, 0, "0.5"), h.State("26-001", 2, 0, "-1"))
	h.Clock.Advance(24 * time.Hour)
	h.MustSave(t, h.Technician, h.State("26-001", 1, 1, "2.9"))
	s, err := h.BatchSheet(t.Context(), h.Lead, "26-001")
	if err != nil {
		t.Fatal(err)
	}
	if got := s.Movements[0].Rates[0].Decimal(3); got != "2.400" {
		t.Errorf("rate of day 1 = %s, want 2.400", got)
	}
	if s.Movements[1].Rates[0].Known() || s.Movements[2].Rates[0].Known() {
		t.Error("a rate appeared without both its states")
	}
	sheet, err := h.MovementSheet(t.Context(), h.Lead, "26-001", storetest.Serial(1))
	if err != nil {
		t.Fatal(err)
	}
	if len(sheet.Readings) != 2 || sheet.Next != storetest.Serial(2) {
		t.Errorf("sheet = %d readings, next %q", len(sheet.Readings), sheet.Next)
	}
	today, err := h.Today(t.Context(), h.Technician)
	if err != nil {
		t.Fatal(err)
	}
	if len(today.Due) != 1 || today.Due[0].K != 0 || today.Due[0].Read != 2 {
		t.Errorf("today = %+v", today.Due)
	}
	round, err := h.RoundSheet(t.Context(), h.Technician, "26-001", 0)
	if err != nil {
		t.Fatal(err)
	}
	if round.Read != 2 || round.Going != 3 || len(round.Holders) != 1 || round.Holders[0].Seats[0].Value != "0.5" {
		t.Errorf("round = %+v", round)
	}
	_ = store.Accepted
}
