package lot

import (
	"cmp"
	"maps"
	"math"
	"slices"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/stat/distuv"
)

// Observation is one number with the level it is charged to, such as a holder, a chamber, a station or
// a reader, and with what it may fairly be compared within: the same round, calibre and depositor.
type Observation struct {
	Value float64
	Level string
	Block Block
}

// Block is what numbers must share to be compared.
type Block struct {
	Round              int
	Calibre, Depositor string
}

// Comparison tells levels apart within blocks.
type Comparison struct {
	// Sets are the levels that can be told apart, each set by itself: two levels are in one set if a
	// chain of blocks in which levels meet leads from one to the other. A set of one level is not
	// separable from anything: say so, and give no effect.
	Sets [][]Level
	F, P float64 // of all differences within sets; P is 1 if there are none
	// FreeLevels and Free are the degrees of freedom of F.
	FreeLevels, Free int
	Residual         float64 // standard deviation within level and block
}

// Separable tells whether any two levels can be told apart.
func (c *Comparison) Separable() bool {
	return slices.ContainsFunc(c.Sets, func(s []Level) bool { return len(s) > 1 })
}

// Level is what one level adds to the mean of its set, in the unit of the values.
type Level struct {
	Name      string
	N         int
	Effect, U float64 // with its standard uncertainty; both 0 in a set of one
}

// Compare estimates what levels add, each block having a mean of its own: least squares of value =
// block + level, weighted so that the effects of a set add up to 0 over its observations. A level that
// shares no block with another (one reader a day, one chamber a temperature, one holder a depositor)
// cannot be told from its block by any arithmetic, and stands in a set of its own. Observations must be
// independent: one a movement and block. ok is false where nothing is separable or no degree of
// freedom is left; Sets is filled in all the same. Effects of persons are not for this function: see
// the round's own clock in trial/entry. Source: analysis of a connected incomplete block design, common
// practice, from memory.
func Compare(list []Observation) (c Comparison, ok bool) {
	d := newDesign(list)
	var gained, free float64
	sigma := 0.0
	sets := d.connected()
	solved := make([]*solution, len(sets))
	for i, set := range sets {
		if len(set) > 1 {
			solved[i] = d.solve(set)
			gained += solved[i].gained
			c.FreeLevels += len(set) - 1
		}
	}
	c.Free = len(list) - len(d.blocks) - c.FreeLevels
	rest := math.Max(0, d.squares-gained)
	if c.Free > 0 {
		free = float64(c.Free)
		sigma = math.Sqrt(rest / free)
	}
	for i, set := range sets {
		c.Sets = append(c.Sets, d.levels(set, solved[i], sigma))
	}
	c.Residual, c.P = sigma, 1
	if c.FreeLevels == 0 || c.Free <= 0 || sigma == 0 {
		return c, false
	}
	c.F = gained / float64(c.FreeLevels) / (rest / free)
	c.P = distuv.F{D1: float64(c.FreeLevels), D2: free}.Survival(c.F)
	return c, true
}

// design counts who met whom.
type design struct {
	names   []string // of levels, sorted
	blocks  []map[int]int
	n       []int
	offsets []float64 // by level: sum of values about their block's mean
	squares float64   // of values about their block's mean
}

func newDesign(list []Observation) *design {
	d := &design{}
	values := map[Block][]Observation{}
	for _, o := range list {
		values[o.Block] = append(values[o.Block], o)
		if i, have := slices.BinarySearch(d.names, o.Level); !have {
			d.names = slices.Insert(d.names, i, o.Level)
		}
	}
	d.n = make([]int, len(d.names))
	offsets := make([]sum, len(d.names))
	var squares sum
	for _, b := range slices.SortedFunc(maps.Keys(values), Block.compare) {
		d.block(values[b], offsets, &squares)
	}
	for i := range offsets {
		d.offsets = append(d.offsets, offsets[i].value())
	}
	d.squares = squares.value()
	return d
}

func (d *design) block(list []Observation, offsets []sum, squares *sum) {
	x := make([]float64, len(list))
	for i, o := range list {
		x[i] = o.Value
	}
	mean, counts := meanOf(x), map[int]int{}
	for _, o := range list {
		i, _ := slices.BinarySearch(d.names, o.Level)
		off := mean.less(o.Value)
		offsets[i].add(off)
		squares.addProduct(off, off)
		counts[i]++
		d.n[i]++
	}
	d.blocks = append(d.blocks, counts)
}

// compare orders blocks, so that sums are made in one order.
func (b Block) compare(o Block) int {
	return cmp.Or(cmp.Compare(b.Round, o.Round), cmp.Compare(b.Calibre, o.Calibre), cmp.Compare(b.Depositor, o.Depositor))
}

// connected groups levels that meet in blocks, directly or through others.
func (d *design) connected() (sets [][]int) {
	set := make([]int, len(d.names))
	for i := range set {
		set[i] = i
	}
	for _, b := range d.blocks {
		members := slices.Collect(maps.Keys(b))
		first := set[slices.Min(members)]
		for _, m := range members {
			old := set[m]
			for i := range set {
				if set[i] == old {
					set[i] = first
				}
			}
		}
	}
	at := map[int]int{}
	for i, s := range set {
		k, have := at[s]
		if !have {
			k = len(sets)
			at[s], sets = k, append(sets, nil)
		}
		sets[k] = append(sets[k], i)
	}
	return sets
}

// solution is the effects of one set, their covariance over the residual variance, and the squares they
// explain.
type solution struct {
	effects mat.VecDense
	cov     mat.Dense
	gained  float64
}

// solve solves the normal equations with the blocks taken out, A e = r: A = diag(n) - Σ n_b n_bᵀ/n_b,
// singular along equal effects, which n nᵀ/N added makes weighted effects of 0.
func (d *design) solve(set []int) *solution {
	k := len(set)
	a, right := mat.NewDense(k, k, nil), mat.NewVecDense(k, nil)
	total := 0.0
	for _, level := range set {
		total += float64(d.n[level])
	}
	for i, p := range set {
		right.SetVec(i, d.offsets[p])
		for j, q := range set {
			v := float64(d.n[p]) * float64(d.n[q]) / total
			if i == j {
				v += float64(d.n[p])
			}
			for _, b := range d.blocks {
				if b[p] > 0 && b[q] > 0 {
					v -= float64(b[p]) * float64(b[q]) / float64(size(b))
				}
			}
			a.Set(i, j, v)
		}
	}
	s := &solution{}
	if err := s.cov.Inverse(a); err != nil { // positive definite by construction
		panic(err)
	}
	s.effects.MulVec(&s.cov, right)
	s.gained = mat.Dot(&s.effects, right)
	s.cov.Apply(func(_, _ int, v float64) float64 { return v - 1/total }, &s.cov)
	return s
}

// size is the number of observations of a block.
func size(b map[int]int) (n int) {
	for _, c := range b {
		n += c
	}
	return n
}

func (d *design) levels(set []int, s *solution, sigma float64) []Level {
	out := make([]Level, len(set))
	for i, level := range set {
		out[i] = Level{Name: d.names[level], N: d.n[level]}
		if s != nil {
			out[i].Effect, out[i].U = s.effects.AtVec(i), sigma*math.Sqrt(math.Max(0, s.cov.At(i, i)))
		}
	}
	return out
}
