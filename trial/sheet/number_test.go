package sheet

import (
	"errors"
	"math/big"
	"regexp"
	"strings"
	"testing"

	"ratehouse/trial"
)

func TestNumbers(t *testing.T) {
	t.Parallel()
	const none = -1 << 62
	for _, c := range []struct {
		text         string
		point        int64 // read with a decimal point; none: refused
		comma        int64 // read where a comma is allowed
		code, comma2 Code
	}{
		{"0", 0, 0, "", ""},
		{"-0.000", 0, 0, "", ""},
		{"1.5", 1500, 1500, "", ""},
		{"+1.5", 1500, 1500, "", ""},
		{"\u22121.5", -1500, -1500, "", ""},
		{"-.5", -500, -500, "", ""},
		{"5.", 5000, 5000, "", ""},
		{"1.2340000", 1234, 1234, "", ""},
		{" \t\u00a0\u202f\u20071.5\u00a0 ", 1500, 1500, "", ""},
		{"0000000000000000000001.5", 1500, 1500, "", ""},
		{"600", 600_000, 600_000, "", ""},
		{"999999999999999", 999_999_999_999_999_000, 999_999_999_999_999_000, "", ""},
		{"1000000000000000", none, none, TooLarge, TooLarge},
		{"1.2341", none, none, TooFine, TooFine},
		{"0.00049999999999999999999", none, none, TooFine, TooFine},
		{"1,5", none, 1500, DecimalComma, ""},
		{"-1,25", none, -1250, DecimalComma, ""},
		{",5", none, 500, DecimalComma, ""},
		{"5,", none, 5000, DecimalComma, ""},
		{"1,234", none, none, DecimalComma, AmbiguousComma},
		{"-123,456", none, none, DecimalComma, AmbiguousComma},
		{"1234,567", none, 1_234_567, DecimalComma, ""},
		{",567", none, 567, DecimalComma, ""},
		{"1,2340", none, 1234, DecimalComma, ""},
		{"1,2345", none, none, DecimalComma, TooFine},
		{"1,234,567", none, none, Grouping, Grouping},
		{"1,234.5", none, none, Grouping, Grouping},
		{"1.234,5", none, none, Grouping, Grouping},
		{"1'234", none, none, Grouping, Grouping},
		{"1 234", none, none, Grouping, Grouping},
		{"1\u00a0234", none, none, Grouping, Grouping},
		{"1_000", none, none, Grouping, Grouping},
		{"1e3", none, none, Exponent, Exponent},
		{"-2E+1", none, none, Exponent, Exponent},
		{"- 5", none, none, SignApart, SignApart},
		{"+\u00a05", none, none, SignApart, SignApart},
		{"", none, none, Blank, Blank},
		{"   ", none, none, Blank, Blank},
		{"-", none, none, NotNumber, NotNumber},
		{".", none, none, NotNumber, NotNumber},
		{"+.", none, none, NotNumber, NotNumber},
		{"n/a", none, none, NotNumber, NotNumber},
		{"null", none, none, NotNumber, NotNumber},
		{"NaN", none, none, NotNumber, NotNumber},
		{"inf", none, none, NotNumber, NotNumber},
		{"--5", none, none, NotNumber, NotNumber},
		{"5-", none, none, NotNumber, NotNumber},
		{"1.2.3", none, none, NotNumber, NotNumber},
		{"\u20135", none, none, OtherCharacter, OtherCharacter},
		{"\u00ad5", none, none, OtherCharacter, OtherCharacter},
		{"1.5 s/d", none, none, OtherCharacter, OtherCharacter},
		{"5%", none, none, OtherCharacter, OtherCharacter},
		{"0x10", none, none, OtherCharacter, OtherCharacter},
		{"\u0661\u0662", none, none, OtherCharacter, OtherCharacter},
		{"\uff11", none, none, OtherCharacter, OtherCharacter},
		{"\u00bd", none, none, OtherCharacter, OtherCharacter},
		{"1\u200b5", none, none, OtherCharacter, OtherCharacter},
		{"\ufeff5", none, none, OtherCharacter, OtherCharacter},
		{"5\x00", none, none, OtherCharacter, OtherCharacter},
		{"5\xff", none, none, OtherCharacter, OtherCharacter},
		{"=1+1", none, none, IsFormula, IsFormula},
		{"2026-01-31", none, none, NotNumber, NotNumber},
		{"12:30", none, none, OtherCharacter, OtherCharacter},
		{"1/2", none, none, OtherCharacter, OtherCharacter},
	} {
		for comma, want := range map[bool]int64{false: c.point, true: c.comma} {
			code := map[bool]Code{false: c.code, true: c.comma2}[comma]
			v, err := ParseMilli(c.text, comma)
			var r *Refusal
			switch {
			case want != none && (err != nil || v != want):
				t.Errorf("%q comma %v: %d, %v; want %d", c.text, comma, v, err, want)
			case want == none && !errors.As(err, &r):
				t.Errorf("%q comma %v is read as %d", c.text, comma, v)
			case want == none && r.Code != code:
				t.Errorf("%q comma %v: %s (%s), want %s", c.text, comma, r.Code, r, code)
			}
		}
	}
}

