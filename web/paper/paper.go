package paper

import (
	"net/http"
	"net/url"
	"time"

	"ratehouse/store"
)

// Paper answers the pages about released papers of one laboratory. Its methods are page.Handlers.
type Paper struct {
	lab   *store.Lab
	limit Limit
}

// Limit slows down whoever guesses numbers and codes at the public page.
type Limit interface {
	Wait(r *http.Request) time.Duration // 0: may try
	Failed(r *http.Request)
}

// New makes the pages of a laboratory.
func New(lab *store.Lab, limit Limit) *Paper { return &Paper{lab, limit} }

// styles is the style sheet of papers.
var styles = []string{"paper.css"}

// param is a part of the address as it was meant; the router leaves escapes in it where there are any.
func param(r *http.Request, name string) string {
	v := r.PathValue(name)
	if r.URL.RawPath == "" {
		return v
	}
	if plain, err := url.PathUnescape(v); err == nil {
		return plain
	}
	return v
}
