package entry_test

import (
	"fmt"
	"math/rand/v2"
	"slices"
	"testing"

	"ratehouse/trial"
	"ratehouse/trial/entry"
	"ratehouse/trial/simulate/rival"
)

// holderOf is a holder of four rows at its last reading in round k, all typed rightly.
func holderOf(f *entry.Forecast, states [][]trial.State, k int) entry.Holder {
	h := entry.Holder{Rows: 4, Columns: len(states) / 4, Expectations: f.Expect(entry.Round{Day: k}, places(states, k, false))}
	for _, s := range states {
		h.Values = append(h.Values, milli(int64(s[k])))
	}
	return h
}

// typedAs types the values of the places in order, place by place; -1 leaves a place blank.
func typedAs(h entry.Holder, order []int) entry.Holder {
	values := make([]*int64, len(order))
	for i, j := range order {
		if j >= 0 {
			values[i] = h.Values[j]
		}
	}
	h.Values = values
	return h
}

// count makes 0, 1, 2, ... and changes it.
func count(n int, change func(order []int) []int) []int {
	order := make([]int, n)
	for i := range order {
		order[i] = i
	}
	return change(order)
}

// practice.md E6, on the second generator, holders of 20 and of 5: each slip of a whole holder is
// offered as one act that puts every value where it belongs; holders typed rightly are left alone.
// Hands were set to within 15 s at the start, so that states differ by more than rates do; and the
// same with all set to zero, where only rates tell the movements apart.
func TestHolderSlips(t *testing.T) {
	t.Parallel()
	p, m, rng := trial.ISO3159(), rival.New(31), rand.New(rand.NewPCG(6, 6))
	f := forecastOf(t, p, historyOf(t, p, m, 10, 100))
	for _, c := range []struct {
		n            int
		zero         bool
		first, later float64 // least share found in round 1 and later, percent
	}{{20, false, 65, 90}, {5, false, 25, 80}, {20, true, 0, 80}, {5, true, 0, 50}} {
		right, found := share{}, map[string]*share{}
		see := func(k int, name string, got *entry.Repair, code entry.RepairCode, order []int) {
			key := fmt.Sprintf("%s, %s", name, map[bool]string{true: "round 1", false: "later"}[k == 1])
			if found[key] == nil {
				found[key] = &share{}
			}
			found[key].add(got != nil && got.Code == code && slices.Equal(got.Order, order))
		}
		for range 6 {
			lot := m.Lot(p, 100)
			if c.zero {
				setToZero(lot)
			}
			for _, k := range []int{1, 2, 3, 4, 9, 11, 13, 14} {
				for at := 0; at+2*c.n <= 100; at += c.n {
					h, next := holderOf(f, lot[at:at+c.n], k), holderOf(f, lot[at+c.n:at+2*c.n], k)
					right.add(entry.Arrange(h, []entry.Holder{next}) != nil)
					from := 1 + rng.IntN(c.n/2)
					see(k, "skipped", entry.Arrange(typedAs(h, count(c.n, func(o []int) []int { return append(slices.Delete(o, from, from+1), -1) })), nil),
						entry.Skipped, count(c.n, func(o []int) []int { return append(slices.Delete(o, from, from+1), -1) }))
					twice := count(c.n, func(o []int) []int { return slices.Insert(o, from, from)[:c.n] })
					want := slices.Clone(twice)
					want[from] = from // the second of the two; the first is where it belongs
					see(k, "doubled", entry.Arrange(typedAs(h, twice), nil), entry.Doubled, want)
					back := count(c.n, func(o []int) []int { slices.Reverse(o); return o })
					see(k, "reversed", entry.Arrange(typedAs(h, back), nil), entry.Reversed, back)
					wrong := h
					wrong.Values = next.Values
					got := entry.Arrange(wrong, []entry.Holder{next})
					see(k, "other holder", got, entry.OtherHolder, count(c.n, func(o []int) []int { return o }))
					if c.n == 20 {
						columns := count(20, func(o []int) []int {
							for i := range o {
								o[i] = i%4*5 + i/4
							}
							return o
						})
						see(k, "columns for rows", entry.Arrange(typedAs(h, columns), nil), entry.Across, columns)
					}
				}
			}
		}
		t.Logf("holders of %d, set to zero %v, typed rightly: %d of %d offered a repair", c.n, c.zero, right.hits, right.of)
		if right.hits > 3 { // at most 1 in 1,000 is meant
			t.Errorf("holders of %d typed rightly: %d of %d offered a repair", c.n, right.hits, right.of)
		}
		for name, s := range found {
			t.Logf("holders of %d, set to zero %v, %s: %.0f of 100 put right, of %d", c.n, c.zero, name, s.percent(), s.of)
			least := c.later
			if name[len(name)-1] == '1' {
				least = c.first
			}
			if s.percent() < least {
				t.Errorf("holders of %d, %s: %.0f of 100 put right, want %.0f", c.n, name, s.percent(), least)
			}
		}
	}
}

