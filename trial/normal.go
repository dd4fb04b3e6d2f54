package trial

// Normal is a multivariate normal distribution of the daily rates of a programme, s/d. Floats: for
// forecasts and plausibility, never for a verdict.
type Normal struct {
	Mean []float64   // day d at [d-1]
	Cov  [][]float64 // symmetric, positive definite
}

// Normal estimates the distribution behind a history: maximum likelihood, with base counted as
// weight movements more, so that little history stays near base and none is base. Movements that
// were taken out early are censored by what had been read, which is in the history too: each day is
// regressed on the days before it over all movements that have both, and mean and covariance are put
// together from these regressions, which for such data is the maximum (factored likelihood of
// monotone missing data; from memory). weight must be above 0.
func (p *Prior) Normal(base Normal, weight float64) Normal {
	n := p.Days
	out := Normal{Mean: make([]float64, n), Cov: square(n)}
	sums := base.sums(weight)
	lines := make([]regression, n)
	for j := n; j >= 1; j-- { // runs that reach day j
		p.Runs[j-1].into(sums)
		lines[j-1] = regress(sums, j)
	}
	for j := 1; j <= n; j++ {
		lines[j-1].extend(&out, j-1)
	}
	return out
}

// Spreads of Unknown.
const (
	unknownMean    = 4.0  // s/d: spread of movements nothing is known of,
	unknownPlace   = 3.0  // of one position against another,
	unknownThermal = 0.4  // s/d per °C,
	unknownDay     = 0.7  // s/d: of one day
	unknownRead    = 0.15 // s: of one reading, shared by two neighbouring days with opposite sign
)

// Unknown is the distribution of rates of a calibre nothing is known of: a level of the movement, one of
// each position, a thermal slope about 23 °C, and what is new each day. Spreads that fit most
// movements: common practice, no source.
func Unknown(days []Day) Normal {
	n := Normal{Mean: make([]float64, len(days)), Cov: make([][]float64, len(days))}
	for i, a := range days {
		n.Cov[i] = make([]float64, len(days))
		for j, b := range days {
			warm := (a.TemperatureC.Exact().Float() - 23) * (b.TemperatureC.Exact().Float() - 23)
			c := unknownMean*unknownMean + unknownThermal*unknownThermal*warm
			if a.Position == b.Position {
				c += unknownPlace * unknownPlace
			}
			switch {
			case i == j:
				c += unknownDay*unknownDay + 2*unknownRead*unknownRead
			case i-j == 1 || j-i == 1:
				c -= unknownRead * unknownRead
			}
			n.Cov[i][j] = c
		}
	}
	return n
}

func square(n int) [][]float64 {
	a := make([][]float64, n)
	for i := range a {
		a[i] = make([]float64, n)
	}
	return a
}

// sums is what weight movements of the distribution add up to: count at [0][0], sums of day d at
// [0][d] and [d][0], products at [i][j].
func (n Normal) sums(weight float64) [][]float64 {
	a := square(len(n.Mean) + 1)
	a[0][0] = weight
	for i, m := range n.Mean {
		a[0][i+1], a[i+1][0] = weight*m, weight*m
		for j, k := range n.Mean {
			a[i+1][j+1] = weight * (n.Cov[i][j] + m*k)
		}
	}
	return a
}

// into adds the moments to such sums, thousandths turned into s/d.
func (m *Moments) into(a [][]float64) {
	a[0][0] += float64(m.N)
	at := 0
	for i, s := range m.Sum {
		a[0][i+1] += float64(s) / 1e3
		a[i+1][0] = a[0][i+1]
		for j := range i + 1 {
			a[i+1][j+1] += float64(m.Cross[at]) / 1e6
			a[j+1][i+1] = a[i+1][j+1]
			at++
		}
	}
}

// regression of a day on all days before it.
type regression struct {
	constant, rest float64   // rest: variance about the line
	slope          []float64 // of the days before
}

func regress(sums [][]float64, day int) regression {
	a := square(day + 1)
	for i := range a {
		copy(a[i], sums[i])
	}
	for k := range day {
		eliminate(a, k)
	}
	r := regression{constant: a[0][day], rest: a[day][day] / sums[0][0]}
	for k := 1; k < day; k++ {
		r.slope = append(r.slope, a[k][day])
	}
	return r
}

// extend adds a day to a distribution that has all days before it.
func (r regression) extend(n *Normal, at int) {
	n.Mean[at], n.Cov[at][at] = r.constant, r.rest
	for i, b := range r.slope {
		n.Mean[at] += b * n.Mean[i]
		for j, c := range r.slope {
			n.Cov[at][i] += c * n.Cov[i][j]
			n.Cov[at][at] += b * c * n.Cov[i][j]
		}
		n.Cov[i][at] = n.Cov[at][i]
	}
}

// eliminate solves for variable k in a symmetric matrix of sums (the sweep operator of regression; from
// memory). After sweeping a set S: [i][j] with i in S, j not: the slope of j on i; both not in S: what
// is left; both in S: less the inverse.
func eliminate(a [][]float64, k int) {
	d := a[k][k]
	row := append([]float64(nil), a[k]...)
	for i := range a {
		f := a[i][k] / d
		for j := range a[i] {
			a[i][j] -= f * row[j]
		}
		a[i][k] = f
	}
	for j := range row {
		a[k][j] = row[j] / d
	}
	a[k][k] = -1 / d
}

// Conditional is what is left of a Normal once some days are known.
type Conditional struct {
	days []int // known, from 1
	mean []float64
	a    [][]float64 // covariance, swept
}

// Given prepares forecasts from the rates of these days, numbered from 1, each once.
func (n Normal) Given(days []int) *Conditional {
	c := &Conditional{days: append([]int(nil), days...), mean: n.Mean, a: square(len(n.Mean))}
	for i := range c.a {
		copy(c.a[i], n.Cov[i])
	}
	for _, d := range days {
		eliminate(c.a, d-1)
	}
	return c
}

// Mean is the expected rate of a day that is not among the known ones, whose rates are x in the order
// given to Given; s/d.
func (c *Conditional) Mean(day int, x []float64) float64 {
	m := c.mean[day-1]
	for i, d := range c.days {
		m += c.a[d-1][day-1] * (x[i] - c.mean[d-1])
	}
	return m
}

// Cov is the covariance of two days that are not known, (s/d)².
func (c *Conditional) Cov(i, j int) float64 { return c.a[i-1][j-1] }

// Distance is the squared Mahalanobis distance of the known rates from their mean: for a normal
// distribution chi-squared with as many degrees of freedom as days are known.
func (c *Conditional) Distance(x []float64) float64 {
	q := 0.0
	for i, d := range c.days {
		for j, e := range c.days {
			q -= (x[i] - c.mean[d-1]) * c.a[d-1][e-1] * (x[j] - c.mean[e-1])
		}
	}
	return max(0, q)
}
