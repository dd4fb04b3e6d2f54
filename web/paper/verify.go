package paper

import (
	"net/http"
	"time"

	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

var verifyLabels = []page.Label{{Name: "number", Text: words.VerifyNumber}, {Name: "code", Text: words.VerifyCode}}

// Verify tells the public whether a paper is genuine, by its number and its code together: from the
// square mark on the paper, or typed in. A wrong number answers like a wrong code.
func (p *Paper) Verify(w http.ResponseWriter, r *http.Request) error {
	c, q := page.Of(r), r.URL.Query()
	f := page.NewForm(c, verifyLabels...)
	f.Set("number", q.Get("number"))
	f.Set("code", q.Get("code"))
	if f.Get("code") == "" {
		if q.Has("code") {
			f.Wrong("code", words.VerifyNoCode)
		}
		return page.Render(w, r, f.Status(), verifyPage(c, f))
	}
	if f.Get("number") == "" {
		f.Wrong("number", words.VerifyNoNum)
		return page.Render(w, r, f.Status(), verifyPage(c, f))
	}
	if wait := p.limit.Wait(r); wait > 0 {
		f.Wrong("", words.VerifyWait.With(c.Span(wait+time.Minute)))
		return page.Render(w, r, http.StatusTooManyRequests, verifyPage(c, f))
	}
	cert, err := p.lab.Verify(r.Context(), f.Get("number"), f.Get("code"))
	switch store.KindOf(err) {
	case store.KindInvalid:
		f.Wrong("code", words.VerifyBadCode)
		return page.Render(w, r, f.Status(), verifyPage(c, f))
	case store.KindNotFound:
		p.limit.Failed(r)
		f.Wrong("", words.VerifyNone)
		return page.Render(w, r, http.StatusNotFound, verifyPage(c, f))
	}
	if err != nil {
		return err
	}
	lang := q.Get("lang")
	if lang == "" {
		lang = cert.Record.Language
	}
	return page.Render(w, r, http.StatusOK, genuinePage(c, verdictOn(c, cert), open(cert, lang, "2")))
}

// verdictOn says in a notice what the laboratory stands by.
func verdictOn(c *page.Context, cert store.Certificate) page.Notice {
	again := &page.Link{Text: c.Say(words.VerifyAnother), URL: page.VerifyURL}
	switch {
	case cert.Record.Demo:
		return page.Notice{Tone: page.Attn, Title: c.Say(words.VerifyDemo), Text: c.Say(words.VerifyGoodHow), Act: again}
	case cert.ReplacedBy != "":
		return page.Notice{Tone: page.Attn, Title: c.Say(words.VerifyOver), Text: c.Say(words.PaperReplacing.With(cert.ReplacedBy)), Act: again}
	case !cert.RevokedAt.IsZero():
		return page.Notice{Tone: page.Attn, Title: c.Say(words.VerifyOver), Text: c.Say(words.PaperRevokedBy.With(c.Date(cert.RevokedAt), stop(cert.Revoked))), Act: again}
	}
	return page.Notice{Tone: page.Good, Title: c.Say(words.VerifyGood), Text: c.Say(words.VerifyGoodHow), Act: again}
}
