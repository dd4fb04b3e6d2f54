package trial

import "strings"

// Position is one of the six positions of a test piece, named by what is up (ISO 3158:1976).
type Position string

// The six positions. Crown positions hold for a crown at 3 o'clock.
const (
	CH  Position = "CH"  // dial up (cadran en haut)
	FH  Position = "FH"  // dial down (fond en haut)
	H3  Position = "3H"  // 3 up: crown up
	H6  Position = "6H"  // 6 up: crown left
	H9  Position = "9H"  // 9 up: crown down
	H12 Position = "12H" // 12 up: crown right
)

// Positions lists all six, the horizontal ones first.
func Positions() []Position { return []Position{CH, FH, H3, H6, H9, H12} }

// ParsePosition reads a symbol, trimmed and in either case. CB (cadran bas) is taken as FH, the
// one symbol stored; ok is false for anything else.
func ParsePosition(s string) (p Position, ok bool) {
	p = Position(strings.ToUpper(strings.TrimSpace(s)))
	if p == "CB" {
		return FH, true
	}
	return p, p.Vertical() || p == CH || p == FH
}

// Vertical tells whether the dial stands upright.
func (p Position) Vertical() bool { return p == H3 || p == H6 || p == H9 || p == H12 }

// Crown says where a crown at 3 o'clock points, as a code for web/words: left, up, down, right or
// horizontal; empty for an unknown position.
func (p Position) Crown() string {
	switch p {
	case CH, FH:
		return "horizontal"
	case H3:
		return "up"
	case H6:
		return "left"
	case H9:
		return "down"
	case H12:
		return "right"
	}
	return ""
}
