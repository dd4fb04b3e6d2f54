package page

import (
	"net/http"

	"github.com/a-h/templ"
)

// Later is a section that takes its time to compute. A page shows its place alone (LaterPlace), and
// later.js asks for it once the page stands; who has no scripts follows a link to it. So it is never
// in the path of the page.
type Later struct {
	ID    string // of the section; its heading is h-ID
	Title string
	Text  string // of the link
	URL   string // of the section as a page of its own
	Inner bool   // for the laboratory's own screens: never printed
}

// LaterScript is the module that a page with such a place names.
const LaterScript = "later.js"

// alone is the parameter that asks for the section without a page around it.
const alone = "alone"

func (l Later) aloneURL() string { return Query(l.URL, alone, "yes") }

// Answer writes the section: alone for the script, in a page of its own for the link.
func (l Later) Answer(w http.ResponseWriter, r *http.Request, status int, s Sheet, body templ.Component) error {
	if r.URL.Query().Has(alone) {
		return Render(w, r, status, laterSection(l, body))
	}
	return Render(w, r, status, laterPage(Of(r), s, l, body))
}
