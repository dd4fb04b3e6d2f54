package entry_test

import (
	"testing"

	"ratehouse/trial"
	"ratehouse/trial/entry"
)

func TestLook(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		rate trial.Rate
		want entry.Finding
	}{
		{trial.Rate{}, entry.None},
		{trial.RateOf(0), entry.None},
		{trial.RateOf(60_000), entry.None},
		{trial.RateOf(-60_000), entry.None},
		{trial.RateOf(60_001), entry.SecondLook},
		{trial.RateOf(-60_001), entry.SecondLook},
		{trial.RateOf(600_000), entry.SecondLook},
		{trial.RateOf(-600_000), entry.SecondLook},
		{trial.RateOf(600_001), entry.Refuse},
		{trial.RateOf(-600_001), entry.Refuse},
		{trial.RateBetween(0, 60_000, 86_400), entry.None},
		{trial.RateBetween(0, 60_000, 86_399), entry.SecondLook}, // a hair beyond 60
		{trial.RateBetween(0, -600_000, 86_399), entry.Refuse},
	} {
		if got := entry.Look(c.rate); got != c.want {
			t.Errorf("%s: %s, want %s", c.rate.Exact(), got, c.want)
		}
	}
}

// practice.md W29: two within 0.3: the first counts; else the median of three.
func TestSettle(t *testing.T) {
	t.Parallel()
	rule := trial.ISO3159().Reading.SecondLook
	for _, c := range []struct {
		first    trial.Milli
		confirms []trial.Milli
		want     trial.Milli
		ok       bool
	}{
		{61_000, nil, 0, false},
		{61_000, []trial.Milli{61_000}, 61_000, true},
		{61_000, []trial.Milli{61_300}, 61_000, true},
		{61_000, []trial.Milli{60_700}, 61_000, true},
		{61_000, []trial.Milli{61_301}, 0, false},
		{61_000, []trial.Milli{16_000}, 0, false},
		{61_000, []trial.Milli{16_000, 16_100}, 16_100, true},
		{61_000, []trial.Milli{16_000, 61_200}, 61_000, true},
		{61_000, []trial.Milli{16_000, 40_000}, 40_000, true},
		{-61_000, []trial.Milli{-16_000, -61_000}, -61_000, true},
		{61_000, []trial.Milli{61_100, 99_000}, 61_000, true}, // the second agreed already
		{61_000, []trial.Milli{1, 2, 3}, 0, false},
	} {
		got, ok := entry.Settle(rule, c.first, c.confirms)
		if got != c.want || ok != c.ok {
			t.Errorf("%d %v: %d %v, want %d %v", c.first, c.confirms, got, ok, c.want, c.ok)
		}
	}
	rule.Then = "mean"
	if _, ok := entry.Settle(rule, 1, []trial.Milli{5000, 1}); ok {
		t.Error("a rule that is not built settles")
	}
}

// practice.md X1: what the check says does not change when limits change; it does not even see them.
func TestLookIsBlindToLimits(t *testing.T) {
	t.Parallel()
	for m := int64(-700_000); m <= 700_000; m += 997 {
		if entry.Look(trial.RateOf(m)) != entry.Look(trial.RateOf(-m)) {
			t.Fatalf("%d is looked at otherwise than %d", m, -m)
		}
	}
}
