package trial

import "errors"

// Prior is the history of a calibre under one programme, for forecasts and entry checks: counts,
// sums and sums of products of daily rates in thousandths of s/d, rounded half to even where the
// interval was not 24 h. Whole numbers throughout, so that priors can be added to and taken from in
// any order, merged, and rebuilt to the same last digit.
//
// Movements are kept apart by how many of their first days were read: whoever was taken out early
// because of what had been read so far then counts for the days it has (Normal says how), instead of
// being left out. Days after a gap are not used.
type Prior struct {
	Days int       // of the programme
	Runs []Moments // Runs[k-1]: movements whose days 1..k were read, and day k+1 was not
}

// Moments are the sums over the movements of one run. The zero value holds none.
type Moments struct {
	N     int64
	Sum   []int64 // by day
	Cross []int64 // of day i times day j, j <= i, at i(i-1)/2 + j - 1; days from 1
}

// Errors of a Prior. A rate beyond ±600 s/d is none of a movement that runs; sums beyond 63 bits
// would need some twenty million movements at that bound.
var (
	ErrPriorDays = errors.New("prior: another number of days")
	ErrPriorRate = errors.New("prior: rate beyond 600 s/d")
	ErrPriorFull = errors.New("prior: sums too large, or more taken out than is in")
)

// priorBeyond bounds a rate, thousandths of s/d either way.
const priorBeyond Milli = 600_000

// NewPrior makes an empty history for a programme of so many days.
func NewPrior(days int) *Prior { return &Prior{Days: days, Runs: make([]Moments, days)} }

// N counts the movements, however many of their days were read; one without day 1 counts nowhere.
func (p *Prior) N() (n int64) {
	for i := range p.Runs {
		n += p.Runs[i].N
	}
	return n
}

// Add counts a movement by its rates, day d at [d-1]. On an error nothing is changed.
func (p *Prior) Add(rates []Rate) error { return p.change(rates, 1) }

// Remove takes a movement out that was added with the same rates.
func (p *Prior) Remove(rates []Rate) error { return p.change(rates, -1) }

func (p *Prior) change(rates []Rate, sign int64) error {
	if len(rates) != p.Days {
		return ErrPriorDays
	}
	var x []int64
	for _, r := range rates {
		if !r.Known() {
			break
		}
		v := r.Milli()
		if v > priorBeyond || v < -priorBeyond {
			return ErrPriorRate
		}
		x = append(x, int64(v))
	}
	if len(x) == 0 {
		return nil
	}
	one := Moments{N: sign, Sum: make([]int64, len(x))}
	for i, a := range x {
		one.Sum[i] = sign * a
		for _, b := range x[:i+1] {
			one.Cross = append(one.Cross, sign*a*b)
		}
	}
	return p.Runs[len(x)-1].add(&one)
}

// Merge adds another history of the same programme. On an error nothing is changed.
func (p *Prior) Merge(q *Prior) error {
	if p.Days != q.Days {
		return ErrPriorDays
	}
	merged := make([]Moments, p.Days)
	for i := range merged {
		merged[i] = p.Runs[i].clone()
		if q.Runs[i].N == 0 {
			continue
		}
		if err := merged[i].add(&q.Runs[i]); err != nil {
			return err
		}
	}
	p.Runs = merged
	return nil
}

func (m *Moments) clone() Moments {
	return Moments{m.N, append([]int64(nil), m.Sum...), append([]int64(nil), m.Cross...)}
}

// add adds sums of the same days; the last movement taken out leaves the zero value.
func (m *Moments) add(o *Moments) error {
	next, ok := Moments{N: m.N + o.N, Sum: make([]int64, len(o.Sum)), Cross: make([]int64, len(o.Cross))}, true
	sums := func(to, a, b []int64) {
		for i, y := range b {
			x := int64(0)
			if len(a) > 0 {
				x = a[i]
			}
			to[i] = x + y
			ok = ok && (x^to[i])&(y^to[i]) >= 0 // else the sum has another sign than both: it ran over
		}
	}
	sums(next.Sum, m.Sum, o.Sum)
	sums(next.Cross, m.Cross, o.Cross)
	if !ok || next.N < 0 {
		return ErrPriorFull
	}
	if next.N == 0 {
		next = Moments{}
	}
	*m = next
	return nil
}
