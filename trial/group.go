package trial

import "slices"

// group evaluates together all criteria over the same days or the same pairs, which share most of
// the work: mean and greatest deviation, mean and greatest variation.
type group struct {
	days           []int32 // a run of days, or nil
	pairs          [][2]int32
	weights        []int64
	first, past    int     // the days as a half-open run, if they are one
	sums           []int32 // criteria that are the plain sum
	deviations     []int32
	totals, peaks  []int32
	lines          []int32 // criteria with weights
	consecutive    bool    // pairs are (first, first+1), (first+2, first+3), ... up to past
	lone, lonePeak int32
}

// groupCriteria sorts criteria into groups.
func groupCriteria(crits []criterion) []group {
	var groups []group
	find := func(same func(*group) bool, fresh group) *group {
		i := slices.IndexFunc(groups, func(g group) bool { return same(&g) })
		if i < 0 {
			groups = append(groups, fresh)
			i = len(groups) - 1
		}
		return &groups[i]
	}
	for i := range crits {
		c, at := &crits[i], int32(i)
		switch {
		case c.shape == deviation || c.shape == linear && plainSum(c.weights):
			first, past := run(c.days)
			g := find(func(g *group) bool { return g.pairs == nil && g.weights == nil && slices.Equal(g.days, c.days) },
				group{days: c.days, first: first, past: past})
			if c.shape == deviation {
				g.deviations = append(g.deviations, at)
			} else {
				g.sums = append(g.sums, at)
			}
		case c.shape == linear:
			groups = append(groups, group{days: c.days, weights: c.weights, lines: []int32{at}})
		default:
			first, past := pairRun(c.pairs)
			g := find(func(g *group) bool { return g.pairs != nil && slices.Equal(g.pairs, c.pairs) },
				group{pairs: c.pairs, first: first, past: past, consecutive: past > 0})
			if c.shape == total {
				g.totals = append(g.totals, at)
			} else {
				g.peaks = append(g.peaks, at)
			}
		}
	}
	return groups
}

func plainSum(weights []int64) bool {
	return !slices.ContainsFunc(weights, func(w int64) bool { return w != 1 })
}

// run gives days as a half-open run; past is 0 if they are none.
func run(days []int32) (first, past int) {
	for i, d := range days {
		if d != days[0]+int32(i) {
			return 0, 0
		}
	}
	return int(days[0]), int(days[0]) + len(days)
}

func pairRun(pairs [][2]int32) (first, past int) {
	for i, p := range pairs {
		if p[0] != pairs[0][0]+2*int32(i) || p[1] != p[0]+1 {
			return 0, 0
		}
	}
	return int(pairs[0][0]), int(pairs[0][0]) + 2*len(pairs)
}

// eval writes N of the group's criteria.
func (g *group) eval(r []int64, values []Value) {
	switch {
	case g.weights != nil:
		var n int64
		for i, d := range g.days {
			n += g.weights[i] * r[d]
		}
		values[g.lines[0]].num = n
	case g.pairs != nil:
		sum, peak := g.variations(r)
		for _, i := range g.totals {
			values[i].num = sum
		}
		for _, i := range g.peaks {
			values[i].num = peak
		}
	default:
		sum, least, most := g.spread(r)
		for _, i := range g.sums {
			values[i].num = sum
		}
		n := int64(len(g.days))
		for _, i := range g.deviations {
			values[i].num = max(n*most-sum, sum-n*least)
		}
	}
}

func (g *group) spread(r []int64) (sum, least, most int64) {
	if g.past == 0 {
		return spread(r, g.days)
	}
	run := r[g.first:g.past]
	least, most = run[0], run[0]
	for _, x := range run {
		sum += x
		least, most = min(least, x), max(most, x)
	}
	return sum, least, most
}

func (g *group) variations(r []int64) (sum, peak int64) {
	if !g.consecutive {
		for _, p := range g.pairs {
			d := magnitude(r[p[1]] - r[p[0]])
			sum += d
			peak = max(peak, d)
		}
		return sum, peak
	}
	for run := r[g.first:g.past]; len(run) >= 2; run = run[2:] {
		d := magnitude(run[1] - run[0])
		sum += d
		peak = max(peak, d)
	}
	return sum, peak
}
