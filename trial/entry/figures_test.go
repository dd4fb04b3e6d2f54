package entry_test

import (
	"fmt"
	"math"
	"os"
	"strings"
	"testing"

	"ratehouse/trial"
	"ratehouse/trial/entry"
	"ratehouse/trial/simulate"
	"ratehouse/trial/simulate/rival"
)

type kindOfRound struct {
	name string
	days []int
}

func kindsOfRound() []kindOfRound {
	return []kindOfRound{
		{"first day of the trial", []int{1}},
		{"first day in a position", []int{3, 5, 7, 9}},
		{"second day in a position", []int{2, 4, 6, 8, 10, 15}},
		{"into the cold", []int{11}},
		{"out of the cold", []int{12}},
		{"into the heat", []int{13}},
		{"back to the first position", []int{14}},
	}
}

// share counts.
type share struct{ hits, of int }

func (s *share) add(hit bool) {
	s.of++
	if hit {
		s.hits++
	}
}

func (s share) percent() float64 { return 100 * float64(s.hits) / float64(max(1, s.of)) }

var amounts = []int64{1000, 3000, 5000, 10_000, 30_000, 60_000}

// figures are what one kind of round shows.
type figures struct {
	looks, ends, lates          share // right values asked again at entry, at the holder's end; named next round
	entry, end, next            map[int64]*share
	sign, transposed, neighbour share // at entry
	named                       share // of the slips asked again at entry, their kind named
}

func newFigures() *figures {
	f := &figures{entry: map[int64]*share{}, end: map[int64]*share{}, next: map[int64]*share{}}
	for _, a := range amounts {
		f.entry[a], f.end[a], f.next[a] = &share{}, &share{}, &share{}
	}
	return f
}

// measure reads one holder in round k, right and with every slip.
func (fig *figures) measure(f *entry.Forecast, states [][]trial.State, k int) {
	r := entry.Round{Day: k}
	before, read := f.Expect(r, places(states, k, false)), places(states, k, true)
	after := f.Expect(r, read)
	for i, s := range states {
		v := int64(s[k])
		fig.looks.add(entry.Check(&before[i], v) != nil)
		fig.ends.add(entry.Check(&after[i], v) != nil)
		for _, a := range amounts {
			off := a * int64(1-2*(i%2))
			typed := v + off
			found := entry.Check(&before[i], typed)
			fig.entry[a].add(found != nil)
			if found != nil && a >= 10_000 {
				fig.named.add(found.By == off && found.Instead == v)
			}
			if i%7 == 0 { // what a holder has in common hardly hangs on one value
				read[i].Value = &typed
				fig.end[a].add(entry.Check(&f.Expect(r, read)[i], typed) != nil)
				read[i].Value = &v
			}
		}
		if v != 0 {
			fig.sign.add(entry.Check(&before[i], -v) != nil)
		}
		if swapped, ok := transpose(v); ok {
			fig.transposed.add(entry.Check(&before[i], swapped) != nil)
		}
		fig.neighbour.add(entry.Check(&before[i], int64(states[(i+1)%len(states)][k])) != nil)
	}
}

// transpose swaps the last two digits of a value in tenths.
func transpose(v int64) (int64, bool) {
	low, high := v/100%10, v/1000%10
	return v + (low-high)*900, low != high
}

// late does the same one round later.
func (fig *figures) late(f *entry.Forecast, states [][]trial.State, k int) {
	day := [2]int64{trial.SecondsPerDay, trial.SecondsPerDay}
	for i, s := range states {
		fig.lates.add(f.Yesterday(ratesOf(s), k, day) != nil)
		for _, a := range amounts {
			wrong := append([]trial.State(nil), s...)
			wrong[k] += trial.State(a * int64(1-2*(i%2)))
			fig.next[a].add(f.Yesterday(ratesOf(wrong), k, day) != nil)
		}
	}
}

func measureAll(t testing.TB, f *entry.Forecast, lot func() [][]trial.State, lots int) map[string]*figures {
	t.Helper()
	out := map[string]*figures{}
	for _, kind := range kindsOfRound() {
		out[kind.name] = newFigures()
	}
	for range lots {
		states := lot()
		for at := 0; at+holderSize <= len(states); at += holderSize {
			for _, kind := range kindsOfRound() {
				for _, k := range kind.days {
					out[kind.name].measure(f, states[at:at+holderSize], k)
					if k+1 < len(states[0]) {
						out[kind.name].late(f, states[at:at+holderSize], k)
					}
				}
			}
		}
	}
	return out
}

func TestCalibration(t *testing.T) {
	if os.Getenv("CAL") == "" {
		t.Skip()
	}
	p := trial.ISO3159()
	h := trial.NewPrior(15)
	run := simulate.Default().Run(p, 77)
	for range 3000 {
		if err := h.Add(ratesOf(run.Next())); err != nil {
			t.Fatal(err)
		}
	}
	run = simulate.Default().Run(p, 78)
	lot := func() (out [][]trial.State) {
		for range 200 {
			out = append(out, run.Next())
		}
		return
	}
	fmt.Println(table(measureAll(t, forecastOf(t, p, h), lot, 5)))
	m := rival.New(11)
	fmt.Println(table(measureAll(t, forecastOf(t, p, historyOf(t, p, m, 30, 100)), func() [][]trial.State { return m.Lot(p, 100) }, 15)))
}

func table(all map[string]*figures) string {
	var b strings.Builder
	for _, kind := range kindsOfRound() {
		f := all[kind.name]
		fmt.Fprintf(&b, "%-27s false %.2f end %.2f late %.2f | n %d", kind.name, f.looks.percent(), f.ends.percent(), f.lates.percent(), f.looks.of)
		for _, a := range amounts {
			fmt.Fprintf(&b, " | %d: %.0f %.0f %.0f", a/1000, f.entry[a].percent(), f.end[a].percent(), f.next[a].percent())
		}
		fmt.Fprintf(&b, " | sign %.0f tr %.0f nb %.0f named %.0f\n", f.sign.percent(), f.transposed.percent(), f.neighbour.percent(), f.named.percent())
	}
	_ = math.Abs
	return b.String()
}
