package entry_test

import (
	"math/rand/v2"
	"testing"

	"ratehouse/trial"
	"ratehouse/trial/entry"
	"ratehouse/trial/simulate/rival"
)

// hand is where a seconds hand stands at the pip.
func hand(state, pip int64) int64 { return ((state+pip)%60_000 + 60_000) % 60_000 }

func TestFold(t *testing.T) {
	t.Parallel()
	const dial = 12 * 3600 * 1000
	for _, c := range [][3]int64{{0, dial, 0}, {43_200_000, dial, 0}, {-86_395_000, dial, 5000}, {21_600_000, dial, 21_600_000}, {-21_600_000, dial, 21_600_000},
		{21_600_001, dial, -21_599_999}, {-21_599_999, dial, -21_599_999}, {59_900, 60_000, -100}, {30_000, 60_000, 30_000}, {-30_000, 60_000, 30_000}, {90_000, 60_000, 30_000}} {
		if got := entry.Fold(c[0], c[1]); got != c[2] {
			t.Errorf("%d by %d: %d, want %d", c[0], c[1], got, c[2])
		}
	}
}

// practice.md E1, E2: of the states a hand can mean the nearest to the expected one is taken; whatever
// is within 30 s of it comes back with its turns.
func TestUnwrap(t *testing.T) {
	t.Parallel()
	rng := rand.New(rand.NewPCG(1, 1))
	for range 20_000 {
		state, pip := rng.Int64N(900_000)-450_000, rng.Int64N(6)*10_000
		expected := trial.State(state + rng.Int64N(59_999) - 29_999)
		h := hand(state, pip)
		got := entry.Unwrap(h, pip, expected)
		if int64(got.State) != state {
			t.Fatalf("hand %d at pip %d, expected %d: %d, want %d", h, pip, expected, got.State, state)
		}
		if base := int64(got.State) - 60_000*got.Turns; base < 0 || base >= 60_000 || hand(base, pip) != h {
			t.Fatalf("state %d has turns %d", got.State, got.Turns)
		}
	}
	var states []trial.State
	for _, c := range entry.Candidates(5000, 0, 12_000, 70_000) {
		states = append(states, c.State)
	}
	if len(states) != 3 || states[0] != 5000 || states[1] != 65_000 || states[2] != -55_000 {
		t.Errorf("candidates %v: want 5, 65, -55, the nearest first", states)
	}
	if none := entry.Candidates(35_000, 0, 0, 20_000); len(none) != 0 {
		t.Errorf("nothing lies within 20 s of zero, got %v", none)
	}
}

// A good fast piece passes 60 once (E2): read by its hand alone it is followed through all rounds, and
// a slip of the hand is named; a value half a minute off is not given turns without a question (E1).
func TestHandIsFollowed(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	f := forecastOf(t, p, nil)
	rates := []int64{5800, 6200, 5500, 5600, 6900, 6700, 7100, 6800, 5200, 5300, 4100, 5400, 6900, 5900, 6000}
	state, place := int64(1200), entry.Place{Seconds: trial.SecondsPerDay}
	before := trial.State(state)
	for k := 1; k <= len(rates); k++ {
		before = trial.State(state)
		place.State, place.Rates = &before, ratesMilli(rates[:k-1])
		state += rates[k-1]
		pip := int64(k%6) * 10_000
		e := f.Expect(entry.Round{Day: k, Kind: entry.OfHand}, []entry.Place{place})[0]
		got, suspect := entry.CheckHand(&e, hand(state, pip), pip)
		if suspect != nil || int64(got.State) != state {
			t.Fatalf("round %d: %+v %+v, want state %d", k, got, suspect, state)
		}
		if k == 6 || k == 8 {
			if _, s := entry.CheckHand(&e, hand(state+30_000, pip), pip); s == nil || s.Slip != entry.Tail || s.Instead != state {
				t.Errorf("round %d, tail: %+v", k, s)
			}
		}
		if k == 8 { // FH: looked at from behind
			if _, s := entry.CheckHand(&e, 60_000-hand(state, pip), pip); s == nil || s.Slip != entry.Mirror || s.Instead != state {
				t.Errorf("mirror: %+v, want instead %d", s, state)
			}
		}
	}
	if state < 60_000 {
		t.Fatal("the test is too kind: the hand never passed 60")
	}
	wide := f.Expect(entry.Round{Day: 1, Kind: entry.OfHand}, []entry.Place{{State: &before, Seconds: trial.SecondsPerDay}})[0]
	wide.Band = 40_000 // whatever the history says
	if _, s := entry.CheckHand(&wide, hand(wide.Centre+24_000, 0), 0); s == nil || s.Slip != entry.OtherTurn {
		t.Errorf("24 s/d from the expectation: %+v, want the turns asked for", s)
	}
	if _, s := entry.CheckHand(&wide, hand(wide.Centre+20_000, 0), 0); s != nil {
		t.Errorf("20 s/d from the expectation: %+v", s)
	}
}

