package page

import (
	"errors"
	"net/http"
	"net/url"
	"strings"
	"unicode/utf8"

	"github.com/a-h/templ"

	"ratehouse/store"
	"ratehouse/web/words"
)

// Label names a field of a form.
type Label struct {
	Name string
	Text words.Text
}

// Form is what somebody typed, kept as typed, with what is wrong with it. A form that is not
// acceptable goes back with status 422, filled in, its faults by their fields and listed at the top.
type Form struct {
	c      *Context
	labels []Label
	values url.Values
	wrong  map[string][]words.Text
	other  []words.Text
}

// NewForm is a form before anybody typed; Set gives it its defaults. Faults are listed in the order
// of the labels.
func NewForm(c *Context, labels ...Label) *Form {
	return &Form{c: c, labels: labels, values: url.Values{}, wrong: map[string][]words.Text{}}
}

// ReadForm reads a posted form. The error is for the handler to return: the body was too large or is
// no form.
func ReadForm(r *http.Request, labels ...Label) (*Form, error) {
	f := NewForm(Of(r), labels...)
	parse := r.ParseForm
	if strings.HasPrefix(r.Header.Get("Content-Type"), "multipart/form-data") {
		parse = func() error { return r.ParseMultipartForm(1 << 20) }
	}
	if err := parse(); err != nil {
		if _, ok := errors.AsType[*http.MaxBytesError](err); ok {
			return nil, err
		}
		return nil, &store.Error{Kind: store.KindInvalid, Code: "form_unreadable"}
	}
	f.values = r.PostForm
	for name, values := range f.values {
		for _, v := range values {
			if !Legible(v) {
				return nil, &store.Error{Kind: store.KindInvalid, Code: "text_nul", Args: map[string]string{"field": name}}
			}
		}
	}
	return f, nil
}

// Legible tells whether a text can be kept: the database takes neither a NUL nor bytes that are no
// UTF-8. No keyboard makes either, so a form with one was not made by our pages.
func Legible(s string) bool { return utf8.ValidString(s) && !strings.Contains(s, "\x00") }

// Get is a field without the blanks around it; Raw is it as typed.
func (f *Form) Get(name string) string { return strings.TrimSpace(f.values.Get(name)) }

// Raw is a field as typed.
func (f *Form) Raw(name string) string { return f.values.Get(name) }

// All is every value of a field that may come several times.
func (f *Form) All(name string) []string { return f.values[name] }

// Has tells whether a field was sent at all, as a ticked box is.
func (f *Form) Has(name string) bool { return f.values.Has(name) }

// Set fills a field.
func (f *Form) Set(name, value string) { f.values.Set(name, value) }

// Wrong notes a fault of a field, or of the whole form when name is "".
func (f *Form) Wrong(name string, why words.Text) {
	if name == "" || !f.knows(name) {
		f.other = append(f.other, why)
		return
	}
	f.wrong[name] = append(f.wrong[name], why)
}

func (f *Form) knows(name string) bool {
	for _, l := range f.labels {
		if l.Name == name {
			return true
		}
	}
	return false
}

// Take notes the faults of a refused verb by their fields and tells whether err was such a refusal
// (invalid, in conflict, or stale); any other error is for the handler to return.
func (f *Form) Take(err error) bool {
	e, ok := errors.AsType[*store.Error](err)
	if !ok || e.Kind != store.KindInvalid && e.Kind != store.KindConflict && e.Kind != store.KindStale {
		return false
	}
	for _, one := range e.All() {
		f.Wrong(one.Field, words.Refusal(one.Code, one.Args))
	}
	return true
}

// OK tells whether nothing is wrong.
func (f *Form) OK() bool { return len(f.wrong) == 0 && len(f.other) == 0 }

// Status is 200 for a form that is in order or new, 422 for one that goes back.
func (f *Form) Status() int {
	if f.OK() {
		return http.StatusOK
	}
	return http.StatusUnprocessableEntity
}

// Field is one field ready to be drawn, with its label, value and fault.
func (f *Form) Field(name string) Field {
	d := Field{Name: name, Value: f.Raw(name), Type: "text", Attrs: templ.Attributes{}}
	for _, l := range f.labels {
		if l.Name == name {
			d.Label = f.c.Say(l.Text)
		}
	}
	for _, w := range f.wrong[name] {
		d.Why = strings.TrimSpace(d.Why + " " + f.c.Say(w))
	}
	return d
}

type faultLine struct{ URL, Text string }

func (f *Form) faultLines() (lines []faultLine) {
	for _, l := range f.labels {
		for _, why := range f.wrong[l.Name] {
			lines = append(lines, faultLine{"#" + fieldID(l.Name), f.c.Say(words.FaultLine.With(l.Text, why))})
		}
	}
	for _, why := range f.other {
		lines = append(lines, faultLine{"", f.c.Say(why)})
	}
	return lines
}

// Field is one field as it is drawn.
type Field struct {
	Name, Label, Hint, Value, Why string
	Type                          string // "text" unless said otherwise
	Attrs                         templ.Attributes
}

// WithHint puts a line below the label.
func (d Field) WithHint(hint string) Field { d.Hint = hint; return d }

// As sets the type of the input: password, file.
func (d Field) As(kind string) Field { d.Type = kind; return d }

// With sets an attribute: With("autocomplete", "username"). The value true sets it without a value.
func (d Field) With(name string, value any) Field {
	attrs := templ.Attributes{name: value}
	for k, v := range d.Attrs {
		attrs[k] = v
	}
	d.Attrs = attrs
	return d
}

// Option is one choice of a select or a set of radio buttons.
type Option struct{ Value, Text string }

func fieldID(name string) string { return "f-" + name }

func (d Field) id() string { return fieldID(d.Name) }

func (d Field) class() string {
	if d.Why != "" {
		return "field wrong"
	}
	return "field"
}

// described lists what describes the field, the fault first.
func (d Field) described() string {
	var ids []string
	if d.Why != "" {
		ids = append(ids, "why-"+d.Name)
	}
	if d.Hint != "" {
		ids = append(ids, "hint-"+d.Name)
	}
	return strings.Join(ids, " ")
}

func (d Field) input() templ.Attributes {
	a := templ.Attributes{}
	for k, v := range d.Attrs {
		a[k] = v
	}
	if s := d.described(); s != "" {
		a["aria-describedby"] = s
	}
	if d.Why != "" {
		a["aria-invalid"] = "true"
	}
	return a
}
