package trial

import (
	"math/big"
	"math/rand/v2"
	"testing"
)

// The two solvers share the rows but not the arithmetic: whole cells with movements carried as
// atoms, warm from other movements, against big rational numbers from scratch.
func TestDictionaryAgreesWithTableau(t *testing.T) {
	t.Parallel()
	j, err := NewJudge(ISO3159(), "1")
	if err != nil {
		t.Fatal(err)
	}
	rng := rand.New(rand.NewPCG(3159, 9))
	open, cannot := 0, 0
	for open < 400 {
		rates := make([]Rate, 15)
		base := rng.Int64N(24_000) - 10_000
		known := uint64(1)<<rng.IntN(15) - 1
		if rng.IntN(4) == 0 {
			known = rng.Uint64()
		}
		for d := range rates {
			if known>>d&1 == 1 {
				rates[d] = RateBetween(0, State(base+rng.Int64N(6000)), 86_400+rng.Int64N(3))
			}
		}
		p := j.prospect()
		if !p.load(rates) {
			j.solvers.Put(p)
			continue
		}
		open++
		yes, d := p.solve()
		if d == nil {
			t.Fatal("the built-in programme outgrew the dictionary")
		}
		if slow := newTableau(j, d.sys, &p.sit).feasible(); slow != yes {
			t.Fatalf("%v: dictionary %v, tableau %v", rates, yes, slow)
		}
		if !yes {
			cannot++
		}
		for v, day := range d.sys.days {
			if day < 0 || !yes {
				continue
			}
			for _, sign := range []int64{-1, 1} {
				fast, bounded, ok := d.extreme(int32(v), sign, &p.point)
				slow := newTableau(j, d.sys, &p.sit).extreme(int32(v), int(sign))
				if !ok || bounded != (slow != nil) || bounded && fast.Cmp(slow) != 0 {
					t.Fatalf("%v day %d: %v %v, tableau %v", rates, day+1, fast, bounded, slow)
				}
			}
			break
		}
		j.solvers.Put(p)
	}
	if cannot < 20 {
		t.Errorf("only %d of %d cannot pass", cannot, open)
	}
}

func TestSumsOf128Bits(t *testing.T) {
	t.Parallel()
	rng := rand.New(rand.NewPCG(3159, 10))
	for range 20_000 {
		hi, lo, want := int64(0), uint64(0), new(big.Int)
		for range 1 + rng.IntN(5) {
			a := (rng.Int64() - rng.Int64()) >> (20 + rng.IntN(40))
			b := (rng.Int64() - rng.Int64()) >> (1 + rng.IntN(60))
			hi, lo = addProduct(hi, lo, a, b)
			want.Add(want, new(big.Int).Mul(big.NewInt(a), big.NewInt(b)))
		}
		if s := signBeyond(hi, lo, 0); s != want.Sign() {
			t.Fatalf("sign %d of %s", s, want)
		}
		off := rng.Uint64() >> rng.IntN(64)
		expect := want.Sign()
		if new(big.Int).Abs(want).Cmp(new(big.Int).SetUint64(off)) <= 0 {
			expect = 0
		}
		if s := signBeyond(hi, lo, off); s != expect {
			t.Fatalf("sign %d of %s beyond %d", s, want, off)
		}
	}
}
