package balance_test

import (
	"fmt"
	"math/rand/v2"
	"slices"
	"testing"

	"ratehouse/trial"
	"ratehouse/trial/balance"
)

func newJudge(t testing.TB) *trial.Judge {
	t.Helper()
	j, err := trial.NewJudge(trial.ISO3159(), "1")
	if err != nil {
		t.Fatal(err)
	}
	return j
}

// sound is a movement that passes: 1.0 s/d throughout, with small variations.
func sound() []int64 {
	return []int64{1_000, 1_200, 900, 1_100, 1_000, 1_300, 1_100, 1_000, 1_200, 1_000, 900, 1_100, 1_000, 1_200, 1_100}
}

func ratesOf(milli []int64) []trial.Rate {
	out := make([]trial.Rate, len(milli))
	for d, x := range milli {
		out[d] = trial.RateOf(x)
	}
	return out
}

// with changes a sound movement.
func with(change func(r []int64)) []trial.Rate {
	r := sound()
	change(r)
	return ratesOf(r)
}

func codes(n balance.Note) (list []balance.Code) {
	for _, part := range [][]balance.Finding{n.Regulation, n.Beyond, n.Look, n.Validity} {
		for _, f := range part {
			list = append(list, f.Code)
		}
	}
	return list
}

// causes are movements each spoilt in one way.
func causes() map[string][]trial.Rate {
	return map[string][]trial.Rate{
		"nothing":  with(func([]int64) {}),
		"far off":  with(func(r []int64) { shift(r, 7_000) }),
		"one jump": with(func(r []int64) { r[3] += 6_000 }),
		"unsteady": with(func(r []int64) {
			for k := 1; k < 10; k += 2 {
				r[k] += 4_000
			}
		}),
		"accessory":    with(func(r []int64) { r[9] -= 7_000 }),
		"out of poise": with(func(r []int64) { r[2], r[3] = r[2]+13_000, r[3]+13_000; r[4], r[5] = r[4]-9_000, r[5]-9_000 }),
		"hanging": with(func(r []int64) {
			for _, d := range []int{0, 1, 13, 14} {
				r[d] += 9_000
			}
		}),
		"thermal":      with(func(r []int64) { r[10], r[12] = r[10]-10_000, r[12]+10_000 }),
		"not resumed":  with(func(r []int64) { r[13], r[14] = r[13]+6_000, r[14]+6_000 }),
		"dial down":    with(func(r []int64) { r[6], r[7] = r[6]+13_000, r[7]+13_000 }),
		"two at once":  with(func(r []int64) { shift(r, 7_000); r[12] += 20_000 }),
		"nothing read": nil,
	}
}

func shift(r []int64, by int64) {
	for d := range r {
		r[d] += by
	}
}

// Other causes, other codes; and the code of each is the one it was spoilt for.
func TestCausesTellApart(t *testing.T) {
	t.Parallel()
	j := newJudge(t)
	facts := balance.Facts{Card: balance.Card{Organ: "index", Step: 2_500}, U: 0.1}
	seen := map[string]string{}
	for name, rates := range causes() {
		n := balance.BenchNote(j, rates, facts)
		text := fmt.Sprint(codes(n))
		if other, twice := seen[text]; twice {
			t.Errorf("%s and %s get the same note: %s", name, other, text)
		}
		seen[text] = name
	}
	for name, want := range map[string][]balance.Code{
		"nothing":      {balance.Room, balance.Opinion},
		"far off":      {balance.Regulate, balance.Units, balance.Opinion},
		"one jump":     {balance.NotEnough, balance.MeanIsInside, balance.OneVariation, balance.LookReading, balance.LookMagnetism, balance.Opinion},
		"unsteady":     {balance.NotEnough, balance.MeanIsInside, balance.Unsteady, balance.LookDrive, balance.LookMagnetism, balance.Opinion},
		"accessory":    {balance.NotEnough, balance.MeanIsInside, balance.Accessory, balance.LookAccessory, balance.Opinion},
		"out of poise": {balance.NotEnough, balance.MeanIsInside, balance.FarPosition, balance.Vertical, balance.LookPattern, balance.NoClosure, balance.NoAmplitude, balance.Opinion},
		"hanging":      {balance.NotEnough, balance.MeanIsInside, balance.HangFlat, balance.LookHang, balance.Opinion},
		"thermal":      {balance.NotEnough, balance.MeanIsInside, balance.Thermal, balance.LookSpring, balance.Opinion},
		"not resumed":  {balance.NotEnough, balance.MeanIsInside, balance.Resumption, balance.LookSettling, balance.Opinion},
		"dial down":    {balance.NotEnough, balance.MeanIsInside, balance.FarPosition, balance.FlatPair, balance.LookPivots, balance.Opinion},
		"two at once":  {balance.NotEnough, balance.MeanAsWell, balance.Thermal, balance.LookSpring, balance.Opinion},
	} {
		if got := codes(balance.BenchNote(j, causes()[name], facts)); !slices.Equal(got, want) {
			t.Errorf("%s: %v, want %v", name, got, want)
		}
	}
}

