package trial

import (
	"fmt"
	"math"
	"math/big"
	"math/bits"
	"strconv"
	"strings"
)

// Exact is an exact number: rational, or made of square roots of rationals, as a standard deviation
// is. The zero value is 0. Values are immutable and may be copied and shared between goroutines.
//
// Most numbers are a fraction of two int64. A criterion over rates whose intervals were not 24 h
// may need hundreds of bits: it is then kept as an enclosure [num/den, (num+slack)/den] beside the
// readings it came from, and computed in full only where the enclosure cannot decide a comparison
// or a rounding.
type Exact struct {
	num, den int64
	slack    int32
	at       int32
	src      *source
}

// source is where a wide Exact gets its full value: a number, or a criterion over kept rates.
type source struct {
	rat   *big.Rat
	surd  *surd
	judge *Judge
	rates []Rate
}

// Ratio is num/den. It panics if den is zero: a caller's bug.
func Ratio(num, den int64) Exact {
	if den == 0 {
		panic("trial: ratio with denominator zero")
	}
	if den < 0 {
		if den == math.MinInt64 || num == math.MinInt64 {
			return FromRat(new(big.Rat).SetFrac(big.NewInt(num), big.NewInt(den)))
		}
		num, den = -num, -den
	}
	return Exact{num: num, den: den}
}

// FromRat copies a big rational number.
func FromRat(r *big.Rat) Exact {
	if r.Num().IsInt64() && r.Denom().IsInt64() {
		return Exact{num: r.Num().Int64(), den: r.Denom().Int64()}
	}
	return Exact{den: 1, src: &source{rat: new(big.Rat).Set(r)}}
}

// ParseExact reads a decimal (ASCII digits, optional sign, at most one point) or p/q of two whole
// numbers, q above zero; no blanks, no exponent.
func ParseExact(s string) (Exact, error) {
	if s == "" || len(s) > 200 {
		return Exact{}, fmt.Errorf("%.40q is not a decimal number or p/q", s)
	}
	body := strings.TrimLeft(s[:1], "+-") + s[1:]
	whole, part, slash := strings.Cut(body, "/")
	digits := strings.Replace(body, ".", "", 1)
	if slash {
		digits = whole + part
	}
	if digits == "" || strings.Trim(digits, "0123456789") != "" || slash && (whole == "" || strings.Trim(part, "0") == "") {
		return Exact{}, fmt.Errorf("%.40q is not a decimal number or p/q", s)
	}
	r, ok := new(big.Rat).SetString(s)
	if !ok {
		return Exact{}, fmt.Errorf("%.40q is not a decimal number or p/q", s)
	}
	return FromRat(r), nil
}

// small tells whether num/den is the whole truth.
func (e Exact) small() bool { return e.src == nil }

// frac gives the small form with a denominator above zero.
func (e Exact) frac() (num, den int64) { return e.num, max(e.den, 1) }

// Rat gives the number as a new big.Rat. An irrational one is cut to 30 decimals, towards minus
// infinity; comparisons, sums and decimals do not go through that.
func (e Exact) Rat() *big.Rat {
	switch {
	case e.small():
		return big.NewRat(e.frac())
	case e.src.rat != nil:
		return new(big.Rat).Set(e.src.rat)
	case e.src.surd != nil:
		return e.src.surd.cut()
	}
	return e.src.judge.crits[e.at].exact(e.src.rates)
}

// Rational gives the number itself, an irrational one cut to 30 decimals: for sums over many
// movements, whose exact form would have a root of each.
func (e Exact) Rational() Exact {
	if e.irrational() {
		return FromRat(e.Rat())
	}
	return e
}

// Float gives the nearest float64, for drawing and statistics only: never for a verdict.
func (e Exact) Float() float64 {
	if e.small() {
		num, den := e.frac()
		return float64(num) / float64(den)
	}
	f, _ := e.Rat().Float64()
	return f
}

