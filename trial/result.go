package trial

// Outcome is what one criterion says.
type Outcome uint8

// Undecided: some of its days are not read. Inside and Outside: against the limits of the
// category. Unlimited: the category sets no limits, so it never decides.
const (
	Undecided Outcome = iota
	Inside
	Outside
	Unlimited
)

// String is the outcome's code.
func (o Outcome) String() string {
	return [...]string{"undecided", "inside", "outside", "unlimited"}[o&3]
}

// Verdict is what all criteria together say.
type Verdict uint8

// Open: nothing outside, not all decided. Pass: all limited criteria decided and inside. Fail: at
// least one decided outside. None: the category has no limits at all.
const (
	Open Verdict = iota
	Pass
	Fail
	None
)

// String is the verdict's code as judge prints it: open, pass, fail or "-".
func (v Verdict) String() string { return [...]string{"open", "pass", "fail", "-"}[v&3] }

// Value is one criterion of one movement.
type Value struct {
	Exact               // the number, if Known
	Known       bool    // all its days are read
	Outcome     Outcome // against the limits of the judge's category
	Unreachable bool    // undecided, and no values of its blank days within ±60 s/d bring it inside
}

// Result is the judgement of one movement. Reuse one Result for many movements to avoid
// allocations; values copied out of it stay right.
type Result struct {
	Verdict Verdict
	Values  []Value // in the order of the programme's criteria
	judge   *Judge
	wide    bool // some value refers to kept readings
	full    bool // all values are whole-number ones, known, and only numerator and outcome change
}

// ready shapes the result for a judge. Denominators of whole-number values are set once here, so
// that the fast path writes numerators alone.
func (r *Result) ready(j *Judge) {
	r.full = false
	if r.judge == j && !r.wide && len(r.Values) == len(j.crits) {
		return
	}
	if cap(r.Values) <= len(j.crits) {
		r.Values = make([]Value, len(j.crits)+1) // one to spare for plan
	}
	r.Values = r.Values[:len(j.crits)]
	for i := range r.Values {
		r.Values[i] = Value{Exact: Exact{den: 1000 * j.crits[i].q}}
	}
	r.judge, r.wide = j, false
}

// fill marks all values known.
func (r *Result) fill() {
	for i := range r.Values {
		r.Values[i].Known, r.Values[i].Unreachable = true, false
	}
	r.full = true
}

// Failed lists the symbols decided outside, in the programme's order.
func (r *Result) Failed() []string {
	return r.symbols(func(v *Value) bool { return v.Outcome == Outside })
}

// Unreachable lists the undecided symbols that no values of their blank days within ±60 s/d can
// bring inside, each criterion by itself.
func (r *Result) Unreachable() []string {
	return r.symbols(func(v *Value) bool { return v.Unreachable })
}

func (r *Result) symbols(want func(*Value) bool) []string {
	var list []string
	for i := range r.Values {
		if want(&r.Values[i]) {
			list = append(list, r.judge.prog.Criteria[i].Symbol)
		}
	}
	return list
}

// Margin is the distance of criterion i to the nearer of its limits, positive inside, negative
// outside; ok is false if it is undecided or has no limits.
func (r *Result) Margin(i int) (margin Exact, ok bool) {
	v, l := r.Values[i], r.judge.Limit(i)
	if !v.Known || !l.Any() {
		return Exact{}, false
	}
	if l.HasMin {
		margin, ok = v.Sub(l.Min), true
	}
	if l.HasMax {
		if m := l.Max.Sub(v.Exact); !ok || m.Cmp(margin) < 0 {
			margin, ok = m, true
		}
	}
	return margin, ok
}

// NearestMargin is the least margin of all decided criteria, with its index; ok is false if there
// is none.
func (r *Result) NearestMargin() (i int, margin Exact, ok bool) {
	for k := range r.Values {
		if m, has := r.Margin(k); has && (!ok || m.Cmp(margin) < 0) {
			i, margin, ok = k, m, true
		}
	}
	return i, margin, ok
}
