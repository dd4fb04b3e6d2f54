package entry_test

import (
	"reflect"
	"testing"

	"ratehouse/trial"
	"ratehouse/trial/entry"
	"ratehouse/trial/simulate/rival"
)

func milli(v int64) *int64 { return &v }

// steady is a holder of three before round k: movements that ran at the same rate every day since a
// state, all thousandths.
func steady(k int, from, rate [3]int64) []entry.Place {
	out := make([]entry.Place, 3)
	for i := range out {
		rates := make([]trial.Rate, k-1)
		for d := range rates {
			rates[d] = trial.RateOf(rate[i])
		}
		state := trial.State(from[i] + rate[i]*int64(k-1))
		out[i] = entry.Place{Rates: rates, State: &state, Seconds: trial.SecondsPerDay, Previous: milli(int64(state))}
	}
	return out
}

// practice.md E5: what is asked again carries the name of the slip it is, and the value it would have
// been. Three steady movements on the second day at 9 up (round 6); the middle one should read about
// 28.4 s, the one before it 9.0, the one after it 43.8.
func TestLikeliestSlip(t *testing.T) {
	t.Parallel()
	f := forecastOf(t, trial.ISO3159(), historyOf(t, trial.ISO3159(), rival.New(5), 10, 100))
	holder := steady(6, [3]int64{3000, 16_400, 61_800}, [3]int64{1000, 2000, -3000})
	e := f.Expect(entry.Round{Day: 6}, holder)[1]
	if e.Centre < 27_400 || e.Centre > 29_400 || e.Band < 1500 || e.Band > 5500 {
		t.Fatalf("centre %d, band %d", e.Centre, e.Band)
	}
	for _, c := range []struct {
		typed   int64
		slip    entry.Slip
		by      int64
		instead int64
	}{
		{33_400, entry.Figure, 5000, 28_400},
		{18_400, entry.Figure, -10_000, 28_400},
		{38_400, entry.Figure, 10_000, 28_400},
		{-1600, entry.Tail, -30_000, 28_400},
		{58_400, entry.Tail, 30_000, 28_400},
		{88_400, entry.Minute, 60_000, 28_400},
		{-31_600, entry.Minute, -60_000, 28_400},
		{-28_400, entry.Sign, 0, 28_400},
		{2840, entry.Point, 0, 28_400},
		{284_000, entry.Point, 0, 28_400},
		{82_400, entry.Transposed, 0, 28_400},
		{9000, entry.Neighbour, -1, 0},
		{43_800, entry.Neighbour, 1, 0},
		{51_000, entry.Unknown, 0, 0},
		{-400_000, entry.Unknown, 0, 0},
	} {
		got := entry.Check(&e, c.typed)
		if got == nil || got.Slip != c.slip || got.By != c.by || got.Instead != c.instead && c.instead != 0 {
			t.Errorf("%d: %+v, want %s by %d instead of %d", c.typed, got, c.slip, c.by, c.instead)
			continue
		}
		if got.Permille < 300 || got.Permille > 1000 {
			t.Errorf("%d: %s with likelihood %d", c.typed, got.Slip, got.Permille)
		}
	}
	for _, right := range []int64{28_400, e.Centre, e.Centre + e.Band, e.Centre - e.Band} {
		if got := entry.Check(&e, right); got != nil {
			t.Errorf("%d: %+v", right, got)
		}
	}
	if got := entry.Check(&e, e.Centre+e.Band+1); got == nil || got.Slip != entry.Odd {
		t.Errorf("just outside: %+v, want odd: no slip is likelier than a movement that does so", got)
	}
	// day 10: the hand of the additional mechanism, running, stands anywhere
	e = f.Expect(entry.Round{Day: 10}, steady(10, [3]int64{0, 0, 0}, [3]int64{1000, 2000, -3000}))[1]
	if got := entry.Check(&e, 43_400); got == nil || got.Slip != entry.OtherHand {
		t.Errorf("day 10: %+v, centre %d", got, e.Centre)
	}
	// the value of yesterday once more: only where it can be told from right
	fast := steady(6, [3]int64{0, 0, 0}, [3]int64{1000, 19_000, 1000})
	e = f.Expect(entry.Round{Day: 6}, fast)[1]
	if got := entry.Check(&e, 95_000); got == nil || got.Slip != entry.Repeated {
		t.Errorf("typed again: %+v, centre %d band %d", got, e.Centre, e.Band)
	}
}

