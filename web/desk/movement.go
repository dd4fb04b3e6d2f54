package desk

import (
	"net/http"
	"slices"
	"strings"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/web/chart"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// Movement is the rate sheet: everything about one movement.
func (d *Desk) Movement(w http.ResponseWriter, r *http.Request) error {
	return d.showMovement(w, r, param(r, "serial"), movementForms{})
}

// movementForms are forms that were not acceptable and go back filled in; nil for those that were not
// sent.
type movementForms struct {
	remark, end *page.Form
	correction  *correction
}

func (f movementForms) status() int {
	forms := []*page.Form{f.remark, f.end}
	if f.correction != nil {
		forms = append(forms, f.correction.Form)
		if f.correction.again {
			return http.StatusUnprocessableEntity
		}
	}
	for _, one := range forms {
		if one != nil && !one.OK() {
			return one.Status()
		}
	}
	return http.StatusOK
}

func (d *Desk) showMovement(w http.ResponseWriter, r *http.Request, serial string, forms movementForms) error {
	c := page.Of(r)
	sheet, err := d.lab.MovementSheet(r.Context(), c.Actor, param(r, "code"), serial)
	if err != nil {
		return err
	}
	v, err := movementViewOf(c, sheet, forms, r.URL.Query().Get("do"), r.URL.Query().Get("remark"))
	if err != nil {
		return err
	}
	if v.forms.correction == nil && v.may.correct && v.do == doCorrect {
		v.forms.correction = newCorrection(c, r.URL.Query().Get("cell"))
	}
	if !v.may.verdicts {
		return page.Render(w, r, forms.status(), plainMovementPage(c, v))
	}
	return page.Render(w, r, forms.status(), movementPage(c, v))
}

// What the address opens on a rate sheet.
const (
	doCorrect = "correct"
	doEnd     = "end"
)

// movementView is a rate sheet ready to be drawn.
type movementView struct {
	c *page.Context
	store.MovementSheet
	piece
	judge  *trial.Judge
	may    rights
	forms  movementForms
	do     string
	remark string
}

func movementViewOf(c *page.Context, s store.MovementSheet, forms movementForms, do, remark string) (movementView, error) {
	j, err := trial.NewJudge(s.Batch.Programme, s.Batch.Category)
	if err != nil {
		return movementView{}, err
	}
	v := movementView{c: c, MovementSheet: s, piece: piece{Movement: &s.Movement}, judge: j, may: rightsOf(c), forms: forms, do: do, remark: remark}
	j.Rates(s.Movement.Rates, &v.result)
	v.cannot = s.Movement.End == store.InTrial && v.result.Verdict == trial.Open && j.CannotPass(s.Movement.Rates)
	if v.forms.end == nil && v.may.end && do == doEnd {
		v.forms.end = page.NewForm(c, endLabels...)
	}
	switch {
	case v.forms.remark != nil:
	case remark == remarkNew && v.may.remark:
		v.forms.remark = page.NewForm(c, newRemarkLabels...)
	case remark != "" && v.may.assess:
		v.forms.remark = page.NewForm(c, moveRemarkLabels...)
		v.forms.remark.Set("state", "closed")
	}
	return v, nil
}

func (v movementView) batchURL() string { return page.BatchURL(v.Batch.Code) }

func (v movementView) url() string {
	return page.MovementURL(v.Batch.Code, v.MovementSheet.Movement.Serial)
}

// open is the sheet with one of its forms open.
func (v movementView) open(do, cell string) string {
	return page.Query(v.url(), "do", do, "cell", cell) + "#" + do
}

func (v movementView) sheet() page.Sheet {
	c, m := v.c, v.piece.Movement
	s := page.Sheet{Title: c.Say(words.RateSheet), Code: m.Serial, Sub: v.sub(), Nav: page.BatchesURL, Styles: []string{"desk.css"},
		Back: &page.Link{Text: c.Say(words.BatchTitle.With(v.Batch.Code)), URL: v.batchURL()}, Cells: v.cells()}
	for _, beside := range []struct {
		text   words.Text
		serial string
	}{{words.Before, v.Before}, {words.Next, v.Next}} {
		if beside.serial != "" {
			s.Acts = append(s.Acts, page.Act{Text: c.Say(beside.text), URL: page.MovementURL(v.Batch.Code, beside.serial)})
		}
	}
	if v.may.doubt {
		s.Scripts = []string{page.LaterScript}
	}
	if v.may.correct && len(v.correctable()) > 0 {
		s.Acts = append(s.Acts, page.Act{Text: c.Say(words.CorrectReading), URL: v.open(doCorrect, "")})
	}
	if v.may.end {
		text := words.EndTitle
		if m.End != store.InTrial {
			text = words.EndBack
		}
		s.Acts = append(s.Acts, page.Act{Text: c.Say(text), URL: v.open(doEnd, "")})
	}
	if v.may.bench && v.result.Verdict == trial.Fail {
		s.Acts = append(s.Acts, page.Act{Text: c.Say(words.BenchNoteTitle), URL: page.BenchNoteURL(v.Batch.Code, m.Serial)})
	}
	if v.may.verdicts && m.Paper != "" {
		s.Acts = append(s.Acts, page.Act{Text: c.Say(paperWord(m.PaperKind)), URL: page.CertificateURL(m.Paper), Main: true})
	}
	return s
}

func paperWord(kind string) words.Text {
	if kind == "certificate" {
		return words.PaperCertificate
	}
	return words.PaperRejection
}

func (v movementView) sub() string {
	where := words.Text(words.NoHolder)
	if m := v.piece.Movement; m.Holder != "" {
		where = words.HolderAndPlace.With(m.Holder, m.Place)
	}
	if !v.may.verdicts {
		return v.c.Say(words.SizeAndCalibre.With(words.Raw(forWhom(v.c, &v.Batch)), where))
	}
	return v.c.Say(words.MovementSub.With(words.Raw(forWhom(v.c, &v.Batch)), v.Batch.Category, where))
}

func (v movementView) cells() []page.Cell {
	c, b, m := v.c, &v.Batch, v.piece.Movement
	stands := plainStanding(m.End)
	if v.may.verdicts {
		stands = judgedAs(v.standing())
	}
	cells := []page.Cell{{Label: c.Say(words.Standing), Body: standsCell(c, stands, v.failedIn())}}
	cells = append(cells, page.TextCell(c.Say(words.Presentation), c.Say(presentation(m.Attempt))),
		page.TextCell(c.Say(words.Programme), c.Say(words.ProgrammeVersion.With(b.Programme.Title, b.Programme.Version))),
		page.TextCell(c.Say(words.TrialFromTo), c.Say(words.DateToDate.With(c.Date(b.StartsAt), c.Date(b.Due(b.LastStep()))))))
	if v.may.verdicts {
		cells = append(cells, page.TextCell(c.Say(words.DecisionRule), c.Say(decision(b.Programme))))
		if m.Paper != "" {
			cells = append(cells, page.Cell{Label: c.Say(paperWord(m.PaperKind)), Body: paperCell(m.Paper)})
		}
	}
	return cells
}

func presentation(attempt int) words.Text {
	if attempt <= 1 {
		return words.FirstPresentation
	}
	return words.AttemptNumber.With(attempt)
}

// failedIn names the criteria outside their limits.
func (v movementView) failedIn() string {
	failed := v.result.Failed()
	if !v.may.verdicts || len(failed) == 0 {
		return ""
	}
	return v.c.Say(words.FailedIn.With(strings.Join(failed, ", ")))
}

func (v movementView) chart() chart.Rates {
	return chart.RatesOf(v.c.Printer, v.judge, v.piece.Serial, v.Rates, &v.result, v.replacedRates())
}

func (v movementView) criteria() part.Criteria {
	return part.CriteriaOf(v.c.Printer, v.judge, &v.result, false)
}

// needed says what the next day must be for an open movement still to be able to pass; "" when that
// is not the question.
func (v movementView) needed() string {
	if v.standing() != standsOpen && v.standing() != standsCannot {
		return ""
	}
	if v.cannot {
		if symbols := v.result.Unreachable(); len(symbols) > 0 {
			return v.c.Say(words.CannotFor.With(strings.Join(symbols, ", ")))
		}
		return v.c.Say(words.CannotTogether)
	}
	day := slices.IndexFunc(v.Rates, func(r trial.Rate) bool { return !r.Known() }) + 1
	if lo, hi, ok := v.judge.Needed(v.Rates, day); ok {
		return v.c.Say(words.DayNeeded.With(day, v.c.Unit(v.c.Needed(lo, hi), v.c.Say(words.UnitSecondsPerDay))))
	}
	return ""
}

// remarkURL opens the form of a remark.
func (v movementView) remarkURL(id string) string {
	return page.Query(v.url(), "remark", id) + "#remark"
}

func (v movementView) remarkLines() []remarkLine {
	lines := remarkLines(v.c, v.Batch.Code, openFirst(v.MovementSheet.Remarks), v.remark, v.remarkURL)
	for i := range lines {
		lines[i].URL = "" // this is its sheet
	}
	return lines
}

// emptied is a field without what was typed: a second look is blind.
func emptied(f page.Field) page.Field {
	f.Value = ""
	return f
}
