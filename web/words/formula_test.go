package words

import (
	"strings"
	"testing"

	"ratehouse/trial"
)

func exact(t *testing.T, s string) trial.Exact {
	t.Helper()
	e, err := trial.ParseExact(s)
	if err != nil {
		t.Fatal(err)
	}
	return e
}

func TestCriteriaAsShown(t *testing.T) {
	t.Parallel()
	prog := trial.ISO3159()
	show := func(symbol, value string) string {
		c, _ := prog.Criterion(symbol)
		return New(EN, nil).Criterion(c, c.Limits["1"], exact(t, value), Decimals(c))
	}
	for _, c := range []struct{ symbol, value, want string }{
		{"M", "1.265", "+1.26"}, {"M", "6", "+6.00"}, {"M", "6.0041", "+6.004"}, {"M", "-4.0001", "−4.0001"}, {"M", "-0.001", "0.00"},
		{"V", "2", "2.00"}, {"V", "2.001", "2.001"}, {"Vmax", "0.7", "0.7"}, {"Vmax", "5.01", "5.01"},
		{"C", "-0.33", "−0.330"}, {"C", "0.60001", "+0.60001"}, {"P", "8.87", "8.87"}, {"R", "-1.05", "−1.05"},
	} {
		if got := show(c.symbol, c.value); got != c.want {
			t.Errorf("%s of %s shows %q, want %q", c.symbol, c.value, got, c.want)
		}
	}
	var limits, meanings []string
	for _, c := range prog.Criteria {
		limits = append(limits, New(EN, nil).Limits(c, c.Limits["1"]))
		meanings = append(meanings, New(EN, nil).Say(Formula(c.Formula)))
	}
	if got := strings.ReplaceAll(strings.Join(limits, "; "), nbsp, " "); got != "−4.0 … +6.0; 0.0 … 2.0; 0.0 … 5.0; −6.0 … +8.0; 0.0 … 10.0; −0.6 … +0.6; −5.0 … +5.0" {
		t.Errorf("limits %s", got)
	}
	if got := meanings[0] + "; " + meanings[1] + "; " + meanings[3]; got != "mean of days 1 to 10; mean of the differences between days 1-2, 3-4, 5-6, 7-8, 9-10; mean of days 1, 2 less mean of days 9, 10" {
		t.Errorf("meanings %s", got)
	}
	if got := New(DE, nil).Margin(exact(t, "-0.0004"), 2); got != "−0,0004" {
		t.Errorf("a margin just outside shows %q", got)
	}
}
