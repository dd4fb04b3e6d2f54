package web

import (
	"net/http"

	"ratehouse/store"
	adjuster "ratehouse/web/bench" // bench is the floor's name below
	"ratehouse/web/desk"
	"ratehouse/web/floor"
	"ratehouse/web/page"
	"ratehouse/web/paper"
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
	bench, qa := floor.New(s.lab), desk.New(s.lab)
	adjusters := adjuster.New(s.lab)
	papers := paper.New(s.lab, guesses{s, newTries(s.lab.Now)})
	return []route{
		{get, "/", public, s.start},
		{get, page.LoginURL, public, s.showLogin},
		{post, page.LoginURL, public, s.logIn},
		{post, page.LogoutURL, public, s.logOut},
		{post, page.LanguageURL, public, s.setLanguage},
		{post, page.ThemeURL, public, s.setTheme},
		{get, page.TodayURL, needs(store.RightToday), bench.Today},
		{get, page.NewBatchURL, needs(store.RightRegister), bench.NewBatch},
		{post, page.NewBatchURL, needs(store.RightRegister), bench.RegisterBatch},
		{get, "/batches/{code}/rounds/{k}", needs(store.RightEnter), bench.Round},
		{post, "/batches/{code}/rounds/{k}", needs(store.RightEnter), bench.PostReading},
		{get, "/batches/{code}/rounds/{k}/readings", needs(store.RightEnter), bench.OwnReading},
		{post, "/batches/{code}/rounds/{k}/readings", needs(store.RightEnter), bench.SaveReadings},
		{post, "/batches/{code}/rounds/{k}/open", needs(store.RightEnter), bench.OpenRound},
		{post, "/batches/{code}/rounds/{k}/close", needs(store.RightEnter), bench.CloseRound},
		{get, "/batches/{code}/rounds/{k}/sheet", needs(store.RightEnter), bench.DaySheet},
		{get, "/batches/{code}/rounds/{k}/remark", needs(store.RightEnter), bench.RoundRemark},
		{post, "/batches/{code}/rounds/{k}/remark", needs(store.RightRemark), bench.AddRemark},
		{get, "/batches/{code}/rounds/{k}/movement", needs(store.RightEnter), bench.Movement},
		{post, "/batches/{code}/rounds/{k}/movement/remark", needs(store.RightRemark), bench.AddRemark},
		{post, "/batches/{code}/rounds/{k}/movement/end", needs(store.RightEnd), bench.EndMovement},
		{get, "/batches/{code}/release", needs(store.RightRelease), papers.Release},
		{post, "/batches/{code}/release", needs(store.RightRelease), papers.PostRelease},
		{get, "/batches/{code}/certificates", needs(store.RightCertificates), papers.Papers},
		{get, "/batches/{code}/certificates/print", needs(store.RightCertificates), papers.Print},
		{get, "/certificates/{number}", needs(store.RightCertificates), papers.Certificate},
		{post, "/certificates/{number}/revoke", needs(store.RightRelease), papers.Revoke},
		{get, page.VerifyURL, public, papers.Verify},
		{get, page.HealthURL, public, s.health},
		{get, page.ReadyURL, public, s.ready},
		{get, page.BatchesURL, needs(store.RightBatches), qa.Batches},
		{get, "/batches/{code}", needs(store.RightBatches), qa.Batch},
		{get, "/batches/{code}" + page.LiveSuffix, needs(store.RightBatches), s.live},
		{get, "/batches/{code}/sheets.csv", needs(store.RightVerdicts), qa.SheetsCSV},
		{get, "/batches/{code}/outlook", needs(store.RightVerdicts), qa.Outlook},
		{get, "/batches/{code}/aim", needs(store.RightVerdicts), qa.Aim},
		{post, "/batches/{code}/remarks", needs(store.RightRemark), qa.AddRemark},
		{post, "/batches/{code}/remarks/{remark}", needs(store.RightAssess), qa.MoveRemark},
		{get, "/batches/{code}/movements/{serial}", needs(store.RightBatches), qa.Movement},
		{get, "/batches/{code}/movements/{serial}/doubt", needs(store.RightDoubt), qa.Doubt},
		{post, "/batches/{code}/movements/{serial}/readings", needs(store.RightCorrect), qa.Correct},
		{post, "/batches/{code}/movements/{serial}/end", needs(store.RightEnd), qa.End},
		{get, page.BenchURL, needs(store.RightBench), adjusters.Rejects},
		{get, "/bench/{code}/{serial}", needs(store.RightBench), adjusters.Note},
		{get, page.SearchURL, needs(store.RightBatches), qa.Search},
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
