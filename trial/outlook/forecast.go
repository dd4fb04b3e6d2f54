package outlook

import "ratehouse/trial"

// Constants of the model. Common practice, no source; chosen on the first simulator (trial/simulate),
// judged on the second (trial/simulate/rival).
const (
	freedom = 4    // degrees of freedom of a scale of which nothing is known, as in trial/entry
	weight  = 30   // movements of history that weigh as much as what is more general: all calibres, no calibre
	draws   = 1024 // points
	surest  = 1e-6 // how near an open movement comes to 0 or 1, which are for what is certain
)

// Forecast forecasts the movements of one calibre in one category. It holds working memory: one
// goroutine uses it at a time.
type Forecast struct {
	judge   *trial.Judge
	normal  trial.Normal
	figures *figures
	eachDay float64 // variance of what is new each day, (s/d)²
	result  trial.Result
	blanks  map[string]*blanks // by which days are read
	rates   []float64          // of the movement being drawn
}

// New prepares forecasts of one calibre from the history of all calibres, of which its own is a part;
// nil stands for an empty one. The more the calibre has of its own, the less the others count; without
// any the others stand for it, and with no history at all spreads that fit most movements
// (trial.Unknown). Movements that were taken out early belong into the history with the days they have
// (trial.Prior). A history of another number of days gives trial.ErrPriorDays.
func New(j *trial.Judge, all, own *trial.Prior) (*Forecast, error) {
	days := j.Programme().Days
	f := &Forecast{judge: j, normal: trial.Unknown(days), figures: newFigures(j), blanks: map[string]*blanks{},
		rates: make([]float64, len(days))}
	for _, history := range []*trial.Prior{all, own} {
		switch {
		case history == nil:
		case history.Days != len(days):
			return nil, trial.ErrPriorDays
		default:
			f.normal = learn(history, f.normal)
		}
	}
	f.eachDay = eachDay(days, f.normal)
	return f, nil
}

// eachDay is the mean variance of a day's rate apart from its conditions: half that of the difference of
// neighbours alike; 0 where a programme has none.
func eachDay(days []trial.Day, n trial.Normal) (mean float64) {
	sum, pairs := 0.0, 0.0
	for i := 1; i < len(days); i++ {
		a, b := days[i-1], days[i]
		if a.Position == b.Position && a.TemperatureC == b.TemperatureC && a.Accessory == b.Accessory {
			sum, pairs = sum+(n.Cov[i][i]+n.Cov[i-1][i-1]-2*n.Cov[i][i-1])/2, pairs+1
		}
	}
	return sum / max(1, pairs)
}

// learn draws a history towards something more general: first its mean, then its covariance about that
// mean, so that a calibre far from the others is not made wider by being far.
func learn(history *trial.Prior, general trial.Normal) trial.Normal {
	general.Mean = history.Normal(general, weight).Mean
	return history.Normal(general, weight)
}

// Chance is the probability that a movement will pass, by its rates, day d at [d-1]; blank days may
// stand anywhere, and those beyond the slice are blank. It is 0 where a decided criterion is outside or
// no rates of the blank days can pass (trial.Judge.CannotPass), 1 where the movement has passed, and
// nowhere else. ok is false in a category without limits. The same input always gives the same output.
func (f *Forecast) Chance(rates []trial.Rate) (p float64, ok bool) {
	f.judge.Rates(rates, &f.result)
	switch f.result.Verdict {
	case trial.Fail:
		return 0, true
	case trial.Pass:
		return 1, true
	case trial.None:
		return 0, false
	}
	inside := f.inside(rates)
	// One drawn inside proves that the movement can pass; only where there is none the judge is asked.
	if inside == 0 && f.judge.CannotPass(rates) {
		return 0, true
	}
	return min(max(float64(inside)/draws, surest), 1-surest), true
}

// inside draws the blank days of the movement last judged and counts the draws that pass.
func (f *Forecast) inside(rates []trial.Rate) (n int) {
	b := f.blanksOf(rates)
	x := make([]float64, len(b.read))
	for i, d := range b.read {
		x[i] = rates[d-1].Exact().Float()
		f.rates[d-1] = x[i]
	}
	centre := make([]float64, len(b.open))
	for i, d := range b.open {
		centre[i] = b.given.Mean(d, x)
	}
	scale := b.scales(x)
	for at := 0; at < draws*len(b.open); at += len(b.open) {
		for i, d := range b.open {
			off := 0.0
			for k := range scale {
				off += scale[k] * b.draws[k][at+i]
			}
			f.rates[d-1] = centre[i] + off
		}
		if f.figures.inside(f.rates, b.needs) {
			n++
		}
	}
	return n
}
