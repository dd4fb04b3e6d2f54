package api_test

import (
	"net/http"
	"net/http/httptest"
	"strings"
	"testing"

	"github.com/go-chi/chi/v5"

	"ratehouse/store"
	"ratehouse/store/storetest"
)

// needed is what each operation is for. It is written down here a second time, so that a right given
// away by mistake is seen.
var needed = map[string]store.Scope{
	"POST /api/v1/batches":                          store.ScopeBatches,
	"GET /api/v1/batches":                           store.ScopeRead,
	"GET /api/v1/batches/{code}":                    store.ScopeRead,
	"GET /api/v1/batches/{code}/sheets.csv":         store.ScopeRead,
	"GET /api/v1/batches/{code}/movements/{serial}": store.ScopeRead,
	"POST /api/v1/readings":                         store.ScopeReadings,
	"GET /api/v1/certificates/{number}":             store.ScopeRead,
	"POST /api/v1/chambers/{code}/climate":          store.ScopeClimate,
	"GET /api/v1/openapi.json":                      "",
}

// Every route that the server really serves below /api/ is walked with every token.
func TestEveryRouteForEveryScope(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	walked := 0
	err := chi.Walk(h.handler.(chi.Routes), func(method, pattern string, _ http.Handler, _ ...func(http.Handler) http.Handler) error {
		if !strings.HasPrefix(pattern, "/api/") {
			return nil
		}
		walked++
		scope, known := needed[method+" "+pattern]
		if !known {
			t.Errorf("%s %s is served, but nobody wrote down who may use it", method, pattern)
			return nil
		}
		path := strings.NewReplacer("{code}", "26-001", "{serial}", "S-1", "{number}", "C-1").Replace(pattern)
		if scope == "" {
			h.call(t, "", method, path, "").want(t, 200, "")
			return nil
		}
		h.call(t, "", method, path, "{}").want(t, 401, "token_missing")
		h.call(t, "rh_nobody", method, path, "{}").want(t, 401, "unknown_token")
		for s, token := range h.tokens {
			a := h.call(t, token, method, path, "{}")
			if s == scope {
				if a.status == 401 || a.status == 403 {
					t.Errorf("%s %s with scope %s: %d", method, pattern, s, a.status)
				}
				continue
			}
			a.want(t, 403, "scope_missing")
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	if walked != len(needed) {
		t.Errorf("%d routes served, %d known", walked, len(needed))
	}
}

func TestChallenges(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	for token, want := range map[string]string{
		"":                            `Bearer realm="ratehouse"`,
		"rh_nobody":                   `Bearer realm="ratehouse", error="invalid_token"`,
		h.tokens[store.ScopeReadings]: `Bearer realm="ratehouse", error="insufficient_scope", scope="read"`,
	} {
		a := h.call(t, token, "GET", "/api/v1/batches", "")
		if got := a.header.Get("WWW-Authenticate"); got != want {
			t.Errorf("status %d: WWW-Authenticate %q, want %q", a.status, got, want)
		}
		if got := a.header.Get("Cache-Control"); got != "no-store" {
			t.Errorf("status %d: Cache-Control %q", a.status, got)
		}
	}
	h.call(t, "", "GET", "/api/v1/batches", "", "Authorization", "Basic cmg6eA==").want(t, 401, "token_missing")
}

// Who is signed in at the pages may follow a link to a file, with the rights of the role, and may not
// change anything without a token.
func TestSessionsMayLook(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.Batch(t, "26-001", 2)
	for name, want := range map[string]int{"lead": 200, "technician": 403} {
		session, _, err := h.LogIn(t.Context(), name, storetest.Password)
		if err != nil {
			t.Fatal(err)
		}
		cookie := "session=" + session
		h.call(t, "", "GET", "/api/v1/batches/26-001/sheets.csv", "", "Cookie", cookie).want(t, want, map[int]string{403: "not_allowed"}[want])
		h.call(t, "", "GET", "/api/v1/batches/26-001", "", "Cookie", cookie).want(t, 200, "")
		h.call(t, "", "POST", "/api/v1/readings", "{}", "Cookie", cookie).want(t, 401, "token_missing")
	}
}

func TestElsewhere(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.call(t, h.all, "GET", "/api/v1/nowhere", "").want(t, 404, "no_such_address")
	h.call(t, "", "GET", "/api/", "").want(t, 404, "no_such_address")
	a := h.call(t, h.all, "DELETE", "/api/v1/batches", "").want(t, 405, "method_not_allowed")
	if got := a.header.Get("Allow"); got != "POST, GET" && got != "GET, POST" {
		t.Errorf("Allow: %q", got)
	}
	h.call(t, h.all, "PUT", "/api/v1/batches/26-001/movements/S%2F1", "{}").want(t, 405, "method_not_allowed")
	r := httptest.NewRequest("POST", "/api/v1/readings", strings.NewReader("{}"))
	r.Header.Set("Sec-Fetch-Site", "cross-site")
	w := httptest.NewRecorder()
	h.handler.ServeHTTP(w, r)
	answer{w.Code, w.Header(), w.Body.Bytes()}.want(t, 401, "token_missing")
}

// What the laboratory cannot answer for is a problem that tells nothing of the inside.
func TestFaultIsAProblem(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.Lab.Close()
	a := h.call(t, h.all, "GET", "/api/v1/batches", "").want(t, 500, "fault")
	if strings.Contains(a.text(), "pool") || strings.Contains(a.text(), "sql") {
		t.Errorf("the inside shows: %s", a.text())
	}
}
