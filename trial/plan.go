package trial

import "slices"

// The path of large batches: all days read, in whole thousandths. Criteria over the same days or
// pairs share their work, and nothing in it branches on a reading.

// plan is the judge's criteria sorted for that path.
type plan struct {
	runs   []pass // over consecutive days: first, past
	passes []pass // over any days or pairs
	lines  []line
	gates  []gate
	done   [2]Verdict // when nothing, when something is outside
}

// pass computes sum, spread and variations once for all criteria that need them.
type pass struct {
	first, past                 int32 // consecutive days, and pairs (first, first+1), (first+2, first+3), ... among them
	n                           int64
	days                        []int32
	pairs                       [][2]int32
	sum, deviation, total, peak int32 // the criterion each goes to
}

// line is one weighted sum. Short ones are the rule and are taken without a loop.
type line struct {
	at    int32
	short [4]term
	long  []term // beyond the first four
}

type term struct {
	weight int64
	day    int32
}

// gate holds the whole-number limits of one criterion.
type gate struct {
	lo, hi int64
	base   Outcome // Inside, or Unlimited where the limits cannot be passed
}

// newPlan sorts criteria whose limits are set.
func newPlan(crits []criterion, limited bool) plan {
	p := plan{done: [2]Verdict{Pass, Fail}, gates: make([]gate, 0, len(crits))}
	if !limited {
		p.done = [2]Verdict{None, None}
	}
	for i := range crits {
		c := &crits[i]
		p.add(c, int32(i))
		g := gate{lo: c.whole.loUp, hi: c.whole.hi, base: Inside}
		if !c.limited {
			g.base = Unlimited
		}
		p.gates = append(p.gates, g)
	}
	return p
}

func (p *plan) add(c *criterion, at int32) {
	if c.shape == linear && !plainSum(c.weights) {
		l := line{at: at}
		for k, d := range c.days {
			if t := (term{c.weights[k], d}); k < len(l.short) {
				l.short[k] = t
			} else {
				l.long = append(l.long, t)
			}
		}
		p.lines = append(p.lines, l)
		return
	}
	slot := func(s *pass) *int32 {
		return map[shape]*int32{linear: &s.sum, deviation: &s.deviation, total: &s.total, greatest: &s.peak}[c.shape]
	}
	*slot(p.passFor(c, slot)) = at
}

// passFor finds a pass over the days or pairs of a criterion that has its slot free, or makes one.
func (p *plan) passFor(c *criterion, slot func(*pass) *int32) *pass {
	nowhere := int32(cap(p.gates))
	fresh := pass{n: int64(len(c.days)), sum: nowhere, deviation: nowhere, total: nowhere, peak: nowhere}
	first, past, ok := run(c.days)
	if c.pairs != nil {
		ok = ok && inOrder(c.pairs)
	} else {
		ok = ok && len(c.days)%2 == 0
	}
	list := &p.passes
	if ok {
		list, fresh.first, fresh.past = &p.runs, first, past
	} else {
		fresh.days, fresh.pairs = c.days, c.pairs
	}
	for i := range *list {
		s := &(*list)[i]
		if s.first == fresh.first && s.past == fresh.past && slices.Equal(s.days, fresh.days) &&
			slices.Equal(s.pairs, fresh.pairs) && *slot(s) == nowhere {
			return s
		}
	}
	*list = append(*list, fresh)
	return &(*list)[len(*list)-1]
}

func plainSum(weights []int64) bool {
	return !slices.ContainsFunc(weights, func(w int64) bool { return w != 1 })
}

// run gives days as a half-open run, if they are one.
func run(days []int32) (first, past int32, ok bool) {
	for i, d := range days {
		if d != days[0]+int32(i) {
			return 0, 0, false
		}
	}
	return days[0], days[0] + int32(len(days)), true
}

// inOrder tells pairs that follow each other without a gap.
func inOrder(pairs [][2]int32) bool {
	for i, p := range pairs {
		if p[0] != pairs[0][0]+2*int32(i) || p[1] != p[0]+1 {
			return false
		}
	}
	return true
}

// judge fills in a result whose values are all known. values has one more at its end, nobody's:
// what no criterion asks for goes there. ok is false if a rate that enters a criterion lies beyond
// rateBits; then nothing here is to be trusted. The parts are functions of their own so that each
// keeps its few numbers in registers: in one body they spill, and it is slower by a half.
func (p *plan) judge(r []int64, values []Value) (v Verdict, ok bool) {
	var far uint64
	for i := range p.runs {
		s := &p.runs[i]
		sum, least, most, total, peak := sweep(r[s.first:s.past])
		far |= beyond(least, most)
		s.put(values, sum, least, most, total, peak)
	}
	for i := range p.passes {
		far |= p.passes[i].any(r, values)
	}
	far |= weigh(p.lines, r, values)
	return p.done[p.gate(values)], far>>(rateBits+1) == 0
}

// sweep passes once over consecutive days, two at a time: the greater of a pair less the smaller
// is its variation.
//
//go:noinline
func sweep(days []int64) (sum, least, most, total, peak int64) {
	least, most = days[0], days[0]
	for i := 0; i < len(days)-1; i += 2 {
		a, b := days[i], days[i+1]
		lo, hi := min(a, b), max(a, b)
		sum += a + b
		total += hi - lo
		peak = max(peak, hi-lo)
		least, most = min(least, lo), max(most, hi)
	}
	return sum, least, most, total, peak
}

// beyond has bits above rateBits set if an extreme is out of range.
func beyond(least, most int64) uint64 {
	const reach = 1 << rateBits
	return uint64(least+reach) | uint64(reach-1-most)
}

// weigh computes the weighted sums.
//
//go:noinline
func weigh(lines []line, r []int64, values []Value) (far uint64) {
	const reach = 1 << rateBits
	for i := range lines {
		l := &lines[i]
		a, b := r[l.short[0].day], r[l.short[1].day]
		n := l.short[0].weight*a + l.short[1].weight*b
		far |= uint64(a+reach) | uint64(b+reach)
		a, b = r[l.short[2].day], r[l.short[3].day]
		n += l.short[2].weight*a + l.short[3].weight*b
		far |= uint64(a+reach) | uint64(b+reach)
		for _, t := range l.long {
			n += t.weight * r[t.day]
			far |= uint64(r[t.day] + reach)
		}
		values[l.at].num = n
	}
	return far
}

// gate compares every numerator with its limits; 1 if any is outside.
//
//go:noinline
func (p *plan) gate(values []Value) (bad uint64) {
	values = values[:len(p.gates)]
	for i := range p.gates {
		v, g := &values[i], &p.gates[i]
		outside := uint64((v.num-g.lo)|(g.hi-v.num)) >> 63 // the sign of either difference
		v.Outcome = g.base + Outcome(outside)
		bad |= outside
	}
	return bad & 1
}

// any passes over days or pairs as they are listed, and gives what is beyond range in far.
func (s *pass) any(r []int64, values []Value) (far uint64) {
	var total, peak int64
	for _, p := range s.pairs {
		d := magnitude(r[p[1]] - r[p[0]])
		total += d
		peak = max(peak, d)
	}
	sum, least, most := spread(r, s.days)
	s.put(values, sum, least, most, total, peak)
	return beyond(least, most)
}

func (s *pass) put(values []Value, sum, least, most, total, peak int64) {
	values[s.sum].num = sum
	values[s.deviation].num = max(s.n*most-sum, sum-s.n*least)
	values[s.total].num = total
	values[s.peak].num = peak
}
