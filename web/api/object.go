package api

import (
	"encoding/json"
	"errors"
	"fmt"
	"maps"
	"net/http"
	"slices"
	"strconv"
	"strings"
	"time"

	"ratehouse/store/proof"
)

// parse reads a body strictly: what other readers would let pass or change in silence is refused.
func parse(body []byte) (any, *Problem) {
	v, err := proof.ParseJSON(body)
	switch {
	case err == nil:
		return v, nil
	case errors.Is(err, proof.ErrText):
		return nil, problem(http.StatusBadRequest, "json_text", "where", err.Error())
	case errors.Is(err, proof.ErrDuplicateKey):
		return nil, problem(http.StatusBadRequest, "json_twice", "where", err.Error())
	case errors.Is(err, proof.ErrDepth):
		return nil, problem(http.StatusBadRequest, "json_deep", "where", err.Error())
	}
	return nil, problem(http.StatusBadRequest, "json_form", "where", err.Error())
}

// object reads the members of a JSON object by name and gathers what is wrong with them. A member
// that is null counts as absent.
type object struct {
	members map[string]any
	asked   map[string]bool
	faults  []Fault
	at      string // "body", "body.readings[3]"
}

func objectOf(v any, at string) (*object, *Problem) {
	members, ok := v.(map[string]any)
	if !ok {
		return nil, problem(http.StatusUnprocessableEntity, "not_object", "where", at)
	}
	return &object{members: members, asked: map[string]bool{}, at: at}, nil
}

func (o *object) wrong(name, code string, args ...string) {
	p := problem(0, code, append([]string{"field", name}, args...)...)
	o.faults = append(o.faults, Fault{Code: Code(code), Location: o.at + "." + name, Args: p.Args})
}

func (o *object) get(name string) (any, bool) {
	o.asked[name] = true
	v, ok := o.members[name]
	return v, ok && v != nil
}

// text is a string without a NUL, which the database cannot keep; "" if it is absent.
func (o *object) text(name string) string {
	v, ok := o.get(name)
	if !ok {
		return ""
	}
	s, ok := v.(string)
	switch {
	case !ok:
		o.wrong(name, "field_type", "want", "string")
		return ""
	case strings.ContainsRune(s, 0):
		o.wrong(name, "text_nul")
		return ""
	}
	return s
}

// needed is a text that must be there.
func (o *object) needed(name string) string {
	faults := len(o.faults)
	s := o.text(name)
	if s == "" && len(o.faults) == faults {
		o.wrong(name, "field_missing")
	}
	return s
}

// integer is a whole number; absent if it is not there.
func (o *object) integer(name string, absent int) int {
	v, ok := o.get(name)
	if !ok {
		return absent
	}
	n, isNumber := v.(json.Number)
	i, err := strconv.Atoi(n.String())
	if !isNumber || err != nil {
		o.wrong(name, "field_type", "want", "integer")
		return absent
	}
	return i
}

// instant is a time after RFC 3339; zero if it is absent.
func (o *object) instant(name string) time.Time {
	s := o.text(name)
	if s == "" {
		return time.Time{}
	}
	var t time.Time
	if err := t.UnmarshalText([]byte(s)); err != nil {
		o.wrong(name, "time_form", "value", printable(s))
		return time.Time{}
	}
	return t
}

// texts is a list of strings.
func (o *object) texts(name string) []string {
	list := o.list(name)
	out := make([]string, len(list))
	for i, v := range list {
		s, ok := v.(string)
		switch {
		case !ok:
			o.wrong(fmt.Sprintf("%s[%d]", name, i), "field_type", "want", "string")
		case strings.ContainsRune(s, 0):
			o.wrong(fmt.Sprintf("%s[%d]", name, i), "text_nul")
		}
		out[i] = s
	}
	return out
}

func (o *object) list(name string) []any {
	v, ok := o.get(name)
	if !ok {
		return nil
	}
	list, ok := v.([]any)
	if !ok {
		o.wrong(name, "field_type", "want", "list")
	}
	return list
}

// finish adds the members nobody asked for and gives all faults in order of their place.
func (o *object) finish() []Fault {
	for _, name := range slices.Sorted(maps.Keys(o.members)) {
		if !o.asked[name] {
			o.faults = append(o.faults, Fault{Code: "unknown_field", Location: o.at + "." + name, Args: map[string]string{"field": name}})
		}
	}
	return o.faults
}

// refused makes a problem of the faults of a body, nil if there are none.
func refused(faults []Fault) *Problem {
	if len(faults) == 0 {
		return nil
	}
	p := problem(http.StatusUnprocessableEntity, string(faults[0].Code))
	p.Args, p.Errors = faults[0].Args, faults
	return p
}
