package entry

import "math"

// Shift is what a whole round has in common beyond what was expected (practice.md B2): the lot is the
// clock. Thousandths of a second, of s/d for rates.
type Shift struct {
	Code  ShiftCode
	Off   int64
	Error int64 // standard uncertainty of Off: of the median and of what lots of the calibre differ by
	N     int   // values it rests on
}

// ShiftCode names what a common shift looks like.
type ShiftCode string

// The codes: whole hours; ten seconds, a pip off; whole seconds of a reference set wrongly; anything
// else, such as another reader or station.
const (
	ClockChange ShiftCode = "clock_change" // E4
	WrongPip    ShiftCode = "wrong_pip"
	WholeSecond ShiftCode = "whole_seconds"
	Common      ShiftCode = "common"
)

// shiftSigma is by how many standard uncertainties a round must be off to be named, clockFewest from
// how many values on (B2).
const (
	shiftSigma  = 3
	clockFewest = 20
)

// Clock looks for a shift common to the values of a round read so far, from twenty on; nil is none.
// The median of the residuals is tested against its own uncertainty and against what whole lots of a
// calibre differ by on such a day: little on a day like the one before, more after a change.
func (f *Forecast) Clock(r Round, places []Place) *Shift {
	plain := f.plain(r, places)
	off := f.residuals(r, places, plain)
	if len(off) < clockFewest {
		return nil
	}
	middle, spread := medianAndSpread(off)
	u := math.Hypot(f.lotSpread(r.Day), math.Sqrt(medianWaste/float64(len(off)))*spread)
	if math.Abs(middle) <= shiftSigma*u {
		return nil
	}
	s := &Shift{Off: int64(math.Round(middle * thousand)), Error: int64(math.Round(u * thousand)), N: len(off)}
	s.Code = shiftCode(s.Off, shiftSigma*s.Error)
	return s
}

// shiftCode names the first kind of shift that the median is close to: within reach or a twentieth of
// the unit, for readers have small offsets besides.
func shiftCode(off, reach int64) ShiftCode {
	near := func(unit int64) bool {
		return magnitude(off) > unit/2 && magnitude(Fold(off, unit)) <= min(max(reach, unit/20), unit/4)
	}
	switch {
	case near(3_600_000):
		return ClockChange
	case magnitude(off) < 65_000 && near(10_000):
		return WrongPip
	case magnitude(off) < 65_000 && near(1000):
		return WholeSecond
	}
	return Common
}
