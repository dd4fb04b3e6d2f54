package proof

import (
	"encoding"
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"reflect"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"
)

// Errors of the canonical form. Each is wrapped with the place where it was met.
var (
	// ErrSyntax: the text is not JSON (RFC 8259).
	ErrSyntax = errors.New("not valid JSON")
	// ErrDuplicateKey: an object names one key twice (RFC 7493 2.3).
	ErrDuplicateKey = errors.New("key given twice")
	// ErrText: a string holds bytes that are not UTF-8, or half of a surrogate pair (RFC 7493 2.1).
	ErrText = errors.New("text is not valid Unicode")
	// ErrNumber: a number is not finite, an integer beyond 2^53, which not every reader keeps, or
	// too small to be told from zero.
	ErrNumber = errors.New("number cannot be kept exactly by every reader; write it as a string")
	// ErrValue: a Go value has no one JSON form.
	ErrValue = errors.New("value has no canonical form")
	// ErrDepth: more than maxDepth objects and lists within each other.
	ErrDepth = errors.New("nested too deeply")
)

// maxDepth bounds recursion on hostile or circular input.
const maxDepth = 256

// maxInteger is 2^53, the end of the integers that a binary64 number holds without gaps.
const maxInteger = 1 << 53

// Canonical gives the canonical JSON of v (RFC 8785): keys in order of their UTF-16 code units,
// numbers as ECMAScript writes them, the fewest escapes, no blanks. It takes nil, bool, string,
// integers within ±2^53, float64, json.Number, lists, maps with string keys, pointers, types
// with MarshalJSON or MarshalText, and structs by their json tags (names, "-", omitempty,
// omitzero; no embedding). Nil maps and lists are null, as in encoding/json. It fails with
// ErrText, ErrNumber, ErrValue or ErrDepth, and never repairs what it is given.
func Canonical(v any) ([]byte, error) {
	return appendValue(nil, reflect.ValueOf(v), 0)
}

// CanonicalJSON gives the canonical form of a JSON text. Beside Canonical's errors it fails
// with ErrSyntax and ErrDuplicateKey. Unicode is not normalised: é as one character and as two
// are different texts, as RFC 8785 3.2.5 wants.
func CanonicalJSON(raw []byte) ([]byte, error) {
	v, err := parseJSON(raw)
	if err != nil {
		return nil, err
	}
	return Canonical(v)
}

func appendValue(out []byte, v reflect.Value, depth int) ([]byte, error) {
	if depth > maxDepth {
		return nil, ErrDepth
	}
	if !v.IsValid() {
		return append(out, "null"...), nil
	}
	if n, ok := v.Interface().(json.Number); ok {
		return appendLiteral(out, string(n))
	}
	if v.Kind() != reflect.Pointer || !v.IsNil() {
		if done, err := appendMarshaler(out, v); done != nil || err != nil {
			return done, err
		}
	}
	switch v.Kind() {
	case reflect.Bool:
		return strconv.AppendBool(out, v.Bool()), nil
	case reflect.String:
		return appendString(out, v.String())
	case reflect.Int, reflect.Int8, reflect.Int16, reflect.Int32, reflect.Int64:
		return appendInteger(out, v.Int())
	case reflect.Uint, reflect.Uint8, reflect.Uint16, reflect.Uint32, reflect.Uint64, reflect.Uintptr:
		return appendInteger(out, int64(min(v.Uint(), math.MaxInt64)))
	case reflect.Float64:
		return appendFloat(out, v.Float())
	}
	return appendCompound(out, v, depth)
}

// appendMarshaler lets a type that writes itself do so; it returns nil, nil for all others.
func appendMarshaler(out []byte, v reflect.Value) ([]byte, error) {
	switch m := v.Interface().(type) {
	case json.Marshaler:
		raw, err := m.MarshalJSON()
		if err != nil {
			return nil, err
		}
		canonical, err := CanonicalJSON(raw)
		if err != nil {
			return nil, err
		}
		return append(out, canonical...), nil
	case encoding.TextMarshaler:
		text, err := m.MarshalText()
		if err != nil {
			return nil, err
		}
		return appendString(out, string(text))
	}
	return nil, nil
}

