package bench

import (
	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// Bench answers the adjusters' pages of one laboratory. Its methods are page.Handlers.
type Bench struct{ lab *store.Lab }

// New makes the pages of a laboratory.
func New(lab *store.Lab) *Bench { return &Bench{lab} }

// styles is the style sheet of these pages.
var styles = []string{"desk.css"}

// rejected tells whether a movement is the bench's: outside by its rates, rejected for cause, or taken
// out because it could not pass.
func rejected(m *store.Movement, v trial.Verdict) bool {
	return m.End == store.Rejected || m.End == store.Removed || m.End == store.InTrial && v == trial.Fail
}

// standing is how a movement of the bench stands.
func standing(m *store.Movement, v trial.Verdict) part.Judged { return part.JudgedOf(v, false, m.End) }

// whose says calibre and depositor of a batch.
func whose(c *page.Context, b *store.Batch) string {
	calibre, depositor := c.Say(words.NoCalibre), b.Depositor.Title
	if b.Calibre.Code != "" {
		calibre = c.Say(words.OfCalibre.With(b.Calibre.Code))
	}
	if depositor == "" {
		depositor = b.Depositor.Code
	}
	return c.Say(words.CalibreFor.With(calibre, depositor))
}
