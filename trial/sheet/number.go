package sheet

import (
	"bytes"
	"fmt"
	"strings"
	"unicode"
	"unicode/utf8"
)

// ParseMilli reads a number as whole thousandths: ASCII digits, an optional sign (+, -, U+2212),
// at most one point (or a comma where decimalComma says so); tabs, blanks and no-break blanks
// around it are trimmed. Digits finer than 0.001 other than zeros are refused, never rounded; so
// are exponents, units, words for nothing, grouping, other dashes and digits, formulas, and a
// comma with one to three digits before and exactly three after it, which may mean two things.
// The error is a *Refusal without line and column.
func ParseMilli(s string, decimalComma bool) (int64, error) {
	v, r := parseNumber([]byte(s), decimalComma)
	if r != nil {
		return 0, r
	}
	return v, nil
}

// quickMilli reads the plain case: an ASCII sign, digits, a point, at most three decimals, at most
// fifteen digits in all. ok false means only: look closer.
func quickMilli(b []byte) (v int64, ok bool) {
	i, neg := 0, false
	if len(b) > 0 && (b[0] == '-' || b[0] == '+') {
		neg = b[0] == '-'
		i = 1
	}
	if len(b) == i || len(b) > 16 {
		return 0, false
	}
	digits, decimals := 0, -1
	for ; i < len(b); i++ {
		c := b[i]
		if d := c - '0'; d <= 9 {
			v = v*10 + int64(d)
			digits++
			continue
		}
		if c != '.' || decimals >= 0 {
			return 0, false
		}
		decimals = digits
	}
	if digits == 0 || digits > 15 {
		return 0, false
	}
	switch digits - decimals {
	case digits + 1: // no point
		v *= 1000
	case 0:
		v *= 1000
	case 1:
		v *= 100
	case 2:
		v *= 10
	case 3:
	default:
		return 0, false
	}
	if neg {
		v = -v
	}
	return v, true
}

const minus = "\u2212"

// parseNumber is ParseMilli on bytes.
func parseNumber(cell []byte, decimalComma bool) (int64, *Refusal) {
	if v, ok := quickMilli(cell); ok {
		return v, nil
	}
	b := trim(cell)
	body, neg := b, false
	switch {
	case bytes.HasPrefix(b, []byte(minus)):
		body, neg = b[len(minus):], true
	case len(b) > 0 && (b[0] == '-' || b[0] == '+'):
		body, neg = b[1:], b[0] == '-'
	}
	if decimalComma && bytes.Count(body, []byte(",")) == 1 && !bytes.Contains(body, []byte(".")) {
		whole, part, _ := bytes.Cut(body, []byte(","))
		if allDigits(whole) && allDigits(part) && len(whole)+len(part) > 0 {
			if len(part) == 3 && len(whole) >= 1 && len(whole) <= 3 {
				return 0, refuse(AmbiguousComma, Visible(string(b)))
			}
			body = []byte(string(whole) + "." + string(part))
		}
	}
	whole, part, _ := bytes.Cut(body, []byte("."))
	if !allDigits(whole) || !allDigits(part) || len(whole)+len(part) == 0 {
		return 0, explain(string(b), decimalComma)
	}
	return exactMilli(b, whole, part, neg)
}

// exactMilli puts the digits together.
func exactMilli(b, whole, part []byte, neg bool) (int64, *Refusal) {
	if len(part) > 3 {
		if len(bytes.TrimRight(part[3:], "0")) > 0 {
			return 0, refuse(TooFine, Visible(string(b)))
		}
		part = part[:3]
	}
	whole = bytes.TrimLeft(whole, "0")
	if len(whole) > 15 {
		return 0, refuse(TooLarge, Visible(string(b)))
	}
	var v int64
	for _, c := range whole {
		v = v*10 + int64(c-'0')
	}
	for i := range 3 {
		v *= 10
		if i < len(part) {
			v += int64(part[i] - '0')
		}
	}
	if neg {
		v = -v
	}
	return v, nil
}

