package bench

import (
	"math"
	"net/http"
	"slices"
	"strconv"
	"strings"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/trial/balance"
	"ratehouse/trial/conformity"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// Note is the bench note on one movement: a sheet of its own, an opinion and marked so, with the name
// of who asked for it and so answers for it. Nothing of it is stored, and no paper holds it.
func (b *Bench) Note(w http.ResponseWriter, r *http.Request) error {
	c := page.Of(r)
	s, err := b.lab.BenchSheet(r.Context(), c.Actor, page.Param(r, "code"), page.Param(r, "serial"))
	if err != nil {
		return err
	}
	j, err := trial.NewJudge(s.Batch.Programme, s.Batch.Category)
	if err != nil {
		return err
	}
	v := noteView{c: c, sheet: &s, judge: j, form: amplitudeForm(c, r.URL.Query().Get("from"), r.URL.Query().Get("to"))}
	j.Rates(s.Movement.Rates, &v.result)
	v.note = balance.BenchNote(j, s.Movement.Rates, balance.Facts{Card: balance.Card{Organ: s.Card.Organ, Step: trial.Milli(s.Card.OrganStepMilli)},
		Amplitude: v.amplitude(), U: v.positionU()})
	status := http.StatusOK
	if !v.form.OK() {
		status = v.form.Status()
	}
	return page.Render(w, r, status, notePage(c, v))
}

// noteView is a bench note ready to be drawn.
type noteView struct {
	c      *page.Context
	sheet  *store.BenchSheet
	judge  *trial.Judge
	result trial.Result
	form   *page.Form
	note   balance.Note
}

// The amplitudes that may be typed, degrees: no balance swings beyond them.
const leastAmplitude, mostAmplitude = 30, 400

// amplitudeForm takes the amplitude out of the address, as it was typed.
func amplitudeForm(c *page.Context, from, to string) *page.Form {
	f := page.NewForm(c, page.Label{Name: "from", Text: words.BenchFrom}, page.Label{Name: "to", Text: words.BenchTo})
	f.Set("from", from)
	f.Set("to", to)
	if from == "" && to == "" {
		return f
	}
	lo, errLo := strconv.Atoi(from)
	hi, errHi := strconv.Atoi(to)
	switch {
	case errLo != nil || lo < leastAmplitude || lo > mostAmplitude:
		f.Wrong("from", words.BenchDegrees)
	case errHi != nil || hi < lo || hi > mostAmplitude:
		f.Wrong("to", words.BenchDegrees)
	}
	return f
}

// amplitude is what was typed, the zero value for nothing.
func (v noteView) amplitude() (a balance.Amplitude) {
	if !v.form.OK() || v.form.Get("from") == "" {
		return a
	}
	lo, _ := strconv.Atoi(v.form.Get("from")) // the form said that both can be read
	hi, _ := strconv.Atoi(v.form.Get("to"))
	return balance.Amplitude{From: float64(lo), To: float64(hi)}
}

// positionU is the greatest standard uncertainty of the mean rate in a vertical position, s/d, under
// what is stated of the readings.
func (v noteView) positionU() (u float64) {
	p, m := v.sheet.Batch.Programme, &v.sheet.Movement
	layout := conformity.Recorded(p, v.sheet.Batch.Steps, m.Cells(&v.sheet.Batch))
	cov := conformity.Propagate(p, layout, part.ResolutionOnly(), conformity.Movement{})
	days := map[trial.Position][]int{}
	for i, d := range p.Days {
		if d.Position.Vertical() && m.Rates[i].Known() {
			days[d.Position] = append(days[d.Position], i)
		}
	}
	for _, list := range days {
		mean := make([]float64, len(p.Days))
		for _, i := range list {
			mean[i] = 1 / float64(len(list))
		}
		u = max(u, math.Sqrt(cov.Of(mean, mean)))
	}
	return u
}

func (v noteView) page() page.Sheet {
	c, m := v.c, &v.sheet.Movement
	s := page.Sheet{Title: c.Say(words.BenchNoteTitle), Code: m.Serial, Sub: whose(c, &v.sheet.Batch), Nav: page.BenchURL, Styles: styles,
		Back:    &page.Link{Text: c.Say(words.BenchRejectsOf.With(v.sheet.Batch.Code)), URL: page.Query(page.BenchURL, "batch", v.sheet.Batch.Code)},
		Notices: []page.Notice{{Tone: page.Attn, Title: c.Say(words.BenchNoteOpinion), Text: c.Say(words.BenchNoteText)}}}
	s.Cells = []page.Cell{{Label: c.Say(words.Standing), Body: standsCell(c, standing(m, v.result.Verdict), v.failedIn())},
		page.TextCell(c.Say(words.BenchOpenBatch), v.sheet.Batch.Code),
		page.TextCell(c.Say(words.BenchAuthor), c.Say(words.BenchAuthorIs.With(c.Actor.Title, words.RoleName(string(c.Actor.Role))))),
		page.TextCell(c.Say(words.BenchMadeOn), c.Date(c.Now))}
	s.Acts = []page.Act{{Text: c.Say(words.RateSheet), URL: page.MovementURL(v.sheet.Batch.Code, m.Serial)}}
	return s
}

func (v noteView) failedIn() words.Text {
	if failed := v.result.Failed(); len(failed) > 0 {
		return words.FailedIn.With(strings.Join(failed, ", "))
	}
	return nil
}

// notePart is one section of the note.
type notePart struct {
	ID    string
	Title words.Text
	Lines []string
	None  words.Text // what stands there instead of nothing; nil leaves the section out
	Steps bool       // in the order in which it is to be done
}

func (v noteView) parts() (parts []notePart) {
	for _, one := range []struct {
		notePart
		findings []balance.Finding
	}{
		{notePart{ID: "regulation", Title: words.BenchRegulation}, v.note.Regulation},
		{notePart{ID: "beyond", Title: words.BenchBeyond, None: words.BenchBeyondNone}, v.note.Beyond},
		{notePart{ID: "look", Title: words.BenchLook, Steps: true}, v.note.Look},
		{notePart{ID: "validity", Title: words.BenchValidity}, v.note.Validity},
	} {
		for _, f := range one.findings {
			one.Lines = append(one.Lines, v.c.BenchFinding(f))
		}
		if one.ID == "validity" {
			one.Lines = append(one.Lines, v.restsOn()...)
		}
		if len(one.Lines) > 0 || one.None != nil {
			parts = append(parts, one.notePart)
		}
	}
	return parts
}

// restsOn names what came from elsewhere than the rates.
func (v noteView) restsOn() (lines []string) {
	speaks := slices.ContainsFunc(v.note.Beyond, func(f balance.Finding) bool { return f.Code == balance.Vertical })
	if speaks && v.amplitude() != (balance.Amplitude{}) {
		lines = append(lines, v.c.Say(words.BenchWasGiven.With(v.form.Get("from"), v.form.Get("to"))))
	}
	step, u := part.ResolutionText()
	return append(lines, v.c.Say(words.BenchResolution.With(v.c.Magnitude(step, 1), v.c.Magnitude(u, 3))))
}
