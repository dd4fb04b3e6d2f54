package desk

import (
	"slices"
	"strings"

	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// mostAtRisk is how many movements the list shows; the table has them all.
const mostAtRisk = 40

// riskView lists open movements that cannot pass, or could not if their next day were like their mean
// so far.
type riskView struct {
	Day  int // the next one; 0 for none
	Lead string
	Rows []riskRow
	More string // address of the rest; "" for none
	Rest int
}

type riskRow struct {
	Serial, URL, Place string
	Judged             part.Judged
	Mean               string
	MeanKnown          bool
	Why                string
	Needed             string
	Hopeless           bool
}

// risks are exact: by what a next day must be for some numbers to satisfy all criteria together.
func (v batchView) risks() riskView {
	r := riskView{Day: v.next, Lead: v.c.Say(words.CannotLead)}
	if v.next > 0 {
		r.Lead = v.c.Say(words.RiskLead.With(v.next))
	}
	var list []*piece
	for i := range v.pieces {
		if p := &v.pieces[i]; p.cannot || p.risk {
			list = append(list, p)
		}
	}
	slices.SortStableFunc(list, func(x, y *piece) int {
		switch {
		case x.cannot == y.cannot:
			return 0
		case x.cannot:
			return -1
		}
		return 1
	})
	if r.Rest = len(list) - mostAtRisk; r.Rest > 0 {
		list, r.More = list[:mostAtRisk], v.filter(standsCannot)
	}
	for _, p := range list {
		r.Rows = append(r.Rows, v.riskRow(p))
	}
	return r
}

func (v batchView) riskRow(p *piece) riskRow {
	c := v.c
	row := riskRow{Serial: p.Serial, URL: page.MovementURL(v.Batch.Code, p.Serial), Place: placeText(p.Movement), Judged: judgedAs(standsCannot),
		Needed: c.Say(words.NoValueHelps), Hopeless: true, Why: c.Say(words.OutOfReachTogether), MeanKnown: p.days > 0}
	if row.MeanKnown {
		row.Mean = c.Signed(p.mean.Decimal(2), 2)
	}
	if symbols := p.result.Unreachable(); len(symbols) > 0 {
		row.Why = strings.Join(symbols, ", ")
	}
	if p.cannot {
		return row
	}
	row.Judged, row.Why = part.Judged{Mark: part.Open, Word: words.AtRisk}, ""
	if lo, hi, ok := v.judge.Needed(p.Rates, v.next); ok {
		row.Needed, row.Hopeless = c.Needed(lo, hi), false
	}
	return row
}

// placeText is where a movement lies.
func placeText(m *store.Movement) string {
	if m.Holder == "" {
		return words.Blank
	}
	return m.Holder + "·" + itoa(m.Place)
}
