package entry

import "math"

// Repair is a slip of a whole holder and what undoes it as one act (practice.md E6). It is offered,
// never applied by itself.
type Repair struct {
	Code     RepairCode
	From     int   // the place where the slip began; 0 otherwise
	Other    int   // which other holder; -1 otherwise
	Order    []int // Order[i]: the place whose movement the value typed at i belongs to, -1: nobody's
	Permille int64 // likelihood among all arrangements, as typed included
}

// RepairCode names a slip of a whole holder.
type RepairCode string

// The codes.
const (
	Skipped     RepairCode = "skipped"    // place From was left out: from it on values belong one place further
	Doubled     RepairCode = "doubled"    // place From was read twice: after it values belong one place before
	Reversed    RepairCode = "reversed"   // read from the other end
	Across      RepairCode = "transposed" // rows taken for columns
	OtherHolder RepairCode = "other_holder"
)

// Holder is a holder at its last reading of a round.
type Holder struct {
	Rows, Columns int           // of its places, in reading order row by row; 0: a line
	Expectations  []Expectation // by place; one without a movement is not Known
	Values        []*int64      // as typed, unwrapped; nil: none
}

// arrangementRate is how often, of ten thousand holders, each kind of arrangement happens. Common
// practice, no source; ranks only.
const arrangementRate = 20

// arrangement is one way in which the values may belong to movements.
type arrangement struct {
	Repair
	score float64 // logarithm of its likelihood against that of the values as typed
	share float64 // of its kind's rate
}

// Arrange tests whether the values of a holder, all typed, belong to other movements than they were
// typed for: shifted by one from any place, from the other end, columns for rows, or those of another
// holder of the round. nil: as typed. Of holders typed rightly at most one in a thousand is offered a
// repair, as far as the model is right: an arrangement must be a thousand times as likely as the
// values as typed, times the number of arrangements tried.
func Arrange(h Holder, others []Holder) *Repair {
	as := h.score(h.Expectations, identity(len(h.Values)))
	list := h.arrangements(others)
	best, total := -1, 1.0
	for i := range list {
		a := &list[i]
		from := h.Expectations
		if a.Other >= 0 {
			from = others[a.Other].Expectations
		}
		a.score = h.score(from, a.Order) - as
		total += a.weight()
		if best < 0 || a.score > list[best].score {
			best = i
		}
	}
	if best < 0 || list[best].score <= math.Log(falseOnce*float64(len(list))) {
		return nil
	}
	found := list[best].Repair
	found.Permille = int64(1000 * (list[best].weight() / total))
	return &found
}

func (a *arrangement) weight() float64 {
	return math.Exp(min(600, a.score)) * a.share * arrangementRate / perReadings
}

func identity(n int) []int {
	order := make([]int, n)
	for i := range order {
		order[i] = i
	}
	return order
}

// arrangements lists what is tried.
func (h Holder) arrangements(others []Holder) (list []arrangement) {
	var held []int // places with a movement, in reading order
	for i := range h.Expectations {
		if h.Expectations[i].Known {
			held = append(held, i)
		}
	}
	if len(held) < 2 {
		return nil
	}
	add := func(code RepairCode, from, other int, order []int, share float64) {
		list = append(list, arrangement{Repair{code, from, other, order, 0}, 0, share})
	}
	for at := range held[:len(held)-1] {
		add(Skipped, held[at], -1, h.shifted(held, at, 1), 1/float64(len(held)))
		add(Doubled, held[at], -1, h.shifted(held, at+1, -1), 1/float64(len(held)))
	}
	back := identity(len(h.Values))
	for i := range back {
		back[i] = len(back) - 1 - i
	}
	add(Reversed, 0, -1, back, 1)
	if h.Rows > 1 && h.Columns > 1 && h.Rows*h.Columns == len(h.Values) {
		add(Across, 0, -1, across(h.Rows, h.Columns), 1)
	}
	for i := range others {
		if len(others[i].Expectations) == len(h.Values) {
			add(OtherHolder, 0, i, identity(len(h.Values)), 1/float64(len(others)))
		}
	}
	return list
}

// shifted belongs the values from the at-th held place on to the held place by further.
func (h Holder) shifted(held []int, at, by int) []int {
	order := identity(len(h.Values))
	for i := at; i < len(held); i++ {
		order[held[i]] = -1
		if j := i + by; j >= 0 && j < len(held) {
			order[held[i]] = held[j]
		}
	}
	return order
}

// across: typed down the columns though the places run along the rows.
func across(rows, columns int) []int {
	order := make([]int, rows*columns)
	for i := range order {
		order[i] = i%rows*columns + i/rows
	}
	return order
}

// score is the logarithm of the likelihood of the values in an arrangement. A value that is nobody's
// may be anything within a minute to either side.
func (h Holder) score(of []Expectation, order []int) (log float64) {
	for i, v := range h.Values {
		switch j := order[i]; {
		case v == nil:
		case j < 0 || !of[j].Known:
			log -= math.Log(1200)
		default:
			log += of[j].logTenth(*v)
		}
	}
	return log
}
