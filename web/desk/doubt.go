package desk

import (
	"net/http"
	"slices"
	"strconv"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/trial/conformity"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// mostHinges is how many readings the list names: the smallest changes come first.
const mostHinges = 6

// Doubt is how sure the verdict of one movement is and on which reading it hangs. It is for the lead
// alone, and never on a paper: a doubt beside a pass would be read as a second verdict.
func (d *Desk) Doubt(w http.ResponseWriter, r *http.Request) error {
	c := page.Of(r)
	sheet, err := d.lab.MovementSheet(r.Context(), c.Actor, param(r, "code"), param(r, "serial"))
	if err != nil {
		return err
	}
	v, err := movementViewOf(c, sheet, movementForms{}, "", "")
	if err != nil {
		return err
	}
	s := page.Sheet{Title: c.Say(words.RateSheet), Code: v.piece.Serial, Sub: v.sub(), Nav: page.BatchesURL, Styles: []string{"desk.css"},
		Back: &page.Link{Text: c.Say(words.RateSheet), URL: v.url()}}
	return v.later().Answer(w, r, http.StatusOK, s, doubtBody(c, v.doubt()))
}

// later is the place of the doubt on the rate sheet.
func (v movementView) later() page.Later {
	return page.Later{ID: "doubt", Title: v.c.Say(words.DoubtTitle), Text: v.c.Say(words.DoubtShow), URL: page.DoubtURL(v.Batch.Code, v.piece.Serial), Inner: true}
}

// doubtView is the doubt of a movement ready to be drawn.
type doubtView struct {
	Verdict part.Judged
	Doubt   string // in per cent; "" where there is no verdict to doubt
	Each    []chanceRow
	Hinges  []hingeRow
	NoHinge words.Text // why there is none
	Ended   bool       // left the trial: what is said is of its rates
	Typed   bool       // rates without states: that they share readings is assumed
	Step, U string
}

// chanceRow is one decided criterion.
type chanceRow struct{ Symbol, Title, Chance string }

// hingeRow is one reading that alone flips the verdict.
type hingeRow struct {
	Round, Change, Symbol string
	Left                  bool // as left after the hands were set, not as found
	To                    part.Judged
}

func (v movementView) doubt() doubtView {
	c, layout := v.c, conformity.Recorded(v.Batch.Programme, v.Batch.Steps, v.piece.Movement.Cells(&v.Batch))
	step, u := part.ResolutionText()
	d := doubtView{Verdict: part.JudgedOf(v.result.Verdict, v.cannot, ""), Step: c.Magnitude(step, 1), U: c.Magnitude(u, 3),
		Ended: v.piece.End != store.InTrial,
		Typed: slices.ContainsFunc(layout, func(s conformity.Stretch) bool { return s.Typed })}
	chances := v.chances(layout)
	if p, ok := chances.Doubt(v.result.Verdict); ok {
		d.Doubt = c.Chance(probability(p), 1)
	}
	for i, one := range chances.Each {
		if k := v.Batch.Programme.Criteria[i]; one.Known {
			d.Each = append(d.Each, chanceRow{k.Symbol, c.Say(words.CriterionTitle(k.Symbol, k.Title)), c.Chance(probability(one.P), 1)})
		}
	}
	d.hinges(v, conformity.Hinges(v.judge, v.Rates, layout))
	return d
}

// chances are the probabilities of conformity under what is stated of the uncertainty.
func (v movementView) chances(layout conformity.Layout) (out conformity.Chances) {
	rates := make([]float64, len(v.Batch.Programme.Days))
	for i, r := range v.Rates {
		if r.Known() {
			rates[i] = r.Exact().Float()
		}
	}
	cov := conformity.Propagate(v.Batch.Programme, layout, part.ResolutionOnly(), conformity.Movement{})
	conformity.NewAssessor(v.judge, cov).Assess(rates, &v.result, &out)
	return out
}

// probability is a decimal as the printer takes it. It is never quite 0 or 1: an error that is normal
// leaves nothing certain.
func probability(p float64) string {
	const least = 1e-6
	return strconv.FormatFloat(min(max(p, least), 1-least), 'f', 6, 64)
}

func (d *doubtView) hinges(v movementView, list []conformity.Hinge) {
	switch {
	case v.result.Verdict == trial.None:
		d.NoHinge = words.YieldNoLimits
	case len(list) == 0:
		d.NoHinge = words.HingeNone
	}
	for _, h := range list[:min(len(list), mostHinges)] {
		d.Hinges = append(d.Hinges, hingeRow{itoa(h.Reading.Step), v.c.Signed(h.Change.String(), 3), v.Batch.Programme.Criteria[h.Criterion].Symbol,
			h.Reading.Left, part.JudgedOf(h.To, false, "")})
	}
}
