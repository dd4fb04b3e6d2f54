package web

import (
	"net/http"

	"ratehouse/store"
	"ratehouse/web/page"
)

// access says who may use a route at all: nobody needs to be signed in, or a right is needed.
type access struct {
	public bool
	right  store.Right
}

// public routes are open to everybody.
var public = access{public: true}

// needs a right.
func needs(r store.Right) access { return access{right: r} }

// route is one line of the table.
type route struct {
	method, pattern string
	access          access
	handle          page.Handler
}

// table is the one table of routes and the rights they need; everything the server answers stands
// here (scripts and styles aside, which are public). The finer rights are decided by the verbs.
func (s *server) table() []route {
	const get, post = http.MethodGet, http.MethodPost
	return []route{
		{get, "/", public, s.start},
		{get, page.LoginURL, public, s.showLogin},
		{post, page.LoginURL, public, s.logIn},
		{post, page.LogoutURL, public, s.logOut},
		{post, page.LanguageURL, public, s.setLanguage},
		{post, page.ThemeURL, public, s.setTheme},
		{get, page.HealthURL, public, s.health},
		{get, page.ReadyURL, public, s.ready},
	}
}

// guarded lets in who has the right of the route. Who is not signed in is led to the log-in and, if
// only looking, back; a form is answered where it was sent from, so that nothing typed is lost.
func (s *server) guarded(one route) http.Handler {
	inner := s.adapt(one.handle)
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		c := page.Of(r)
		switch {
		case one.access.public || c.SignedIn && c.Actor.May(one.access.right):
			inner.ServeHTTP(w, r)
		case c.SignedIn:
			page.ShowError(w, r, page.Forbidden())
		case r.Method == http.MethodGet || r.Method == http.MethodHead:
			http.Redirect(w, r, page.Query(page.LoginURL, "next", r.URL.RequestURI()), http.StatusSeeOther)
		default:
			page.ShowError(w, r, &store.Error{Kind: store.KindUnauthenticated, Code: "unauthenticated"})
		}
	})
}
