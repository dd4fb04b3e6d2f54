package trial_test

import (
	"math/big"

	"ratehouse/trial"
)

// oracle judges the built-in programme the plainest way there is, from the formulas of the domain
// notes and the limits of the check values, sharing nothing with the engine.
type oracle struct {
	values  map[string]*big.Rat // nil: undecided
	inside  map[string]bool
	verdict string
}

var oracleLimits = map[string]map[string][2]string{
	"1": {"M": {"-4", "6"}, "V": {"0", "2"}, "Vmax": {"0", "5"}, "D": {"-6", "8"}, "P": {"0", "10"}, "C": {"-0.6", "0.6"}, "R": {"-5", "5"}},
	"2": {"M": {"-5", "8"}, "V": {"0", "3.4"}, "Vmax": {"0", "7"}, "D": {"-8", "10"}, "P": {"0", "15"}, "C": {"-0.7", "0.7"}, "R": {"-6", "6"}},
}

// oracleBounds are the same limits as numbers.
var oracleBounds = func() map[string]map[string][2]*big.Rat {
	all := map[string]map[string][2]*big.Rat{}
	for category, limits := range oracleLimits {
		all[category] = map[string][2]*big.Rat{}
		for symbol, l := range limits {
			all[category][symbol] = [2]*big.Rat{ratOf(l[0]), ratOf(l[1])}
		}
	}
	return all
}()

var symbols = []string{"M", "V", "Vmax", "D", "P", "C", "R"}

func ratOf(s string) *big.Rat {
	r, ok := new(big.Rat).SetString(s)
	if !ok {
		panic(s)
	}
	return r
}

// askOracle takes R1..R15 at r[1..15], nil where not read.
func askOracle(r [16]*big.Rat, category string) oracle {
	o := oracle{map[string]*big.Rat{}, map[string]bool{}, "pass"}
	there := func(days ...int) bool {
		for _, d := range days {
			if r[d] == nil {
				return false
			}
		}
		return true
	}
	sub := func(a, b *big.Rat) *big.Rat { return new(big.Rat).Sub(a, b) }
	over := func(a *big.Rat, n int64) *big.Rat { return new(big.Rat).Quo(a, new(big.Rat).SetInt64(n)) }
	half := func(a, b *big.Rat) *big.Rat { return over(new(big.Rat).Add(a, b), 2) }
	abs := func(a *big.Rat) *big.Rat { return new(big.Rat).Abs(a) }
	if there(1, 2, 3, 4, 5, 6, 7, 8, 9, 10) {
		m := new(big.Rat)
		for i := 1; i <= 10; i++ {
			m.Add(m, r[i])
		}
		m = over(m, 10)
		sum, most, dev := new(big.Rat), new(big.Rat), new(big.Rat)
		for k := 1; k <= 5; k++ {
			d := abs(sub(r[2*k], r[2*k-1]))
			sum.Add(sum, d)
			if d.Cmp(most) > 0 {
				most = d
			}
		}
		for i := 1; i <= 10; i++ {
			if d := abs(sub(r[i], m)); d.Cmp(dev) > 0 {
				dev = d
			}
		}
		o.values["M"], o.values["V"], o.values["Vmax"], o.values["P"] = m, over(sum, 5), most, dev
	}
	if there(1, 2, 9, 10) {
		o.values["D"] = sub(half(r[1], r[2]), half(r[9], r[10]))
	}
	if there(11, 13) {
		o.values["C"] = over(sub(r[13], r[11]), 30)
	}
	if there(1, 2, 15) {
		o.values["R"] = sub(r[15], half(r[1], r[2]))
	}
	for _, s := range symbols {
		v := o.values[s]
		if v == nil {
			if o.verdict == "pass" {
				o.verdict = "open"
			}
			continue
		}
		l := oracleBounds[category][s]
		o.inside[s] = v.Cmp(l[0]) >= 0 && v.Cmp(l[1]) <= 0
		if !o.inside[s] {
			o.verdict = "fail"
		}
	}
	return o
}

// fromRates makes the oracle's input of the engine's.
func fromRates(rates []trial.Rate) (r [16]*big.Rat) {
	for i, x := range rates {
		if x.Known() {
			r[i+1] = x.Exact().Rat()
		}
	}
	return r
}