func TestRefusalsSayWhatCannotBeSeen(t *testing.T) {
	t.Parallel()
	for text, want := range map[string]string{
		"\u20135":   `"–5" is not a number: '–' (U+2013) is not allowed in one`,
		"1\u200b5":  `"1\u200b5" is not a number: U+200B is not allowed in one`,
		"5\x00":     `"5\x00" is not a number: U+0000 is not allowed in one`,
		"5\xff":     `"5\xff" is not a number: a byte that is not text is not allowed in one`,
		"1\u00a0e3": `"1\u00a0e3" is not a number: U+00A0 is not allowed in one`,
	} {
		if _, err := ParseMilli(text, false); err == nil || err.Error() != want {
			t.Errorf("%q: %v, want %s", text, err, want)
		}
	}
	long := strings.Repeat("x", 10_000)
	if _, err := ParseMilli(long, false); len(err.Error()) > 300 {
		t.Errorf("a refusal of %d characters", len(err.Error()))
	}
}

// Every code has a text whose arguments fit.
func TestEveryCodeHasItsText(t *testing.T) {
	t.Parallel()
	for code, n := range Codes() {
		args := make([]string, n)
		if s := refuse(code, args...).Reason(); strings.Contains(s, "%!") {
			t.Errorf("%s: %s", code, s)
		}
	}
}

var plainNumber = regexp.MustCompile(`^[+\-\x{2212}]?([0-9]+\.?[0-9]*|\.[0-9]+)$`)

// oracleMilli is the grammar as a regular expression and big numbers, apart from the reader.
func oracleMilli(s string, comma bool) (*big.Int, bool) {
	s = strings.Trim(s, " \t\u00a0\u2007\u202f")
	if comma && strings.Count(s, ",") == 1 && !strings.Contains(s, ".") {
		if regexp.MustCompile(`^[+\-\x{2212}]?[0-9]{1,3},[0-9]{3}$`).MatchString(s) {
			return nil, false
		}
		s = strings.Replace(s, ",", ".", 1)
	}
	if !plainNumber.MatchString(s) {
		return nil, false
	}
	r, ok := new(big.Rat).SetString(strings.Replace(s, "\u2212", "-", 1))
	if !ok {
		return nil, false
	}
	r.Mul(r, big.NewRat(1000, 1))
	limit := new(big.Rat).SetInt64(1_000_000_000_000_000_000)
	return new(big.Int).Set(r.Num()), r.IsInt() && new(big.Rat).Abs(r).Cmp(limit) < 0
}

func FuzzParseMilli(f *testing.F) {
	for _, s := range []string{"1.5", "-0.600", "\u22122,5", "1,234", " 5. ", "1e3", "=1", "- 5", "\u00a07", "99999999999999999999", "0.0001", "1'000", "\xff"} {
		f.Add(s, true)
		f.Add(s, false)
	}
	f.Fuzz(func(t *testing.T, s string, comma bool) {
		v, err := ParseMilli(s, comma)
		want, ok := oracleMilli(s, comma)
		if (err == nil) != ok {
			t.Fatalf("%q comma %v: %d, %v; the oracle reads %v", s, comma, v, err, want)
		}
		if err == nil && want.Cmp(big.NewInt(v)) != 0 {
			t.Fatalf("%q comma %v: %d, want %s", s, comma, v, want)
		}
		if err == nil {
			if back, err := ParseMilli(trial.Milli(v).String(), false); err != nil || back != v {
				t.Fatalf("%q prints %s, which reads %d, %v", s, trial.Milli(v), back, err)
			}
		} else if strings.Contains(err.Error(), "%!") && !strings.Contains(s, "%") || strings.ContainsAny(err.Error(), "\n\r\x00") {
			t.Fatalf("%q: %q", s, err)
		}
	})
}