func appendCompound(out []byte, v reflect.Value, depth int) ([]byte, error) {
	switch v.Kind() {
	case reflect.Pointer, reflect.Interface:
		return appendValue(out, v.Elem(), depth+1)
	case reflect.Array, reflect.Slice:
		if v.Type().Elem().Kind() == reflect.Uint8 {
			return nil, fmt.Errorf("%s: %w", v.Type(), ErrValue)
		}
		if v.Kind() == reflect.Slice && v.IsNil() {
			return append(out, "null"...), nil
		}
		return appendList(out, v, depth)
	case reflect.Map:
		if v.Type().Key().Kind() != reflect.String {
			return nil, fmt.Errorf("%s: keys must be strings: %w", v.Type(), ErrValue)
		}
		if v.IsNil() {
			return append(out, "null"...), nil
		}
		members := make([]member, 0, v.Len())
		for it := v.MapRange(); it.Next(); {
			members = append(members, member{it.Key().String(), it.Value()})
		}
		return appendObject(out, members, depth)
	case reflect.Struct:
		members, err := structMembers(v)
		if err != nil {
			return nil, err
		}
		return appendObject(out, members, depth)
	}
	return nil, fmt.Errorf("%s: %w", v.Type(), ErrValue)
}

func appendList(out []byte, v reflect.Value, depth int) ([]byte, error) {
	out = append(out, '[')
	var err error
	for i := range v.Len() {
		if i > 0 {
			out = append(out, ',')
		}
		if out, err = appendValue(out, v.Index(i), depth+1); err != nil {
			return nil, fmt.Errorf("[%d]: %w", i, err)
		}
	}
	return append(out, ']'), nil
}

// member is one key of an object with its value.
type member struct {
	key   string
	value reflect.Value
}

func appendObject(out []byte, members []member, depth int) ([]byte, error) {
	slices.SortFunc(members, func(a, b member) int { return compareUTF16(a.key, b.key) })
	out = append(out, '{')
	var err error
	for i, m := range members {
		if i > 0 {
			if m.key == members[i-1].key {
				return nil, fmt.Errorf("%q: %w", m.key, ErrDuplicateKey)
			}
			out = append(out, ',')
		}
		if out, err = appendString(out, m.key); err != nil {
			return nil, fmt.Errorf("key %q: %w", m.key, err)
		}
		out = append(out, ':')
		if out, err = appendValue(out, m.value, depth+1); err != nil {
			return nil, fmt.Errorf(".%s: %w", m.key, err)
		}
	}
	return append(out, '}'), nil
}

// structMembers lists the fields of a struct as encoding/json names them.
func structMembers(v reflect.Value) ([]member, error) {
	t := v.Type()
	members := make([]member, 0, t.NumField())
	for i := range t.NumField() {
		field := t.Field(i)
		name, options, _ := strings.Cut(field.Tag.Get("json"), ",")
		if field.Tag.Get("json") == "-" || (!field.IsExported() && !field.Anonymous) {
			continue
		}
		if field.Anonymous {
			return nil, fmt.Errorf("%s embeds %s: %w", t, field.Name, ErrValue)
		}
		if name == "" {
			name = field.Name
		}
		skip, err := leftOut(v.Field(i), options)
		if err != nil {
			return nil, fmt.Errorf("%s.%s: %w", t, field.Name, err)
		}
		if !skip {
			members = append(members, member{name, v.Field(i)})
		}
	}
	return members, nil
}

// leftOut applies the options of a json tag to a field.
func leftOut(v reflect.Value, options string) (bool, error) {
	for option := range strings.SplitSeq(options, ",") {
		switch option {
		case "":
		case "omitempty":
			if isEmpty(v) {
				return true, nil
			}
		case "omitzero":
			if z, ok := v.Interface().(interface{ IsZero() bool }); ok && z.IsZero() || v.IsZero() {
				return true, nil
			}
		default:
			return false, fmt.Errorf("json option %q: %w", option, ErrValue)
		}
	}
	return false, nil
}

func isEmpty(v reflect.Value) bool {
	switch v.Kind() {
	case reflect.Array, reflect.Map, reflect.Slice, reflect.String:
		return v.Len() == 0
	case reflect.Struct:
		return false
	}
	return v.IsZero()
}

