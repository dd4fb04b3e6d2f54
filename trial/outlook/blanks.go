package outlook

import (
	"math"
	"math/rand/v2"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/stat/distmv"
	"gonum.org/v1/gonum/stat/distuv"
	"gonum.org/v1/gonum/stat/samplemv"

	"ratehouse/trial"
)

// news says what is new on a day: each kind has its own scale in each movement, since what a movement
// does in other positions says little of its spring, and neither how restless it is.
type news int

const (
	daily  news = iota // nothing but the day: position and temperature were met before
	place              // the position
	warmth             // the temperature
	kinds
)

// newsOf is what a day brings after others.
func newsOf(days []trial.Day, day int, before []int) news {
	position, both, warm := false, false, len(before) == 0
	for _, d := range before {
		a, b := days[d-1], days[day-1]
		position = position || a.Position == b.Position
		warm = warm || a.TemperatureC == b.TemperatureC
		both = both || a.Position == b.Position && a.TemperatureC == b.TemperatureC
	}
	switch {
	case both:
		return daily
	case warm && !position:
		return place
	}
	return warmth
}

// blanks is what days not read can be, given which are.
type blanks struct {
	read, open []int // days
	given      *trial.Conditional
	steps      []step
	needs      []wanted         // the criteria that decide
	draws      [kinds][]float64 // departures from what is expected by what is new, for scales of 1: open days, draw after draw
}

// step is a read day after the days read before it.
type step struct {
	news  news
	given *trial.Conditional
	share float64 // of the kind of news in what is new
}

// mostKept bounds what is kept; movements of one round mostly have the same days.
const mostKept = 32

// blanksOf prepares the blank days of the movement last judged.
func (f *Forecast) blanksOf(rates []trial.Rate) *blanks {
	key := make([]byte, len(f.rates))
	b := &blanks{}
	for d := range key {
		if d < len(rates) && rates[d].Known() {
			key[d], b.read = 1, append(b.read, d+1)
		} else {
			b.open = append(b.open, d+1)
		}
	}
	if kept, ok := f.blanks[string(key)]; ok {
		return kept
	}
	if len(f.blanks) == mostKept {
		clear(f.blanks)
	}
	b.given, b.needs = f.normal.Given(b.read), f.figures.needs(&f.result)
	days := f.judge.Programme().Days
	for i, d := range b.read {
		b.steps = append(b.steps, step{newsOf(days, d, b.read[:i]), f.normal.Given(b.read[:i]), 1})
	}
	b.first()
	b.draw(f)
	f.blanks[string(key)] = b
	return b
}

// first makes the first day read one of a new position. How far it lies from the lot is mostly how the
// movement was regulated, so that it counts for less the more other positions have been read.
func (b *blanks) first() {
	others := 0.0
	for i, s := range b.steps {
		if i > 0 && s.news == place {
			others++
		}
	}
	if len(b.steps) > 0 {
		b.steps[0].share = 1 / (1 + others)
	}
}

// freedoms are the degrees of freedom of each scale once some days are read.
func (b *blanks) freedoms() (of [kinds]float64) {
	for k := range of {
		of[k] = freedom
	}
	for _, s := range b.steps {
		of[s.news] += s.share
	}
	return of
}

// scales are by how much what is new on a day of a movement is larger than others', by the days read
// that brought the like: those of a multivariate t once some of it is known (from memory).
func (b *blanks) scales(x []float64) (scale [kinds]float64) {
	for k := range scale {
		scale[k] = freedom - 2
	}
	for i, s := range b.steps {
		off := x[i] - s.given.Mean(b.read[i], x[:i])
		scale[s.news] += s.share * off * off / s.given.Cov(b.read[i], b.read[i])
	}
	for k, of := range b.freedoms() {
		scale[k] = math.Sqrt(scale[k] / of)
	}
	return scale
}

// draw makes the departures, day after day by the Cholesky factor of the conditional covariance. What
// is new on a day is normal over the root of a chi-squared variable by its degrees of freedom, one for
// each kind of news and movement. A day with a new position or temperature brings the day's own news
// besides.
func (b *blanks) draw(f *Forecast) {
	n, days := len(b.open), f.judge.Programme().Days
	var lower mat.TriDense
	b.root(&lower)
	points := pointsOf(2*n + int(kinds))
	for k := range b.draws {
		b.draws[k] = make([]float64, draws*n)
	}
	radius := b.radii(points, 2*n)
	seen := append([]int(nil), b.read...)
	for j, d := range b.open {
		pivot, what := lower.At(j, j), newsOf(days, d, seen)
		own := 1.0
		if what != daily {
			own = math.Min(1, math.Sqrt(f.eachDay)/pivot)
		}
		seen = append(seen, d)
		for k := range draws {
			row := points.RawRowView(k)
			x := own * distuv.UnitNormal.Quantile(row[j]) * radius[daily][k]
			y := math.Sqrt(1-own*own) * distuv.UnitNormal.Quantile(row[n+j]) * radius[what][k]
			for i := j; i < n; i++ {
				b.draws[daily][k*n+i] += lower.At(i, j) * x
				b.draws[what][k*n+i] += lower.At(i, j) * y
			}
		}
	}
}

// radii are what makes normal variables Student-t ones, by kind and draw, from the columns from at on.
func (b *blanks) radii(points *mat.Dense, at int) (radius [kinds][]float64) {
	for kind, of := range b.freedoms() {
		size := distuv.ChiSquared{K: of}
		for k := range draws {
			radius[kind] = append(radius[kind], math.Sqrt(of/size.Quantile(points.At(k, at+kind))))
		}
	}
	return radius
}

// root is the Cholesky factor of the covariance of the open days. A history drawn towards
// trial.Unknown is positive definite; the jitter guards rounding when the sums are very large.
func (b *blanks) root(lower *mat.TriDense) {
	cov := mat.NewSymDense(len(b.open), nil)
	for i, d := range b.open {
		for j, e := range b.open[:i+1] {
			cov.SetSym(i, j, b.given.Cov(d, e))
		}
	}
	var c mat.Cholesky
	for jitter := 1e-9; !c.Factorize(cov); jitter *= 10 {
		for i := range b.open {
			cov.SetSym(i, i, cov.At(i, i)+jitter)
		}
	}
	c.LTo(lower)
}

// pointsOf are evenly spread points of the unit cube, the same every time: a Halton sequence scrambled
// as by Owen (gonum's samplemv; from memory), kept off the borders.
func pointsOf(dim int) *mat.Dense {
	const off = 1e-9
	points := mat.NewDense(draws, dim, nil)
	samplemv.Halton{Kind: samplemv.Owen, Q: distmv.NewUnitUniform(dim, nil), Src: rand.NewPCG(3159, draws)}.Sample(points)
	points.Apply(func(_, _ int, v float64) float64 { return min(max(v, off), 1-off) }, points)
	return points
}
