package trial

import (
	"bytes"
	"errors"
	"math/rand/v2"
	"reflect"
	"testing"
)

// somePrior is a history of movements whose first days were read, some to the end.
func somePrior(t testing.TB, days, movements int) *Prior {
	t.Helper()
	r := rand.New(rand.NewPCG(5, 7))
	p := NewPrior(days)
	for range movements {
		rates := make([]Rate, days)
		for d := range r.IntN(days + 1) {
			rates[d] = RateOf(int64(r.IntN(1_200_001) - 600_000))
		}
		if err := p.Add(rates); err != nil {
			t.Fatal(err)
		}
	}
	return p
}

func TestPriorBytes(t *testing.T) {
	t.Parallel()
	for _, movements := range []int{0, 1, 300} {
		p := somePrior(t, 15, movements)
		got, err := ParsePrior(p.Bytes())
		if err != nil || !reflect.DeepEqual(got, p) {
			t.Errorf("%d movements: read back as %+v, %v", movements, got, err)
		}
	}
}

// Bytes cut short, longer, or of another thing are refused, and never break the program.
func TestPriorBytesBroken(t *testing.T) {
	t.Parallel()
	whole := somePrior(t, 4, 50).Bytes()
	for n := range whole {
		if _, err := ParsePrior(whole[:n]); !errors.Is(err, ErrPriorBytes) {
			t.Errorf("the first %d of %d bytes: %v", n, len(whole), err)
		}
	}
	for _, b := range [][]byte{append(bytes.Clone(whole), 0), bytes.Repeat([]byte{0xff}, 40), {0xff, 0xff, 0xff, 0xff, 0x0f, 2}, {1, 1, 2, 2}} {
		if _, err := ParsePrior(b); !errors.Is(err, ErrPriorBytes) {
			t.Errorf("%v: %v", b, err)
		}
	}
}
