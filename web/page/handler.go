package page

import (
	"bytes"
	"errors"
	"net/http"

	"github.com/a-h/templ"

	"ratehouse/store"
	"ratehouse/web/words"
)

// Handler answers a request or says what kept it from doing so. It writes nothing before it is sure
// of success: Render and Redirect see to that.
type Handler func(w http.ResponseWriter, r *http.Request) error

// Adapt makes a Handler an http.Handler: an error becomes its page, and report hears of it with the
// status that was sent.
func Adapt(h Handler, report func(r *http.Request, status int, err error)) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		if err := h(w, r); err != nil {
			status := ShowError(w, r, err)
			report(r, status, err)
		}
	})
}

// Render writes a page: first into memory, so that a template that fails half way shows a fault page
// and not half of itself.
func Render(w http.ResponseWriter, r *http.Request, status int, body templ.Component) error {
	var buf bytes.Buffer
	if err := body.Render(r.Context(), &buf); err != nil {
		return err
	}
	h := w.Header()
	h.Set("Content-Type", "text/html; charset=utf-8")
	if h.Get("Cache-Control") == "" {
		h.Set("Cache-Control", "no-store")
	}
	w.WriteHeader(status)
	_, err := w.Write(buf.Bytes())
	return ignoreGone(err)
}

// ignoreGone: who has closed the page cannot be told that it did not arrive.
func ignoreGone(error) error { return nil }

// Redirect sends the browser on after something was done; it asks for the new page with GET.
func Redirect(w http.ResponseWriter, r *http.Request, to string) error {
	http.Redirect(w, r, to, http.StatusSeeOther)
	return nil
}

// NotFound is the error of a page that is not there.
func NotFound() error { return &store.Error{Kind: store.KindNotFound, Code: "not_found"} }

// Forbidden is the error of a page that this account may not see.
func Forbidden() error { return &store.Error{Kind: store.KindForbidden, Code: "forbidden"} }

// kinds is the one table from what the laboratory answers to what the web says.
var kinds = map[store.Kind]problem{
	store.KindNotFound:        {http.StatusNotFound, words.NotFoundTitle, words.NotFoundSub, words.NotFoundHelp},
	store.KindForbidden:       {http.StatusForbidden, words.ForbiddenTitle, nil, words.ForbiddenHelp},
	store.KindInvalid:         {http.StatusUnprocessableEntity, words.InvalidTitle, words.InvalidSub, words.InvalidHelp},
	store.KindConflict:        {http.StatusConflict, words.ConflictTitle, words.ConflictSub, words.ConflictHelp},
	store.KindStale:           {http.StatusConflict, words.ConflictTitle, words.ConflictSub, words.ConflictHelp},
	store.KindUnauthenticated: {http.StatusUnauthorized, words.SignedOutTitle, words.SignedOutSub, words.SignedOutHelp},
	store.KindTooMany:         {http.StatusTooManyRequests, words.BusyTitle, nil, words.BusyHelp},
	store.KindFault:           {http.StatusInternalServerError, words.FaultTitle, words.FaultSub, words.FaultHelp},
}

type problem struct {
	status           int
	title, sub, help words.Text
}

// StatusOf is the HTTP status of an error. What is not one of the laboratory's errors is a fault of
// ours, except a body that is too large.
func StatusOf(err error) int {
	if _, ok := errors.AsType[*http.MaxBytesError](err); ok {
		return http.StatusRequestEntityTooLarge
	}
	return kinds[store.KindOf(err)].status
}

// ShowError writes the page of an error and gives its status. The text of an unknown error never
// reaches the page: its number does, and stands in the log beside the text.
func ShowError(w http.ResponseWriter, r *http.Request, err error) int {
	c := Of(r)
	p := kinds[store.KindOf(err)]
	if tooLarge, ok := errors.AsType[*http.MaxBytesError](err); ok {
		p = problem{http.StatusRequestEntityTooLarge, words.TooLargeTitle, nil,
			words.TooLargeHelp.With(words.Raw(c.Unit(c.Count(int(tooLarge.Limit/1024)), "KiB")))}
	}
	view := errorView{problem: p}
	if store.KindOf(err) == store.KindForbidden {
		view.sub = words.ForbiddenSub.With(c.Actor.Title)
	}
	if e, ok := errors.AsType[*store.Error](err); ok {
		for _, one := range e.All() {
			view.reasons = append(view.reasons, c.Fault(one.Code, one.Args))
		}
	}
	if p.status == http.StatusNotFound && !c.SignedIn {
		view.help = words.NotFoundOut
	}
	show(w, r, view)
	return p.status
}

func show(w http.ResponseWriter, r *http.Request, view errorView) {
	if err := Render(w, r, view.status, errorPage(Of(r), view)); err != nil {
		http.Error(w, http.StatusText(http.StatusInternalServerError), http.StatusInternalServerError)
	}
}

// ShowMethod writes the page for an address that exists but not for this method.
func ShowMethod(w http.ResponseWriter, r *http.Request) {
	show(w, r, errorView{problem: problem{http.StatusMethodNotAllowed, words.MethodTitle, nil, words.NotFoundHelp}})
}

// ShowForeign writes the page for a request that another site sent with this browser.
func ShowForeign(w http.ResponseWriter, r *http.Request) {
	show(w, r, errorView{problem: problem{http.StatusForbidden, words.InvalidTitle, nil, words.CrossOrigin}})
}

type errorView struct {
	problem
	reasons []string
}

// quote tells whether the page shows the number of the request: only where somebody must look into
// the log.
func (v errorView) quote() bool { return v.status >= 500 }

// explains tells whether the reasons add to the title; for what is not there or not allowed they
// would only repeat it.
func (v errorView) explains() bool {
	return len(v.reasons) > 0 && (v.status == http.StatusUnprocessableEntity || v.status == http.StatusConflict)
}
