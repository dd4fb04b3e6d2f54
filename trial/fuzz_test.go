package trial_test

import (
	"encoding/binary"
	"fmt"
	"slices"
	"testing"

	"ratehouse/trial"
)

// FuzzRates judges any rates in any intervals like the oracle does, and never says 'cannot pass'
// of anything but an open movement.
func FuzzRates(f *testing.F) {
	f.Add([]byte("ratehouse rates, fifteen of them, and more"), false)
	f.Add(make([]byte, 15*6), true)
	f.Fuzz(func(t *testing.T, data []byte, second bool) {
		category := "1"
		if second {
			category = "2"
		}
		j := newJudge(t, category)
		rates := make([]trial.Rate, 15)
		for d := range rates {
			if len(data) < 6 {
				break
			}
			diff, secs := int32(binary.LittleEndian.Uint32(data)), int64(binary.LittleEndian.Uint16(data[4:]))
			data = data[6:]
			rates[d] = trial.RateBetween(0, trial.State(diff>>(diff&31)), 54_000+secs)
			if secs%5 == 0 {
				rates[d] = trial.RateOf(int64(diff % 20_000))
			}
			if secs%11 == 0 {
				rates[d] = trial.Rate{}
			}
		}
		var got trial.Result
		j.Rates(rates, &got)
		sameAsOracle(t, "fuzzed", j, &got, rates)
		if j.CannotPass(rates) && got.Verdict != trial.Open {
			t.Fatalf("%s and cannot pass", got.Verdict)
		}
	})
}

func ExampleJudge_Rates() {
	judge, err := trial.NewJudge(trial.ISO3159(), "1")
	if err != nil {
		panic(err)
	}
	rates := slices.Repeat([]trial.Rate{trial.RateOf(6010)}, 15) // 6.01 s/d every day
	rates[14] = trial.Rate{}                                     // the last day is not read yet
	var result trial.Result
	judge.Rates(rates, &result)
	for i, c := range judge.Programme().Criteria {
		if v := result.Values[i]; v.Known {
			fmt.Println(c.Symbol, trial.Printed(v.Exact, judge.Limit(i), c.Decimals), v.Outcome)
		} else {
			fmt.Println(c.Symbol, v.Outcome)
		}
	}
	fmt.Println(result.Verdict, result.Failed())
	// Output:
	// M 6.01 outside
	// V 0.0 inside
	// Vmax 0.0 inside
	// D 0.0 inside
	// P 0.0 inside
	// C 0.00 inside
	// R undecided
	// fail [M]
}
