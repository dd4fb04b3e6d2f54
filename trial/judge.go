package trial

import (
	"errors"
	"math/big"
	"math/bits"
	"slices"
	"sync"
)

// ErrNotBuilt marks what the contract names and this version does not compute yet.
var ErrNotBuilt = errors.New("not built yet")

// Judge holds a programme compiled for one category. It is immutable and safe for use by many
// goroutines at once.
type Judge struct {
	prog      *Programme
	category  string
	crits     []criterion
	plan      plan // the same criteria for movements read in full
	limited   bool // at least one criterion has limits
	simple    bool // all criteria are of shapes the plan knows
	exactOnly bool // a limited criterion asks the solver for exact numbers
	all       []uint64
	fixedBits uint
	solvers   sync.Pool // *prospect, warm from the last movement; see cannot.go
}

const (
	// rateBits bounds |rate| in thousandths for fixed-point work: 4,194 s/d. Others are exact and slow.
	rateBits = 22
	// unreachableBox is the range of blank days for Value.Unreachable, thousandths of s/d.
	unreachableBox = 60_000
)

// NewJudge compiles a programme for one of its categories. The error is a *Fault naming the place
// in the programme; errors.Is(err, ErrNotBuilt) tells what this version cannot compute yet.
func NewJudge(p *Programme, category string) (*Judge, error) {
	if err := p.Check(); err != nil {
		return nil, err
	}
	if !p.HasCategory(category) {
		return nil, fault("categories", "unknown_category", category)
	}
	j := &Judge{prog: p, category: category, all: make([]uint64, words(len(p.Days)))}
	for d := range p.Days {
		j.all[d/64] |= 1 << (d % 64)
	}
	var steepest int64 = 1
	j.simple = true
	for i, c := range p.Criteria {
		crit, err := compileFormula(p, criterionPath(i)+".formula", c.Formula, j.crits)
		if err != nil {
			return nil, err
		}
		j.crits = append(j.crits, crit)
		steepest = max(steepest, crit.lip)
		j.simple = j.simple && crit.shape.plain()
	}
	// Room for N and for the products in reach: rate · steepest · 4 · days below 2^62.
	room := 62 - int(rateBits) - int(bitsOf(steepest)) - 2 - int(bitsOf(int64(len(p.Days))))
	j.fixedBits = uint(min(max(room, 0), 28))
	most := int64(1) << (rateBits + j.fixedBits + bitsOf(steepest) + 1)
	for i := range j.crits {
		l := p.Criteria[i].Limits[category]
		if err := j.crits[i].limit(criterionPath(i)+".limits."+category, l, j.fixedBits, most); err != nil {
			return nil, err
		}
		j.limited = j.limited || j.crits[i].limited
		j.exactOnly = j.exactOnly || j.crits[i].limited && j.crits[i].shape.composite()
	}
	if j.simple {
		j.plan = newPlan(j.crits, j.limited)
	}
	return j, nil
}

// Programme is the programme the judge was made from; do not change it.
func (j *Judge) Programme() *Programme { return j.prog }

// Category is the category code the judge was made for.
func (j *Judge) Category() string { return j.category }

// Limit gives the limits of criterion i in the judge's category.
func (j *Judge) Limit(i int) Limit { return j.prog.Criteria[i].Limits[j.category] }

// Milli judges rates given in whole thousandths of s/d, rates[d-1] for day d, bit d-1 of known
// set where it was read; the others are ignored. A programme of more than 64 days needs MilliLong.
// It panics otherwise, or if rates is shorter than the programme: a caller's bug. No allocation
// once out has been used with this judge and rates stay within ±4,194 s/d.
func (j *Judge) Milli(rates []int64, known uint64, out *Result) {
	if len(j.all) != 1 {
		panic("trial: Milli with a programme of more than 64 days")
	}
	r := rates[:len(j.prog.Days)]
	if known &= j.all[0]; known == j.all[0] && out.judge == j && out.full {
		verdict, ok := j.plan.judge(r, out.Values[:len(out.Values)+1])
		if out.Verdict = verdict; ok {
			return
		}
	}
	set := [1]uint64{known}
	j.milli(r, set[:], out)
}

