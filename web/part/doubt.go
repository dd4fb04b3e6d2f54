package part

import (
	"math"
	"strconv"

	"ratehouse/trial"
)

// resolution is the step in which a state is read by eye, s: a tenth (common practice, no source).
var resolution = trial.Ratio(1, 10)

// ResolutionOnly is the budget that pages compute with while no laboratory has entered its own: the
// resolution of the readings and nothing else. Whoever shows a figure made from it names it so, for
// the whole budget is several times greater.
func ResolutionOnly() trial.Budget { return trial.Budget{Resolution: resolution} }

// ResolutionText is the resolution and the standard uncertainty it makes of one state, s, as plain
// decimals: the step over √12 (JCGM 100:2008 4.3.7, from memory).
func ResolutionText() (step, u string) {
	return resolution.Decimal(1), strconv.FormatFloat(resolution.Float()/math.Sqrt(12), 'f', 3, 64)
}
