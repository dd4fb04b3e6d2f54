package web

import (
	"net/http"
	"time"
)

// guesses slows down whoever tries numbers and codes of papers, by the address they come from. What
// was right once does not forgive earlier guesses: one genuine paper must not open the next hundred.
type guesses struct {
	s *server
	t *tries
}

// Wait is how long the asker still has to wait.
func (g guesses) Wait(r *http.Request) time.Duration { return g.t.wait(g.s.clientAddr(r)) }

// Failed counts a wrong guess.
func (g guesses) Failed(r *http.Request) { g.t.failed(g.s.clientAddr(r)) }
