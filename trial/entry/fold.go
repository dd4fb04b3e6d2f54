package entry

// Minute60 is the period of a seconds hand, thousandths of a second.
const Minute60 = 60_000

// Fold brings a state into (-period/2, +period/2]: what a dial of that period can show (practice.md
// E4). Both in the same unit; period above 0.
func Fold(state, period int64) int64 { return nearest(state, 0, period) }

// nearest is x and a whole number of periods, as close to centre as can be; at equal distance the
// upper one.
func nearest(x, centre, period int64) int64 {
	d := (x - centre) % period
	if 2*d > period {
		d -= period
	}
	if 2*d <= -period {
		d += period
	}
	return centre + d
}
