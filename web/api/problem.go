package api

import (
	"context"
	"encoding/json"
	"errors"
	"net/http"
	"strconv"

	"github.com/danielgtaylor/huma/v2"

	"ratehouse/store"
	"ratehouse/web/page"
)

// Problem is every answer that is not a success (RFC 9457).
type Problem struct {
	Type    string            `json:"type" doc:"always about:blank: the code tells what it is" example:"about:blank"`
	Title   string            `json:"title" doc:"the status in words" example:"Unprocessable Entity"`
	Status  int               `json:"status" example:"422"`
	Detail  string            `json:"detail" doc:"what is wrong and what would be right, in the language asked for"`
	Code    Code              `json:"code"`
	Args    map[string]string `json:"args,omitempty" doc:"what the sentence is about"`
	Request string            `json:"request" doc:"number of the request in the server's log"`
	Errors  []Fault           `json:"errors,omitempty" doc:"every fault found, if there can be several"`
}

// Fault is one thing that is wrong with a request.
type Fault struct {
	Code     Code              `json:"code"`
	Location string            `json:"location" doc:"where, such as body.serials, query.limit" example:"body.depositor"`
	Detail   string            `json:"detail"`
	Args     map[string]string `json:"args,omitempty"`
}

// Error is for logs.
func (p *Problem) Error() string { return string(p.Code) }

// GetStatus tells huma the status.
func (p *Problem) GetStatus() int { return p.Status }

// ContentType tells huma the media type.
func (p *Problem) ContentType(string) string { return "application/problem+json" }

// Code says what is wrong; the list is closed.
type Code string

// Schema is the closed list.
func (Code) Schema(r huma.Registry) *huma.Schema {
	return closed(r, "ProblemCode", "What is wrong. The list is closed: new codes come with a new version of the document.", Codes())
}

// formCodes are what can be wrong with a request before the laboratory sees it.
var formCodes = []string{
	"fault", "parameter", "no_such_address", "method_not_allowed", "media_type", "body_too_large", "body_cut_off", "body_empty",
	"json_form", "json_text", "json_twice", "json_deep", "not_object", "unknown_field", "field_missing", "field_type", "time_form",
	"text_nul", "field_list", "too_many_items", "token_missing", "scope_missing", "key_form", "not_built",
}

// labCodes are what the laboratory answers to the calls that this API makes.
var labCodes = []string{
	"not_allowed", "unknown_token", "request_under_way", "key_reused",
	"cursor_unknown", "no_batch", "no_movement", "no_certificate",
	"needed", "code_form", "batch_code_taken", "unknown_programme", "unknown_entry", "unknown_holder_type", "category_needed",
	"unknown_category", "category_contradicts_calibre", "too_many_pieces", "serial_empty", "serial_long", "serial_formula",
	"serial_unprintable", "serial_repeated", "place_repeated", "place_out_of_range", "already_certified", "place_taken",
	"movement_placed_twice", "depositor_code_taken", "calibre_code_taken", "holder_code_taken",
	"reading_changed_meanwhile",
}

// Codes is the closed list of problem codes.
func Codes() []string { return sorted(formCodes, labCodes) }

// problem makes one with named arguments.
func problem(status int, code string, args ...string) *Problem {
	p := &Problem{Type: "about:blank", Title: http.StatusText(status), Status: status, Code: Code(code)}
	for i := 0; i+1 < len(args); i += 2 {
		if p.Args == nil {
			p.Args = map[string]string{}
		}
		p.Args[args[i]] = args[i+1]
	}
	return p
}

// say fills in the sentences in the language of the request.
func (p *Problem) say(ctx context.Context) *Problem {
	c := page.From(ctx)
	p.Request = c.ID
	p.Detail = c.Fault(string(p.Code), p.Args)
	for i := range p.Errors {
		p.Errors[i].Detail = c.Fault(string(p.Errors[i].Code), p.Errors[i].Args)
	}
	return p
}