// compareUTF16 orders valid UTF-8 strings by their UTF-16 code units (RFC 8785 3.2.3). Byte
// order would put U+E000..U+FFFF before the characters beyond U+FFFF, whose first unit is
// U+D800..U+DBFF.
func compareUTF16(a, b string) int {
	for a != "" && b != "" {
		ra, na := utf8.DecodeRuneInString(a)
		rb, nb := utf8.DecodeRuneInString(b)
		if ra != rb {
			if (ra > 0xFFFF) != (rb > 0xFFFF) {
				ra, rb = firstUnit(ra), firstUnit(rb)
			}
			return int(ra) - int(rb)
		}
		a, b = a[na:], b[nb:]
	}
	return len(a) - len(b)
}

func firstUnit(r rune) rune {
	if r > 0xFFFF {
		return 0xD800 + (r-0x10000)>>10
	}
	return r
}

const hexDigits = "0123456789abcdef"

// appendString writes a string with only the escapes of RFC 8785 3.2.2.2.
func appendString(out []byte, s string) ([]byte, error) {
	if !utf8.ValidString(s) {
		return nil, ErrText
	}
	out = append(out, '"')
	for i := range len(s) {
		switch c := s[i]; {
		case c == '"' || c == '\\':
			out = append(out, '\\', c)
		case c >= 0x20:
			out = append(out, c)
		case strings.IndexByte("\b\t\n\f\r", c) >= 0:
			out = append(out, '\\', "btn_fr"[c-'\b'])
		default:
			out = append(out, '\\', 'u', '0', '0', hexDigits[c>>4], hexDigits[c&15])
		}
	}
	return append(out, '"'), nil
}

func appendInteger(out []byte, n int64) ([]byte, error) {
	if n > maxInteger || n < -maxInteger {
		return nil, ErrNumber
	}
	return strconv.AppendInt(out, n, 10), nil
}

// appendFloat writes a number of a document: finite, and not an integer beyond 2^53 that its
// canonical text would show with digits it does not hold.
func appendFloat(out []byte, f float64) ([]byte, error) {
	if a := math.Abs(f); math.IsNaN(f) || math.IsInf(f, 0) || a > maxInteger && a < 1e21 {
		return nil, ErrNumber
	}
	return appendES6(out, f), nil
}

// appendLiteral writes a number given as JSON text. Decimals beyond what binary64 holds are
// rounded, as RFC 8785 says; integers that it cannot hold are refused.
func appendLiteral(out []byte, s string) ([]byte, error) {
	if n, ok := scanNumber(s); !ok || n != len(s) {
		return nil, fmt.Errorf("number %q: %w", s, ErrSyntax)
	}
	if !strings.ContainsAny(s, ".eE") {
		n, err := strconv.ParseInt(s, 10, 64)
		if err != nil {
			return nil, ErrNumber
		}
		return appendInteger(out, n)
	}
	f, err := strconv.ParseFloat(s, 64)
	if err != nil || math.Abs(f) == maxInteger { // may stand for 2^53+1, rounded
		return nil, ErrNumber
	}
	if f == 0 && strings.ContainsAny(mantissa(s), "123456789") { // too small to be told from zero
		return nil, ErrNumber
	}
	return appendFloat(out, f)
}

func mantissa(s string) string {
	if i := strings.IndexAny(s, "eE"); i >= 0 {
		return s[:i]
	}
	return s
}

// appendES6 writes a finite number as ECMAScript's Number::toString does (RFC 8785 3.2.2.3):
// the shortest digits that read back as f, plain between 1e-6 and 1e21, else with an exponent;
// negative zero is 0.
func appendES6(out []byte, f float64) []byte {
	if f == 0 {
		return append(out, '0')
	}
	if a := math.Abs(f); a >= 1e-6 && a < 1e21 {
		return strconv.AppendFloat(out, f, 'f', -1, 64)
	}
	out = strconv.AppendFloat(out, f, 'e', -1, 64)
	// Go pads exponents to two digits, ECMAScript does not: 1e-07 becomes 1e-7.
	if n := len(out); out[n-2] == '0' && (out[n-3] == '-' || out[n-3] == '+') {
		out = append(out[:n-2], out[n-1])
	}
	return out
}
