package lot

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"

	"ratehouse/trial"
)

// Noise is the uncertainty of one state reading as the trials themselves show it.
type Noise struct {
	Movements int
	Variance  float64  // u_s², s²; chance can make it negative
	Range     Interval // of Variance
	U         float64  // u_s, s; 0 for a negative variance
	Resolved  bool     // Range lies above 0: the lot tells u_s from none
}

// ReadingNoise finds u_s from ordinary trials. The change of rate within one pair of days is made of
// three states, the middle one twice; two pairs that follow each other share one state, others share
// none. So u_s² is the mean covariance of changes of pairs that touch less that of pairs that do not,
// and what a movement's drift adds to both drops out:
//
//	u_s² = mean Cov(R2k - R2k-1, R2k+2 - R2k+1) - mean Cov(of pairs not adjacent)
//
// lots holds movements read together, day d at [d-1]; changes are taken about their mean within the
// lot, so that what a round shares (the clock, the reader) is not in it. pairs are days of one position
// each, such as those of the mean variation. Only movements with all days of the pairs and intervals of
// 24 h count; the scatter of the figure from movement to movement gives its interval. ok is false
// without pairs of both sorts or with fewer than 30 movements. Rates that were typed as rates, or hands
// set in between, have no shared state: leave them out. Source: practice of the house (covariance of
// differences of shared readings, JCGM 100:2008 5.2, from memory).
func ReadingNoise(lots [][][]trial.Rate, pairs [][2]int, confidence float64) (n Noise, ok bool) {
	near, far := neighbours(pairs)
	if len(near) == 0 || len(far) == 0 {
		return n, false
	}
	var figures []float64
	for _, lot := range lots {
		figures = append(figures, noiseOf(changes(lot, pairs), near, far)...)
	}
	if len(figures) < 30 {
		return n, false
	}
	m := MomentsOf(figures)
	half := distuv.UnitNormal.Quantile((1+confidence)/2) * m.SD / math.Sqrt(float64(m.N))
	n = Noise{Movements: m.N, Variance: m.Mean, Range: Interval{m.Mean - half, m.Mean + half}}
	n.U, n.Resolved = math.Sqrt(math.Max(0, m.Mean)), n.Range.Lo > 0
	return n, true
}

// neighbours lists the pairs of pairs that share a reading, and those that do not.
func neighbours(pairs [][2]int) (near, far [][2]int) {
	for i, p := range pairs {
		for k, q := range pairs[:i] {
			if q[1]+1 == p[0] || p[1]+1 == q[0] {
				near = append(near, [2]int{k, i})
			} else {
				far = append(far, [2]int{k, i})
			}
		}
	}
	return near, far
}

// changes are those of the movements that have all pairs, s/d, about the mean of each pair.
func changes(lot [][]trial.Rate, pairs [][2]int) (out [][]float64) {
	for _, rates := range lot {
		row := make([]float64, 0, len(pairs))
		for _, p := range pairs {
			a, b := rateOn(rates, p[0]), rateOn(rates, p[1])
			x, okX := a.Thousandths()
			y, okY := b.Thousandths()
			if !okX || !okY {
				break
			}
			row = append(row, float64(y-x)/1000)
		}
		if len(row) == len(pairs) {
			out = append(out, row)
		}
	}
	for k := range pairs {
		column := make([]float64, len(out))
		for i := range out {
			column[i] = out[i][k]
		}
		if len(out) > 0 {
			mean := meanOf(column).value()
			for i := range out {
				out[i][k] -= mean
			}
		}
	}
	return out
}

// rateOn is the rate of a day, not read beyond the slice.
func rateOn(rates []trial.Rate, day int) trial.Rate {
	if day > len(rates) {
		return trial.Rate{}
	}
	return rates[day-1]
}

// noiseOf is each movement's own figure; n/(n-1) makes up for means taken from the lot itself.
func noiseOf(changes [][]float64, near, far [][2]int) []float64 {
	if len(changes) < 2 {
		return nil
	}
	scale := float64(len(changes)) / float64(len(changes)-1)
	mean := func(row []float64, of [][2]int) float64 {
		s := 0.0
		for _, ik := range of {
			s += row[ik[0]] * row[ik[1]]
		}
		return s / float64(len(of))
	}
	out := make([]float64, len(changes))
	for i, row := range changes {
		out[i] = scale * (mean(row, near) - mean(row, far))
	}
	return out
}