// setToZero shifts all states of each movement so that it starts at zero.
func setToZero(lot [][]trial.State) {
	for _, s := range lot {
		for k, start := 0, s[0]; k < len(s); k++ {
			s[k] -= start
		}
	}
}

// Holes stay holes: a shift leaves them out, and one wrong value is no slip of the holder.
func TestHolderWithHoles(t *testing.T) {
	t.Parallel()
	p, m := trial.ISO3159(), rival.New(31)
	f := forecastOf(t, p, historyOf(t, p, m, 10, 100))
	states := m.Lot(p, 10)
	here := places(states, 4, false)
	here[3].Empty, here[6].Empty = true, true
	h := entry.Holder{Expectations: f.Expect(entry.Round{Day: 4}, here), Values: make([]*int64, 10)}
	order := []int{0, 2, 4, -1, 5, 7, -1, 8, 9, -1} // place 1 left out
	for i, j := range order {
		if j >= 0 {
			h.Values[i] = milli(int64(states[j][4]))
		}
	}
	got := entry.Arrange(h, nil)
	if got == nil || got.Code != entry.Skipped || got.From != 1 {
		t.Fatalf("%+v", got)
	}
	for i, j := range order {
		if j >= 0 && got.Order[i] != j {
			t.Errorf("order %v, want %v", got.Order, order)
			break
		}
	}
	for i := range h.Values {
		h.Values[i] = nil
		if !here[i].Empty {
			h.Values[i] = milli(int64(states[i][4]))
		}
	}
	*h.Values[5] += 60_000
	if got := entry.Arrange(h, nil); got != nil {
		t.Errorf("one wrong value: %+v", got)
	}
}

// practice.md B2: twenty values show a reference one second off on a day like the one before; after a
// change only what no lot does. Rounds as they are (the generator's readers have offsets of their own,
// which may rightly be named) and with a shift of everything.
func TestRoundIsTheClock(t *testing.T) {
	t.Parallel()
	p, m := trial.ISO3159(), rival.New(41)
	f := forecastOf(t, p, historyOf(t, p, m, 30, 100))
	same, changed := []int{2, 4, 6, 8, 12, 14, 15}, []int{3, 5, 7, 9, 11, 13}
	shifts := map[string]struct {
		n    int
		by   int64
		code entry.ShiftCode
	}{"as it is": {20, 0, ""}, "100 as they are": {100, 0, ""}, "1 s": {20, 1000, entry.WholeSecond}, "pip": {20, -10_000, entry.WrongPip}, "hour": {20, 3_600_000, entry.ClockChange}}
	named, coded := map[string]*share{}, map[string]*share{}
	for range 10 {
		lot := m.Lot(p, 100)
		for kind, days := range map[string][]int{"like the day before": same, "after a change": changed} {
			for _, k := range days {
				for name, shift := range shifts {
					read := places(lot[:shift.n], k, true)
					for i := range read {
						*read[i].Value += shift.by
					}
					key := name + ", " + kind
					if named[key] == nil {
						named[key], coded[key] = &share{}, &share{}
					}
					got := f.Clock(entry.Round{Day: k}, read)
					named[key].add(got != nil)
					coded[key].add(got != nil && got.Code == shift.code)
				}
			}
		}
	}
	for key, s := range named {
		t.Logf("%s: %.0f of 100 rounds named, %.0f by its code, of %d", key, s.percent(), coded[key].percent(), s.of)
	}
	for key, b := range map[string][2]float64{"as it is, like the day before": {0, 12}, "as it is, after a change": {0, 8},
		"100 as they are, like the day before": {0, 15}, "100 as they are, after a change": {0, 8}, "1 s, like the day before": {85, 100},
		"pip, like the day before": {98, 100}, "pip, after a change": {85, 100}, "hour, like the day before": {100, 100}, "hour, after a change": {100, 100}} {
		if got := named[key].percent(); got < b[0] || got > b[1] {
			t.Errorf("%s: %.0f of 100 rounds named, want %.0f to %.0f", key, got, b[0], b[1])
		}
	}
	for key, least := range map[string]float64{"pip, like the day before": 85, "hour, like the day before": 100, "hour, after a change": 100} {
		if got := coded[key].percent(); got < least {
			t.Errorf("%s: %.0f of 100 named by its code", key, got)
		}
	}
	if got := f.Clock(entry.Round{Day: 2}, places(m.Lot(p, 19), 2, true)); got != nil {
		t.Errorf("nineteen values: %+v", got)
	}
}

