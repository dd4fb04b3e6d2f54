package api_test

import (
	"bytes"
	"encoding/json"
	"io"
	"net/http"
	"net/http/httptest"
	"regexp"
	"strings"
	"sync"
	"testing"

	"github.com/getkin/kin-openapi/openapi3"
	"github.com/getkin/kin-openapi/openapi3filter"
	"github.com/getkin/kin-openapi/routers"
	"github.com/getkin/kin-openapi/routers/legacy"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/web"
	"ratehouse/web/api"
)

// house is a laboratory behind its real server, with a token of each scope.
type house struct {
	*storetest.House
	handler http.Handler
	tokens  map[store.Scope]string
	all     string // a token with all scopes
}

func newHouse(t testing.TB) *house {
	t.Helper()
	h := &house{House: storetest.New(t), tokens: map[store.Scope]string{}}
	handler, err := web.New(web.Config{Lab: h.Lab, BodyLimit: 4 << 20}) // the API's own limit is 1 MiB
	if err != nil {
		t.Fatal(err)
	}
	h.handler = handler
	for _, s := range store.Scopes {
		h.tokens[s] = h.token(t, store.NewToken{Title: string(s), Account: "technician", Scopes: []store.Scope{s}})
	}
	h.all = h.token(t, store.NewToken{Title: "all", Account: "technician", Scopes: store.Scopes})
	return h
}

func (h *house) token(t testing.TB, n store.NewToken) string {
	t.Helper()
	secret, _, err := h.AddToken(t.Context(), h.Manager, n)
	if err != nil {
		t.Fatal(err)
	}
	return secret
}

// answer is what came back.
type answer struct {
	status int
	header http.Header
	body   []byte
}

func (a answer) into(t testing.TB, v any) {
	t.Helper()
	if err := json.Unmarshal(a.body, v); err != nil {
		t.Fatalf("status %d: %v in %.300s", a.status, err, a.body)
	}
}

// text is the answer with nothing done to it, for messages.
func (a answer) text() string { return string(a.body[:min(len(a.body), 1500)]) }

// problem is the answer as a problem.
func (a answer) problem(t testing.TB) (p api.Problem) {
	t.Helper()
	if got := a.header.Get("Content-Type"); got != "application/problem+json" {
		t.Fatalf("status %d with Content-Type %q: %s", a.status, got, a.text())
	}
	a.into(t, &p)
	return p
}

// want checks the status and, for a problem, the code and that its sentence helps.
func (a answer) want(t testing.TB, status int, code string) answer {
	t.Helper()
	if a.status != status {
		t.Errorf("status %d, want %d %s: %s", a.status, status, code, a.text())
		return a
	}
	if code == "" {
		return a
	}
	p := a.problem(t)
	if string(p.Code) != code || p.Status != status || p.Title == "" || p.Type == "" || p.Request == "" {
		t.Errorf("problem %+v, want the code %s", p, code)
	}
	if p.Detail == "" || blank.MatchString(p.Detail) || strings.Contains(p.Detail, "("+code+")") {
		t.Errorf("code %s: the sentence %q does not help", code, p.Detail)
	}
	return a
}

// blank is a place in a sentence that nothing was put into.
var blank = regexp.MustCompile(`\{[a-z_]+\}`)

// call sends a request and checks whatever comes back against the served document.
func (h *house) call(t testing.TB, token, method, path, body string, headers ...string) answer {
	t.Helper()
	return h.send(t, token, method, path, strings.NewReader(body), headers...)
}

func (h *house) send(t testing.TB, token, method, path string, body io.Reader, headers ...string) answer {
	t.Helper()
	r := httptest.NewRequest(method, path, body)
	if token != "" {
		r.Header.Set("Authorization", "Bearer "+token)
	}
	if method == http.MethodPost {
		r.Header.Set("Content-Type", "application/json")
	}
	for i := 0; i+1 < len(headers); i += 2 {
		r.Header.Set(headers[i], headers[i+1])
		if headers[i+1] == "" {
			r.Header.Del(headers[i])
		}
	}
	w := httptest.NewRecorder()
	h.handler.ServeHTTP(w, r)
	a := answer{w.Code, w.Header(), w.Body.Bytes()}
	h.check(t, r, a)
	return a
}

// described is the served document, read once by another implementation.
func (h *house) described(t testing.TB) (*openapi3.T, routers.Router) {
	t.Helper()
	once.Do(func() {
		r := httptest.NewRequest("GET", api.DocumentPath, nil)
		w := httptest.NewRecorder()
		h.handler.ServeHTTP(w, r)
		if document, documentErr = openapi3.NewLoader().LoadFromData(w.Body.Bytes()); documentErr != nil {
			return
		}
		if documentErr = document.Validate(t.Context()); documentErr != nil {
			return
		}
		router, documentErr = legacy.NewRouter(document)
	})
	if documentErr != nil {
		t.Fatalf("the served document: %v", documentErr)
	}
	return document, router
}

var (
	once        sync.Once
	document    *openapi3.T
	router      routers.Router
	documentErr error
)

// check holds a real answer against the document: its status must be described there and its body must
// fit. Addresses and methods that the document does not know are outside it.
func (h *house) check(t testing.TB, r *http.Request, a answer) {
	t.Helper()
	_, router := h.described(t)
	route, params, err := router.FindRoute(r)
	if err != nil {
		return
	}
	in := &openapi3filter.ResponseValidationInput{
		RequestValidationInput: &openapi3filter.RequestValidationInput{Request: r, PathParams: params, Route: route},
		Status:                 a.status, Header: a.header, Body: io.NopCloser(bytes.NewReader(a.body)),
		Options: &openapi3filter.Options{IncludeResponseStatus: true, MultiError: true},
	}
	if err := openapi3filter.ValidateResponse(t.Context(), in); err != nil {
		t.Errorf("%s %s answered %d in a way the document does not describe: %v\n%s", r.Method, r.URL, a.status, err, a.text())
	}
}
