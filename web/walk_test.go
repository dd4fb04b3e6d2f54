package web

import (
	"net/http"
	"net/http/httptest"
	"strings"
	"testing"

	"github.com/go-chi/chi/v5"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/web/page"
	"ratehouse/web/static"
)

// statusReached is what the stand-in of every handler answers: no real one does.
const statusReached = 299

// reached builds the real server with its real table and middleware, its handlers replaced by one that
// only says it was reached, so that what the walk sees is the rights alone.
func reached(t *testing.T, lab *store.Lab) (*server, chi.Router) {
	t.Helper()
	s, err := newServer(Config{Lab: lab})
	if err != nil {
		t.Fatal(err)
	}
	// One more page and form for every right, so that each is tried whatever the table holds.
	for _, right := range []store.Right{store.RightSelf, store.RightToday, store.RightEnter, store.RightRegister, store.RightBatches, store.RightVerdicts,
		store.RightDoubt, store.RightCorrect, store.RightEnd, store.RightRemark, store.RightAssess, store.RightRelease, store.RightCertificates, store.RightBench,
		store.RightSetup, store.RightAccounts, store.RightJournal} {
		for _, method := range []string{http.MethodGet, http.MethodPost} {
			s.routes = append(s.routes, route{method: method, pattern: "/right-" + string(right), access: needs(right)})
		}
	}
	for i := range s.routes {
		s.routes[i].handle = func(w http.ResponseWriter, _ *http.Request) error {
			w.WriteHeader(statusReached)
			return nil
		}
	}
	return s, s.handler()
}

// concrete puts something into the parameters of a pattern.
func concrete(pattern string) string {
	parts := strings.Split(pattern, "/")
	for i, p := range parts {
		if strings.HasPrefix(p, "{") {
			parts[i] = "1"
		}
	}
	return strings.Join(parts, "/")
}

func TestEveryRouteForEveryRole(t *testing.T) {
	t.Parallel()
	house := storetest.New(t)
	s, router := reached(t, house.Lab)
	table := map[string]access{}
	for _, one := range s.routes {
		key := one.method + " " + one.pattern
		if _, twice := table[key]; twice {
			t.Errorf("%s stands twice in the table", key)
		}
		table[key] = one.access
	}
	sessions := map[store.Role]string{"": ""}
	for role, name := range map[store.Role]string{store.Technician: "technician", store.Lead: "lead", store.Adjuster: "adjuster", store.Manager: "manager"} {
		token, _, err := house.LogIn(t.Context(), name, storetest.Password)
		if err != nil {
			t.Fatal(err)
		}
		sessions[role] = token
	}
	walked := 0
	err := chi.Walk(router, func(method, pattern string, _ http.Handler, _ ...func(http.Handler) http.Handler) error {
		if pattern == static.Prefix+"*" || strings.HasPrefix(pattern, apiPrefix) {
			return nil // public by nature; the API has a walk of its own over tokens and scopes
		}
		walked++
		a, ok := table[method+" "+pattern]
		if !ok {
			t.Errorf("%s %s is served but stands in no table", method, pattern)
			return nil
		}
		for role, token := range sessions {
			checkAccess(t, router, method, pattern, a, role, token)
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	if walked != len(s.routes) {
		t.Errorf("walked %d routes, the table has %d", walked, len(s.routes))
	}
}

func checkAccess(t *testing.T, router http.Handler, method, pattern string, a access, role store.Role, token string) {
	t.Helper()
	r := httptest.NewRequest(method, concrete(pattern), nil)
	if token != "" {
		r.AddCookie(&http.Cookie{Name: plainCookie, Value: token})
	}
	w := httptest.NewRecorder()
	router.ServeHTTP(w, r)
	want := http.StatusForbidden
	switch {
	case a.public || role != "" && role.May(a.right):
		want = statusReached
	case role == "" && method == http.MethodGet:
		want = http.StatusSeeOther
	case role == "":
		want = http.StatusUnauthorized
	}
	if w.Code != want {
		t.Errorf("%s %s as %q: status %d, want %d", method, pattern, role, w.Code, want)
	}
	if to := w.Header().Get("Location"); want == http.StatusSeeOther && !strings.HasPrefix(to, page.LoginURL+"?next=") {
		t.Errorf("%s %s signed out leads to %q, want the log-in", method, pattern, to)
	}
}

// The rights themselves: what the table says is compared with what each role is for, so that a right
// given to a role by mistake is seen here too.
func TestNobodyReadsVerdictsWhileReading(t *testing.T) {
	t.Parallel()
	if store.Technician.May(store.RightVerdicts) {
		t.Error("who reads may see verdicts: readings would bend towards them")
	}
	for _, role := range []store.Role{store.Technician, store.Adjuster, store.Manager} {
		if role.May(store.RightDoubt) {
			t.Errorf("a %s may see how sure a verdict is: that is for the lead", role)
		}
	}
	for _, r := range []store.Right{store.RightRelease, store.RightAccounts, store.RightCorrect, store.RightAssess} {
		if store.Technician.May(r) || store.Adjuster.May(r) {
			t.Errorf("technician or adjuster has the right %q", r)
		}
	}
}

func TestHeadersOnEveryKindOfAnswer(t *testing.T) {
	t.Parallel()
	h, err := New(Config{Lab: storetest.New(t).Lab})
	if err != nil {
		t.Fatal(err)
	}
	for _, path := range []string{"/login", "/nowhere", "/healthz", static.URL("base.css")} {
		w := httptest.NewRecorder()
		h.ServeHTTP(w, httptest.NewRequest("GET", path, nil))
		for name, want := range map[string]string{"Content-Security-Policy": Policy, "X-Content-Type-Options": "nosniff", "Referrer-Policy": "same-origin"} {
			if got := w.Header().Get(name); got != want {
				t.Errorf("%s: %s is %q", path, name, got)
			}
		}
		if body := w.Body.String(); strings.Contains(body, " style=") || strings.Contains(body, "<style") || strings.Contains(body, "onclick") || strings.Contains(body, "<script>") {
			t.Errorf("%s holds an inline style or script", path)
		}
	}
	for _, bad := range []string{"unsafe", "*", "data:", "http:"} {
		if strings.Contains(Policy, bad) {
			t.Errorf("the policy allows %s", bad)
		}
	}
}
