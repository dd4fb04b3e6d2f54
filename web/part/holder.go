package part

import (
	"strconv"
	"strings"

	"ratehouse/web/words"
)

// Holder is whatever carries movements, as it lies on the bench, seen from above: every place of its
// type in reading order, those that are blocked, empty or left behind too. A hole stays a hole.
type Holder struct {
	Code       string // engraved on it
	Rows, Cols int
	Places     []HolderPlace
	Note       string // at its right, "2 fail"
}

// HolderPlace is one place.
type HolderPlace struct {
	N        string // as engraved or counted
	Row, Col int    // where it lies, from 1 at the top left
	State    PlaceState
	Serial   string
	Short    string // the end of the number, as it is read under the loupe; "" uses Serial
	Value    string // shown only when no field is open (E8)
	Word     string // what else stands there: withdrawn, now
	Judged   *Judged
	URL      string
}

// PlaceState is what a place looks like.
type PlaceState string

// The states of a place. On a map of verdicts the mark says more than the state.
const (
	PlaceToDo    PlaceState = "to-do"
	PlaceHere    PlaceState = "here"
	PlaceRead    PlaceState = "read"
	PlaceKept    PlaceState = "kept" // on this device, not yet sent
	PlaceLook    PlaceState = "look"
	PlaceOff     PlaceState = "off"     // left the trial, still lying or not
	PlaceEmpty   PlaceState = "empty"   // no movement
	PlaceBlocked PlaceState = "blocked" // cannot carry one
)

// says is the whole place in a sentence, for screen readers.
func (h HolderPlace) says(p *words.Printer) string {
	if h.State == PlaceEmpty {
		return p.Say(words.PlaceNothing.With(h.N, words.PlaceEmpty))
	}
	if h.State == PlaceBlocked {
		return p.Say(words.PlaceNothing.With(h.N, words.PlaceBlocked))
	}
	state := h.Word
	if h.Judged != nil {
		state = p.Say(h.Judged.Word)
	}
	if state == "" {
		state = p.Say(h.stateText())
	}
	return p.Say(words.PlaceSays.With(h.N, h.Serial, state))
}

func (h HolderPlace) stateText() words.Text {
	switch h.State {
	case PlaceHere:
		return words.PlaceHere
	case PlaceRead:
		return words.PlaceRead
	case PlaceKept:
		return words.PlaceKept
	case PlaceLook:
		return words.PlaceLook
	case PlaceOff:
		return words.PlaceRemoved
	}
	return words.PlaceToDo
}

func (h HolderPlace) short() string {
	if h.Short != "" {
		return h.Short
	}
	return h.Serial
}

// gridMost is the number of rows and columns the style sheet can place; a larger holder flows in
// reading order.
const gridMost = 12

func (h Holder) class() string {
	if h.Cols > gridMost {
		return "holder"
	}
	return "holder cols-" + strconv.Itoa(max(h.Cols, 1))
}

// at places a place in the grid; reading order and layout may differ, as in a strip read from its other
// end.
func (h Holder) at(p HolderPlace) string {
	if p.Row < 1 || p.Col < 1 || p.Row > gridMost || p.Col > gridMost {
		return ""
	}
	return "at-r" + strconv.Itoa(p.Row) + " at-c" + strconv.Itoa(p.Col)
}

// mapView is a holder as a small picture: a ring for each place.
type mapView struct {
	Box, W, H string
	Places    []mapPlace
}

type mapPlace struct {
	HolderPlace
	X, Y, Class, Strike string
	Says                string
}

const mapStep = 29

func (h Holder) mapView(p *words.Printer) mapView {
	w, ht := 11+mapStep*max(h.Cols, 1), 10+mapStep*max(h.Rows, 1)
	v := mapView{Box: "0 0 " + strconv.Itoa(w) + " " + strconv.Itoa(ht), W: strconv.Itoa(w - 1), H: strconv.Itoa(ht - 1)}
	for _, pl := range h.Places {
		if pl.State == PlaceBlocked {
			continue
		}
		x, y := 20+mapStep*(pl.Col-1), 19+mapStep*(pl.Row-1)
		m := mapPlace{HolderPlace: pl, X: strconv.Itoa(x), Y: strconv.Itoa(y), Says: pl.says(p), Class: "place s-" + pl.mapClass()}
		m.Strike = strings.Join([]string{"M", strconv.Itoa(x - 7), " ", strconv.Itoa(y + 7), "l14-14"}, "")
		v.Places = append(v.Places, m)
	}
	return v
}

func (h HolderPlace) mapClass() string {
	switch {
	case h.State == PlaceEmpty:
		return "empty"
	case h.Judged != nil:
		return string(h.Judged.Mark)
	}
	return "open"
}
