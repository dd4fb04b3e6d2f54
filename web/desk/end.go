package desk

import (
	"net/http"

	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

var endLabels = []page.Label{{Name: "end", Text: words.EndHow}, {Name: "seen", Text: words.EndSeen}, {Name: "cause", Text: words.EndCause}}

// endChoices are the ways to leave the trial. That a movement cannot pass is offered only to who sees
// verdicts.
func (v movementView) endChoices() []page.Option {
	c := v.c
	list := []page.Option{{Value: string(store.Rejected), Text: c.Say(words.EndRejectedFor)}, {Value: string(store.Withdrawn), Text: c.Say(words.EndWithdrawnBy)},
		{Value: string(store.Void), Text: c.Say(words.EndVoidBy)}}
	if v.may.verdicts {
		list = append(list, page.Option{Value: string(store.Removed), Text: c.Say(words.EndRemovedAs)})
	}
	return list
}

func (v movementView) seenChoices() []page.Option {
	list := []page.Option{{Text: v.c.Say(words.EndSeenNothing)}}
	for _, o := range store.Observations {
		list = append(list, page.Option{Value: string(o), Text: v.c.Say(words.Seen(o))})
	}
	return list
}

// endingLine is an end, or one taken back.
type endingLine struct {
	Word, Cause, When string
}

func (v movementView) endings() []endingLine {
	lines := make([]endingLine, len(v.Endings))
	for i, e := range v.Endings {
		word := words.EndWord(e.End)
		if e.End == store.InTrial {
			word = words.EndTakenBack
		}
		lines[i] = endingLine{v.c.Say(word), e.Cause, v.c.Instant(e.At)}
		if e.End == store.Removed && !v.may.verdicts {
			lines[i].Word, lines[i].Cause = v.c.Say(words.TakenOut), ""
		}
		if e.Code != "" {
			lines[i].When = v.c.Say(words.EndSeenWhen.With(words.Seen(e.Code), lines[i].When))
		}
	}
	return lines
}

// End takes a movement out of the trial, or (with an empty end) its end back.
func (d *Desk) End(w http.ResponseWriter, r *http.Request) error {
	c, code, serial := page.Of(r), param(r, "code"), param(r, "serial")
	f, err := page.ReadForm(r, endLabels...)
	if err != nil {
		return err
	}
	end := store.End(f.Get("end"))
	switch {
	case end == store.InTrial && f.Get("back") == "":
		f.Wrong("end", words.EndChoose)
	case end == store.Removed && !rightsOf(c).verdicts:
		return page.Forbidden()
	}
	if f.Get("cause") == "" {
		f.Wrong("cause", words.EndCauseNeeded)
	}
	if f.OK() {
		err := d.lab.EndMovement(r.Context(), c.Actor, code, serial, end, f.Raw("cause"), store.Observation(f.Get("seen")))
		if err == nil {
			return page.Redirect(w, r, page.MovementURL(code, serial))
		}
		if !f.Take(err) {
			return err
		}
	}
	return d.showMovement(w, r, serial, movementForms{end: f})
}
