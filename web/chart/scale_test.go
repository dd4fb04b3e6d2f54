package chart

import (
	"math"
	"strings"
	"testing"
)

func TestTicks(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		min, max float64
		most     int
		want     string
	}{
		{-4, 6, 6, "-4 -2 0 2 4 6"}, {-6, 8, 9, "-6 -4 -2 0 2 4 6 8"}, {1, 15, 6, "5 10 15"}, {0, 1, 6, "0.0 0.2 0.4 0.6 0.8 1.0"},
		{-0.6, 0.6, 7, "-0.6 -0.4 -0.2 0.0 0.2 0.4 0.6"}, {5, 5, 6, "5.0"}, {0, 0, 6, "0.00"}, {0, 5000, 6, "0 1000 2000 3000 4000 5000"},
		{-12, 20, 9, "-10 -5 0 5 10 15 20"}, {0.001, 0.002, 3, "0.0010 0.0015 0.0020"}, {-0.05, -0.01, 5, "-0.05 -0.04 -0.03 -0.02 -0.01"},
		{3, 1, 6, ""}, {math.NaN(), 1, 6, ""}, {math.Inf(-1), 1, 6, ""}, {0, 1, 0, ""},
	} {
		var got []string
		for _, k := range Ticks(c.min, c.max, c.most) {
			got = append(got, k.Dec)
		}
		if s := strings.Join(got, " "); s != c.want && !(c.min == c.max && len(got) == 1) {
			t.Errorf("Ticks(%v, %v, %d) = %q, want %q", c.min, c.max, c.most, s, c.want)
		}
	}
}

func TestScaleNeverUndefined(t *testing.T) {
	t.Parallel()
	if got := NewScale(-4, 6, 0, 100).At(1); got != 50 {
		t.Errorf("middle at %v, want 50", got)
	}
	for _, s := range []Scale{NewScale(5, 5, 0, 100), NewScale(6, 5, 0, 100), NewScale(0, math.Inf(1), 0, 100)} {
		if got := s.At(5); math.IsNaN(got) || math.IsInf(got, 0) {
			t.Errorf("%v.At(5) = %v", s, got)
		}
	}
	if lo, hi := Widen(-7.6, 16.8, 9); lo != -10 || hi != 20 {
		t.Errorf("widened to %v, %v, want -10, 20", lo, hi)
	}
}
