package paper

import (
	"net/http"
	"strconv"
	"strings"

	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

// The signed record and the key that checks it are files beside the paper. Numbers of papers have no
// small letters, so these endings cannot belong to one.
const (
	recordEnding = ".jws"
	keyEnding    = ".jwk"
)

// revokeLabels are the fields of a revocation.
var revokeLabels = []page.Label{{Name: "reason", Text: words.RevokeReason}}

// Certificate shows a paper, or sends its signed record or key.
func (p *Paper) Certificate(w http.ResponseWriter, r *http.Request) error {
	number := param(r, "number")
	file := ""
	for _, ending := range []string{recordEnding, keyEnding} {
		if name, ok := strings.CutSuffix(number, ending); ok {
			number, file = name, ending
		}
	}
	cert, err := p.lab.Certificate(r.Context(), page.Of(r).Actor, number)
	if err != nil {
		return err
	}
	switch file {
	case recordEnding:
		return send(w, number+recordEnding, "application/jose", cert.JWS+"\n")
	case keyEnding:
		return send(w, number+keyEnding, "application/jwk+json", cert.PublicKey+"\n")
	}
	return p.show(w, r, cert, page.NewForm(page.Of(r), revokeLabels...))
}

func (p *Paper) show(w http.ResponseWriter, r *http.Request, cert store.Certificate, f *page.Form) error {
	c := page.Of(r)
	v := certificateView{sheet: open(cert, r.URL.Query().Get("lang"), "1"), form: f, revoke: c.Actor.May(store.RightRelease) && cert.RevokedAt.IsZero()}
	return page.Render(w, r, f.Status(), certificatePage(c, v))
}

// certificateView is a paper on its page.
type certificateView struct {
	sheet  sheet
	form   *page.Form
	revoke bool // the actor may revoke it
}

func (v certificateView) url(ending string) string {
	return page.CertificateURL(v.sheet.Number) + ending
}

// send sends a small file to be kept.
func send(w http.ResponseWriter, name, ctype, content string) error {
	h := w.Header()
	h.Set("Content-Type", ctype)
	h.Set("Content-Disposition", "attachment; filename="+strconv.Quote(name))
	h.Set("Cache-Control", "no-store")
	_, err := w.Write([]byte(content))
	return ignoreGone(err)
}

// ignoreGone: who has closed the page cannot be told that it did not arrive.
func ignoreGone(error) error { return nil }

// Revoke takes a paper back.
func (p *Paper) Revoke(w http.ResponseWriter, r *http.Request) error {
	f, err := page.ReadForm(r, revokeLabels...)
	if err != nil {
		return err
	}
	c, number := page.Of(r), param(r, "number")
	err = p.lab.Revoke(r.Context(), c.Actor, number, f.Get("reason"))
	if err == nil {
		return page.Redirect(w, r, page.CertificateURL(number))
	}
	if !f.Take(err) {
		return err
	}
	cert, err := p.lab.Certificate(r.Context(), c.Actor, number)
	if err != nil {
		return err
	}
	return p.show(w, r, cert, f)
}
