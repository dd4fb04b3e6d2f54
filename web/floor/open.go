package floor

import (
	"net/http"
	"strconv"
	"strings"

	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

// OpenRound opens a round for reading.
func (f *Floor) OpenRound(w http.ResponseWriter, r *http.Request) error {
	code, k, err := roundOf(r)
	if err != nil {
		return err
	}
	if err := f.lab.OpenRound(r.Context(), page.Of(r).Actor, code, k); err != nil {
		return err
	}
	return page.Redirect(w, r, page.RoundURL(code, k))
}

// closeView asks whether a round is closed without what is missing.
type closeView struct {
	sheet       page.Sheet
	url, action string
	missing     []missingPlace
	looks       int
	token       string // what was shown as missing: closing with anything else missing asks again
	changed     bool
}

type missingPlace struct {
	holder, serial, url string
	place               int
	look                bool
}

// CloseRound closes a round; with readings missing only after they were named and confirmed.
func (f *Floor) CloseRound(w http.ResponseWriter, r *http.Request) error {
	c := page.Of(r)
	code, k, err := roundOf(r)
	if err != nil {
		return err
	}
	form, err := page.ReadForm(r)
	if err != nil {
		return err
	}
	s, err := f.lab.RoundSheet(r.Context(), c.Actor, code, k)
	if err != nil {
		return err
	}
	v := viewClose(c, &s)
	if len(v.missing) > 0 && form.Raw("without") != v.token {
		v.changed = form.Raw("without") != ""
		return page.Render(w, r, http.StatusUnprocessableEntity, closePage(c, v))
	}
	if err := f.lab.CloseRound(r.Context(), c.Actor, code, k); err != nil {
		return err
	}
	return page.Redirect(w, r, page.TodayURL)
}

func viewClose(c *page.Context, s *store.RoundSheet) closeView {
	url := page.RoundURL(s.Batch.Code, s.K)
	v := closeView{url: url, action: page.Under(url, "close"), sheet: page.Sheet{Title: c.Say(words.CloseTitle.With(s.K)), Code: s.Batch.Code,
		Sub: roundWords(c, &s.Batch, s.Plan), Nav: page.TodayURL, Floor: true, Styles: styles, Back: &page.Link{Text: c.Say(words.BackToRound), URL: url}}}
	if nothingRead(s) {
		return v
	}
	var nos []string
	for _, h := range s.Holders {
		for _, x := range h.Seats {
			if !toRead(x) {
				continue
			}
			v.missing = append(v.missing, missingPlace{holder: h.Code, serial: x.Serial, place: x.Place, look: x.Look,
				url: page.RoundPlaceURL(s.Batch.Code, s.K, h.Code, strconv.Itoa(x.Place))})
			nos = append(nos, strconv.Itoa(x.No))
			if x.Look {
				v.looks++
			}
		}
	}
	v.token = strings.Join(nos, " ")
	return v
}
