package desk

import (
	"net/http"
	"strings"

	"github.com/google/uuid"

	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

// remarkNew is the open form of a remark that does not exist yet.
const remarkNew = "new"

// remarkLine is a remark as it stands in a list.
type remarkLine struct {
	ID           string
	Where, Words string
	URL          string // of the movement; "" for the whole batch
	About        string // when, who, state
	Last         string // what was said when it was assessed or closed
	Closed       bool
	Form         string // address that opens its form; "" for who may not
	Here         bool   // its form is open
}

func remarkLines(c *page.Context, code string, list []store.Remark, open string, form func(id string) string) []remarkLine {
	lines := make([]remarkLine, len(list))
	for i, r := range list {
		l := remarkLine{ID: r.ID.String(), Where: r.Serial, Words: r.Words, Closed: r.State == "closed",
			About: c.Say(words.RemarkAbout.With(c.Instant(r.At), r.By, remarkState(r.State)))}
		if r.Serial != "" {
			l.URL = page.MovementURL(code, r.Serial)
		}
		if r.Step >= 0 {
			l.About = c.Say(words.RemarkAtRound.With(r.Step, words.Raw(l.About)))
		}
		if r.State != "open" {
			l.Last = r.Last
		}
		if rightsOf(c).assess && !l.Closed {
			l.Form, l.Here = form(l.ID), open == l.ID
		}
		lines[i] = l
	}
	return lines
}

func remarkState(state string) words.Text {
	switch state {
	case "assessed":
		return words.RemarkAssessed
	case "closed":
		return words.RemarkClosed
	}
	return words.RemarkOpen
}

// remarks of the batch page, newest first, those that are not closed before the others.
func (v batchView) remarkLines() []remarkLine {
	return remarkLines(v.c, v.Batch.Code, openFirst(v.Remarks), v.choice.Remark, func(id string) string {
		q := v.choice
		q.Remark = id
		return q.address(v.Batch.Code, "remark")
	})
}

// openFirst puts what still needs a decision before what is closed.
func openFirst(list []store.Remark) []store.Remark {
	var open, closed []store.Remark
	for _, r := range list {
		if r.State == "closed" {
			closed = append(closed, r)
		} else {
			open = append(open, r)
		}
	}
	return append(open, closed...)
}

var (
	newRemarkLabels  = []page.Label{{Name: "serial", Text: words.RemarkOn}, {Name: "words", Text: words.RemarkLabel}}
	moveRemarkLabels = []page.Label{{Name: "state", Text: words.RemarkBecomes}, {Name: "words", Text: words.RemarkEffect}}
)

// remarkForm is the form that is open on the page: one that went back, or a fresh one.
func (v *batchView) remarkForm(back *page.Form) *page.Form {
	switch {
	case back != nil:
		return back
	case v.choice.Remark == remarkNew && v.may.remark:
		return page.NewForm(v.c, newRemarkLabels...)
	case v.choice.Remark != "" && v.may.assess:
		f := page.NewForm(v.c, moveRemarkLabels...)
		f.Set("state", "closed")
		return f
	}
	return nil
}

// newRemarkURL opens the form for a new remark.
func (v batchView) newRemarkURL() string {
	q := v.choice
	q.Remark = remarkNew
	return q.address(v.Batch.Code, "remark")
}

// closeURL is the page without the open form.
func (v batchView) closeURL() string {
	q := v.choice
	q.Remark = ""
	return q.address(v.Batch.Code, "remark")
}

// AddRemark notes something on a batch or one of its movements.
func (d *Desk) AddRemark(w http.ResponseWriter, r *http.Request) error {
	code, c := param(r, "code"), page.Of(r)
	f, err := page.ReadForm(r, newRemarkLabels...)
	if err != nil {
		return err
	}
	serial := f.Get("serial")
	err = d.lab.AddRemark(r.Context(), c.Actor, code, serial, -1, f.Raw("words"))
	if err == nil {
		return page.Redirect(w, r, back(f, page.BatchURL(code)+"#remark"))
	}
	if store.KindOf(err) == store.KindNotFound && serial != "" {
		f.Wrong("serial", words.Refusal("no_movement", map[string]string{"serial": serial, "code": code}))
	} else if !f.Take(err) {
		return err
	}
	return d.showRemark(w, r, f, remarkNew)
}

// MoveRemark says what became of a remark.
func (d *Desk) MoveRemark(w http.ResponseWriter, r *http.Request) error {
	c, id := page.Of(r), param(r, "remark")
	f, err := page.ReadForm(r, moveRemarkLabels...)
	if err != nil {
		return err
	}
	key, err := uuid.Parse(id)
	if err != nil {
		return page.NotFound()
	}
	err = d.lab.CloseRemark(r.Context(), c.Actor, key, f.Get("state"), f.Raw("words"))
	if err == nil {
		return page.Redirect(w, r, back(f, page.BatchURL(param(r, "code"))+"#remark"))
	}
	if !f.Take(err) {
		return err
	}
	return d.showRemark(w, r, f, id)
}

// showRemark draws the page the form came from, with the form as it was filled in.
func (d *Desk) showRemark(w http.ResponseWriter, r *http.Request, f *page.Form, open string) error {
	q := r.URL.Query()
	q.Set("remark", open)
	r.URL.RawQuery = q.Encode()
	if serial := f.Get("from"); serial != "" {
		return d.showMovement(w, r, serial, movementForms{remark: f})
	}
	return d.showBatch(w, r, f)
}

// back is where a form leads when it is done: the rate sheet it came from, or the page given.
func back(f *page.Form, otherwise string) string {
	if to := f.Raw("to"); page.Local(to) && strings.HasPrefix(to, page.BatchesURL) {
		return to
	}
	return otherwise
}
