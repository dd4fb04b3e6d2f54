package proof

import (
	"encoding/json"
	"fmt"
	"strconv"
	"strings"
	"unicode/utf16"
	"unicode/utf8"
)

// parseJSON reads one JSON text (RFC 8259) into nil, bool, string, json.Number, []any and
// map[string]any. encoding/json is no help here: it silently turns broken UTF-8 and lone
// surrogates into U+FFFD and lets the last of two equal keys win, so that two different texts
// would have one hash.
func parseJSON(raw []byte) (any, error) {
	if !utf8.Valid(raw) {
		return nil, ErrText
	}
	p := &parser{text: string(raw)}
	v, err := p.value(0)
	if err == nil {
		if p.blanks(); p.at < len(p.text) {
			err = ErrSyntax
		}
	}
	if err != nil {
		return nil, fmt.Errorf("byte %d: %w", p.at, err)
	}
	return v, nil
}

type parser struct {
	text string
	at   int
}

func (p *parser) blanks() {
	for p.at < len(p.text) && strings.IndexByte(" \t\n\r", p.text[p.at]) >= 0 {
		p.at++
	}
}

// take skips blanks and the byte c, if it comes next.
func (p *parser) take(c byte) bool {
	p.blanks()
	if p.at < len(p.text) && p.text[p.at] == c {
		p.at++
		return true
	}
	return false
}

func (p *parser) value(depth int) (any, error) {
	if depth > maxDepth {
		return nil, ErrDepth
	}
	p.blanks()
	if p.at == len(p.text) {
		return nil, ErrSyntax
	}
	switch c := p.text[p.at]; {
	case c == '{':
		return p.object(depth)
	case c == '[':
		return p.list(depth)
	case c == '"':
		return p.str()
	case c == '-' || c >= '0' && c <= '9':
		n, ok := scanNumber(p.text[p.at:])
		if !ok {
			return nil, ErrSyntax
		}
		p.at += n
		return json.Number(p.text[p.at-n : p.at]), nil
	}
	return p.word()
}

func (p *parser) word() (any, error) {
	for _, w := range []struct {
		text  string
		value any
	}{{"null", nil}, {"true", true}, {"false", false}} {
		if strings.HasPrefix(p.text[p.at:], w.text) {
			p.at += len(w.text)
			return w.value, nil
		}
	}
	return nil, ErrSyntax
}

func (p *parser) list(depth int) (any, error) {
	items := []any{}
	p.take('[')
	if p.take(']') {
		return items, nil
	}
	for {
		v, err := p.value(depth + 1)
		if err != nil {
			return nil, err
		}
		items = append(items, v)
		switch {
		case p.take(']'):
			return items, nil
		case !p.take(','):
			return nil, ErrSyntax
		}
	}
}

func (p *parser) object(depth int) (any, error) {
	members := map[string]any{}
	p.take('{')
	if p.take('}') {
		return members, nil
	}
	for {
		if err := p.member(members, depth); err != nil {
			return nil, err
		}
		switch {
		case p.take('}'):
			return members, nil
		case !p.take(','):
			return nil, ErrSyntax
		}
	}
}

func (p *parser) member(members map[string]any, depth int) error {
	p.blanks()
	key, err := p.str()
	if err != nil {
		return err
	}
	if _, twice := members[key]; twice {
		return fmt.Errorf("%q: %w", key, ErrDuplicateKey)
	}
	if !p.take(':') {
		return ErrSyntax
	}
	members[key], err = p.value(depth + 1)
	return err
}

func (p *parser) str() (string, error) {
	if p.at == len(p.text) || p.text[p.at] != '"' {
		return "", ErrSyntax
	}
	p.at++
	var b strings.Builder
	for p.at < len(p.text) {
		c := p.text[p.at]
		p.at++
		switch {
		case c == '"':
			return b.String(), nil
		case c == '\\':
			if err := p.escape(&b); err != nil {
				return "", err
			}
		case c < 0x20:
			return "", ErrSyntax
		default:
			b.WriteByte(c)
		}
	}
	return "", ErrSyntax
}

func (p *parser) escape(b *strings.Builder) error {
	if p.at == len(p.text) {
		return ErrSyntax
	}
	c := p.text[p.at]
	p.at++
	if c == 'u' {
		return p.unicode(b)
	}
	i := strings.IndexByte(`"\/bfnrt`, c)
	if i < 0 {
		return ErrSyntax
	}
	b.WriteByte("\"\\/\b\f\n\r\t"[i])
	return nil
}

// unicode reads the four digits of one escape, and the second half of a surrogate pair.
func (p *parser) unicode(b *strings.Builder) error {
	r, err := p.unit()
	if err != nil {
		return err
	}
	if utf16.IsSurrogate(r) {
		if !strings.HasPrefix(p.text[p.at:], `\u`) {
			return ErrText
		}
		p.at += 2
		low, err := p.unit()
		if err != nil {
			return err
		}
		if r = utf16.DecodeRune(r, low); r == utf8.RuneError {
			return ErrText
		}
	}
	b.WriteRune(r)
	return nil
}

func (p *parser) unit() (rune, error) {
	if len(p.text)-p.at < 4 {
		return 0, ErrSyntax
	}
	digits := p.text[p.at : p.at+4]
	n, err := strconv.ParseUint(digits, 16, 16)
	if err != nil || strings.ContainsAny(digits, "+-_") {
		return 0, ErrSyntax
	}
	p.at += 4
	return rune(n), nil
}

// scanNumber gives the length of the JSON number at the head of s.
func scanNumber(s string) (int, bool) {
	i := 0
	digits := func() bool {
		from := i
		for i < len(s) && s[i] >= '0' && s[i] <= '9' {
			i++
		}
		return i > from
	}
	if i < len(s) && s[i] == '-' {
		i++
	}
	if i < len(s) && s[i] == '0' {
		i++
	} else if !digits() {
		return 0, false
	}
	if i < len(s) && s[i] == '.' {
		if i++; !digits() {
			return 0, false
		}
	}
	if i < len(s) && (s[i] == 'e' || s[i] == 'E') {
		if i++; i < len(s) && (s[i] == '+' || s[i] == '-') {
			i++
		}
		if !digits() {
			return 0, false
		}
	}
	return i, true
}

// ParseJSON reads one JSON text strictly into nil, bool, string, json.Number, []any and
// map[string]any: ErrText, ErrSyntax, ErrDuplicateKey and ErrDepth say what encoding/json would let
// pass. Errors name the byte where reading ended.
func ParseJSON(raw []byte) (any, error) { return parseJSON(raw) }
