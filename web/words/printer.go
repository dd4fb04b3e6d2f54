package words

import (
	"strconv"
	"strings"
	"time"
)

const (
	minus = "\u2212" // as wide as the plus; the hyphen is not
	nbsp  = "\u00a0"
	dots  = "\u2026"
	// Blank stands for a value that is not there; part.NotRead says it to screen readers as well.
	Blank = "\u00b7"
)

// Printer says everything a page shows in one language and one time zone. It is made for a request
// and holds nothing else; the same value may be used from several goroutines.
type Printer struct {
	lang Lang
	zone *time.Location
}

// New makes a printer; a nil zone is UTC, an unknown language English.
func New(lang Lang, zone *time.Location) *Printer {
	if zone == nil {
		zone = time.UTC
	}
	if lang != FR && lang != DE {
		lang = EN
	}
	return &Printer{lang: lang, zone: zone}
}

// Lang is the language spoken.
func (p *Printer) Lang() Lang { return p.lang }

// Zone is the zone in which instants are shown.
func (p *Printer) Zone() *time.Location { return p.zone }

// Say speaks a text.
func (p *Printer) Say(t Text) string { return t.text(p) }

// Choose picks the language: the account's if set, else the first of the Accept-Language header that
// is spoken here (its quality values order it), else English.
func Choose(account, accept string) Lang {
	for _, l := range Langs {
		if string(l) == account {
			return l
		}
	}
	best, bestQ := EN, -1.0
	for part := range strings.SplitSeq(accept, ",") {
		tag, params, _ := strings.Cut(strings.TrimSpace(part), ";")
		q := 1.0
		if v, ok := strings.CutPrefix(strings.TrimSpace(params), "q="); ok {
			if f, err := strconv.ParseFloat(v, 64); err == nil {
				q = f
			}
		}
		tag, _, _ = strings.Cut(strings.ToLower(tag), "-")
		for _, l := range Langs {
			if tag == string(l) && q > bestQ && q > 0 {
				best, bestQ = l, q
			}
		}
	}
	return best
}

func (p *Printer) singular(n int) bool {
	return n == 1 || (n == 0 && p.lang == FR)
}

// Count shows a whole number with its thousands apart: 1,200 in English, 1 200 in French and German,
// where a point could be taken for a decimal one.
func (p *Printer) Count(n int) string {
	s := strconv.Itoa(n)
	sign := ""
	if s[0] == '-' {
		sign, s = minus, s[1:]
	}
	apart := ","
	if p.lang != EN {
		apart = nbsp
	}
	for i := len(s) - 3; i > 0; i -= 3 {
		s = s[:i] + apart + s[i:]
	}
	return sign + s
}

// Round cuts an exact decimal to places decimals, half to even, and pads it where it has fewer. The
// result is again a plain decimal ("-0.30"), never "-0.00". What is no decimal comes back unchanged.
func Round(dec string, places int) string {
	neg := strings.HasPrefix(dec, "-")
	whole, frac, ok := cut(dec)
	if !ok {
		return dec
	}
	if len(frac) <= places {
		frac += strings.Repeat("0", places-len(frac))
		return signed(neg, whole, frac)
	}
	rest := frac[places:]
	digits := []byte(whole + frac[:places])
	half := strings.Compare(rest, "5"+strings.Repeat("0", len(rest)-1))
	odd := (digits[len(digits)-1]-'0')%2 == 1
	if half > 0 || (half == 0 && odd) {
		digits = increment(digits)
	}
	n := len(digits) - places
	return signed(neg, string(digits[:n]), string(digits[n:]))
}

func cut(dec string) (whole, frac string, ok bool) {
	whole, frac, _ = strings.Cut(strings.TrimLeft(dec, "+-"), ".")
	if whole == "" {
		whole = "0"
	}
	for _, c := range whole + frac {
		if c < '0' || c > '9' {
			return "", "", false
		}
	}
	return whole, frac, true
}

func increment(digits []byte) []byte {
	for i := len(digits) - 1; i >= 0; i-- {
		if digits[i] != '9' {
			digits[i]++
			return digits
		}
		digits[i] = '0'
	}
	return append([]byte{'1'}, digits...)
}

func signed(neg bool, whole, frac string) string {
	s := whole
	if frac != "" {
		s += "." + frac
	}
	if neg && strings.Trim(s, "0.") != "" {
		s = "-" + s
	}
	return s
}