// MilliLong is Milli with any number of days: bit (d-1)%64 of known[(d-1)/64] is day d.
func (j *Judge) MilliLong(rates []int64, known []uint64, out *Result) {
	if len(j.all) == 1 {
		j.Milli(rates, known[0], out)
		return
	}
	set := make([]uint64, len(j.all))
	for i := range set {
		set[i] = known[i] & j.all[i]
	}
	j.milli(rates[:len(j.prog.Days)], set, out)
}

func (j *Judge) milli(r []int64, known []uint64, out *Result) {
	out.ready(j)
	switch {
	case j.simple && subset(j.all, known) && inRange(r):
		out.fill()
		out.Verdict, _ = j.plan.judge(r, out.Values[:len(out.Values)+1])
	case knownInRange(r, known):
		j.partial(known, out, reading{r: r})
	default:
		j.exactly(ratesOf(r, known), known, out)
	}
}

// knownInRange is inRange for the known rates alone.
func knownInRange(r []int64, known []uint64) bool {
	for d := range r {
		if has(known, d) && !inRange(r[d:d+1]) {
			return false
		}
	}
	return true
}

// ratesOf makes exact rates of whole thousandths.
func ratesOf(r []int64, known []uint64) []Rate {
	rates := make([]Rate, len(r))
	for d := range r {
		if has(known, d) {
			rates[d] = RateOf(r[d])
		}
	}
	return rates
}

// inRange tells whether all rates lie in [-2^rateBits, 2^rateBits).
func inRange(r []int64) bool {
	var far uint64
	for _, x := range r {
		far |= uint64(x + 1<<rateBits) // 0 to 2^(rateBits+1) if x is in range
	}
	return far>>(rateBits+1) == 0
}

// reading is one movement's rates as whole numbers: thousandths, or fixed-point thousandths with
// the exact rates behind them.
type reading struct {
	r     []int64
	rates []Rate // nil: r is exact, in thousandths
	kept  *source
}

// partial judges criterion by criterion: days missing, or rates in fixed point.
func (j *Judge) partial(known []uint64, out *Result, m reading) {
	for i := range j.crits {
		c, v := &j.crits[i], &out.Values[i]
		*v = Value{Exact: Exact{den: 1000 * c.q}}
		switch {
		case subset(c.need, known):
			v.Known = true
			j.decide(i, out.Values, &m)
		case c.limited:
			v.Unreachable = j.unreachable(i, known, &m)
		default:
			v.Outcome = Unlimited
		}
	}
	out.wide = m.kept != nil
	out.Verdict = j.verdict(out.Values)
}

// verdict is what the outcomes say together.
func (j *Judge) verdict(values []Value) Verdict {
	open := false
	for i := range values {
		switch values[i].Outcome {
		case Outside:
			return Fail
		case Undecided:
			open = true
		}
	}
	switch {
	case !j.limited:
		return None
	case open:
		return Open
	}
	return Pass
}

// exactly judges by big numbers alone: rates beyond every reading's range.
func (j *Judge) exactly(rates []Rate, known []uint64, out *Result) {
	for i := range j.crits {
		c, v := &j.crits[i], &out.Values[i]
		*v = Value{}
		switch {
		case subset(c.need, known):
			v.Known, v.Exact = true, j.valueOf(int32(i), exactRates(rates))
			v.Outcome = j.contained(i, v.Exact)
		case c.limited:
			v.Unreachable = !j.reachable(i, slices.Clone(known), situation{rates: slices.Clone(rates)})
		default:
			v.Outcome = Unlimited
		}
	}
	out.wide = true
	out.Verdict = j.verdict(out.Values)
}

// exactRates reads rates as big numbers of thousandths.
func exactRates(rates []Rate) func(d int32) *big.Rat {
	return func(d int32) *big.Rat { return big.NewRat(rates[d].num, rates[d].den) }
}

