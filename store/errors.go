package store

import (
	"errors"
	"fmt"
	"maps"
	"slices"
	"strings"
)

// Kind sorts errors by what the caller can do about them; the web maps each to one status.
type Kind int

// The kinds of error a verb can answer with. Everything else is a fault of ours.
const (
	KindFault           Kind = iota // a defect or a dead database: nothing the caller can do
	KindNotFound                    // no such thing, or none that this actor may see
	KindForbidden                   // known, but not allowed to this actor
	KindInvalid                     // what was typed is not acceptable: Field says where
	KindConflict                    // somebody else was first
	KindUnauthenticated             // who are you
	KindTooMany                     // slow down
	KindStale                       // the page is older than the data
)

// Error is an answer to the caller: a code with arguments, which web/words says in his language.
type Error struct {
	Kind  Kind
	Code  string            // closed list, snake case: "batch_code_taken"
	Field string            // the form field it belongs to, if any
	Args  map[string]string // what the sentence needs
	More  []*Error          // further faults of the same form
}

// Error gives the code and its arguments for logs; people read what web/words makes of them.
func (e *Error) Error() string {
	var b strings.Builder
	b.WriteString(e.Code)
	for _, k := range slices.Sorted(maps.Keys(e.Args)) {
		fmt.Fprintf(&b, " %s=%q", k, e.Args[k])
	}
	return b.String()
}

// All lists e and the faults found with it.
func (e *Error) All() []*Error { return append([]*Error{e}, e.More...) }

// KindOf is the kind of err, KindFault when it is not one of ours.
func KindOf(err error) Kind {
	if e, ok := errors.AsType[*Error](err); ok {
		return e.Kind
	}
	return KindFault
}

func failure(kind Kind, code string, args ...string) *Error {
	e := &Error{Kind: kind, Code: code}
	for i := 0; i+1 < len(args); i += 2 {
		if e.Args == nil {
			e.Args = map[string]string{}
		}
		e.Args[args[i]] = args[i+1]
	}
	return e
}

func invalid(field, code string, args ...string) *Error {
	e := failure(KindInvalid, code, args...)
	e.Field = field
	return e
}

// faults gathers what is wrong with a form, so that all of it is said at once.
type faults struct{ list []*Error }

func (f *faults) add(e *Error) {
	if e != nil {
		f.list = append(f.list, e)
	}
}

func (f *faults) err() error {
	if len(f.list) == 0 {
		return nil
	}
	first := *f.list[0]
	first.More = f.list[1:]
	return &first
}
