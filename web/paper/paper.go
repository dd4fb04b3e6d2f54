package paper

import (
	"net/http"
	"time"

	"ratehouse/store"
	"ratehouse/web/page"
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

// param is a part of the address as it was meant.
var param = page.Param
