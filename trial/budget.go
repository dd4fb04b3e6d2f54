package trial

// Budget is an uncertainty budget as data: what the readings, the chambers, the reference and the
// handling of a laboratory contribute to the rates it states. All terms are standard uncertainties
// unless said otherwise, none is negative, and a term left at zero says that it is neglected. Its
// JSON form lives in trial/sheet; trial/conformity computes from it.
//
// The terms follow the law of propagation of JCGM 100:2008 5.2.2 (from memory); which of them matter
// is common practice, no source.
type Budget struct {
	Title string
	// Read is the repeatability of one state reading, s.
	Read Exact
	// Methods holds Read for methods that have their own: another station, another eye.
	Methods map[string]Exact
	// Resolution is the larger of the step of the display and the step of the hand with the beat, s;
	// it enters as step/√12.
	Resolution Exact
	// Common is what all readings of one round share, s: the reference clock, its offset, the trigger.
	Common Exact
	// Eccentricity is the amplitude a of the periodic error a·sin(angle of the hand) of the seconds
	// display, s; not a standard uncertainty.
	Eccentricity Exact
	// ChamberSystematic is the deviation of a chamber's temperature from nominal that stays for the
	// whole trial, °C; ChamberRandom the part that is new each day. Both matter only where the
	// programme's measurand is the rate at nominal temperature.
	ChamberSystematic, ChamberRandom Exact
	// Frequency is that of the reference over the trial, s/d.
	Frequency Exact
	// Handling is what a day's time outside the chamber and its shocks add, s/d, new each day.
	Handling Exact
	// Tilt is the deviation of the rack from the vertical, degrees.
	Tilt Exact
}

// ReadingOnly is the budget of state readings alone, u in s.
func ReadingOnly(u Exact) Budget { return Budget{Read: u} }
