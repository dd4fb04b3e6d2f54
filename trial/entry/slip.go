package entry

import "ratehouse/trial"

// Slip is a code for what may have gone wrong with a value (practice.md E5).
type Slip string

// The slips of one value. By is in thousandths.
const (
	Odd        Slip = "odd"         // none of these is likelier than a movement that does as it was read
	Figure     Slip = "figure"      // read at a wrong figure or pip: By 1, 5 or 10 s
	Tail       Slip = "tail"        // read at the hand's tail, or upside down: By 30 s
	Minute     Slip = "minute"      // By 60 s
	Mirror     Slip = "mirror"      // hand at 60 - x: seen from the back
	Sign       Slip = "sign"        // sign left out or typed too much
	Point      Slip = "point"       // decimal point at another place
	Transposed Slip = "transposed"  // two neighbouring digits swapped
	Neighbour  Slip = "neighbour"   // the movement beside it; By -1 before, +1 after
	Repeated   Slip = "repeated"    // the value of the round before
	OtherHand  Slip = "other_hand"  // hand of the additional mechanism
	Unknown    Slip = "unknown"     // a slip, of no kind listed
	OtherTurn  Slip = "turn_unsure" // seconds hand: the whole turns are not sure (E1)
)

// SlipRate is how often a slip happens among ten thousand values.
type SlipRate struct {
	Slip Slip
	By   int64 // thousandths; 0 where the slip has no amount of its own
	Rate int64
}

// perReadings is what rates refer to.
const perReadings = 10_000

// slipRates lists what can happen to a value of this kind on this day. Figures by common practice, no
// source: they only rank what is named once a value is asked again; what is asked again hangs on the
// expectation alone.
func slipRates(kind Kind, day trial.Day) []SlipRate {
	list := []SlipRate{{Transposed, 0, 10}, {Neighbour, 0, 10}, {Repeated, 0, 3}, {Unknown, 0, 10}}
	if kind != OfHand { // which is typed without a sign, as three digits
		list = append(list, SlipRate{Sign, 0, 10}, SlipRate{Point, 0, 4})
	}
	if kind == OfRate {
		return list
	}
	tail := int64(3)
	if day.Position == trial.H6 { // 6 up: whoever takes 12 for the top reads 30 s off
		tail = 8
	}
	for _, s := range []SlipRate{{Figure, 1000, 5}, {Figure, 5000, 5}, {Figure, 10_000, 5}, {Tail, 30_000, tail}} {
		list = append(list, s, SlipRate{s.Slip, -s.By, s.Rate})
	}
	if kind == OfState {
		list = append(list, SlipRate{Minute, 60_000, 6}, SlipRate{Minute, -60_000, 6})
	}
	if kind == OfHand {
		mirror := int64(2)
		if day.Position == trial.FH { // a strip turned over is looked at from behind
			mirror = 8
		}
		list = append(list, SlipRate{Mirror, 0, mirror})
	}
	if day.Accessory {
		list = append(list, SlipRate{OtherHand, 0, 40})
	}
	return list
}
