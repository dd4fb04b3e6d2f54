package web

import (
	"context"
	"net/http"
	"time"
)

// health tells that the program runs; it asks nobody.
func (s *server) health(w http.ResponseWriter, _ *http.Request) error {
	return plain(w, http.StatusOK, "ok")
}

// ready tells that the database answers, within two seconds, and that the program is not about to end.
func (s *server) ready(w http.ResponseWriter, r *http.Request) error {
	select {
	case <-s.ending:
		return plain(w, http.StatusServiceUnavailable, "ending")
	default:
	}
	ctx, cancel := context.WithTimeout(r.Context(), 2*time.Second)
	defer cancel()
	if err := s.lab.Ready(ctx); err != nil {
		s.log.WarnContext(r.Context(), "not ready", "error", err.Error())
		return plain(w, http.StatusServiceUnavailable, "database does not answer")
	}
	return plain(w, http.StatusOK, "ready")
}

func plain(w http.ResponseWriter, status int, text string) error {
	w.Header().Set("Content-Type", "text/plain; charset=utf-8")
	w.Header().Set("Cache-Control", "no-store")
	w.WriteHeader(status)
	w.Write([]byte(text + "\n")) //nolint:errcheck // who asked has gone
	return nil
}
