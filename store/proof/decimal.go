package proof

import (
	"fmt"
	"math/big"
	"regexp"
	"strings"
)

var (
	decimalForm = regexp.MustCompile(`^-?(0|[1-9][0-9]{0,17})(\.[0-9]{1,27})?$`)
	// A mean over days read at odd seconds has a denominator with some five digits a day.
	ratioForm = regexp.MustCompile(`^-?(0|[1-9][0-9]{0,499})/[1-9][0-9]{0,499}$`)
)

// rat gives the exact value of a decimal and its digits after the point.
func (d Decimal) rat() (*big.Rat, int, error) {
	v, ok := new(big.Rat).SetString(string(d))
	if !decimalForm.MatchString(string(d)) || !ok || v.Sign() == 0 && d[0] == '-' {
		return nil, 0, fmt.Errorf("%q is not a decimal number", string(d))
	}
	_, fraction, _ := strings.Cut(string(d), ".")
	return v, len(fraction), nil
}

// limit gives the exact value of a limit, decimal or p/q, or nil for none.
func (d Decimal) limit() (*big.Rat, error) {
	if ratioForm.MatchString(string(d)) {
		v, _ := new(big.Rat).SetString(string(d))
		return v, nil
	}
	if d == "" {
		return nil, nil
	}
	v, _, err := d.rat()
	return v, err
}

// rat gives the value of an exact number; only the form of big.Rat.String is taken.
func (e Exact) rat() (*big.Rat, error) {
	v, ok := new(big.Rat).SetString(string(e))
	if !ratioForm.MatchString(string(e)) || !ok || v.String() != string(e) {
		return nil, fmt.Errorf("%q is not p/q in lowest terms", string(e))
	}
	return v, nil
}

// ExactOf gives the text of an exact number.
func ExactOf(v *big.Rat) Exact { return Exact(v.String()) }

// Rounded gives v with that many digits after the point, rounded once, half to even
// (ISO 80000-1 Annex B rule A, from memory), and never "-0".
func Rounded(v *big.Rat, decimals int) Decimal {
	scale := new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(decimals)), nil)
	num := new(big.Int).Mul(v.Num(), scale)
	q, rest := new(big.Int).DivMod(num, v.Denom(), new(big.Int)) // rest >= 0
	switch rest.Lsh(rest, 1).Cmp(v.Denom()) {
	case 1:
		q.Add(q, big.NewInt(1))
	case 0:
		if q.Bit(0) == 1 {
			q.Add(q, big.NewInt(1))
		}
	}
	sign := ""
	if q.Sign() < 0 {
		sign = "-"
	}
	digits := q.Abs(q).String()
	if missing := decimals + 1 - len(digits); missing > 0 {
		digits = strings.Repeat("0", missing) + digits
	}
	if decimals == 0 {
		return Decimal(sign + digits)
	}
	point := len(digits) - decimals
	return Decimal(sign + digits[:point] + "." + digits[point:])
}

// Printed rounds v to the given digits, and to as many more as are needed for the printed
// number to lie on the same side of its limits as v itself: a value of 6.04 that fails a limit
// of 6 is printed 6.04, never 6.0. A number that no decimal can tell from its limit, such as 2/3
// on a limit of 2/3, is printed as p/q. Nil limits are none.
func Printed(v *big.Rat, decimals int, low, high *big.Rat) Decimal {
	const most = 18 // further digits; limits are decimals of a few places or exact fractions
	for places := decimals; places <= decimals+most; places++ {
		d := Rounded(v, places)
		shown, _ := new(big.Rat).SetString(string(d))
		if within(shown, low, high) == within(v, low, high) {
			return d
		}
	}
	return Decimal(v.RatString())
}

// within tells whether v lies between the limits, which belong to the permitted range.
func within(v, low, high *big.Rat) bool {
	return (low == nil || v.Cmp(low) >= 0) && (high == nil || v.Cmp(high) <= 0)
}

// margin is the distance from v to the nearer limit, negative outside; nil without limits.
func margin(v, low, high *big.Rat) *big.Rat {
	var m *big.Rat
	if low != nil {
		m = new(big.Rat).Sub(v, low)
	}
	if high != nil {
		if up := new(big.Rat).Sub(high, v); m == nil || up.Cmp(m) < 0 {
			m = up
		}
	}
	return m
}

// deciding gives the limits that decide a criterion: the acceptance limits of a guarded rule
// where they are given, else the programme's. Nil means none.
func (c Criterion) deciding() (low, high *big.Rat, err error) {
	texts := [2]Decimal{c.Min, c.Max}
	if c.AcceptMin != "" {
		texts[0] = c.AcceptMin
	}
	if c.AcceptMax != "" {
		texts[1] = c.AcceptMax
	}
	if low, err = texts[0].limit(); err != nil {
		return nil, nil, err
	}
	high, err = texts[1].limit()
	return low, high, err
}

// WithValue returns c with its value as judged: exact, printed, margin and verdict. The limits
// and Decimals must be set before; v is nil while the criterion is undecided. The verdict is
// the engine's; one that contradicts the limits is found by Record.Check.
func (c Criterion) WithValue(v *big.Rat, verdict Verdict) (Criterion, error) {
	c.Value, c.Printed, c.Margin, c.Verdict = "", "", "", verdict
	if v == nil {
		return c, nil
	}
	low, high, err := c.deciding()
	if err != nil {
		return c, fmt.Errorf("criterion %s: limit %w", c.Symbol, err)
	}
	c.Value, c.Printed = ExactOf(v), Printed(v, c.Decimals, low, high)
	if m := margin(v, low, high); m != nil {
		c.Margin = Printed(m, c.Decimals, new(big.Rat), nil)
	}
	return c, nil
}
