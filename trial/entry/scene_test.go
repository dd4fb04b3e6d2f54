package entry_test

import (
	"testing"

	"ratehouse/trial"
	"ratehouse/trial/entry"
	"ratehouse/trial/simulate/rival"
)

const holderSize = 20

// ratesOf makes rates of states a day apart.
func ratesOf(states []trial.State) []trial.Rate {
	rates := make([]trial.Rate, len(states)-1)
	for d := range rates {
		rates[d] = trial.RateBetween(states[d], states[d+1], trial.SecondsPerDay)
	}
	return rates
}

// historyOf counts lots of the second generator.
func historyOf(t testing.TB, p *trial.Programme, m *rival.Maker, lots, size int) *trial.Prior {
	t.Helper()
	history := trial.NewPrior(len(p.Days))
	for range lots {
		for _, s := range m.Lot(p, size) {
			if err := history.Add(ratesOf(s)); err != nil {
				t.Fatal(err)
			}
		}
	}
	return history
}

func forecastOf(t testing.TB, p *trial.Programme, history *trial.Prior) *entry.Forecast {
	t.Helper()
	f, err := entry.NewForecast(p, history)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// places are the movements of a holder before round k; with read their values of round k are there.
func places(states [][]trial.State, k int, read bool) []entry.Place {
	out := make([]entry.Place, len(states))
	for i, s := range states {
		before, typed, now := s[k-1], int64(s[k-1]), int64(s[k])
		out[i] = entry.Place{Rates: ratesOf(s[:k]), State: &before, Seconds: trial.SecondsPerDay, Previous: &typed}
		if read {
			out[i].Value = &now
		}
	}
	return out
}
