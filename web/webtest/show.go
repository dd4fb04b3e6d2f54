package webtest

import (
	"context"
	"io"
	"net/http"
	"net/http/httptest"
	"testing"
	"time"

	"github.com/a-h/templ"

	"ratehouse/store"
	"ratehouse/web"
	"ratehouse/web/page"
	"ratehouse/web/static"
	"ratehouse/web/words"
)

// Show opens a component alone in the frame of a page, under the server's policy but without a
// laboratory: for looking at parts and charts in states that take long to bring about. The path
// /en, /fr or /de says the language; the tab begins at /en.
func Show(t testing.TB, s page.Sheet, body func(*page.Context) templ.Component) *Tab {
	t.Helper()
	mux := http.NewServeMux()
	mux.Handle(static.Prefix, static.Handler())
	mux.HandleFunc("GET /{lang}", func(w http.ResponseWriter, r *http.Request) {
		c := &page.Context{Printer: words.New(words.Lang(r.PathValue("lang")), time.UTC), Path: r.URL.Path, SignedIn: true,
			Actor: store.Actor{Title: "Nadja Quill", Role: store.Lead}, House: store.House{Title: "Hollinfell Timing Laboratory", Zone: time.UTC},
			Now: time.Date(2026, 12, 1, 8, 52, 0, 0, time.UTC), Nav: page.Navigation}
		w.Header().Set("Content-Security-Policy", web.Policy)
		frame := templ.ComponentFunc(func(ctx context.Context, out io.Writer) error {
			return page.Frame(c, s).Render(templ.WithChildren(ctx, body(c)), out)
		})
		if err := page.Render(w, r.WithContext(page.With(r.Context(), c)), http.StatusOK, frame); err != nil {
			t.Errorf("render: %v", err)
		}
	})
	srv := httptest.NewServer(mux)
	t.Cleanup(srv.Close)
	tab := Start(t, srv.URL)
	tab.Go("/en")
	return tab
}
