package floor

import (
	"net/http"
	"strconv"

	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

// pieceView is what can be done at a round besides reading: a remark on it or on one movement, and the
// end of a movement's trial.
type pieceView struct {
	sheet      page.Sheet
	serial     string
	remark     *page.Form
	end        *page.Form // nil: this cannot be ended here
	remarkURL  string
	endURL     string
	ended      string // how it left, "" while it is in trial
	remarkHint string
}

var (
	remarkLabels = []page.Label{{Name: "words", Text: words.RemarkLabel}}
	endLabels    = []page.Label{{Name: "end", Text: words.EndHow}, {Name: "cause", Text: words.EndCause}, {Name: "seen", Text: words.EndSeen}}
)

// Movement shows what can be done with one movement at a round besides reading it.
func (f *Floor) Movement(w http.ResponseWriter, r *http.Request) error {
	v, err := f.viewPiece(r, r.URL.Query().Get("serial"))
	if err != nil {
		return err
	}
	return page.Render(w, r, http.StatusOK, piecePage(page.Of(r), v))
}

// RoundRemark shows the form for a remark on the whole batch at a round.
func (f *Floor) RoundRemark(w http.ResponseWriter, r *http.Request) error {
	v, err := f.viewPiece(r, "")
	if err != nil {
		return err
	}
	return page.Render(w, r, http.StatusOK, piecePage(page.Of(r), v))
}

func (f *Floor) viewPiece(r *http.Request, serial string) (pieceView, error) {
	c := page.Of(r)
	code, k, err := roundOf(r)
	if err != nil {
		return pieceView{}, err
	}
	s, err := f.lab.RoundSheet(r.Context(), c.Actor, code, k)
	if err != nil {
		return pieceView{}, err
	}
	url := page.RoundURL(code, k)
	v := pieceView{serial: serial, remark: page.NewForm(c, remarkLabels...), remarkURL: page.Under(url, "remark"), remarkHint: c.Say(words.RemarkHintAll)}
	v.sheet = page.Sheet{Title: c.Say(words.RemarkTitle), Nav: page.TodayURL, Floor: true, Styles: styles, Sub: c.Say(words.BatchTitle.With(code)) + ", " + c.Say(words.RoundNumber.With(k)),
		Back: &page.Link{Text: c.Say(words.BackToRound), URL: url}}
	if serial == "" {
		return v, nil
	}
	h, x := seatOfSerial(&s, serial)
	if x == nil {
		return v, page.NotFound()
	}
	v.sheet.Title, v.sheet.Code = c.Say(words.PieceTitle), serial
	v.sheet.Sub = c.Say(words.PieceWhere.With(words.Raw(v.sheet.Sub), h.Code, x.Place))
	v.sheet.Back.URL = page.RoundPlaceURL(code, k, h.Code, strconv.Itoa(x.Place))
	v.remarkHint, v.remarkURL, v.endURL = c.Say(words.RemarkHint), page.Under(url, "movement", "remark"), page.Under(url, "movement", "end")
	if x.Ended != store.InTrial {
		v.ended = c.Say(words.EndWord(x.Ended))
	}
	if c.Actor.May(store.RightEnd) {
		v.end = page.NewForm(c, endLabels...)
		if x.Code != "" {
			v.end.Set("seen", string(x.Code))
		}
	}
	return v, nil
}

// AddRemark notes something on a movement, or on the batch when no serial is given.
func (f *Floor) AddRemark(w http.ResponseWriter, r *http.Request) error {
	c := page.Of(r)
	code, k, err := roundOf(r)
	if err != nil {
		return err
	}
	form, err := page.ReadForm(r, remarkLabels...)
	if err != nil {
		return err
	}
	serial := form.Raw("serial")
	err = f.lab.AddRemark(r.Context(), c.Actor, code, serial, k, form.Get("words"))
	if err == nil {
		return page.Redirect(w, r, f.backTo(r, serial, "noted"))
	}
	if !form.Take(err) {
		return err
	}
	v, err := f.viewPiece(r, serial)
	if err != nil {
		return err
	}
	v.remark = form
	return page.Render(w, r, form.Status(), piecePage(c, v))
}

// EndMovement ends a movement's trial for a cause, or takes the end back.
func (f *Floor) EndMovement(w http.ResponseWriter, r *http.Request) error {
	c := page.Of(r)
	code, _, err := roundOf(r)
	if err != nil {
		return err
	}
	form, err := page.ReadForm(r, endLabels...)
	if err != nil {
		return err
	}
	serial := form.Raw("serial")
	if form.Raw("end") == "" && form.Raw("back") == "" {
		form.Wrong("end", words.EndChoose)
		if form.Get("cause") == "" {
			form.Wrong("cause", words.Refusal("needed", nil))
		}
	} else {
		err = f.lab.EndMovement(r.Context(), c.Actor, code, serial, store.End(form.Raw("end")), form.Get("cause"), store.Observation(form.Raw("seen")))
		if err == nil {
			return page.Redirect(w, r, f.backTo(r, serial, ""))
		}
		if !form.Take(err) {
			return err
		}
	}
	v, err := f.viewPiece(r, serial)
	if err != nil {
		return err
	}
	v.end = form
	return page.Render(w, r, form.Status(), piecePage(c, v))
}

// backTo is the round page at the movement that was dealt with.
func (f *Floor) backTo(r *http.Request, serial, noted string) string {
	code, k, _ := roundOf(r)
	s, err := f.lab.RoundSheet(r.Context(), page.Of(r).Actor, code, k)
	if err != nil {
		return page.RoundURL(code, k)
	}
	h, x := seatOfSerial(&s, serial)
	if x == nil {
		return page.Query(page.RoundURL(code, k), "noted", noted)
	}
	return page.Query(page.RoundURL(code, k), "holder", h.Code, "place", strconv.Itoa(x.Place), "noted", noted)
}

func endOptions(c *page.Context) []page.Option {
	return []page.Option{{Value: string(store.Rejected), Text: c.Say(words.EndRejectedFor)}, {Value: string(store.Withdrawn), Text: c.Say(words.EndWithdrawnBy)},
		{Value: string(store.Void), Text: c.Say(words.EndVoidBy)}}
}

func seenOptions(c *page.Context) []page.Option {
	list := []page.Option{{Value: "", Text: c.Say(words.EndSeenNothing)}}
	for _, o := range store.Observations {
		list = append(list, page.Option{Value: string(o), Text: c.Say(words.Seen(o))})
	}
	return list
}
