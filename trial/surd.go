package trial

import (
	"math/big"
	"slices"
)

// surd is a number of the form Σ coefficient · √(product of some radicands): what standard
// deviations, sums of them and their margins are. coefs[set] belongs to the radicands whose bits
// are in set; coefs[0] is the rational part. It is immutable.
type surd struct {
	radicands []*big.Rat // above zero
	coefs     []*big.Rat // two to the power of the number of radicands
}

const (
	// cutPlaces is the number of decimals at which an irrational number is cut where only a rational
	// one can be given.
	cutPlaces = 30
	// mostRadicands bounds the exact form, which doubles with each: a programme's sums rest on six
	// (mostRoots), and their differences on twelve at most. Beyond, numbers are cut.
	mostRadicands = 12
)

// Root is the square root of r, exactly. It panics below zero: a caller's bug.
func Root(r *big.Rat) Exact {
	if r.Sign() < 0 {
		panic("trial: root of a negative number")
	}
	num, den := new(big.Int).Sqrt(r.Num()), new(big.Int).Sqrt(r.Denom())
	if square := new(big.Rat).SetFrac(new(big.Int).Mul(num, num), new(big.Int).Mul(den, den)); square.Cmp(r) == 0 {
		return FromRat(new(big.Rat).SetFrac(num, den))
	}
	s := &surd{[]*big.Rat{new(big.Rat).Set(r)}, []*big.Rat{new(big.Rat), big.NewRat(1, 1)}}
	return s.exact()
}

// pure tells a single root, and gives its radicand.
func (s *surd) pure() (radicand *big.Rat, ok bool) {
	if len(s.radicands) != 1 || s.coefs[0].Sign() != 0 || !s.coefs[1].IsInt() || s.coefs[1].Num().Cmp(big.NewInt(1)) != 0 {
		return nil, false
	}
	return s.radicands[0], true
}

// compareSurds compares; two single roots, as batches are sorted by them, and a root with a limit,
// by their squares.
func compareSurds(s, t *surd) int {
	a, okA := s.pure()
	b, okB := t.pure()
	switch {
	case okA && okB:
		return a.Cmp(b)
	case okA && len(t.radicands) == 0 && t.coefs[0].Sign() >= 0:
		return a.Cmp(new(big.Rat).Mul(t.coefs[0], t.coefs[0]))
	}
	d := s.plus(t, -1)
	return signOf(d.radicands, d.coefs)
}

// exact wraps the number; a rational one loses its form as a surd.
func (s *surd) exact() Exact {
	if !slices.ContainsFunc(s.coefs[1:], func(c *big.Rat) bool { return c.Sign() != 0 }) {
		return FromRat(s.coefs[0])
	}
	return Exact{den: 1, src: &source{surd: s}}
}

// surdOf is any number as a surd.
func surdOf(e Exact) *surd {
	if e.src != nil && e.src.surd != nil {
		return e.src.surd
	}
	return &surd{coefs: []*big.Rat{e.Rat()}}
}

// irrational tells a number that is kept as a surd.
func (e Exact) irrational() bool { return e.src != nil && e.src.surd != nil }

// over writes the number with other radicands, its own among them.
func (s *surd) over(radicands []*big.Rat) []*big.Rat {
	out := make([]*big.Rat, 1<<len(radicands))
	for set := range out {
		out[set] = new(big.Rat)
	}
	for set, c := range s.coefs {
		at := 0
		for k, r := range s.radicands {
			if set>>k&1 == 1 {
				at |= 1 << slices.IndexFunc(radicands, func(x *big.Rat) bool { return x.Cmp(r) == 0 })
			}
		}
		out[at] = c
	}
	return out
}

// common gives both numbers over all radicands of either.
func common(s, t *surd) (radicands, a, b []*big.Rat) {
	radicands = slices.Clone(s.radicands)
	for _, r := range t.radicands {
		if !slices.ContainsFunc(radicands, func(x *big.Rat) bool { return x.Cmp(r) == 0 }) {
			radicands = append(radicands, r)
		}
	}
	if len(radicands) > mostRadicands {
		return nil, []*big.Rat{s.cut()}, []*big.Rat{t.cut()}
	}
	return radicands, s.over(radicands), t.over(radicands)
}

// plus is s + sign · t.
func (s *surd) plus(t *surd, sign int64) *surd {
	radicands, a, b := common(s, t)
	sum := make([]*big.Rat, len(a))
	for set := range a {
		sum[set] = new(big.Rat).Mul(b[set], big.NewRat(sign, 1))
		sum[set].Add(sum[set], a[set])
	}
	return &surd{radicands, sum}
}

// times is s · t.
func (s *surd) times(t *surd) *surd {
	radicands, a, b := common(s, t)
	return &surd{radicands, product(radicands, a, b)}
}

