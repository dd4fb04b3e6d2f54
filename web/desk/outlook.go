package desk

import (
	"cmp"
	"net/http"
	"slices"
	"strconv"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/trial/outlook"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

// mostUnlikely is how many movements the list shows.
const mostUnlikely = 20

// Outlook is what the open movements of a batch will probably do.
func (d *Desk) Outlook(w http.ResponseWriter, r *http.Request) error {
	c := page.Of(r)
	s, err := d.lab.BatchSheet(r.Context(), c.Actor, param(r, "code"))
	if err != nil {
		return err
	}
	h, err := d.lab.HistoryOf(r.Context(), c.Actor, &s.Batch)
	if err != nil {
		return err
	}
	b, err := judgeBatch(s)
	if err != nil {
		return err
	}
	v, err := outlookOf(c, b, h)
	if err != nil {
		return err
	}
	frame := partFrame(c, &s.Batch)
	return outlookPlace(c, s.Batch.Code).Answer(w, r, http.StatusOK, frame, outlookBody(c, v))
}

// outlookPlace is where the outlook stands on the page of a batch.
func outlookPlace(c *page.Context, code string) page.Later {
	return page.Later{ID: "outlook", Title: c.Say(words.OutlookTitle), Text: c.Say(words.OutlookShow), URL: page.OutlookURL(code), Inner: true}
}

// asksOutlook tells whether anything is open.
func (v batchView) asksOutlook() bool { return v.all().Open > 0 }

// outlookView is the outlook of a batch ready to be drawn.
type outlookView struct {
	Lead, History string // Lead is "" when nothing is open
	Rows          []outlookRow
}

type outlookRow struct {
	Serial, URL, Place, Read, Chance string
	p                                float64
}

func outlookOf(c *page.Context, b *judged, h store.History) (outlookView, error) {
	forecast, err := outlook.New(b.judge, h.All, h.Own)
	if err != nil {
		return outlookView{}, err
	}
	var v outlookView
	expected := 0.0
	for i := range b.pieces {
		m := b.pieces[i].Movement
		if m.End != store.InTrial || b.pieces[i].result.Verdict != trial.Open {
			continue
		}
		p, ok := forecast.Chance(m.Rates)
		if !ok {
			continue
		}
		expected += p
		v.Rows = append(v.Rows, outlookRow{m.Serial, page.MovementURL(b.Batch.Code, m.Serial), placeText(m), strconv.Itoa(daysRead(m)), c.Chance(probability(p), 1), p})
	}
	if len(v.Rows) == 0 {
		return v, nil
	}
	pass, all := int(expected+0.5), b.all()
	v.Lead = c.Say(words.OutlookLead.With(len(v.Rows), pass, c.Share(all.Pass+pass, all.Judged()+len(v.Rows))))
	if v.History = c.Say(words.OutlookNoPast); h.All.N() > 0 {
		v.History = c.Say(words.OutlookHistory.With(int(h.Own.N()), int(h.All.N())))
	}
	slices.SortStableFunc(v.Rows, func(a, b outlookRow) int { return cmp.Compare(a.p, b.p) })
	v.Rows = v.Rows[:min(len(v.Rows), mostUnlikely)]
	return v, nil
}

// daysRead counts the days of a movement that have a rate.
func daysRead(m *store.Movement) (n int) {
	for _, r := range m.Rates {
		if r.Known() {
			n++
		}
	}
	return n
}