// What is asked again lies as far above the expectation as below it, whatever kind of value.
func TestCheckIsSymmetric(t *testing.T) {
	t.Parallel()
	f := forecastOf(t, trial.ISO3159(), nil)
	for _, kind := range []entry.Kind{entry.OfState, entry.OfRate, entry.OfHand} {
		for k := 1; k <= 15; k++ {
			for _, e := range f.Expect(entry.Round{Day: k, Kind: kind}, steady(k, [3]int64{-9000, 100, 44_000}, [3]int64{-4000, 300, 5000})) {
				for d := int64(0); d < 3*e.Band; d += 97 {
					if (entry.Check(&e, e.Centre+d) == nil) != (entry.Check(&e, e.Centre-d) == nil) {
						t.Fatalf("kind %d round %d: %d above and below the centre differ", kind, k, d)
					}
				}
			}
		}
	}
}

// practice.md X1: every answer of the room stays the same when all limits of the programme change, or
// go; nor does it hang on categories or criteria.
func TestBlindToLimits(t *testing.T) {
	t.Parallel()
	m := rival.New(21)
	history := historyOf(t, trial.ISO3159(), m, 5, 100)
	states := m.Lot(trial.ISO3159(), 20)
	slips := []int64{0, 1000, -1000, 3000, -3000, 5000, 10_000, -10_000, 30_000, 60_000, -60_000}
	answers := func(p *trial.Programme) (out []any) {
		f := forecastOf(t, p, history)
		for k := 1; k < len(states[0]); k++ {
			r := entry.Round{Day: k}
			read := places(states, k, true)
			list := f.Expect(r, read)
			h := entry.Holder{Rows: 4, Columns: 5, Expectations: list}
			for i, s := range states {
				for _, by := range slips {
					out = append(out, entry.Check(&list[i], int64(s[k])+by))
				}
				h.Values = append(h.Values, milli(int64(states[len(states)-1-i][k])))
				if k > 1 {
					out = append(out, f.Yesterday(ratesOf(s[:k+1]), k-1, [2]int64{86_400, 86_400}))
				}
			}
			out = append(out, list, entry.Arrange(h, nil), f.Still(r, read, list), f.Clock(r, read))
		}
		return out
	}
	want := answers(trial.ISO3159())
	for name, change := range map[string]func(*trial.Programme){
		"tightened": func(p *trial.Programme) {
			for i := range p.Criteria {
				tight := map[string]trial.Limit{}
				for _, c := range p.Categories {
					tight[c.Code] = trial.Limit{HasMin: true, HasMax: true, Min: trial.Ratio(-1, 10), Max: trial.Ratio(1, 10)}
				}
				p.Criteria[i].Limits = tight
			}
		},
		"none": func(p *trial.Programme) {
			for i := range p.Criteria {
				p.Criteria[i].Limits = nil
			}
		},
		"no criteria": func(p *trial.Programme) { p.Criteria, p.Categories = nil, nil },
	} {
		p := trial.ISO3159()
		change(p)
		if got := answers(p); !reflect.DeepEqual(got, want) {
			t.Errorf("limits %s: other answers", name)
		}
	}
}

// A lot that runs otherwise than its calibre: once its first places are read the others are expected
// where the lot runs, and a value that fits the lot is no longer asked again.
func TestLotIsLearnt(t *testing.T) {
	t.Parallel()
	f := forecastOf(t, trial.ISO3159(), historyOf(t, trial.ISO3159(), rival.New(5), 10, 100))
	var holder []entry.Place
	for range 20 {
		holder = append(holder, steady(1, [3]int64{}, [3]int64{})...)
	}
	r := entry.Round{Day: 1}
	before := f.Expect(r, holder)[59]
	for i := range 4 {
		holder[i].Value = milli(before.Centre + 6000)
	}
	if few := f.Expect(r, holder)[59]; few.Centre != before.Centre {
		t.Errorf("four values moved the centre by %d", few.Centre-before.Centre)
	}
	for i := range 40 {
		holder[i].Value = milli(before.Centre + 6000 + int64(i%5-2)*1000)
	}
	after := f.Expect(r, holder)[59]
	if moved := after.Centre - before.Centre; moved < 5000 || moved > 6000 {
		t.Errorf("forty values 6.0 s above moved the centre by %d", moved)
	}
}
