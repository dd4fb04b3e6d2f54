package web

import (
	"io"
	"net/http"
	"strings"
	"time"

	"github.com/go-chi/chi/v5"

	"ratehouse/web/page"
)

const (
	liveWithin = 45 * time.Second // a stream's own end, before the server's: the browser asks again, and its session is looked at again
	livePause  = time.Second      // a page is drawn anew at most so often
)

// live tells a page of a batch when it is out of date, as server-sent events (WHATWG HTML, 9.2). It
// holds no connection of the pool, and does not keep the server from ending.
func (s *server) live(w http.ResponseWriter, r *http.Request) error {
	changed, done := s.lab.WatchBatch(chi.URLParam(r, "code"))
	defer done()
	w.Header().Set("Content-Type", "text/event-stream")
	w.Header().Set("Cache-Control", "no-store")
	end := time.NewTimer(liveWithin)
	defer end.Stop()
	say := func(words string) error {
		if _, err := io.WriteString(w, words); err != nil {
			return err
		}
		return http.NewResponseController(w).Flush()
	}
	for err := say("retry: 2000\n\n"); err == nil; {
		select {
		case <-changed:
			err = say("event: changed\ndata:\n\n")
		case <-end.C:
			return nil
		case <-s.ending:
			return nil
		case <-r.Context().Done():
			return nil
		}
		select {
		case <-time.After(livePause):
		case <-s.ending:
		case <-r.Context().Done():
		}
	}
	return nil // who listened has gone
}

// unattended tells a request that a page makes by itself from one of a person: it does not keep a
// session alive.
func unattended(r *http.Request) bool {
	return r.Header.Get(page.LiveHeader) != "" || strings.HasSuffix(r.URL.Path, page.LiveSuffix)
}