// Signed shows a rate, a state or a difference: an exact decimal with its sign always, plus too, the
// true minus, and the language's decimal sign. Exact zero has no sign. "" is Blank.
func (p *Printer) Signed(dec string, places int) string {
	if dec == "" {
		return Blank
	}
	s := Round(dec, places)
	switch {
	case strings.HasPrefix(s, "-"):
		s = minus + s[1:]
	case strings.Trim(s, "0.") != "":
		s = "+" + strings.TrimPrefix(s, "+")
	}
	return p.point(s)
}

// Magnitude shows a number that has no sign by nature, V, Vmax or P. "" is Blank.
func (p *Printer) Magnitude(dec string, places int) string {
	if dec == "" {
		return Blank
	}
	s := Round(dec, places)
	if strings.HasPrefix(s, "-") {
		s = minus + s[1:]
	}
	return p.point(s)
}

// Number shows dec signed or as a magnitude.
func (p *Printer) Number(dec string, places int, sign bool) string {
	if sign {
		return p.Signed(dec, places)
	}
	return p.Magnitude(dec, places)
}

func (p *Printer) point(s string) string {
	if p.lang == EN {
		return s
	}
	return strings.Replace(s, ".", ",", 1)
}

// Interval shows limits as an interval, for magnitudes too: one form to read. A side that has no
// limit ("") is left out, in words.
func (p *Printer) Interval(lo, hi string, places int, sign bool) string {
	switch {
	case lo == "" && hi == "":
		return p.Say(NoLimits)
	case lo == "":
		return p.Say(AtMost.With(p.Number(hi, places, sign)))
	case hi == "":
		return p.Say(AtLeast.With(p.Number(lo, places, sign)))
	}
	return p.Number(lo, places, sign) + nbsp + dots + " " + p.Number(hi, places, sign)
}

// Celsius shows a temperature, the unit never apart from its number.
func (p *Printer) Celsius(dec string) string {
	return p.Magnitude(dec, decimals(dec)) + nbsp + "°C"
}

func decimals(dec string) int {
	_, frac, _ := strings.Cut(dec, ".")
	return len(frac)
}

// Unit puts a unit behind a number so that no line breaks between them.
func (p *Printer) Unit(number, unit string) string { return number + nbsp + unit }

// Share shows part of whole in per cent with one decimal: 83.5 %. Nothing of nothing is Blank; a part
// that is neither none nor all never shows as 0.0 % or 100.0 %.
func (p *Printer) Share(part, whole int) string {
	if whole <= 0 {
		return Blank
	}
	num := part * 1000
	tenth := num / whole
	if rest := 2 * (num % whole); rest > whole || (rest == whole && tenth%2 == 1) {
		tenth++
	}
	switch {
	case tenth == 0 && part > 0:
		return p.Say(Below.With(p.percent("0.1")))
	case tenth == 1000 && part < whole:
		return p.Say(Above.With(p.percent("99.9")))
	}
	return p.percent(strconv.Itoa(tenth/10) + "." + strconv.Itoa(tenth%10))
}

func (p *Printer) percent(dec string) string { return p.point(dec) + nbsp + "%" }

// Chance shows a probability given as a decimal between 0 and 1, in per cent without the sign (the
// head of the column has it): "below 0.1" and "above 99.9" where it is only small or great, 0 and 100
// for the exact 0 and 1 alone.
func (p *Printer) Chance(dec string, places int) string {
	whole, frac, ok := cut(dec)
	if dec == "" || !ok {
		return Blank
	}
	if strings.Trim(frac, "0") == "" {
		return map[bool]string{true: "0", false: "100"}[strings.Trim(whole, "0") == ""]
	}
	for len(frac) < 2 {
		frac += "0"
	}
	s := Round(strings.TrimLeft(whole+frac[:2], "0")+"."+frac[2:], places)
	least := Round("0."+strings.Repeat("0", max(places-1, 0))+"1", places)
	most := Round("99."+strings.Repeat("9", places), places)
	if places == 0 {
		least = "1"
	}
	switch {
	case strings.Trim(s, "0.") == "":
		return p.Say(Below.With(p.point(least)))
	case strings.HasPrefix(s, "100"):
		return p.Say(Above.With(p.point(most)))
	}
	return p.point(s)
}
