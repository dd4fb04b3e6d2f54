package desk

import (
	"slices"
	"strings"

	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// mostOnMap movements are drawn in their holders; of more, the table sorted by place says as much.
const mostOnMap = 400

// holders draws every holder of the batch with its movements as they stand.
func (v batchView) holders() []part.Holder {
	if len(v.pieces) > mostOnMap {
		return nil
	}
	lying := map[string][]*piece{}
	var codes []string
	for i := range v.pieces {
		p := &v.pieces[i]
		if p.Holder == "" {
			continue
		}
		if lying[p.Holder] == nil {
			codes = append(codes, p.Holder)
		}
		lying[p.Holder] = append(lying[p.Holder], p)
	}
	slices.Sort(codes)
	out := make([]part.Holder, 0, len(codes))
	for _, code := range codes {
		out = append(out, v.holder(code, lying[code]))
	}
	return out
}

func (v batchView) holder(code string, lying []*piece) part.Holder {
	h := part.Holder{Code: code, Note: v.holderNote(lying)}
	i := slices.IndexFunc(v.types, func(t store.HolderType) bool { return t.Code == lying[0].HolderType })
	if i < 0 {
		return h
	}
	t := v.types[i]
	h.Rows, h.Cols = t.Rows, t.Columns
	for _, place := range t.Places() {
		row, col := t.At(place)
		at := part.HolderPlace{N: itoa(place), Row: row, Col: col, State: part.PlaceEmpty}
		for _, p := range lying {
			if p.Place == place {
				judged := judgedAs(p.standing())
				at.State, at.Serial, at.Judged, at.URL = part.PlaceRead, p.Serial, &judged, page.MovementURL(v.Batch.Code, p.Serial)
			}
		}
		h.Places = append(h.Places, at)
	}
	return h
}

// holderNote counts what is not in order in a holder.
func (v batchView) holderNote(lying []*piece) string {
	count := map[string]int{}
	for _, p := range lying {
		count[p.standing()]++
	}
	var says []string
	for _, s := range []string{standsFail, string(store.Rejected), string(store.Removed), standsCannot} {
		if n := count[s]; n > 0 {
			says = append(says, v.c.Say(words.CountAndWord.With(n, judgedAs(s).Word)))
		}
	}
	return strings.Join(says, ", ")
}

// legend says what the rings mean, for the standings that are there.
func (v batchView) legend() (marks []part.Judged) {
	here := map[string]bool{}
	for i := range v.pieces {
		here[v.pieces[i].standing()] = true
	}
	for _, s := range []string{standsPass, standsFail, standsCannot, standsOpen} {
		if here[s] {
			marks = append(marks, judgedAs(s))
		}
	}
	return marks
}
