package floor

import (
	"net/http"
	"strconv"

	"ratehouse/store"
	"ratehouse/web/page"
)

// Floor answers the technicians' pages of one laboratory. Its methods are page.Handlers.
type Floor struct{ lab *store.Lab }

// styles is the style sheet of the floor's own parts.
var styles = []string{"floor.css"}

// New makes the pages of a laboratory.
func New(lab *store.Lab) *Floor { return &Floor{lab} }

// roundOf is the round that an address names: /batches/{code}/rounds/{k}.
func roundOf(r *http.Request) (code string, k int, err error) {
	k, err = strconv.Atoi(r.PathValue("k"))
	if err != nil || k < 0 {
		return "", 0, page.NotFound()
	}
	return r.PathValue("code"), k, nil
}
