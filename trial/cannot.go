package trial

import "math/big"

// CannotPass tells whether the movement is open and no real numbers for its blank days, free of
// each other, satisfy all limited criteria together; other than Value.Unreachable, which looks at
// each criterion by itself within ±60 s/d. Rates beyond the slice count as blank.
//
// True is always right. False is right as long as the open criteria ask for nothing but flat
// sides: linear formulas, upper limits of magnitudes, and weighted sums in which every magnitude
// pulls towards its limit. What else a programme may ask is left out of the joint question, so
// that the movement counts as able to pass: lower limits of magnitudes, sums in which a magnitude
// pulls the other way, and standard deviations but for their least value by themselves.
func (j *Judge) CannotPass(rates []Rate) bool {
	p := j.prospect()
	defer j.solvers.Put(p)
	return p.cannotPass(rates)
}

// Needed gives the closed interval in which the rate of a blank day (1..n) must lie for the
// movement still to be able to pass: with any rate inside it some filling of the other blank days
// passes, with any outside none does. ok is false if the day is read, if the movement is not open
// or cannot pass whatever comes, if the day is not bounded on both sides, or if an open criterion is
// of those CannotPass leaves out.
func (j *Judge) Needed(rates []Rate, day int) (lo, hi Exact, ok bool) {
	if day < 1 || day > len(j.prog.Days) {
		return Exact{}, Exact{}, false
	}
	p := j.prospect()
	defer j.solvers.Put(p)
	if !p.load(rates) {
		return Exact{}, Exact{}, false
	}
	least, most := p.interval(int32(day - 1))
	if least == nil || most == nil {
		return Exact{}, Exact{}, false
	}
	thousand := new(big.Rat).SetInt64(1000)
	return FromRat(least.Quo(least, thousand)), FromRat(most.Quo(most, thousand)), true
}

// prospect is the working memory of the solver, kept warm in the judge's pool: the dictionaries of
// the sets of blank days seen lately. What it holds changes how fast an answer comes, never the
// answer.
type prospect struct {
	judge  *Judge
	result Result
	r      []int64
	known  []uint64
	key    []byte
	sit    situation
	point  point
	warm   map[string]*dictionary
}

// mostWarm bounds the dictionaries a prospect keeps.
const mostWarm = 64

func (j *Judge) prospect() *prospect {
	if p, ok := j.solvers.Get().(*prospect); ok {
		return p
	}
	return &prospect{judge: j, r: make([]int64, len(j.prog.Days)), known: make([]uint64, len(j.all)),
		warm: map[string]*dictionary{}}
}

// load judges the movement and tells whether it is open.
func (p *prospect) load(rates []Rate) bool {
	j := p.judge
	clear(p.known)
	rates = rates[:min(len(rates), len(p.r))]
	j.Rates(rates, &p.result)
	if p.result.Verdict != Open {
		return false
	}
	p.sit = situation{known: p.known}
	if j.exactOnly {
		j.fix(rates, p.r, p.known) // for what is known alone
		p.sit.rates = rates
		return true
	}
	if j.whole(rates, p.r, p.known) {
		p.sit.r = p.r
		return true
	}
	clear(p.known)
	if p.sit.rates = rates; j.fix(rates, p.r, p.known) {
		p.sit.r, p.sit.fixedBits = p.r, j.fixedBits
	}
	return true
}

func (p *prospect) cannotPass(rates []Rate) bool {
	if !p.load(rates) {
		return false
	}
	yes, _ := p.solve()
	return !yes
}

// open lists the limited criteria still undecided.
func (p *prospect) open() []int {
	var list []int
	for i := range p.result.Values {
		if p.result.Values[i].Outcome == Undecided {
			list = append(list, i)
		}
	}
	return list
}

// solve answers feasibility for the loaded movement; d is the dictionary at a feasible point, nil
// if the slow solver had to answer.
func (p *prospect) solve() (yes bool, d *dictionary) {
	p.key = p.key[:0]
	for _, w := range p.known {
		for i := range 8 {
			p.key = append(p.key, byte(w>>(8*i)))
		}
	}
	d = p.warm[string(p.key)]
	if d == nil {
		if d = newDictionary(p.judge.rowsOf(p.open(), false, append([]uint64(nil), p.known...))); d != nil {
			if len(p.warm) >= mostWarm {
				clear(p.warm)
			}
			p.warm[string(p.key)] = d
		}
	}
	if d != nil {
		p.judge.point(d.sys, &p.sit, &p.point)
		if yes, ok := d.feasible(&p.point); ok {
			return yes, d
		}
		delete(p.warm, string(p.key))
	}
	s := p.judge.rowsOf(p.open(), false, p.known)
	return newTableau(p.judge, s, &p.sit).feasible(), nil
}

// interval is the range of a blank day in thousandths; nil where unbounded or impossible.
func (p *prospect) interval(day int32) (least, most *big.Rat) {
	yes, d := p.solve()
	if !yes || d != nil && d.sys.loose {
		return nil, nil
	}
	if d != nil {
		v, ok := d.sys.vars[day]
		if !ok {
			return nil, nil
		}
		lo, hasLo, ok1 := d.extreme(v, -1, &p.point)
		hi, hasHi, ok2 := lo, false, false
		if ok1 {
			hi, hasHi, ok2 = d.extreme(v, 1, &p.point)
		}
		if ok1 && ok2 {
			if !hasLo || !hasHi {
				return nil, nil
			}
			return lo, hi
		}
		delete(p.warm, string(p.key))
	}
	s := p.judge.rowsOf(p.open(), false, p.known)
	v, ok := s.vars[day]
	if !ok || s.loose {
		return nil, nil
	}
	return newTableau(p.judge, s, &p.sit).extreme(v, -1), newTableau(p.judge, s, &p.sit).extreme(v, 1)
}

// feasible tells whether real values of the blank days satisfy some criteria together, within
// ±60 s/d if boxed: the exact answer behind Value.Unreachable.
func (j *Judge) feasible(crits []int, box bool, known []uint64, sit situation) bool {
	if j.exactOnly && sit.rates == nil {
		sit = situation{rates: ratesOf(sit.r, known)}
	} else if j.exactOnly {
		sit.r = nil
	}
	sit.known, sit.box = known, box
	s := j.rowsOf(crits, box, known)
	var p point
	if d := newDictionary(s); d != nil {
		j.point(s, &sit, &p)
		if yes, ok := d.feasible(&p); ok {
			return yes
		}
	}
	return newTableau(j, s, &sit).feasible()
}
