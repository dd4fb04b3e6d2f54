package floor

import (
	"strings"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

// dayWords says a programme day with where its movements lie: day 4 (3H, 23 °C).
func dayWords(c *page.Context, p *trial.Programme, n int) words.Text {
	d, _ := p.Day(n)
	says := words.DayWhere
	if d.Accessory {
		says = words.DayWhereWith
	}
	return says.With(n, string(d.Position), c.Celsius(d.TemperatureC.String()))
}

// roundWords says what a round closes and opens (practice notes W11): the reading of day 9 starts day
// 10, and who forgets it engages the chronograph on the wrong day.
func roundWords(c *page.Context, b *store.Batch, plan trial.Round) string {
	switch {
	case plan.Closes == 0:
		return c.Say(words.RoundBegins.With(dayWords(c, b.Programme, plan.Opens)))
	case plan.Opens == 0:
		return c.Say(words.RoundEnds.With(dayWords(c, b.Programme, plan.Closes)))
	}
	return c.Say(words.RoundCloses.With(dayWords(c, b.Programme, plan.Closes), dayWords(c, b.Programme, plan.Opens)))
}

// batchWords is the size of a batch and its calibre; never its depositor (practice notes X1).
func batchWords(c *page.Context, b *store.Batch) string {
	size := words.Movements.With(b.Size)
	if b.Calibre.Code == "" {
		return c.Say(size)
	}
	return c.Say(words.SizeAndCalibre.With(size, words.CalibreCode.With(b.Calibre.Code)))
}

// actWords lists what is done after the reading, in order; "" when nothing is.
func actWords(c *page.Context, plan trial.Round) string {
	var acts []string
	for _, a := range plan.Acts {
		if a.Kind != trial.ActRead {
			acts = append(acts, c.Say(words.ActWord(c.Printer, a)))
		}
	}
	return strings.Join(acts, ", ")
}

// now is where the movements lie when a round begins: in the day it closes, before round 0 in the
// conditioning.
func now(p *trial.Programme, plan trial.Round) (trial.Position, trial.Milli) {
	if d, ok := p.Day(plan.Closes); ok {
		return d.Position, d.TemperatureC
	}
	return p.Conditioning.Position, p.Conditioning.TemperatureC
}

// moved is the temperature a round moves its movements to; ok is false when they stay.
func moved(plan trial.Round) (to trial.Milli, ok bool) {
	for _, a := range plan.Acts {
		if a.Kind == trial.ActMove {
			return a.ToC, true
		}
	}
	return 0, false
}

// Temperatures from which a chamber asks for care, in thousandths of a degree. Common practice, no
// source.
const (
	coldBelow trial.Milli = 15_000
	warmAbove trial.Milli = 30_000
)