// Cmp compares exactly: -1 if e < f, 0 if equal, +1 if e > f.
func (e Exact) Cmp(f Exact) int {
	if e.irrational() || f.irrational() {
		return compareSurds(surdOf(e), surdOf(f))
	}
	if !e.bounded() || !f.bounded() {
		return e.Rat().Cmp(f.Rat())
	}
	switch {
	case e.small() && f.small():
		return cmpFrac(e.num, max(e.den, 1), f.num, max(f.den, 1))
	case cmpFrac(e.num+int64(e.slack), max(e.den, 1), f.num, max(f.den, 1)) < 0:
		return -1
	case cmpFrac(e.num, max(e.den, 1), f.num+int64(f.slack), max(f.den, 1)) > 0:
		return 1
	}
	return e.Rat().Cmp(f.Rat())
}

// bounded tells whether num, den and slack enclose the number.
func (e Exact) bounded() bool { return e.src == nil || e.src.judge != nil }

// Sign is -1, 0 or +1.
func (e Exact) Sign() int { return e.Cmp(Exact{}) }

// Add gives e + f.
func (e Exact) Add(f Exact) Exact {
	if s, ok := addSmall(e, f, 1); ok {
		return s
	}
	if e.irrational() || f.irrational() {
		return surdOf(e).plus(surdOf(f), 1).exact()
	}
	return FromRat(new(big.Rat).Add(e.Rat(), f.Rat()))
}

// Sub gives e - f.
func (e Exact) Sub(f Exact) Exact {
	if s, ok := addSmall(e, f, -1); ok {
		return s
	}
	if e.irrational() || f.irrational() {
		return surdOf(e).plus(surdOf(f), -1).exact()
	}
	return FromRat(new(big.Rat).Sub(e.Rat(), f.Rat()))
}

// Times gives e · f.
func (e Exact) Times(f Exact) Exact {
	if e.irrational() || f.irrational() {
		return surdOf(e).times(surdOf(f)).exact()
	}
	return FromRat(new(big.Rat).Mul(e.Rat(), f.Rat()))
}

// Neg gives -e.
func (e Exact) Neg() Exact { return Exact{}.Sub(e) }

// addSmall is e + sign·f over a common denominator, if everything fits.
func addSmall(e, f Exact, sign int64) (Exact, bool) {
	if !e.small() || !f.small() {
		return Exact{}, false
	}
	a, b := e.frac()
	c, d := f.frac()
	x, ok1 := mul64(a, d)
	y, ok2 := mul64(c, b)
	den, ok3 := mul64(b, d)
	const half = 1 << 62
	if !ok1 || !ok2 || !ok3 || x > half || x < -half || y > half || y < -half {
		return Exact{}, false
	}
	num := x + sign*y
	if b == d {
		num, den = a+sign*c, b
	}
	return Exact{num: num, den: den}, true
}

// String prints p/q in lowest terms, p alone for a whole number, and 30 decimals of an irrational one.
func (e Exact) String() string {
	if e.irrational() {
		return e.Decimal(cutPlaces)
	}
	return e.Rat().RatString()
}

// short prints the decimal with as few places as tell the whole number, at most three.
func (e Exact) short() string {
	s := e.Decimal(3)
	return strings.TrimSuffix(strings.TrimRight(s, "0"), ".")
}

// Decimal prints the number with so many decimals (none below zero), rounded once, half to even
// (ISO 80000-1 rule A), never -0.
func (e Exact) Decimal(places int) string {
	places = max(places, 0)
	if places <= 9 && e.bounded() {
		if q, ok := e.rounded(pow10[places]); ok {
			return string(appendScaled(nil, q, places))
		}
	}
	return e.slowDecimal(places)
}

// AppendDecimal appends what Decimal prints, without allocating for ordinary numbers.
func (e Exact) AppendDecimal(dst []byte, places int) []byte {
	if places >= 0 && places <= 9 && e.bounded() {
		if q, ok := e.rounded(pow10[places]); ok {
			return appendScaled(dst, q, places)
		}
	}
	return append(dst, e.slowDecimal(max(places, 0))...)
}

var pow10 = [10]int64{1, 10, 100, 1000, 10_000, 100_000, 1_000_000, 10_000_000, 100_000_000, 1_000_000_000}

