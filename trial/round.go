package trial

// Round is the k-th reading as the programme lays it down: it closes the stretch since round k-1
// and opens the next, with the acts to be done then, in order.
type Round struct {
	K      int
	Closes int // day closed; 0 for round 0
	Opens  int // day opened; 0 for the last round
	Acts   []Act
}

// Act is one thing to do at a round.
type Act struct {
	Kind     ActKind
	From, To Position // for Turn; From may be empty at round 0
	FromC    Milli    // for Move, nominal temperatures in thousandths of a degree
	ToC      Milli
}

// ActKind names an act.
type ActKind string

// The acts, in the order in which they are done at a round. An accessory is started after the
// reading that opens its day and stopped after the one that closes it, so that no reading is
// taken between the two (practice.md W12).
const (
	ActRead         ActKind = "read"
	ActAccessoryOff ActKind = "accessory_off"
	ActWind         ActKind = "wind"
	ActAccessoryOn  ActKind = "accessory_on"
	ActTurn         ActKind = "turn"
	ActMove         ActKind = "move"
)

// Has tells whether the round carries an act of that kind.
func (r Round) Has(kind ActKind) bool {
	for _, a := range r.Acts {
		if a.Kind == kind {
			return true
		}
	}
	return false
}

// Rounds derives round 0 to n from the days: what each closes, opens and asks to be done.
func (p *Programme) Rounds() []Round {
	rounds := make([]Round, 0, len(p.Days)+1)
	for k := 0; k <= len(p.Days); k++ {
		rounds = append(rounds, p.round(k))
	}
	return rounds
}

// round is round k. Before day 1 the conditioning stands in for a day.
func (p *Programme) round(k int) Round {
	r := Round{K: k, Closes: k, Acts: []Act{{Kind: ActRead}}}
	prev := Day{Position: p.Conditioning.Position, TemperatureC: p.Conditioning.TemperatureC}
	if d, ok := p.Day(k); ok {
		prev = d
	}
	next, more := p.Day(k + 1)
	if prev.Accessory && !next.Accessory {
		r.Acts = append(r.Acts, Act{Kind: ActAccessoryOff})
	}
	if !more {
		return r
	}
	r.Opens = k + 1
	r.Acts = append(r.Acts, Act{Kind: ActWind})
	if next.Accessory && !prev.Accessory {
		r.Acts = append(r.Acts, Act{Kind: ActAccessoryOn})
	}
	if next.Position != prev.Position {
		r.Acts = append(r.Acts, Act{Kind: ActTurn, From: prev.Position, To: next.Position})
	}
	if next.TemperatureC != prev.TemperatureC {
		r.Acts = append(r.Acts, Act{Kind: ActMove, FromC: prev.TemperatureC, ToC: next.TemperatureC})
	}
	return r
}
