package desk

import (
	"net/http"

	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// Search finds movements and batches; a single hit is gone to at once.
func (d *Desk) Search(w http.ResponseWriter, r *http.Request) error {
	c, asked := page.Of(r), r.URL.Query().Get("q")
	found, err := d.lab.Search(r.Context(), c.Actor, asked)
	if err != nil {
		return err
	}
	if to := singleHit(found); to != "" {
		return page.Redirect(w, r, to)
	}
	return page.Render(w, r, http.StatusOK, searchPage(c, searchView{asked, found, rightsOf(c).verdicts}))
}

// singleHit is where a search leads that leaves no choice: one thing found, or one that is meant whole.
func singleHit(f store.Found) string {
	var whole, all []string
	for _, b := range f.Batches {
		all = append(all, page.BatchURL(b.Code))
		if b.Whole {
			whole = append(whole, page.BatchURL(b.Code))
		}
	}
	for _, m := range f.Movements {
		all = append(all, page.MovementURL(m.Batch, m.Serial))
		if m.Whole {
			whole = append(whole, page.MovementURL(m.Batch, m.Serial))
		}
	}
	switch {
	case len(all) == 1:
		return all[0]
	case len(whole) == 1:
		return whole[0]
	}
	return ""
}

type searchView struct {
	Asked string
	store.Found
	Depositors bool // who is reading is not told them
}

func (v searchView) sheet(c *page.Context) page.Sheet {
	s := page.Sheet{Title: c.Say(words.SearchTitle), Nav: page.BatchesURL, Styles: []string{"desk.css"}, Back: &page.Link{Text: c.Say(words.BatchesAll), URL: page.BatchesURL}}
	if v.Asked != "" {
		s.Sub = c.Say(words.SearchFor.With(v.Asked))
	}
	return s
}

func (v searchView) empty(c *page.Context) part.Empty {
	if v.Asked == "" {
		return part.Empty{Title: c.Say(words.SearchEmpty), Text: c.Say(words.SearchHow)}
	}
	return part.Empty{Title: c.Say(words.SearchNothing.With(v.Asked)), Text: c.Say(words.SearchHow)}
}
