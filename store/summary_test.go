package store

import (
	"fmt"
	"math/rand/v2"
	"testing"
)

// Counting is adding: whatever stands in one field stays there through a row of the table and back.
func TestCountsSurviveTheirRow(t *testing.T) {
	t.Parallel()
	r := rand.New(rand.NewPCG(1, 2))
	for range 200 {
		s := Summary{First: anyCounts(r), Again: anyCounts(r), Failed: []int{r.IntN(9), 1}, Alone: []int{0, r.IntN(9)}, Read: []int{3, 2, 1}, Cannot: r.IntN(5)}
		back := summaryOf(s.row([16]byte{1}))
		if fmt.Sprint(*back) != fmt.Sprint(s) {
			t.Fatalf("%+v came back as %+v", s, *back)
		}
		if got, want := s.All().All(), s.First.All()+s.Again.All(); got != want {
			t.Fatalf("all = %d, want %d", got, want)
		}
	}
}

func anyCounts(r *rand.Rand) Counts {
	list := make([]int32, standings)
	for i := range list {
		list[i] = r.Int32N(1000)
	}
	return countsOf(list)
}
