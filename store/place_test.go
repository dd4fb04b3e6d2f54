package store_test

import (
	"testing"

	"ratehouse/store"
)

// Where places 1, 2 and 6 of a holder of two rows and three columns lie, for every corner and way.
func TestHolderTypeAt(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		origin, along    string
		first, next, end [2]int
	}{
		{"top_left", "rows", [2]int{1, 1}, [2]int{1, 2}, [2]int{2, 3}},
		{"top_right", "rows", [2]int{1, 3}, [2]int{1, 2}, [2]int{2, 1}},
		{"bottom_left", "rows", [2]int{2, 1}, [2]int{2, 2}, [2]int{1, 3}},
		{"bottom_right", "rows", [2]int{2, 3}, [2]int{2, 2}, [2]int{1, 1}},
		{"top_left", "columns", [2]int{1, 1}, [2]int{2, 1}, [2]int{2, 3}},
		{"top_right", "columns", [2]int{1, 3}, [2]int{2, 3}, [2]int{2, 1}},
		{"bottom_left", "columns", [2]int{2, 1}, [2]int{1, 1}, [2]int{1, 3}},
		{"bottom_right", "columns", [2]int{2, 3}, [2]int{1, 3}, [2]int{1, 1}},
	} {
		h := store.HolderType{Rows: 2, Columns: 3, Origin: c.origin, Along: c.along}
		for place, want := range map[int][2]int{1: c.first, 2: c.next, 6: c.end} {
			if row, col := h.At(place); [2]int{row, col} != want {
				t.Errorf("%s along %s: place %d lies at %d,%d, want %v", c.origin, c.along, place, row, col, want)
			}
		}
	}
}