// find is the finding of a code.
func find(t testing.TB, n balance.Note, code balance.Code) balance.Finding {
	t.Helper()
	for _, part := range [][]balance.Finding{n.Regulation, n.Beyond, n.Look, n.Validity} {
		for _, f := range part {
			if f.Code == code {
				return f
			}
		}
	}
	t.Fatalf("no %s in %v", code, codes(n))
	return balance.Finding{}
}

// The numbers beside the codes.
func TestNoteNumbers(t *testing.T) {
	t.Parallel()
	j := newJudge(t)
	facts := balance.Facts{Card: balance.Card{Organ: "index", Step: 2_500}, U: 0.1}
	note := func(name string) balance.Note { return balance.BenchNote(j, causes()[name], facts) }
	expect := func(n balance.Note, code balance.Code, values ...trial.Milli) {
		t.Helper()
		if f := find(t, n, code); !slices.Equal(f.Values, values) {
			t.Errorf("%s: %v, want %v", code, f.Values, values)
		}
	}
	// M is 8.08: shifts of -12.08 to -2.08 bring it to -4 … +6; at 2.5 s/d a division -4.832 to -0.832.
	expect(note("far off"), balance.Regulate, -12_080, -2_080, -7_080)
	expect(note("far off"), balance.Units, -4_832, -832)
	expect(note("two at once"), balance.MeanAsWell, -12_080, -2_080)
	expect(note("one jump"), balance.OneVariation, 6_200, 200)
	if f := find(t, note("one jump"), balance.OneVariation); !slices.Equal(f.Days, []int{3, 4}) || f.Position != trial.H3 {
		t.Errorf("%+v", f)
	}
	expect(note("accessory"), balance.Accessory, -7_200)
	expect(note("dial down"), balance.FlatPair, 1_200-14_050) // day 10 with the mechanism is left out
	expect(note("thermal"), balance.Thermal, 670, 15_509)     // 20.1/30 s/d per °C, over 43,200
	expect(note("hanging"), balance.LookHang, 1_000)
	// 3H 14.0, 6H 1.1, 9H -7.85: mean 3.075, A sin = -10.925, A cos = -1.975.
	f := find(t, note("out of poise"), balance.Vertical)
	if f.Values[0] != 11_102 || f.Values[1] != 259_753 {
		t.Errorf("pattern %v", f.Values)
	}
	if f := find(t, note("out of poise"), balance.FarPosition); f.Position != trial.H3 || !slices.Equal(f.Days, []int{4}) {
		t.Errorf("%+v", f)
	}
}

// A heavy side is named with an amplitude that keeps the sign, and not otherwise (X4).
func TestNoHeavySideWithoutAmplitude(t *testing.T) {
	t.Parallel()
	j := newJudge(t)
	rates := causes()["out of poise"]
	has := func(f balance.Facts, code balance.Code) bool {
		return slices.Contains(codes(balance.BenchNote(j, rates, f)), code)
	}
	for _, c := range []struct {
		a     balance.Amplitude
		heavy bool
	}{{balance.Amplitude{}, false}, {balance.Amplitude{From: 180, To: 180}, true}, {balance.Amplitude{From: 270, To: 270}, false},
		{balance.Amplitude{From: 225, To: 290}, true}, {balance.Amplitude{From: 210, To: 290}, false}} {
		f := balance.Facts{Amplitude: c.a, U: 0.1}
		if has(f, balance.LookHeavy) != c.heavy || has(f, balance.LookPattern) == c.heavy || has(f, balance.AmplitudeWide) != (!c.heavy && c.a.To > 0) {
			t.Errorf("%v: %v", c.a, codes(balance.BenchNote(j, rates, f)))
		}
	}
	low := find(t, balance.BenchNote(j, rates, balance.Facts{Amplitude: balance.Amplitude{From: 180, To: 180}}), balance.LookHeavy).Values[0]
	high := find(t, balance.BenchNote(j, rates, balance.Facts{Amplitude: balance.Amplitude{From: 225, To: 290}}), balance.LookHeavy).Values[0]
	if high != low-180_000 {
		t.Errorf("above the neutral amplitude the light side: %v, %v", low, high)
	}
}

// What regulating can do, against every shift tried.
func TestRegulation(t *testing.T) {
	t.Parallel()
	j := newJudge(t)
	rng := rand.New(rand.NewPCG(4, 4))
	found := 0
	moved := make([]int64, 15)
	var out trial.Result
	for range 60 {
		r := make([]int64, 15)
		mean := rng.Int64N(40_000) - 20_000
		for d := range r {
			r[d] = mean + rng.Int64N(6_000) - 3_000
		}
		s, ok := balance.Regulation(j, ratesOf(r))
		lo, hi := int64(1), int64(0)
		for by := int64(-30_000); by <= 30_000; by++ {
			copy(moved, r)
			shift(moved, by)
			j.Milli(moved, 1<<15-1, &out)
			if out.Verdict == trial.Pass {
				if lo > hi {
					lo = by
				}
				hi = by
			}
		}
		if ok != (lo <= hi) || ok && (int64(s.Lo) != lo || int64(s.Hi) != hi) {
			t.Fatalf("%v: %v %v, by trying %d to %d", r, s, ok, lo, hi)
		}
		if ok {
			found++
		}
	}
	if found < 10 {
		t.Errorf("only %d of 60 can be regulated", found)
	}
	blank := ratesOf(sound())
	blank[14] = trial.Rate{}
	if _, ok := balance.Regulation(j, blank); ok {
		t.Error("regulation of an undecided movement")
	}
}

