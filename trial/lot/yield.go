package lot

import "ratehouse/trial"

// Yield is passed / (passed + failed) with what chance alone allows it to be.
type Yield struct {
	Pass, Judged  int
	Share         float64  // 0 where nothing is judged
	Wilson, Exact Interval // score and Clopper-Pearson
}

// YieldOf computes a yield and its intervals from counts of passed and failed movements. Who was
// withdrawn or is void is in neither; who was rejected for cause or removed counts as failed. First
// presentations and re-submissions are two yields.
func YieldOf(pass, fail int, confidence float64) Yield {
	y := Yield{Pass: pass, Judged: pass + fail, Wilson: Wilson(pass, pass+fail, confidence), Exact: ClopperPearson(pass, pass+fail, confidence)}
	if y.Judged > 0 {
		y.Share = float64(pass) / float64(y.Judged)
	}
	return y
}

// Failures counts by criterion what failed movements are outside of, each criterion at its index in
// the programme.
type Failures struct {
	Outside  []int   // outside of this one
	Alone    []int   // outside of this one and no other
	Together [][]int // [i][k]: outside of both; [i][i] is Outside[i]
}

// NewFailures makes an empty count for so many criteria.
func NewFailures(criteria int) *Failures {
	f := &Failures{Outside: make([]int, criteria), Alone: make([]int, criteria), Together: make([][]int, criteria)}
	for i := range f.Together {
		f.Together[i] = make([]int, criteria)
	}
	return f
}

// Add counts one movement by the criteria decided outside; one without counts nowhere.
func (f *Failures) Add(r *trial.Result) {
	outside := 0
	last := 0
	for i := range r.Values {
		if r.Values[i].Outcome != trial.Outside {
			continue
		}
		f.Outside[i]++
		outside, last = outside+1, i
		for k := range r.Values {
			if r.Values[k].Outcome == trial.Outside {
				f.Together[i][k]++
			}
		}
	}
	if outside == 1 {
		f.Alone[last]++
	}
}