// A movement nobody regulated, 52 s/d fast: by its hand alone it would be taken for 8 s/d slow; the
// quick check, though only good to some seconds a day, puts the first turn right, its own past the
// next (E1).
func TestQuickCheckUnwraps(t *testing.T) {
	t.Parallel()
	f := forecastOf(t, trial.ISO3159(), historyOf(t, trial.ISO3159(), rival.New(5), 10, 100))
	start, r := trial.State(0), entry.Round{Day: 1, Kind: entry.OfHand}
	place := entry.Place{State: &start, Seconds: trial.SecondsPerDay}
	e := f.Expect(r, []entry.Place{place})[0]
	if got, _ := entry.CheckHand(&e, 52_000, 0); got.State != -8000 {
		t.Fatalf("the test is too kind: without a quick check %+v", got)
	}
	place.Quick = trial.RateOf(57_600)
	e = f.Expect(r, []entry.Place{place})[0]
	if got, s := entry.CheckHand(&e, 52_000, 0); got.State != 52_000 || s != nil {
		t.Errorf("with a quick check: %+v %+v", got, s)
	}
	next, r := trial.State(52_000), entry.Round{Day: 2, Kind: entry.OfHand}
	e = f.Expect(r, []entry.Place{{State: &next, Seconds: trial.SecondsPerDay, Rates: ratesMilli([]int64{52_000}), Quick: place.Quick}})[0]
	if got, s := entry.CheckHand(&e, 43_000, 0); got.State != 103_000 || s != nil {
		t.Errorf("the day after: %+v %+v, centre %d band %d", got, s, e.Centre, e.Band)
	}
}

func ratesMilli(list []int64) []trial.Rate {
	out := make([]trial.Rate, len(list))
	for i, r := range list {
		out[i] = trial.RateOf(r)
	}
	return out
}

// The danger of practice.md E1: a movement that loses a minute a day more than it seems passes all
// criteria unchanged. Its anchor gives it away, and no anchor holds nothing.
func TestAnchor(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	judge, err := trial.NewJudge(p, "1")
	if err != nil {
		t.Fatal(err)
	}
	seen := []int64{1200, 1600, 400, -300, 2900, 2500, 3800, 3300, 2100, 2600, 4900, 2400, -1700, 1500, 1900}
	var result trial.Result
	judge.Rates(ratesMilli(seen), &result)
	if result.Verdict != trial.Pass {
		t.Fatal("the rates as seen should pass")
	}
	begin, end, truly := trial.State(300), trial.State(300), trial.State(300)
	for _, r := range seen {
		end += trial.State(r)
		truly += trial.State(r - 60_000)
	}
	first := trial.RateOf(seen[0])
	quick := func(rate int64) trial.Rate { // two hands half an hour apart, read to a tenth
		return entry.QuickRate(hand(0, 0), 0, hand(rate*1800/86_400/100*100, 0), 0, 1800)
	}
	minutes := func(s trial.State) *trial.State { s = s / 60_000 * 60_000; return &s }
	for name, c := range map[string]struct {
		a    entry.Anchor
		want entry.AnchorResult
	}{
		"none":                           {entry.Anchor{}, entry.NoAnchor},
		"quick check, as it seems":       {entry.Anchor{Quick: quick(1200)}, entry.AnchorHolds},
		"quick check, a minute less":     {entry.Anchor{Quick: quick(1200 - 60_000)}, entry.OffQuick},
		"quick check, a minute more":     {entry.Anchor{Quick: quick(1200 + 60_000)}, entry.OffQuick},
		"minute hand, as it seems":       {entry.Anchor{First: minutes(begin), Last: minutes(end)}, entry.AnchorHolds},
		"minute hand, a minute less":     {entry.Anchor{First: minutes(begin), Last: minutes(truly)}, entry.OffMinutes},
		"minute hand only at the start":  {entry.Anchor{First: minutes(begin)}, entry.NoAnchor},
		"quick check right, minutes off": {entry.Anchor{Quick: quick(1200), First: minutes(begin), Last: minutes(truly)}, entry.OffMinutes},
	} {
		if got := c.a.Anchored(first, begin, end, 15); got != c.want {
			t.Errorf("%s: %s, want %s", name, got, c.want)
		}
	}
	if entry.QuickRate(0, 0, 100, 0, 1799).Known() {
		t.Error("a quick check of less than half an hour gave a rate")
	}
	if r := entry.QuickRate(59_900, 50_000, 500, 50_000, 1800); r.Milli() != 28_800 { // +0.6 s in 1800 s
		t.Errorf("quick rate %d", r.Milli())
	}
}

// A wrong turn is taken back for all later rounds at once (E2), as far as the hands were not set.
func TestRecount(t *testing.T) {
	t.Parallel()
	cells := []trial.Cell{{HasFound: true, Found: 100}, {HasFound: true, Found: 50_000}, {}, {HasFound: true, Found: 70_000, HasLeft: true, Left: 200}, {HasFound: true, Found: 900}}
	entry.Recount(cells, 1, -1)
	for k, want := range []trial.State{100, -10_000, 0, 10_000, 900} {
		if cells[k].Found != want {
			t.Errorf("step %d: %d, want %d", k, cells[k].Found, want)
		}
	}
	if cells[3].Left != 200 {
		t.Errorf("as left %d", cells[3].Left)
	}
}