// product multiplies coefficients over the same radicands.
func product(radicands, a, b []*big.Rat) []*big.Rat {
	out := make([]*big.Rat, len(a))
	for set := range out {
		out[set] = new(big.Rat)
	}
	for i, x := range a {
		for k, y := range b {
			if x.Sign() == 0 || y.Sign() == 0 {
				continue
			}
			p := new(big.Rat).Mul(x, y)
			out[i^k].Add(out[i^k], p.Mul(p, inside(radicands, i&k)))
		}
	}
	return out
}

// inside is the product of the radicands of a set.
func inside(radicands []*big.Rat, set int) *big.Rat {
	p := big.NewRat(1, 1)
	for k, r := range radicands {
		if set>>k&1 == 1 {
			p.Mul(p, r)
		}
	}
	return p
}

// signOf is the sign of Σ coefs · roots, exactly: of u + v·√q the sign of u and v if they agree,
// else u's sign times that of u² - v²·q, which has a radicand less.
func signOf(radicands, coefs []*big.Rat) int {
	if len(radicands) == 0 {
		return coefs[0].Sign()
	}
	last := len(radicands) - 1
	rest, q := radicands[:last], radicands[last]
	u, v := coefs[:len(coefs)/2], coefs[len(coefs)/2:]
	su, sv := signOf(rest, u), signOf(rest, v)
	switch {
	case sv == 0 || su == sv:
		return su
	case su == 0:
		return sv
	}
	diff, vv := product(rest, u, u), product(rest, v, v)
	for set := range diff {
		diff[set].Sub(diff[set], vv[set].Mul(vv[set], q))
	}
	return su * signOf(rest, diff)
}

// floor is the greatest whole number not above s · 10^places.
func (s *surd) floor(places int) *big.Int {
	scale := new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(places)), nil)
	n := s.near(scale)
	n.Rsh(n, fine)
	for s.above(n, scale) < 0 {
		n.Sub(n, big.NewInt(1))
	}
	one := big.NewInt(1)
	for next := new(big.Int).Add(n, one); s.above(next, scale) >= 0; next = new(big.Int).Add(n, one) {
		n = next
	}
	return n
}

// fine is how many bits near looks beyond the unit.
const fine = 64

// near is s · scale · 2^fine, off by less than one and the sum of all coefficients' magnitudes.
func (s *surd) near(scale *big.Int) *big.Int {
	shift := fine + uint(scale.BitLen())
	sum := new(big.Rat)
	for set, c := range s.coefs {
		if c.Sign() == 0 {
			continue
		}
		r := inside(s.radicands, set)
		whole := new(big.Int).Lsh(r.Num(), 2*shift)
		root := new(big.Rat).SetInt(whole.Quo(whole, r.Denom()).Sqrt(whole))
		sum.Add(sum, root.Mul(root, c))
	}
	n := new(big.Int).Mul(sum.Num(), scale)
	n.Quo(n, sum.Denom())
	return n.Rsh(n, uint(scale.BitLen()))
}

// tame tells coefficients whose magnitudes sum up to less than 2^31.
func (s *surd) tame() bool {
	sum := new(big.Rat)
	for _, c := range s.coefs {
		sum.Add(sum, new(big.Rat).Abs(c))
	}
	return sum.Cmp(big.NewRat(1<<31, 1)) < 0
}

// above is the sign of s - n/scale.
func (s *surd) above(n, scale *big.Int) int {
	t := s.plus(&surd{coefs: []*big.Rat{new(big.Rat).SetFrac(n, scale)}}, -1)
	return signOf(t.radicands, t.coefs)
}

// rounded is s · 10^places rounded half to even. Where the number is not within 2^-32 of the middle
// between two whole ones, knowing it nearly is enough.
func (s *surd) rounded(places int) *big.Int {
	scale := new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(places)), nil)
	if s.tame() {
		n := s.near(scale)
		n.Add(n, new(big.Int).Lsh(big.NewInt(1), fine-1))
		rest := new(big.Int).And(n, new(big.Int).SetUint64(1<<fine-1)).Uint64()
		if rest > 1<<32 && rest < 1<<fine-1<<32 {
			return n.Rsh(n, fine)
		}
	}
	n := s.floor(places)
	twice := new(big.Int).Lsh(n, 1)
	c := s.above(twice.Add(twice, big.NewInt(1)), scale.Lsh(scale, 1))
	if c > 0 || c == 0 && n.Bit(0) == 1 {
		n.Add(n, big.NewInt(1))
	}
	return n
}

// cut is the number cut to cutPlaces decimals, towards minus infinity.
func (s *surd) cut() *big.Rat {
	scale := new(big.Int).Exp(big.NewInt(10), big.NewInt(cutPlaces), nil)
	return new(big.Rat).SetFrac(s.floor(cutPlaces), scale)
}

// bounds are rational numbers not above and not below e, equal to it unless it is irrational.
func (e Exact) bounds() (under, over *big.Rat) {
	under, over = e.Rat(), e.Rat()
	if e.irrational() {
		step := new(big.Int).Exp(big.NewInt(10), big.NewInt(cutPlaces), nil)
		over.Add(over, new(big.Rat).SetFrac(big.NewInt(1), step))
	}
	return under, over
}