func allDigits(b []byte) bool {
	for _, c := range b {
		if c < '0' || c > '9' {
			return false
		}
	}
	return true
}

// isBlank tells the characters that are trimmed: tab, blank and the no-break blanks.
func isBlank(r rune) bool {
	return r == ' ' || r == '\t' || r == '\u00a0' || r == '\u2007' || r == '\u202f'
}

// trim takes blanks off both ends.
func trim(b []byte) []byte {
	for len(b) > 0 && (b[0] == ' ' || b[0] == '\t') {
		b = b[1:]
	}
	for len(b) > 0 && (b[len(b)-1] == ' ' || b[len(b)-1] == '\t') {
		b = b[:len(b)-1]
	}
	if len(b) > 0 && (b[0] >= utf8.RuneSelf || b[len(b)-1] >= utf8.RuneSelf) {
		return bytes.TrimFunc(b, isBlank)
	}
	return b
}

// explain finds the most helpful reason why a text is not a number.
func explain(s string, decimalComma bool) *Refusal {
	shown := Visible(s)
	signless := strings.TrimLeft(s, "+-"+minus)
	inner := strings.TrimFunc(signless, isBlank)
	switch {
	case s == "":
		return refuse(Blank)
	case strings.HasPrefix(s, "=") || strings.HasPrefix(s, "@"):
		return refuse(IsFormula, shown)
	case signless != s && inner != signless && looksNumeric(inner):
		return refuse(SignApart, shown)
	case isExponent(signless):
		return refuse(Exponent, shown)
	case groups(signless) && !(strings.Count(signless, ",") == 1 && !strings.ContainsAny(signless, "'’ \u00a0\u2007\u202f\u2009_")):
		return refuse(Grouping, shown)
	case looksNumeric(strings.ReplaceAll(signless, ",", ".")) && strings.Count(signless, ",") == 1 && !decimalComma:
		return refuse(DecimalComma, shown)
	case strings.ContainsRune(signless, ',') && looksNumeric(strings.NewReplacer(",", "", ".", "").Replace(signless)):
		return refuse(Grouping, shown)
	}
	if !strings.ContainsAny(s, "0123456789") && isASCII(s) {
		return refuse(NotNumber, shown)
	}
	for _, r := range s {
		if strings.ContainsRune("0123456789.+-"+minus, r) {
			continue
		}
		return refuse(OtherCharacter, shown, character(r))
	}
	return refuse(NotNumber, shown)
}

// looksNumeric tells digits with at most one point.
func looksNumeric(s string) bool {
	whole, part, _ := strings.Cut(s, ".")
	return len(whole)+len(part) > 0 && allDigits([]byte(whole)) && allDigits([]byte(part))
}

func isExponent(s string) bool {
	i := strings.IndexAny(s, "eE")
	return i > 0 && looksNumeric(s[:i]) && looksNumeric(strings.TrimLeft(s[i+1:], "+-"+minus))
}

// groups tells digits held apart by grouping characters.
func groups(s string) bool {
	const marks = ",'’_ \u00a0\u2007\u202f\u2009"
	plain := strings.Map(func(r rune) rune {
		if strings.ContainsRune(marks, r) {
			return -1
		}
		return r
	}, s)
	return plain != s && looksNumeric(plain) && s[0] >= '0' && s[0] <= '9'
}

func isASCII(s string) bool {
	for i := range len(s) {
		if s[i] >= utf8.RuneSelf {
			return false
		}
	}
	return true
}

// character names one character by itself and its code point.
func character(r rune) string {
	if r == utf8.RuneError {
		return "a byte that is not text"
	}
	if unicode.IsPrint(r) && r < utf8.RuneSelf {
		return fmt.Sprintf("'%c'", r)
	}
	if unicode.IsPrint(r) {
		return fmt.Sprintf("'%c' (U+%04X)", r, r)
	}
	return fmt.Sprintf("U+%04X", r)
}
