package trial

import "math"

// Milli counts thousandths: of a second for a state, of a second per day for a rate, of a degree
// for a temperature.
type Milli int64

// Exact gives the number itself, thousandths divided out.
func (m Milli) Exact() Exact { return Ratio(int64(m), 1000) }

// String prints the shortest decimal: Milli(1500) is 1.5.
func (m Milli) String() string { return m.Exact().short() }

// State is indicated minus reference time in thousandths of a second, positive when ahead.
type State int64

// Exact gives the state in seconds.
func (s State) Exact() Exact { return Ratio(int64(s), 1000) }

// String prints the shortest decimal in seconds.
func (s State) String() string { return s.Exact().short() }

// SecondsPerDay is the length of the day a rate is referred to.
const SecondsPerDay = 86_400

// Rate is a daily rate as an exact rational number of thousandths of s/d, positive = gaining. The
// zero value means not read, which is never the same as a rate of zero.
type Rate struct{ num, den int64 }

// RateOf is a rate of so many thousandths of s/d.
func RateOf(milli int64) Rate { return Rate{milli, 1} }

// RateBetween is the rate that leads from one state to the other in so many whole seconds:
// (to - from) · 86,400 / seconds. Without a positive interval, or with states more than a hundred
// million seconds apart, there is no rate and the result is the zero Rate.
func RateBetween(from, to State, seconds int64) Rate {
	diff := int64(to) - int64(from)
	const far = 100_000_000_000
	if seconds <= 0 || diff > far || diff < -far {
		return Rate{}
	}
	if seconds == SecondsPerDay {
		return Rate{diff, 1}
	}
	return Rate{diff * SecondsPerDay, seconds}
}

// Shifted is the rate after one of the two states that bound it moved by so many thousandths of a
// second over an interval of so many whole seconds: r + by · 86,400 / seconds. A rate not read stays
// so; without a positive interval, or where numbers outgrow 64 bits, the result is the zero Rate.
func (r Rate) Shifted(by, seconds int64) Rate {
	shift := RateBetween(0, State(by), seconds)
	if r.den == 0 || shift.den == 0 {
		return Rate{}
	}
	if r.den == shift.den {
		return Rate{r.num + shift.num, r.den}
	}
	a, ok1 := mul64(r.num, shift.den)
	b, ok2 := mul64(shift.num, r.den)
	den, ok3 := mul64(r.den, shift.den)
	const half = 1 << 62
	if !ok1 || !ok2 || !ok3 || abs64(a) > half || abs64(b) > half {
		return Rate{}
	}
	return Rate{a + b, den}
}

// Known tells whether the rate was read at all.
func (r Rate) Known() bool { return r.den != 0 }

// Exact gives the rate in s/d; zero for a rate not read.
func (r Rate) Exact() Exact {
	if r.den == 0 {
		return Exact{}
	}
	if den, ok := mul64(r.den, 1000); ok {
		return Ratio(r.num, den)
	}
	return Ratio(r.num, r.den).Times(Ratio(1, 1000))
}

// Thousandths gives the rate as whole thousandths of s/d; ok is false if it is none, or not read.
func (r Rate) Thousandths() (milli int64, ok bool) {
	if r.den == 0 || r.num%r.den != 0 {
		return 0, false
	}
	return r.num / r.den, true
}

// Decimal prints the rate in s/d with so many decimals, half to even; empty if not read.
func (r Rate) Decimal(places int) string {
	if r.den == 0 {
		return ""
	}
	return r.Exact().Decimal(places)
}

// Milli gives the rate in whole thousandths of s/d, rounded half to even; zero if not read. For
// statistics: verdicts take Exact. A rate too large for that gives the nearest bound of int64.
func (r Rate) Milli() Milli {
	if m, ok := r.Thousandths(); ok || r.den == 0 {
		return Milli(m)
	}
	q, ok := roundHalfEven(r.num, 1, r.den)
	if !ok {
		q = math.MaxInt64
		if r.num < 0 {
			q = -q
		}
	}
	return Milli(q)
}
