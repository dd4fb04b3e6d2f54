package chart

import (
	"math"
	"strconv"

	"ratehouse/trial"
	"ratehouse/trial/lot"
	"ratehouse/web/words"
)

// Distribution is a histogram of one criterion over a batch, against its limits. The limits fall on
// edges of columns, and a value equal to a limit stands inside.
type Distribution struct {
	Symbol, Title  string
	Unit           string
	Signed         bool
	Samples        []lot.Sample
	HasMin, HasMax bool
	Min, Max       float64
	MinText        string
	MaxText        string
	MeanText       string // the mean as it is said; "" leaves it out
	Mean           float64
}

// DistributionOf gathers criterion i from the results of a batch judged by j; what is not known yet is
// left out. The mean shown is the exact mean of the values, of irrational ones cut to 30 decimals.
func DistributionOf(p *words.Printer, j *trial.Judge, i int, results []trial.Result) Distribution {
	crit, l := j.Programme().Criteria[i], j.Limit(i)
	d := Distribution{Symbol: crit.Symbol, Title: p.Say(words.CriterionTitle(crit.Symbol, crit.Title)), Unit: p.Say(words.Unit(crit.Unit)),
		Signed: words.SignedKind(crit.Formula.Kind),
		HasMin: l.HasMin, HasMax: l.HasMax, Min: l.Min.Float(), Max: l.Max.Float()}
	d.MinText = p.Number(l.Min.Decimal(3), short(l.Min), d.Signed)
	d.MaxText = p.Number(l.Max.Decimal(3), short(l.Max), d.Signed)
	var sum trial.Exact
	for _, r := range results {
		if v := r.Values[i]; v.Known {
			d.Samples = append(d.Samples, lot.Sample{X: v.Float(), Outside: v.Outcome == trial.Outside})
			sum = sum.Add(v.Rational())
		}
	}
	if n := len(d.Samples); n > 0 {
		mean := sum.Times(trial.Ratio(1, int64(n)))
		d.Mean, d.MeanText = mean.Float(), p.Number(mean.Decimal(2), 2, d.Signed)
	}
	if !d.Signed && !d.HasMin {
		d.HasMin, d.Min, d.MinText = true, 0, "" // magnitudes begin at zero: an edge, not a limit to name
	}
	return d
}

// bins lays out the columns.
func (d Distribution) bins() []lot.Column {
	return lot.Histogram(d.Samples, lot.Bounds{HasMin: d.HasMin, Min: d.Min, HasMax: d.HasMax, Max: d.Max})
}

type histogramView struct {
	Distribution
	zones  []rect
	rows   []axisTick
	cols   []column
	ticks  []label
	limits []namedX
	mean   *namedX
}

type column struct {
	X, Y, W, H, Class, Says, Tip       string
	HitX, HitW, TipX, TipY, TipW, Text string
	Mid                                string
}

type namedX struct{ X, Text string }

const (
	histLeft, histRight = 34.0, 410.0
	histTop, histFoot   = 26.0, 230.0
)

func (d Distribution) view(p *words.Printer) histogramView {
	v := histogramView{Distribution: d}
	bins := d.bins()
	most := 1
	for _, b := range bins {
		most = max(most, b.N)
	}
	from, to := bins[0].From, bins[len(bins)-1].To
	room := (to - from) / float64(len(bins))
	x := NewScale(from-room, to+room, histLeft, histRight)
	count := Ticks(0, float64(most), 5)
	_, top := Widen(0, float64(most), 5)
	y := NewScale(0, top, histFoot, histTop)
	for _, t := range append(count, over(count, top)...) {
		if t.At != math.Trunc(t.At) {
			continue
		}
		class := "grid"
		if t.At == 0 {
			class = "axis"
		}
		v.rows = append(v.rows, axisTick{class, px(y.At(t.At)), p.Count(int(t.At)), px(y.At(t.At) + 4)})
	}
	for _, b := range bins {
		v.cols = append(v.cols, d.column(p, b, x, y))
	}
	v.limitsAndTicks(p, x, from-room, to+room)
	return v
}

// over is the tick at the top of the axis when the highest column stands above the last one.
func over(ticks []Tick, top float64) []Tick {
	if n := len(ticks); n > 0 && ticks[n-1].At < top {
		return []Tick{{top, strconv.Itoa(int(top))}}
	}
	return nil
}

func (d Distribution) column(p *words.Printer, b lot.Column, x, y Scale) column {
	left, right := x.At(b.From), x.At(b.To)
	top := y.At(float64(b.N))
	class := "col"
	if b.Outside {
		class = "col over"
	}
	places := edgePlaces(b.To - b.From)
	edge := func(e float64) string {
		return p.Number(strconv.FormatFloat(e, 'f', 6, 64), places, d.Signed)
	}
	says := p.Say(words.ChartBin.With(edge(b.From), p.Unit(edge(b.To), d.Unit), words.Movements.With(b.N)))
	tip := p.Count(b.N)
	w := textWidth(tip)
	mid := (left + right) / 2
	return column{px(left + 1), px(top), px(math.Max(right-left-2, 1)), px(histFoot - top), class, says, tip,
		px(left), px(right - left), px(mid - w/2), px(top - 22), px(w), px(top - 8), px(mid)}
}

// edgePlaces is the number of decimals that tell the edges of columns a step apart.
func edgePlaces(step float64) int {
	for places := range 4 {
		if s := step * math.Pow10(places); math.Abs(s-math.Round(s)) < 1e-6 {
			return max(places, 1)
		}
	}
	return 3
}

func (v *histogramView) limitsAndTicks(p *words.Printer, x Scale, from, to float64) {
	if v.HasMin && v.MinText != "" {
		at := x.At(v.Min)
		v.zones = append(v.zones, rect{px(histLeft), px(histTop), px(at - histLeft), px(histFoot - histTop), "bout"})
		v.limits = append(v.limits, namedX{px(at), p.Say(words.ChartLimit.With(v.MinText))})
	}
	if v.HasMax {
		at := x.At(v.Max)
		v.zones = append(v.zones, rect{px(at), px(histTop), px(histRight - at), px(histFoot - histTop), "bout"})
		v.limits = append(v.limits, namedX{px(at), p.Say(words.ChartLimit.With(v.MaxText))})
	}
	ticks := Ticks(from, to, 9)
	for _, t := range ticks {
		v.ticks = append(v.ticks, label{px(x.At(t.At)), p.Number(t.Dec, places(ticks), v.Signed)})
	}
	if v.MeanText != "" && v.Mean >= from && v.Mean <= to {
		v.mean = &namedX{px(x.At(v.Mean)), p.Say(words.ChartMean.With(v.MeanText))}
	}
}

// meanAbove tells whether the mean's label would run into a limit's; it is then set below the chart's
// top edge.
func (v histogramView) meanLabelY() string {
	m, err := strconv.ParseFloat(v.mean.X, 64)
	if err != nil {
		return "14"
	}
	for _, l := range v.limits {
		if at, err := strconv.ParseFloat(l.X, 64); err == nil && math.Abs(at-m) < textWidth(l.Text)/2+textWidth(v.mean.Text)/2 {
			return "40"
		}
	}
	return "14"
}
