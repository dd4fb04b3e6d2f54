package rival

import (
	"math"
	"slices"
	"testing"

	"ratehouse/trial"
)

func TestSameSeedSameLots(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	a, b, other := New(3).Lot(p, 20), New(3).Lot(p, 20), New(4).Lot(p, 20)
	for i := range a {
		if !slices.Equal(a[i], b[i]) {
			t.Fatalf("movement %d differs between two runs of one seed", i)
		}
	}
	if slices.Equal(a[0], other[0]) {
		t.Error("two seeds, one movement")
	}
}

// Published check values of domain notes 4.4: 1 µg at 1 mm, and the amplitude at which it has no
// effect.
func TestPoise(t *testing.T) {
	t.Parallel()
	for degrees, want := range map[float64]float64{150: 0.19887348, 180: 0.10127025, 280: -0.07154081} {
		if got := poise(degrees); math.Abs(got-want) > 1e-8 {
			t.Errorf("%v°: %.9f, want %.8f", degrees, got, want)
		}
	}
	if zero := poise(219.54058042797); math.Abs(zero) > 1e-12 {
		t.Errorf("at 219.54°: %g", zero)
	}
}

// A generator kinder than practice.md E15 asks for judges nothing: root mean squares of 4,000 movements
// of 40 lots.
func TestNotTooKind(t *testing.T) {
	t.Parallel()
	p, m := trial.ISO3159(), New(1)
	var turn, warm, again float64
	n, pass := 0.0, 0.0
	judge, err := trial.NewJudge(p, "1")
	if err != nil {
		t.Fatal(err)
	}
	var result trial.Result
	for range 40 {
		for _, s := range m.Lot(p, 100) {
			rates := make([]trial.Rate, len(p.Days))
			for d := range rates {
				rates[d] = trial.RateBetween(s[d], s[d+1], trial.SecondsPerDay)
			}
			if judge.Rates(rates, &result); result.Verdict == trial.Pass {
				pass++
			}
			rate := func(d int) float64 { return float64(rates[d-1].Milli()) / 1000 }
			turn += math.Pow(rate(3)-rate(2), 2)
			warm += math.Pow((rate(13)-rate(11))/30, 2)
			again += math.Pow(rate(4)-rate(3), 2)
			n++
		}
	}
	turn, warm, again = math.Sqrt(turn/n), math.Sqrt(warm/n), math.Sqrt(again/n)
	t.Logf("change of position %.2f s/d, second day %.2f s/d, thermal slope %.3f s/d per °C, yield %.3f", turn, again, warm, pass/n)
	if turn < 2 || warm < 0.2 || again < 0.3 {
		t.Errorf("too kind: change of position %.2f, second day %.2f, thermal slope %.3f", turn, again, warm)
	}
}
