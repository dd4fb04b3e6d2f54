package desk

import (
	"net/http"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/trial/balance"
	"ratehouse/trial/sheet"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

// aimSeed drives the resampling behind the aim point: one number for all, so that a batch always gets
// the same answer.
const aimSeed = 1

// mostShift is the greatest shift that may be asked for, thousandths of s/d: no rate lies beyond it.
const mostShift = 600_000

// aimShifts are the shifts the table shows, thousandths of s/d.
var aimShifts = []trial.Milli{-4000, -3000, -2000, -1000, -500, 0, 500, 1000, 2000, 3000, 4000}

// Aim is what a batch would yield with all its rates shifted alike: where the workshop that regulates
// it should set.
func (d *Desk) Aim(w http.ResponseWriter, r *http.Request) error {
	c := page.Of(r)
	s, err := d.lab.BatchSheet(r.Context(), c.Actor, param(r, "code"))
	if err != nil {
		return err
	}
	j, err := trial.NewJudge(s.Batch.Programme, s.Batch.Category)
	if err != nil {
		return err
	}
	form := shiftForm(c, r.URL.Query().Get("shift"))
	v := aimViewOf(c, s.Batch.Code, judgedRates(&s), j, form)
	frame := partFrame(c, &s.Batch)
	status := http.StatusOK
	if !form.OK() {
		status = form.Status()
	}
	return aimPlace(c, s.Batch.Code).Answer(w, r, status, frame, aimBody(c, v))
}

// aimPlace is where the aim point stands on the page of a batch.
func aimPlace(c *page.Context, code string) page.Later {
	return page.Later{ID: "aim", Title: c.Say(words.AimTitle), Text: c.Say(words.AimShow), URL: page.AimURL(code)}
}

// asksAim tells whether the page of a batch has anything to shift: a verdict, pass or fail.
func (v batchView) asksAim() bool { return v.all().Judged() > 0 }

// judgedRates are the movements that the yield counts and their rates decide: no shift makes a stopped
// movement run.
func judgedRates(s *store.BatchSheet) (lot [][]trial.Rate) {
	for i := range s.Movements {
		if m := &s.Movements[i]; m.End == store.InTrial || m.End == store.Removed {
			lot = append(lot, m.Rates)
		}
	}
	return lot
}

// shiftForm takes the shift out of the address, as it was typed.
func shiftForm(c *page.Context, typed string) *page.Form {
	f := page.NewForm(c, page.Label{Name: "shift", Text: words.AimShift})
	f.Set("shift", typed)
	if typed == "" {
		return f
	}
	milli, err := sheet.ParseMilli(typed, c.Lang() != words.EN)
	switch {
	case err != nil:
		f.Wrong("shift", words.AimShiftWrong)
	case milli < -mostShift || milli > mostShift:
		f.Wrong("shift", words.AimShiftFar)
	}
	return f
}

// aimView is the aim point of a batch ready to be drawn.
type aimView struct {
	URL     string
	Form    *page.Form
	Says    []string // in sentences
	Asked   string   // the answer to the shift asked for; "" for none
	Rows    []aimRow
	Judged  int
	Nothing words.Text // why there is none
}

// aimRow is one shift and what it would yield.
type aimRow struct {
	Shift, Passes, Share string
	N, Of                int
	Now                  bool
}

func aimViewOf(c *page.Context, code string, lot [][]trial.Rate, j *trial.Judge, form *page.Form) aimView {
	a, ok := balance.AimPoint(j, lot, aimSeed)
	v := aimView{URL: page.AimURL(code), Form: form, Judged: a.Movements}
	switch {
	case a.Movements == 0:
		v.Nothing = words.NothingJudgedInFull
		return v
	case !ok:
		v.Nothing = words.AimNone
		return v
	}
	v.Says = aimSays(c, &a)
	for _, s := range aimShifts {
		n := a.PassesAt(s)
		v.Rows = append(v.Rows, aimRow{c.Signed(s.String(), 1), c.Count(n), c.Share(n, a.Movements), n, a.Movements, s == 0})
	}
	if typed := form.Get("shift"); typed != "" && form.OK() {
		milli, _ := sheet.ParseMilli(typed, c.Lang() != words.EN) // the form said that it can be read
		s := trial.Milli(milli)
		n := a.PassesAt(s)
		v.Asked = c.Say(words.AimAsked.With(c.Unit(c.Signed(s.String(), decimals(s)), c.Say(words.UnitSecondsPerDay)), n, a.Movements, c.Share(n, a.Movements)))
	}
	return v
}

// aimSays says the aim point in sentences.
func aimSays(c *page.Context, a *balance.Aim) []string {
	best := words.AimBest.With(a.AtBest, shifts(c, a.Best))
	if a.AtBest == a.Passed {
		best = words.AimStays
	}
	says := []string{c.Say(words.AimNow.With(a.Passed, a.Movements)), c.Say(best)}
	if a.Near != a.Best {
		says = append(says, c.Say(words.AimNear.With(shifts(c, a.Near))))
	}
	says = append(says, c.Say(words.AimSure.With(shifts(c, balance.Shift{Lo: a.Low, Hi: a.High}))))
	if a.MRejects > 0 {
		says = append(says, c.Say(words.AimRegulation.With(a.RegulationOnly, a.MRejects)))
	}
	return says
}

// shifts is an interval of shifts, drawn inwards so that every one shown serves.
func shifts(c *page.Context, s balance.Shift) string {
	return c.Unit(c.Needed(s.Lo.Exact(), s.Hi.Exact()), c.Say(words.UnitSecondsPerDay))
}

// decimals is one, or as many as it takes to show a shift as it was asked for.
func decimals(s trial.Milli) int {
	switch {
	case s%10 != 0:
		return 3
	case s%100 != 0:
		return 2
	}
	return 1
}
