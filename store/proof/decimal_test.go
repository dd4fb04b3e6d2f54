package proof

import (
	"fmt"
	"math/big"
	"testing"
)

func ratio(t testing.TB, s string) *big.Rat {
	t.Helper()
	v, ok := new(big.Rat).SetString(s)
	if !ok {
		t.Fatalf("%q is no number", s)
	}
	return v
}

// Column A of the table in the project's domain notes, section 6 (ISO 80000-1 Annex B rule A;
// the 12.x values follow the annex, from memory; the rest computed), and its traps.
func TestRounded(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		value    string
		decimals int
		want     Decimal
	}{
		{"12.223", 1, "12.2"}, {"12.251", 1, "12.3"}, {"12.275", 1, "12.3"}, {"12.25", 1, "12.2"}, {"12.35", 1, "12.4"},
		{"6.04", 1, "6.0"}, {"6.05", 1, "6.0"}, {"6.06", 1, "6.1"}, {"-4.05", 1, "-4.0"}, {"2.05", 1, "2.0"}, {"0.605", 2, "0.60"},
		{"-2.5", 0, "-2"}, {"2.675", 2, "2.68"}, {"1/15", 3, "0.067"}, {"-1/30", 3, "-0.033"}, {"-1/300", 2, "0.00"}, {"-0.04", 1, "0.0"},
		{"-0.06", 1, "-0.1"}, {"0", 0, "0"}, {"-7/1", 2, "-7.00"}, {"0.0005", 3, "0.000"}, {"-0.0015", 3, "-0.002"}, {"99.95", 1, "100.0"},
	} {
		if got := Rounded(ratio(t, c.value), c.decimals); got != c.want {
			t.Errorf("%s to %d: %s, want %s", c.value, c.decimals, got, c.want)
		}
	}
}

// Rounding against a definition that shares nothing with it: no multiple of the step is nearer,
// and of two equally near ones the even one is taken.
func TestRoundedIsNearest(t *testing.T) {
	t.Parallel()
	for num := int64(-700); num <= 700; num++ {
		for den := int64(1); den <= 24; den++ {
			v := big.NewRat(num, den)
			got := ratio(t, string(Rounded(v, 1)))
			units := new(big.Rat).Mul(got, big.NewRat(10, 1))
			off := new(big.Rat).Sub(v, got)
			twice := off.Abs(off).Mul(off, big.NewRat(20, 1)) // 1 = half a step
			if c := twice.Cmp(big.NewRat(1, 1)); !units.IsInt() || c > 0 || c == 0 && units.Num().Bit(0) == 1 {
				t.Fatalf("%s became %s", v, got)
			}
		}
	}
}

func TestPrinted(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		value, low, high string
		decimals         int
		want             Decimal
	}{
		{"6.04", "-4", "6", 1, "6.04"}, {"6.0004", "-4", "6", 1, "6.0004"}, {"6", "-4", "6", 1, "6.0"}, {"5.96", "-4", "6", 1, "6.0"},
		{"-4.04", "-4", "6", 1, "-4.04"}, {"-3.96", "-4", "6", 1, "-4.0"}, {"181/300", "-0.6", "0.6", 2, "0.603"}, {"0.6", "-3/5", "3/5", 2, "0.60"},
		{"0.34", "0", "1/3", 2, "0.34"}, {"333/1000", "0", "1/3", 2, "0.33"}, {"1/3", "0", "1/3", 2, "0.33"}, {"2/3", "0", "2/3", 1, "2/3"}, {"-2/3", "-2/3", "0", 1, "-2/3"},
		{"6.00000000001", "-4", "6", 1, "6.00000000001"},
	} {
		got := Printed(ratio(t, c.value), c.decimals, ratio(t, c.low), ratio(t, c.high))
		if got != c.want {
			t.Errorf("%s: %s, want %s", c.value, got, c.want)
		}
	}
}

func TestDecimalForm(t *testing.T) {
	t.Parallel()
	for _, good := range []Decimal{"0", "0.0", "1", "-1", "10.50", "-0.001", "123456789012345678.000000000000000001"} {
		if _, _, err := good.rat(); err != nil {
			t.Errorf("%s: %v", good, err)
		}
	}
	for _, bad := range []Decimal{"", "+1", "-0", "-0.00", "01", ".5", "5.", "1e3", "1,5", " 1", "1 ", "0x1", "1/2", "٣", "--1", "1_0", "NaN"} {
		if v, _, err := bad.rat(); err == nil {
			t.Errorf("%q read as %s", bad, v)
		}
	}
	for _, bad := range []Exact{"", "1", "2/4", "1/0", "1/-2", "+1/2", "0/2", "1.5", "-0/1", "01/2", "1/02", " 1/2"} {
		if v, err := bad.rat(); err == nil {
			t.Errorf("%q read as %s", bad, v)
		}
	}
	for _, good := range []Exact{"0/1", "-11/50", "6/1", "201/100"} {
		if v, err := good.rat(); err != nil || ExactOf(v) != good {
			t.Errorf("%q: %v, %v", good, v, err)
		}
	}
}

// What WithValue writes is what Check wants, for values around, on and between the limits.
func TestWithValueAgreesWithCheck(t *testing.T) {
	t.Parallel()
	for num := int64(-2000); num <= 2000; num += 4 {
		for _, den := range []int64{1, 3, 30, 250} {
			v := big.NewRat(num, den)
			k := Criterion{Symbol: "X", Title: "x", Unit: "s/d", Definition: "x", Decimals: int(num>>2) & 3, Min: "-4", Max: "20/3"}
			low, high, err := k.deciding()
			if err != nil {
				t.Fatal(err)
			}
			k, err = k.WithValue(v, decided(v, low, high))
			if err != nil {
				t.Fatal(err)
			}
			c := &checker{record: Record{Criteria: []Criterion{k}}}
			if c.criteria(); len(c.faults) > 0 {
				t.Fatalf("%+v: %v", k, c.faults)
			}
		}
	}
	if _, err := (Criterion{Min: "x"}).WithValue(new(big.Rat), VerdictPass); err == nil {
		t.Error("a limit that is no number was taken")
	}
	k, err := Criterion{Value: "1/1", Printed: "1", Margin: "1"}.WithValue(nil, VerdictOpen)
	if want := (Criterion{Verdict: VerdictOpen}); err != nil || k != want {
		t.Errorf("%v, %v", k, err)
	}
}

func ExamplePrinted() {
	limit := big.NewRat(6, 1)
	fmt.Println(Printed(big.NewRat(604, 100), 1, nil, limit), Printed(big.NewRat(596, 100), 1, nil, limit))
	// Output: 6.04 6.0
}
