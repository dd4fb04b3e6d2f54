package store_test

import (
	"errors"
	"fmt"
	"math/rand/v2"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/trial"
)

// The history kept up while things happen is the one made from the sheets: of the other batches alone,
// by calibre and pooled.
func TestHistoryKeptUpIsMadeAnew(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	const n = 6
	calibre := map[string]string{"26-000": "KW21", "26-001": "KW21", "26-002": "OD44", "26-003": ""}
	for _, code := range []string{"26-000", "26-001", "26-002", "26-003"} {
		h.Batch(t, code, n, func(b *store.NewBatch) { b.Calibre = calibre[code] })
		for i := range 3 {
			for day := 1; day <= 2+i; day++ {
				h.MustSave(t, h.Technician, h.Rate(code, i+1, day, fmt.Sprintf("%d.25", day*i)))
			}
		}
	}
	r := rand.New(rand.NewPCG(3, 9))
	for range 12 {
		h.Clock.Advance(time.Minute)
		whatHappens(t, h, r, []string{"26-000", "26-001", "26-002", "26-003"}[r.IntN(4)], n)
		drain(t, h)
		for of := range calibre {
			sheet, err := h.BatchSheet(t.Context(), h.Lead, of)
			if err != nil {
				t.Fatal(err)
			}
			got, err := h.HistoryOf(t.Context(), h.Lead, &sheet.Batch)
			if err != nil {
				t.Fatal(err)
			}
			want := historyAnew(t, h, calibre, of)
			if d := cmp.Diff(want, got); d != "" {
				t.Fatalf("history for %s: made anew (-), kept up (+):\n%s", of, d)
			}
		}
	}
	if _, err := h.HistoryOf(t.Context(), h.Technician, &store.Batch{}); !isForbidden(err) {
		t.Errorf("for who is reading: %v", err)
	}
}

func historyAnew(t *testing.T, h *storetest.House, calibre map[string]string, of string) store.History {
	t.Helper()
	anew := store.History{All: trial.NewPrior(15), Own: trial.NewPrior(15)}
	for code, c := range calibre {
		if code == of {
			continue
		}
		sheet, err := h.BatchSheet(t.Context(), h.Lead, code)
		if err != nil {
			t.Fatal(err)
		}
		for _, m := range sheet.Movements {
			err := anew.All.Add(m.Rates)
			if err == nil && c != "" && c == calibre[of] {
				err = anew.Own.Add(m.Rates)
			}
			if err != nil {
				t.Fatal(err)
			}
		}
	}
	return anew
}

func isForbidden(err error) bool {
	e, ok := errors.AsType[*store.Error](err)
	return ok && e.Kind == store.KindForbidden
}
