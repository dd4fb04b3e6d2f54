package words

import (
	"fmt"
	"path/filepath"
	"runtime"
	"slices"
	"strings"
)

// Lang is a language the pages speak.
type Lang string

// The languages. Each message has all of them.
const (
	EN Lang = "en"
	FR Lang = "fr"
	DE Lang = "de"
)

// Langs lists the languages in the order in which a page offers them.
var Langs = []Lang{EN, FR, DE}

// Own is the language's name in itself.
func (l Lang) Own() string {
	switch l {
	case FR:
		return "Français"
	case DE:
		return "Deutsch"
	}
	return "English"
}

// Text is something a Printer can say: a message without arguments, a message with its arguments,
// or Raw.
type Text interface{ text(p *Printer) string }

// Raw is text that is data and not ours to translate: a code, a name, a title somebody typed.
type Raw string

func (r Raw) text(*Printer) string { return string(r) }

// entry is one message in all languages, with the place it was written for the tests' sake.
type entry struct {
	at     string
	forms  map[Lang][]string // one form, or singular and plural
	args   int
	doubts []Lang
}

// catalogue is every message of the program, in the order of its source.
var catalogue []*entry

func register(args int, forms map[Lang][]string) *entry {
	_, file, line, _ := runtime.Caller(2)
	for i, f := range forms[FR] {
		forms[FR][i] = french.Replace(f)
	}
	e := &entry{at: fmt.Sprintf("%s:%d", filepath.Base(file), line), forms: forms, args: args}
	catalogue = append(catalogue, e)
	return e
}

// french puts the blanks that French sets before its double signs where no line can break.
var french = strings.NewReplacer(" :", "\u00a0:", " ;", "\u00a0;", " ?", "\u00a0?", " !", "\u00a0!", " »", "\u00a0»", "« ", "«\u00a0", " %", "\u00a0%")

// M0 to M4 are messages with so many arguments: the compiler counts them. The arguments of With stand
// in the order in which the English text names them; the other languages may turn the order round.
// An argument is a string, an int (said with its thousands apart) or a Text.
type (
	M0 struct{ e *entry }
	M1 struct{ e *entry }
	M2 struct{ e *entry }
	M3 struct{ e *entry }
	M4 struct{ e *entry }
	// Plural is a message that hangs on a whole number, its first argument, named {n}.
	Plural struct{ e *entry }
)

func one(en, fr, de string) map[Lang][]string {
	return map[Lang][]string{EN: {en}, FR: {fr}, DE: {de}}
}

func say(en, fr, de string) M0  { return M0{register(0, one(en, fr, de))} }
func say1(en, fr, de string) M1 { return M1{register(1, one(en, fr, de))} }
func say2(en, fr, de string) M2 { return M2{register(2, one(en, fr, de))} }
func say3(en, fr, de string) M3 { return M3{register(3, one(en, fr, de))} }
func say4(en, fr, de string) M4 { return M4{register(4, one(en, fr, de))} }

// plural takes singular and plural of each language. English and German use the singular for 1 only,
// French for 0 and 1.
func plural(en, ens, fr, frs, de, des string) Plural {
	return Plural{register(-1, map[Lang][]string{EN: {en, ens}, FR: {fr, frs}, DE: {de, des}})}
}

// unsure marks the languages in which a practitioner of the trade should confirm the term, as (?)
// does in the glossary.
func (m M0) unsure(l ...Lang) M0         { m.e.doubts = l; return m }
func (m M1) unsure(l ...Lang) M1         { m.e.doubts = l; return m }
func (m M2) unsure(l ...Lang) M2         { m.e.doubts = l; return m }
func (m M3) unsure(l ...Lang) M3         { m.e.doubts = l; return m }
func (m M4) unsure(l ...Lang) M4         { m.e.doubts = l; return m }
func (m Plural) unsure(l ...Lang) Plural { m.e.doubts = l; return m }

func (m M0) text(p *Printer) string { return m.e.forms[p.lang][0] }

// said is a message with its arguments.
type said struct {
	e    *entry
	args []any
}

// With gives the message its arguments.
func (m M1) With(a any) Text { return said{m.e, []any{a}} }

// With gives the message its arguments.
func (m M2) With(a, b any) Text { return said{m.e, []any{a, b}} }

// With gives the message its arguments.
func (m M3) With(a, b, c any) Text { return said{m.e, []any{a, b, c}} }

// With gives the message its arguments.
func (m M4) With(a, b, c, d any) Text { return said{m.e, []any{a, b, c, d}} }

// With gives the message its number and what else it names.
func (m Plural) With(n int, more ...any) Text { return said{m.e, append([]any{n}, more...)} }

func (s said) text(p *Printer) string {
	forms := s.e.forms[p.lang]
	form := forms[0]
	if len(forms) == 2 && !p.singular(s.args[0].(int)) {
		form = forms[1]
	}
	names := placeholders(s.e.forms[EN][len(s.e.forms[EN])-1])
	if len(names) != len(s.args) {
		panic(fmt.Sprintf("words: %s takes %d arguments, got %d", s.e.at, len(names), len(s.args)))
	}
	pairs := make([]string, 0, 2*len(names))
	for i, n := range names {
		pairs = append(pairs, "{"+n+"}", p.arg(s.args[i]))
	}
	return strings.NewReplacer(pairs...).Replace(form)
}

func (p *Printer) arg(a any) string {
	switch a := a.(type) {
	case string:
		return a
	case int:
		return p.Count(a)
	case Text:
		return a.text(p)
	}
	panic(fmt.Sprintf("words: an argument is a string, an int or a Text, not %T: numbers come as exact decimals", a))
}

// placeholders lists the names in braces in the order of their first appearance.
func placeholders(form string) []string {
	var names []string
	for {
		i := strings.IndexByte(form, '{')
		if i < 0 {
			return names
		}
		n := strings.IndexByte(form[i:], '}')
		if n < 0 {
			return names
		}
		if name := form[i+1 : i+n]; !slices.Contains(names, name) {
			names = append(names, name)
		}
		form = form[i+n:]
	}
}
