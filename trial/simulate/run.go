package simulate

import (
	"math/rand/v2"

	"ratehouse/trial"
)

// Batch is how many movements of a Run share their rounds, and with them the errors common to a round.
const Batch = 200

// Run draws movements one after another and takes each through a programme, read once an interval.
type Run struct {
	model  Model
	prog   *trial.Programme
	rng    *rand.Rand
	hours  []float64
	rounds []Round
	drawn  int
}

// Run begins with a seed. The movements hang on the seed alone: the first hundred are the same
// however many follow.
func (m Model) Run(p *trial.Programme, seed uint64) *Run {
	r := &Run{model: m, prog: p, rng: rand.New(rand.NewPCG(seed, 3159)), hours: make([]float64, len(p.Days))}
	for i := range r.hours {
		r.hours[i] = float64(p.Reading.IntervalS) / 3600
	}
	return r
}

// Next draws the next movement: its states as read, rounds 0 to the programme's last.
func (r *Run) Next() []trial.State {
	if r.drawn%Batch == 0 {
		r.rounds = r.model.Rounds(len(r.prog.Days)+1, r.rng)
	}
	r.drawn++
	v := r.model.Draw(r.rng)
	return r.model.States(&v, v.Rates(r.prog, r.rng), r.rounds, r.hours, r.rng)
}
