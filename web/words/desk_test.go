package words

import (
	"testing"

	"ratehouse/trial"
)

// What a coming rate must be is drawn inwards: every value shown is one that serves.
func TestNeededIsDrawnInwards(t *testing.T) {
	t.Parallel()
	en, de := New(EN, nil), New(DE, nil)
	for _, c := range []struct{ lo, hi, want string }{
		{"-4", "6", "−4.0\u00a0… +6.0"},
		{"-1/3", "1/3", "−0.3\u00a0… +0.3"},
		{"-2/3", "2/3", "−0.6\u00a0… +0.6"},
		{"1.01", "1.99", "+1.1\u00a0… +1.9"},
		{"1.01", "1.09", "+1.01\u00a0… +1.09"},
		{"1.0012", "1.0019", "+1.0012\u00a0… +1.0019"},
		{"0.25", "0.25", "+0.25\u00a0… +0.25"},
	} {
		lo, errLo := trial.ParseExact(c.lo)
		hi, errHi := trial.ParseExact(c.hi)
		if errLo != nil || errHi != nil {
			t.Fatal(errLo, errHi)
		}
		if got := en.Needed(lo, hi); got != c.want {
			t.Errorf("[%s, %s] shows as %q, want %q", c.lo, c.hi, got, c.want)
		}
	}
	if got := de.Needed(trial.Ratio(-1, 3), trial.Ratio(1, 3)); got != "−0,3\u00a0… +0,3" {
		t.Errorf("in German %q", got)
	}
}
