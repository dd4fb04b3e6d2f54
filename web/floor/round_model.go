package floor

import (
	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

// roundModel is what the script of the round page starts from: where the places lie and how they stand,
// but no value (practice notes E8), and every sentence it may have to say, with its blanks in braces.
type roundModel struct {
	Readings string            `json:"readings"` // where readings go, and where one's own is asked for
	Page     string            `json:"page"`
	Batch    string            `json:"batch"`
	K        int               `json:"k"`
	Kind     string            `json:"kind"`
	Comma    bool              `json:"comma"` // the language writes decimals with a comma
	Zone     string            `json:"zone"`
	Open     bool              `json:"open"`
	At       [2]int            `json:"at"` // holder and seat shown first
	Holders  []holderModel     `json:"holders"`
	Codes    map[string]string `json:"codes"` // observation by key
	Words    map[string]string `json:"words"`
}

type holderModel struct {
	Code  string      `json:"code"`
	Seats []seatModel `json:"seats"` // in reading order
}

type seatModel struct {
	Place  int    `json:"n"`
	Row    int    `json:"row"`
	Col    int    `json:"col"`
	Serial string `json:"serial,omitempty"`
	Short  string `json:"short,omitempty"`
	Nth    int    `json:"nth,omitempty"`
	State  string `json:"state"` // to-do, read, look, off, empty
	Code   string `json:"code,omitempty"`
	Mine   bool   `json:"mine,omitempty"`
	End    string `json:"end,omitempty"`
}

func modelOf(c *page.Context, s *store.RoundSheet, h, i int) roundModel {
	url := page.RoundURL(s.Batch.Code, s.K)
	m := roundModel{Readings: page.Under(url, "readings"), Page: url, Batch: s.Batch.Code, K: s.K, Kind: string(store.KindState),
		Comma: c.Lang() != words.EN, Zone: c.Zone().String(), Open: s.State == store.RoundOpen, At: [2]int{h, i},
		Codes: map[string]string{}, Words: saying(c, s)}
	if s.Batch.Entry == store.EntryRate {
		m.Kind = string(store.KindRate)
	}
	for n, o := range store.Observations {
		m.Codes[observationKeys[n]] = string(o)
	}
	for _, h := range s.Holders {
		hm := holderModel{Code: h.Code}
		for _, x := range h.Seats {
			hm.Seats = append(hm.Seats, seatOf(c, &h, x))
		}
		m.Holders = append(m.Holders, hm)
	}
	return m
}

func seatOf(c *page.Context, h *store.HolderRound, x store.Seat) seatModel {
	row, col := h.Type.At(x.Place)
	m := seatModel{Place: x.Place, Row: row, Col: col, Serial: x.Serial, Short: short(x.Serial), Nth: x.Nth, State: "to-do", Code: string(x.Code), Mine: x.Mine}
	switch {
	case x.No == 0:
		m.State, m.Short = "empty", ""
	case x.Ended != store.InTrial:
		m.State, m.End = "off", c.Say(words.EndWord(x.Ended))
	case x.Look:
		m.State = "look"
	case x.Read:
		m.State = "read"
	}
	return m
}

// blank is a place in a sentence that the script fills in.
func blank(name string) words.Text { return words.Raw("{" + name + "}") }

// saying is every sentence of the script.
func saying(c *page.Context, s *store.RoundSheet) map[string]string {
	n, time, value := blank("n"), blank("time"), blank("value")
	field, sign := words.FieldState, words.SignState
	if s.Batch.Entry == store.EntryRate {
		field, sign = words.FieldRate, words.SignRate
	}
	list := map[string]words.Text{
		"field": field.With(n), "sign": sign, "again": words.FieldAgain.With(n), "onceMore": words.FieldOnceMore.With(n),
		"correct": words.FieldCorrect.With(n), "none": words.FieldNone.With(n), "hintAgain": words.HintAgain,
		"hintOwn": words.HintOwn.With(value), "hintOwnUnseen": words.HintOwnUnseen, "hintOther": words.HintOther,
		"hintEnded": words.HintEnded.With(blank("end")), "hintEmpty": words.HintEmpty, "reasonNeeded": words.ReasonNeeded,
		"saved": words.PlaceSaved.With(n, time), "kept": words.PlaceKeptNow.With(n), "lookAgain": words.PlaceReadAgain.With(n),
		"lookOnceMore": words.PlaceOnceMore.With(n), "savedAfterLook": words.SavedAfterLook.With(blank("saved"), blank("why")),
		"askAgain": words.AskReadAgain.With(n), "askType": words.AskTypeAgain.With(n), "askWhere": words.AskWhere.With(blank("holder"), n),
		"typed": words.TypedValue.With(value), "conflictText": words.ConflictTwo.With(blank("name"), value, time, blank("mine")),
		"conflictAt": words.ConflictAt.With(time), "decide": words.ConflictDecide, "leave": words.LeaveTheirs.With(value), "put": words.PutMine.With(value),
		"conflictReason": words.ConflictReason, "bothAgree": words.BothAgree.With(n, blank("name")), "notNumber": words.NotANumber,
		"emptyField": words.EmptyField, "allRead": words.AllRead, "holderDone": words.HolderDone.With(blank("holder")), "goOnTo": words.GoOnTo.With(n),
		"holderRead": words.HolderRead.With(blank("read"), blank("all")), "andLooks": words.AndLooks.With(blank("read"), n),
		"holderOf": words.HolderOf.With(n, blank("all"), blank("code")), "countOf": words.CountOf.With(blank("read"), blank("all")),
		"netTitle": words.NetTitle.With(time), "netText": words.NetText.With(n), "outTitle": words.SignedOutNet, "outText": words.SignedOutText.With(n),
		"wait": words.WaitForQueue.With(n), "callRefused": words.CallRefused,
		"placeSays": words.PlaceSays.With(n, blank("serial"), blank("state")), "placeNothing": words.PlaceNothing.With(n, blank("state")),
		"stateToDo": words.PlaceToDo, "stateHere": words.PlaceHere, "stateRead": words.PlaceRead, "stateKept": words.PlaceKept, "stateLook": words.PlaceLook,
		"stateEmpty": words.PlaceEmpty, "stateTrouble": words.LegendTrouble, "here": words.PlaceNow, "read": words.PlaceRead,
		"again1": words.PlaceAgain, "refused": words.PlaceRefused, "conflict": words.PlaceTwo, "draft": words.PlaceTyped,
	}
	said := map[string]string{}
	for k, t := range list {
		said[k] = c.Say(t)
	}
	for _, o := range store.Observations {
		said["seen-"+string(o)] = c.Say(words.Seen(o))
		said["short-"+string(o)] = c.Say(words.SeenShort(o))
	}
	return said
}
