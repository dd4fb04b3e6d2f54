package part

import (
	"strconv"

	"ratehouse/trial"
	"ratehouse/web/words"
)

// Strip is a programme day by day, always in the same order and width.
type Strip struct{ Days []StripDay }

// StripDay is one of its columns.
type StripDay struct {
	N           int
	Position    trial.Position
	Temperature string
	Warmth      string // "cold", "warm" or ""
	Turns       bool   // something is turned or moved before this day
	Accessory   bool
	State       DayState
	Count       string // how many were read; "" leaves it out
}

// DayState is where a day lies in time.
type DayState string

// The states of a day.
const (
	DayDone  DayState = "done"
	DayNow   DayState = "now"
	DayAhead DayState = "ahead"
)

// StripOf makes the strip of a programme with so many rounds closed: day closed is done, the one after
// it is now. read may hold how many were read by day (read[d] for day d); nil leaves the counts out.
func StripOf(p *words.Printer, prog *trial.Programme, closed int, read []int) Strip {
	s := Strip{Days: make([]StripDay, len(prog.Days))}
	for i, d := range prog.Days {
		day := StripDay{N: d.N, Position: d.Position, Temperature: p.Celsius(d.TemperatureC.String()), Warmth: warmth(prog, d), Accessory: d.Accessory, State: DayAhead}
		if i > 0 {
			last := prog.Days[i-1]
			day.Turns = d.Position != last.Position || d.TemperatureC != last.TemperatureC
		}
		switch {
		case d.N <= closed:
			day.State = DayDone
		case d.N == closed+1:
			day.State = DayNow
		}
		if d.N < len(read) && (read[d.N] > 0 || d.N <= closed) {
			day.Count = p.Count(read[d.N])
		}
		s.Days[i] = day
	}
	return s
}

// warmth tells how a day lies to the temperature that most days have.
func warmth(prog *trial.Programme, d trial.Day) string {
	count := map[trial.Milli]int{}
	usual := prog.Days[0].TemperatureC
	for _, o := range prog.Days {
		if count[o.TemperatureC]++; count[o.TemperatureC] > count[usual] {
			usual = o.TemperatureC
		}
	}
	switch {
	case d.TemperatureC < usual:
		return "cold"
	case d.TemperatureC > usual:
		return "warm"
	}
	return ""
}

func (d StripDay) state() words.Text {
	switch d.State {
	case DayDone:
		return words.DayRead
	case DayNow:
		return words.DayNow
	}
	return words.DayAhead
}

// small is the strip for lists: squares that step down for cold and up for warm, with a gap where
// movements are turned.
type small struct {
	Box, Says string
	Squares   []square
}

type square struct{ X, Y, Class string }

func (s Strip) small(p *words.Printer) small {
	var v small
	x, done := 0, 0
	for _, d := range s.Days {
		if d.Turns {
			x += 4
		}
		y := 8
		switch d.Warmth {
		case "cold":
			y = 14
		case "warm":
			y = 2
		}
		class := "d"
		switch d.State {
		case DayDone:
			class, done = "d full", d.N
		case DayNow:
			class = "d today"
		}
		v.Squares = append(v.Squares, square{strconv.Itoa(x), strconv.Itoa(y), class})
		x += 18
	}
	v.Box = "0 0 " + strconv.Itoa(max(x, 1)) + " 30"
	v.Says = p.Say(words.DayOf.With(done, len(s.Days)))
	return v
}
