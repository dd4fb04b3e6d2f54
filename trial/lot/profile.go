package lot

import (
	"math"

	"ratehouse/trial"
)

// Place is how a lot goes in one position at one nominal temperature, s/d.
type Place struct {
	Position     trial.Position
	TemperatureC trial.Milli
	Days         []int    // of the programme
	Moments               // of the movements' own means over these days: N of Of
	Of           int      // movements of the lot
	Range        Interval // of the mean, by Student's t; equal to Mean where N is 1
}

// ProfileOf is the position profile of a lot: for each position and temperature, in the programme's
// order, what the means of the movements read on all its days are. A movement with a blank day counts
// for the other places only, so each place has its N, and after early removals the later ones speak of
// the survivors: compare places of equal N, or say "measured on N of Of".
func ProfileOf(p *trial.Programme, lot [][]trial.Rate, confidence float64) []Place {
	places := placesOf(p)
	for i := range places {
		at := &places[i]
		at.Of = len(lot)
		var means []float64
		for _, rates := range lot {
			if m, ok := meanOver(rates, at.Days); ok {
				means = append(means, m)
			}
		}
		at.Moments = MomentsOf(means)
		half := 0.0
		if n := float64(at.N); n > 1 {
			half = -studentQuantile((1-confidence)/2, n-1) * at.SD / math.Sqrt(n)
		}
		at.Range = Interval{at.Mean - half, at.Mean + half}
	}
	return places
}

func placesOf(p *trial.Programme) (out []Place) {
days:
	for _, d := range p.Days {
		for i := range out {
			if out[i].Position == d.Position && out[i].TemperatureC == d.TemperatureC {
				out[i].Days = append(out[i].Days, d.N)
				continue days
			}
		}
		out = append(out, Place{Position: d.Position, TemperatureC: d.TemperatureC, Days: []int{d.N}})
	}
	return out
}

// meanOver is a movement's mean rate over days that must all be there.
func meanOver(rates []trial.Rate, days []int) (mean float64, ok bool) {
	var s sum
	for _, d := range days {
		r := rateOn(rates, d)
		if !r.Known() {
			return 0, false
		}
		s.add(r.Exact().Float())
	}
	return s.over(len(days)).value(), true
}