// decide fills in a criterion whose days are all there.
func (j *Judge) decide(i int, values []Value, m *reading) {
	c, v := &j.crits[i], &values[i]
	if c.shape.composite() {
		v.Exact = j.composed(c, values, m)
		v.Outcome = j.contained(i, v.Exact)
		return
	}
	n := c.eval(m.r)
	if m.rates == nil {
		v.num = n
		v.Outcome = c.outcome(n, 0, c.whole)
		return
	}
	if m.kept == nil { // one copy of the rates for all criteria of the movement
		m.kept = &source{judge: j, rates: append([]Rate(nil), m.rates...)}
	}
	v.Exact = j.enclose(i, n, m.kept)
	if v.Outcome = c.outcome(n, c.lip, c.fixed); v.Outcome == Undecided {
		v.Outcome = c.exactOutcome(c.exactN(exactRates(slices.Clone(m.rates))))
	}
}

// composed is a composite criterion from the rates, or from the values before it.
func (j *Judge) composed(c *criterion, values []Value, m *reading) Exact {
	if c.shape == mixed {
		return c.add(func(at int32) Exact { return values[at].Exact })
	}
	if m.rates == nil {
		return c.rootOf(new(big.Rat).SetInt64(c.wholeSquares(m.r)))
	}
	return c.rootOf(c.exactSquares(exactRates(slices.Clone(m.rates))))
}

// contained compares an exact value with the limits.
func (j *Judge) contained(i int, e Exact) Outcome {
	l := j.Limit(i)
	switch {
	case !l.Any():
		return Unlimited
	case l.Contains(e):
		return Inside
	}
	return Outside
}

// enclose is criterion i as an enclosure around its fixed-point N.
func (j *Judge) enclose(i int, n int64, kept *source) Exact {
	c := &j.crits[i]
	den, ok := mul64(1000*c.q, 1<<j.fixedBits)
	if !ok || c.lip > 1<<28 {
		return FromRat(c.exact(kept.rates))
	}
	return Exact{num: n - c.lip, den: den, slack: int32(2 * c.lip), at: int32(i), src: kept}
}

// outcome compares N, known to within ±err, with the limits; Undecided if that is not enough.
func (c *criterion) outcome(n, err int64, b bounds) Outcome {
	switch {
	case !c.limited:
		return Unlimited
	case n+err < b.loUp || n-err > b.hi:
		return Outside
	case n-err >= b.loUp && n+err <= b.hi:
		return Inside
	}
	return Undecided
}

// Rates judges exact rates, rates[d-1] for day d; a shorter slice leaves the rest not read. It
// decides by fixed-point enclosures and, only where they leave a comparison open, by big rational
// numbers; no float is involved.
func (j *Judge) Rates(rates []Rate, out *Result) {
	out.ready(j)
	var buf [64]int64
	var setBuf [1]uint64
	r, known := buf[:], setBuf[:]
	if len(j.all) > 1 {
		r, known = make([]int64, len(j.prog.Days)), make([]uint64, len(j.all))
	}
	r = r[:len(j.prog.Days)]
	rates = rates[:min(len(rates), len(r))]
	if j.whole(rates, r, known) {
		j.milli(r, known, out)
		return
	}
	if !j.fix(rates, r, known) {
		j.exactly(rates, known, out)
		return
	}
	j.partial(known, out, reading{r: r, rates: rates})
}

// whole copies rates that are all whole thousandths within range and tells whether they are.
func (j *Judge) whole(rates []Rate, r []int64, known []uint64) bool {
	for d, x := range rates {
		if x.den == 0 {
			continue
		}
		if x.den != 1 || abs64(x.num)>>rateBits != 0 {
			return false
		}
		r[d] = x.num
		known[d/64] |= 1 << (d % 64)
	}
	return true
}

// fix copies rates cut to fixed point, each off by less than one unit; false if one is beyond its
// range.
func (j *Judge) fix(rates []Rate, r []int64, known []uint64) bool {
	ok := j.fixedBits > 0
	for d, x := range rates {
		if x.den == 0 {
			continue
		}
		known[d/64] |= 1 << (d % 64)
		hi, lo := bits.Mul64(abs64(x.num), 1<<j.fixedBits)
		if hi >= uint64(x.den) {
			ok = false
			continue
		}
		q, _ := bits.Div64(hi, lo, uint64(x.den))
		if q>>(rateBits+j.fixedBits) != 0 {
			ok = false
			continue
		}
		if r[d] = int64(q); x.num < 0 {
			r[d] = -r[d]
		}
	}
	return ok
}