// practice.md B3: a holder that was not turned, cooled or heated lacks the scatter that the others
// gain. Movements of the second generator taken through a programme without that change.
func TestMissingScatter(t *testing.T) {
	t.Parallel()
	p, m := trial.ISO3159(), rival.New(51)
	f := forecastOf(t, p, historyOf(t, p, m, 20, 100))
	right := share{}
	for _, c := range []struct {
		day    int
		stays  trial.Day
		code   entry.StillCode
		twenty float64 // least share of holders of 20 found, percent
	}{
		{3, trial.Day{Position: trial.H6, TemperatureC: 23_000}, entry.NotTurned, 60},
		{5, trial.Day{Position: trial.H3, TemperatureC: 23_000}, entry.NotTurned, 80},
		{7, trial.Day{Position: trial.H9, TemperatureC: 23_000}, entry.NotTurned, 60},
		{9, trial.Day{Position: trial.FH, TemperatureC: 23_000}, entry.NotTurned, 45},
		{11, trial.Day{Position: trial.CH, TemperatureC: 23_000}, entry.NotCooled, 85},
		{13, trial.Day{Position: trial.CH, TemperatureC: 23_000}, entry.NotHeated, 85},
		{14, trial.Day{Position: trial.CH, TemperatureC: 38_000}, entry.NotMoved, 85},
	} {
		still := *p
		still.Days = slices.Clone(p.Days)
		still.Days[c.day-1].Position, still.Days[c.day-1].TemperatureC = c.stays.Position, c.stays.TemperatureC
		r, found := entry.Round{Day: c.day}, map[int]*share{20: {}, 10: {}, 5: {}}
		for range 6 {
			good, bad := m.Lot(p, 100), m.Lot(&still, 100)
			for n, s := range found {
				for at := 0; at < 100; at += n {
					here := places(good[at:at+n], c.day, true)
					right.add(f.Still(r, here, f.Expect(r, here)) != nil)
					here = places(bad[at:at+n], c.day, true)
					got := f.Still(r, here, f.Expect(r, here))
					s.add(got != nil && got.Code == c.code)
				}
			}
		}
		t.Logf("day %d, %s: of holders of 20, 10, 5 found %.0f, %.0f, %.0f percent", c.day, c.code, found[20].percent(), found[10].percent(), found[5].percent())
		if found[20].percent() < c.twenty {
			t.Errorf("day %d, %s: %.0f of 100 holders of 20 found, want %.0f", c.day, c.code, found[20].percent(), c.twenty)
		}
	}
	t.Logf("holders treated rightly: %d of %d named", right.hits, right.of)
	if right.hits > 3 { // at most 1 in 1,000 is meant
		t.Errorf("holders treated rightly: %d of %d named", right.hits, right.of)
	}
	if got := f.Still(entry.Round{Day: 4}, nil, nil); got != nil {
		t.Errorf("nothing changes on day 4: %+v", got)
	}
}

// practice.md E7: the estimate of yesterday's error is the error, with its sign: high is above 0.
func TestYesterdaysSlip(t *testing.T) {
	t.Parallel()
	p, m := trial.ISO3159(), rival.New(61)
	f := forecastOf(t, p, historyOf(t, p, m, 10, 100))
	day := [2]int64{trial.SecondsPerDay, trial.SecondsPerDay}
	for _, k := range []int{1, 3, 5, 9} {
		for _, by := range []int64{-5000, 5000} {
			found, sum := 0, int64(0)
			for _, s := range m.Lot(p, 100) {
				s[k] += trial.State(by)
				if late := f.Yesterday(ratesOf(s), k, day); late != nil {
					found, sum = found+1, sum+late.Off
					if late.Day != k {
						t.Fatalf("day %d named for %d", late.Day, k)
					}
				}
			}
			if mean := float64(sum) / float64(max(1, found)); found < 90 || mean/float64(by) < 0.8 || mean/float64(by) > 1.2 {
				t.Errorf("state after day %d off by %d: %d of 100 found, by %.0f on the mean", k, by, found, mean)
			}
		}
	}
	rates := ratesOf(m.Lot(p, 1)[0])
	for _, k := range []int{0, 15, 16} {
		if late := f.Yesterday(rates, k, day); late != nil {
			t.Errorf("the state after day %d has no two rates: %+v", k, late)
		}
	}
	rates[4] = trial.Rate{}
	if f.Yesterday(rates, 4, day) != nil || f.Yesterday(rates, 5, day) != nil {
		t.Error("a rate that was not read tells nothing")
	}
}