func TestUnits(t *testing.T) {
	t.Parallel()
	// Practice notes, X6: 3.5 to 5.0 s/d at 2.5 a division are 1.4 to 2.
	c := balance.Card{Organ: "index", Step: 2_500}
	if lo, hi, ok := c.Units(balance.Shift{Lo: 3_500, Hi: 5_000}); !ok || lo != 1_400 || hi != 2_000 {
		t.Errorf("%v %v %v", lo, hi, ok)
	}
	// Rounded inwards: 1/3 division is 0.334, 2/3 is 0.666.
	if lo, hi, ok := (balance.Card{Step: 3_000}).Units(balance.Shift{Lo: 1_000, Hi: 2_000}); !ok || lo != 334 || hi != 666 {
		t.Errorf("%v %v %v", lo, hi, ok)
	}
	if lo, hi, ok := (balance.Card{Step: 3_000}).Units(balance.Shift{Lo: -2_000, Hi: -1_000}); !ok || lo != -666 || hi != -334 {
		t.Errorf("%v %v %v", lo, hi, ok)
	}
	if _, _, ok := (balance.Card{}).Units(balance.Shift{Lo: 1, Hi: 2}); ok {
		t.Error("units without a step")
	}
}

func TestAimPoint(t *testing.T) {
	t.Parallel()
	j := newJudge(t)
	rng := rand.New(rand.NewPCG(6, 6))
	var lot [][]trial.Rate
	for n := range 120 {
		r := sound()
		shift(r, 5_000+rng.Int64N(6_000)-3_000) // M 3 to 9: about half beyond +6
		if n%10 == 0 {
			r[12] += 30_000 // these fail on C whatever the shift
		}
		lot = append(lot, ratesOf(r))
	}
	lot = append(lot, ratesOf(sound())[:9]) // not judged in full
	a, ok := balance.AimPoint(j, lot, 1)
	if !ok || a.Movements != 120 {
		t.Fatalf("%+v", a)
	}
	most, passed, rejects, mended := 0, 0, 0, 0
	for by := trial.Milli(-15_000); by <= 15_000; by += 50 {
		n := passesAt(j, lot[:120], by)
		if n != a.PassesAt(by) {
			t.Fatalf("at %v: %d pass, the curve says %d", by, n, a.PassesAt(by))
		}
		if by == 0 {
			passed = n
		}
		most = max(most, n)
		if n > a.AtBest || n == a.AtBest && (by < a.Best.Lo || by > a.Best.Hi) && max(by, -by) < max(a.Best.Lo, -a.Best.Hi, 0) {
			t.Errorf("at %v %d pass, best is %d at %v", by, n, a.AtBest, a.Best)
		}
	}
	var out trial.Result
	for n, rates := range lot[:120] {
		if j.Rates(rates, &out); out.Values[0].Outcome == trial.Outside {
			rejects++
			if n%10 != 0 {
				mended++
			}
		}
	}
	if a.AtBest != most || a.Passed != passed || a.MRejects != rejects || a.RegulationOnly != mended || most != 108 || mended == 0 {
		t.Errorf("%d at best (by trying %d), %d pass, %d of %d by regulation; by hand %d, %d of %d",
			a.AtBest, most, a.Passed, a.RegulationOnly, a.MRejects, passed, mended, rejects)
	}
	if a.Near.Lo > a.Best.Lo || a.Near.Hi < a.Best.Hi || a.PassesAt(a.Near.Lo) < a.AtBest-1 || a.PassesAt(a.Near.Lo-1) >= a.AtBest-1 || a.PassesAt(a.Near.Hi+1) >= a.AtBest-1 {
		t.Errorf("near %v around %v", a.Near, a.Best)
	}
	if a.Low > a.High || a.High >= 0 {
		t.Errorf("bootstrap %v to %v", a.Low, a.High)
	}
	again, _ := balance.AimPoint(j, lot, 1)
	if again.Low != a.Low || again.High != a.High {
		t.Error("the same seed, another interval")
	}
	if _, ok := balance.AimPoint(j, lot[:1], 1); ok {
		t.Error("an aim for a movement no shift mends")
	}
}

func passesAt(j *trial.Judge, lot [][]trial.Rate, by trial.Milli) (n int) {
	var out trial.Result
	moved := make([]trial.Rate, 15)
	for _, rates := range lot {
		for d, x := range rates {
			moved[d] = x.Shifted(int64(by), trial.SecondsPerDay)
		}
		if j.Rates(moved, &out); out.Verdict == trial.Pass {
			n++
		}
	}
	return n
}