// rounded gives the number times scale as a whole number, half to even; ok is false if it does
// not fit or the enclosure leaves it open.
func (e Exact) rounded(scale int64) (int64, bool) {
	den := max(e.den, 1)
	lo, ok := roundHalfEven(e.num, scale, den)
	if !ok || e.slack == 0 {
		return lo, ok
	}
	hi, ok := roundHalfEven(e.num+int64(e.slack), scale, den)
	return lo, ok && lo == hi
}

// roundHalfEven is num·scale/den rounded once.
func roundHalfEven(num, scale, den int64) (int64, bool) {
	neg := num < 0
	hi, lo := bits.Mul64(abs64(num), uint64(scale))
	d := uint64(den)
	if hi >= d {
		return 0, false
	}
	var q, r uint64
	if hi == 0 {
		q, r = lo/d, lo%d
	} else {
		q, r = bits.Div64(hi, lo, d)
	}
	if twice := r << 1; r > math.MaxInt64 || twice > d || twice == d && q&1 == 1 {
		q++
	}
	if q > math.MaxInt64 {
		return 0, false
	}
	if neg {
		return -int64(q), true
	}
	return int64(q), true
}

// slowDecimal is Decimal by big numbers.
func (e Exact) slowDecimal(places int) string {
	var q *big.Int
	if e.irrational() {
		q = e.src.surd.rounded(places)
	} else {
		q = roundRat(e.Rat(), places)
	}
	neg := q.Sign() < 0
	s := q.Abs(q).String()
	if places > 0 {
		if len(s) <= places {
			s = strings.Repeat("0", places+1-len(s)) + s
		}
		s = s[:len(s)-places] + "." + s[len(s)-places:]
	}
	if neg {
		s = "-" + s
	}
	return s
}

// roundRat is r · 10^places rounded half to even.
func roundRat(r *big.Rat, places int) *big.Int {
	scale := new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(places)), nil)
	q, m := scale.Mul(r.Num(), scale), new(big.Int)
	q.DivMod(q, r.Denom(), m) // m >= 0
	if c := m.Lsh(m, 1).Cmp(r.Denom()); c > 0 || c == 0 && q.Bit(0) == 1 {
		q.Add(q, big.NewInt(1))
	}
	return q
}

// appendScaled prints q / 10^places.
func appendScaled(dst []byte, q int64, places int) []byte {
	u := abs64(q)
	if q < 0 {
		dst = append(dst, '-')
	}
	if places == 0 {
		return strconv.AppendUint(dst, u, 10)
	}
	var digits [24]byte // from the last backwards: 20 digits and a point at most
	at := len(digits)
	for ; places > 0; places-- {
		at--
		digits[at] = byte('0' + u%10)
		u /= 10
	}
	at--
	digits[at] = '.'
	if u < 10 {
		at--
		digits[at] = byte('0' + u)
		return append(dst, digits[at:]...)
	}
	return append(strconv.AppendUint(dst, u, 10), digits[at:]...)
}

// abs64 is |x| without overflow.
func abs64(x int64) uint64 {
	if x < 0 {
		return -uint64(x)
	}
	return uint64(x)
}

// mul64 multiplies and tells whether it fits.
func mul64(a, b int64) (int64, bool) {
	hi, lo := bits.Mul64(abs64(a), abs64(b))
	if hi != 0 || lo > math.MaxInt64 {
		return 0, false
	}
	if (a < 0) != (b < 0) {
		return -int64(lo), true
	}
	return int64(lo), true
}

// cmpFrac compares a/b with c/d, b and d above zero, by 128-bit products.
func cmpFrac(a, b, c, d int64) int {
	if (a < 0) != (c < 0) {
		if a < 0 {
			return -1
		}
		return 1
	}
	h1, l1 := bits.Mul64(abs64(a), uint64(d))
	h2, l2 := bits.Mul64(abs64(c), uint64(b))
	if a < 0 {
		h1, l1, h2, l2 = h2, l2, h1, l1
	}
	switch {
	case h1 < h2 || h1 == h2 && l1 < l2:
		return -1
	case h1 == h2 && l1 == l2:
		return 0
	}
	return 1
}