// show writes a problem where huma does not.
func (a *API) show(w http.ResponseWriter, r *http.Request, p *Problem) {
	h := w.Header()
	h.Set("Content-Type", p.ContentType(""))
	h.Set("Cache-Control", "no-store")
	if p.Status == http.StatusUnauthorized {
		challenge := `Bearer realm="ratehouse"`
		if p.Code == "unknown_token" {
			challenge += `, error="invalid_token"`
		}
		h.Set("WWW-Authenticate", challenge)
	}
	w.WriteHeader(p.Status)
	if err := json.NewEncoder(w).Encode(p.say(r.Context())); err != nil {
		return // who asked has gone
	}
}

// kinds is the one table from what the laboratory answers to what the API says.
var kinds = map[store.Kind]int{
	store.KindNotFound:        http.StatusNotFound,
	store.KindForbidden:       http.StatusForbidden,
	store.KindInvalid:         http.StatusUnprocessableEntity,
	store.KindConflict:        http.StatusConflict,
	store.KindStale:           http.StatusConflict,
	store.KindUnauthenticated: http.StatusUnauthorized,
	store.KindTooMany:         http.StatusTooManyRequests,
}

// problemOf turns any error into a problem. What is no answer of the laboratory is a fault of ours: it
// is logged, and its text stays here.
func (a *API) problemOf(ctx context.Context, err error) *Problem {
	if p, ok := errors.AsType[*Problem](err); ok {
		return p.say(ctx)
	}
	e, ok := errors.AsType[*store.Error](err)
	status := kinds[store.KindOf(err)]
	if !ok || status == 0 {
		if !errors.Is(err, ctx.Err()) || ctx.Err() == nil {
			a.log.ErrorContext(ctx, "fault", "request", page.From(ctx).ID, "error", err.Error())
		}
		return problem(http.StatusInternalServerError, "fault").say(ctx)
	}
	p := problem(status, e.Code)
	p.Args = e.Args
	if status == http.StatusUnprocessableEntity {
		for _, one := range e.All() {
			p.Errors = append(p.Errors, Fault{Code: Code(one.Code), Location: location(one.Field), Args: one.Args})
		}
	}
	return p.say(ctx)
}

// location says where in the request a field of the laboratory's stands.
func location(field string) string {
	switch field {
	case "":
		return "body"
	case "cursor":
		return "query.cursor"
	}
	return "body." + field
}

// Huma makes its own errors, for parameters that do not fit their schema, by these two functions; they
// are its one place to have them made otherwise.
func init() {
	huma.NewError = func(status int, _ string, errs ...error) huma.StatusError {
		return fromHuma(status, errs)
	}
	huma.NewErrorWithContext = func(ctx huma.Context, status int, _ string, errs ...error) huma.StatusError {
		return fromHuma(status, errs).say(ctx.Context())
	}
}

func fromHuma(status int, errs []error) *Problem {
	code := "parameter"
	if status >= http.StatusInternalServerError {
		code = "fault"
	}
	p := problem(status, code)
	for _, err := range errs {
		d, ok := err.(huma.ErrorDetailer)
		if !ok || code == "fault" {
			continue
		}
		detail := d.ErrorDetail()
		args := map[string]string{"name": detail.Location, "reason": detail.Message}
		if p.Args == nil {
			p.Args = args
		}
		p.Errors = append(p.Errors, Fault{Code: "parameter", Location: detail.Location, Args: args})
	}
	return p
}

// printable quotes what was sent, shortened, with its invisible characters made visible.
func printable(s string) string {
	const most = 100
	if len(s) > most {
		s = s[:most] + "…"
	}
	return strconv.QuoteToGraphic(s)
}

// answering makes a handler of huma of one of ours, whose errors become problems.
func answering[I, O any](a *API, h func(context.Context, *I) (*O, error)) func(context.Context, *I) (*O, error) {
	return func(ctx context.Context, in *I) (*O, error) {
		out, err := h(ctx, in)
		if err != nil {
			return nil, a.problemOf(ctx, err)
		}
		return out, nil
	}
}
