package trial

// Cell is what was recorded at one step of a movement's series.
type Cell struct {
	HasRate, HasFound, HasLeft bool
	Rate                       Milli // a typed rate of the stretch that ends here
	Found                      State // as found at the reading
	Left                       State // as left, if the hands were set; opens the next stretch
	At                         int64 // instant of the reading, whole Unix seconds; 0: not recorded
}

// Step is one reading as really run.
type Step struct {
	Day int // programme day the stretch that ends here serves; 0: none (start, idle, given up)
}

// Assemble turns readings by step into rates by programme day: out[d-1] is day d, the zero Rate
// where it was not read. cells[k] belongs to steps[k]; a missing cell is an empty one. A day with
// both its states uses them, over the whole seconds between their instants (domain notes 1.5: the
// stretch starts at the state as left, if the hands were set, else as found); else its typed rate
// counts; else it is not read. When several steps close one day the latest counts, read or not: a
// repeat replaces what it repeats (practice.md W33).
func (p *Programme) Assemble(steps []Step, cells []Cell) []Rate {
	out := make([]Rate, len(p.Days))
	var empty Cell
	prev := &empty
	for k := range steps {
		cell := &empty
		if k < len(cells) {
			cell = &cells[k]
		}
		if d := steps[k].Day; d >= 1 && d <= len(out) {
			out[d-1] = stretch(prev, cell)
		}
		prev = cell
	}
	return out
}

// stretch is the rate between two neighbouring readings.
func stretch(from, to *Cell) Rate {
	if r := betweenStates(from, to); r.Known() {
		return r
	}
	if to.HasRate {
		return RateOf(int64(to.Rate))
	}
	return Rate{}
}

func betweenStates(from, to *Cell) Rate {
	if !to.HasFound || from.At == 0 || to.At == 0 {
		return Rate{}
	}
	switch {
	case from.HasLeft:
		return RateBetween(from.Left, to.Found, to.At-from.At)
	case from.HasFound:
		return RateBetween(from.Found, to.Found, to.At-from.At)
	}
	return Rate{}
}
