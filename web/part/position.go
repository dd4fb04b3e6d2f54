package part

import (
	"ratehouse/trial"
	"ratehouse/web/words"
)

// positionWords is a position with its trade term and, in brackets, where the crown points: what
// somebody turning movements needs.
func positionWords(p *words.Printer, pos trial.Position) (term, crown string) {
	term = p.Say(words.PositionTerm(string(pos)))
	if c := words.Crown(pos.Crown()); c != nil {
		crown = "(" + p.Say(c) + ")"
	}
	return term, crown
}

// known tells whether there is a sign for the position.
func known(pos trial.Position) bool {
	_, ok := trial.ParsePosition(string(pos))
	return ok
}

// positionLine is what stands behind the symbol: 3 up (crown up), 23 °C.
func positionLine(p *words.Printer, pos trial.Position, celsius string) string {
	term, crown := positionWords(p, pos)
	line := term
	if term == string(pos) {
		line = ""
	}
	if crown != "" {
		line += " " + crown
	}
	if celsius != "" {
		line += ", " + p.Celsius(celsius)
	}
	return line
}

// Moved is what a round does to where a movement lies: the day it closes, the day it opens; nil at
// either end of the trial.
type Moved struct{ Closes, Opens *trial.Day }

// Stays tells whether nothing is turned or moved.
func (m Moved) Stays() bool {
	return m.Closes != nil && m.Opens != nil && m.Closes.Position == m.Opens.Position && m.Closes.TemperatureC == m.Opens.TemperatureC
}

// MovedAt is what round k of a programme does.
func MovedAt(prog *trial.Programme, k int) (m Moved) {
	if d, ok := prog.Day(k); ok {
		m.Closes = &d
	}
	if d, ok := prog.Day(k + 1); ok {
		m.Opens = &d
	}
	return m
}
