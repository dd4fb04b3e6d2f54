package trial_test

import (
	"math"
	"math/big"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"ratehouse/trial"
)

// evenDecimal rounds half to even by scaling to a whole number and comparing remainders, and is
// written apart from the engine's own rounding.
func evenDecimal(x *big.Rat, places int) string {
	scale := new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(places)), nil)
	y := new(big.Rat).Mul(x, new(big.Rat).SetInt(scale))
	floor := new(big.Int).Div(y.Num(), y.Denom()) // Euclidean: rounds down for a positive divisor
	rest := new(big.Rat).Sub(y, new(big.Rat).SetInt(floor))
	switch c := rest.Cmp(big.NewRat(1, 2)); {
	case c > 0, c == 0 && floor.Bit(0) == 1:
		floor.Add(floor, big.NewInt(1))
	}
	s := new(big.Rat).SetFrac(floor, scale).FloatString(places)
	if floor.Sign() == 0 {
		s = strings.TrimPrefix(s, "-")
	}
	return s
}

func TestRoundingRows(t *testing.T) {
	t.Parallel()
	var file struct {
		Rows []struct {
			Value, Step string
			Even        string `json:"ruleA_half_even"`
		}
		Double struct {
			Value string
			To    string `json:"direct_to_0.1"`
		} `json:"double_rounding"`
	}
	readJSON(t, "rounding.json", &file)
	if len(file.Rows) < 20 {
		t.Fatalf("%d rows", len(file.Rows))
	}
	for _, row := range file.Rows {
		e, err := trial.ParseExact(row.Value)
		if err != nil {
			t.Fatal(err)
		}
		var got string
		switch row.Step {
		case "1E1":
			got = e.Times(trial.Ratio(1, 10)).Decimal(0) + "0"
		case "1":
			got = e.Decimal(0)
		default:
			got = e.Decimal(len(row.Step) - 2)
		}
		if got != row.Even {
			t.Errorf("%s to %s: %s, want %s", row.Value, row.Step, got, row.Even)
		}
	}
	if e, _ := trial.ParseExact(file.Double.Value); e.Decimal(1) != file.Double.To {
		t.Errorf("%s is rounded twice: %s", file.Double.Value, e.Decimal(1))
	}
}

func TestDecimal(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		e      trial.Exact
		places int
		want   string
	}{
		{trial.Exact{}, 6, "0.000000"},
		{trial.Ratio(-1, 10_000_000), 6, "0.000000"}, // never -0
		{trial.Ratio(-1, 2_000_000), 6, "0.000000"},
		{trial.Ratio(-3, 2_000_000), 6, "-0.000002"},
		{trial.Ratio(1, 3), 6, "0.333333"},
		{trial.Ratio(2, -3), 6, "-0.666667"},
		{trial.Ratio(math.MaxInt64, 1), 9, "9223372036854775807.000000000"},
		{trial.Ratio(math.MinInt64, 1), 0, "-9223372036854775808"},
		{trial.Ratio(math.MinInt64, -1), 0, "9223372036854775808"},
		{trial.Ratio(1, math.MaxInt64), 20, "0.00000000000000000011"},
		{trial.Ratio(5, 1), -3, "5"},
		{trial.Milli(-1500).Exact(), 1, "-1.5"},
	} {
		if got := c.e.Decimal(c.places); got != c.want {
			t.Errorf("%s to %d: %s, want %s", c.e, c.places, got, c.want)
		}
	}
	if s := trial.Milli(-1500).String() + trial.State(2000).String() + trial.Milli(0).String(); s != "-1.520" {
		t.Errorf("short forms %s", s)
	}
}

func TestExactAgreesWithBigNumbers(t *testing.T) {
	t.Parallel()
	number := rapid.Custom(func(t *rapid.T) trial.Exact {
		num := rapid.Int64().Draw(t, "num")
		den := rapid.Int64().Filter(func(d int64) bool { return d != 0 }).Draw(t, "den")
		return trial.Ratio(num, den)
	})
	rapid.Check(t, func(t *rapid.T) {
		e, f := number.Draw(t, "e"), number.Draw(t, "f")
		places := rapid.IntRange(0, 12).Draw(t, "places")
		if got, want := e.Cmp(f), e.Rat().Cmp(f.Rat()); got != want {
			t.Fatalf("%s and %s compare %d, want %d", e, f, got, want)
		}
		if got, want := e.Decimal(places), evenDecimal(e.Rat(), places); got != want {
			t.Fatalf("%s to %d: %s, want %s", e, places, got, want)
		}
		if got := string(e.AppendDecimal([]byte("x"), places)); got != "x"+e.Decimal(places) {
			t.Fatalf("appended %s", got)
		}
		for name, pair := range map[string][2]*big.Rat{
			"sum":        {e.Add(f).Rat(), new(big.Rat).Add(e.Rat(), f.Rat())},
			"difference": {e.Sub(f).Rat(), new(big.Rat).Sub(e.Rat(), f.Rat())},
			"product":    {e.Times(f).Rat(), new(big.Rat).Mul(e.Rat(), f.Rat())},
			"negative":   {e.Neg().Rat(), new(big.Rat).Neg(e.Rat())},
		} {
			if pair[0].Cmp(pair[1]) != 0 {
				t.Fatalf("%s of %s and %s is %s", name, e, f, pair[0])
			}
		}
		if back, err := trial.ParseExact(e.String()); err != nil || back.Cmp(e) != 0 {
			t.Fatalf("%s reads back as %s, %v", e, back, err)
		}
	})
}

func TestParseExact(t *testing.T) {
	t.Parallel()
	for s, want := range map[string]string{"-0.6": "-3/5", "+6": "6", ".5": "1/2", "5.": "5", "1/3": "1/3", "-2/4": "-1/2", "007": "7"} {
		if e, err := trial.ParseExact(s); err != nil || e.String() != want {
			t.Errorf("%q: %s, %v; want %s", s, e, err, want)
		}
	}
	for _, s := range []string{"", "+", "-", ".", "/", "1/", "/2", "1/0", "1/-2", "1e3", "0x1", " 1", "1 ", "1.2/3", "1_0", "--1", "+-1", "1.2.3", "inf", "NaN", "1,5", strings.Repeat("1", 300)} {
		if e, err := trial.ParseExact(s); err == nil {
			t.Errorf("%q is read as %s", s, e)
		}
	}
}

func TestPrinted(t *testing.T) {
	t.Parallel()
	six := trial.Limit{HasMax: true, Max: trial.Ratio(6, 1), HasMin: true, Min: trial.Ratio(-4, 1)}
	third := trial.Limit{HasMax: true, Max: trial.Ratio(1, 3)}
	for _, c := range []struct {
		value string
		limit trial.Limit
		want  string
	}{
		{"6.04", six, "6.04"},
		{"6.0004", six, "6.0004"},
		{"6", six, "6.0"},
		{"5.96", six, "6.0"},
		{"-4.04", six, "-4.04"},
		{"-4.05", six, "-4.05"},
		{"-3.96", six, "-4.0"},
		{"2.05", six, "2.0"},
		{"2.05", trial.Limit{}, "2.0"},
		{"1/3", third, "0.3"},
		{"2/3", trial.Limit{HasMax: true, Max: trial.Ratio(2, 3)}, "2/3"},
		{"12.251", six, "12.3"},
	} {
		e, err := trial.ParseExact(c.value)
		if err != nil {
			t.Fatal(err)
		}
		if got := trial.Printed(e, c.limit, 1); got != c.want {
			t.Errorf("%s prints %s, want %s", c.value, got, c.want)
		}
	}
}
