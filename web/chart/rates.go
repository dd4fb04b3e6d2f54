package chart

import (
	"math"
	"slices"
	"strconv"

	"ratehouse/trial"
	"ratehouse/web/words"
)

// Rates is the chart of a movement's daily rates, with everything it shows as numbers; RatesOf makes
// it and RatesChart draws it.
type Rates struct {
	Serial        string
	Width, Height float64 // in pixels of the column it is shown in; 0: a page that may be wide or narrow
	Days          []RateDay
	Lines         []RateLine
	Mean          *Mean
}

// RateDay is one programme day.
type RateDay struct {
	N                     int
	Position, Temperature string
	Band                  Band
	Turns                 bool // another position or temperature than the day before
	Known                 bool
	Rate                  float64 // for its place on the chart only
	Text                  string  // the rate as it is said, with its sign
	Free                  bool    // enters no criterion
	Replaced              []Old
}

// Old is a value that a correction replaced.
type Old struct {
	Rate float64
	Text string
}

// Band is how a day's temperature lies to the programme's usual one.
type Band string

// The bands.
const (
	Usual Band = ""
	Cold  Band = "cold"
	Warm  Band = "warm"
)

// RateLine is a horizontal limit over some days, named where it begins.
type RateLine struct {
	From, To int
	Rate     float64
	Text     string
}

// Mean is the mean rate over its days with its limits, drawn at the right.
type Mean struct {
	From, To       int
	Rate           float64
	Text           string
	HasMin, HasMax bool
	Min, Max       float64
	MinText        string
	MaxText        string
}

// RatesOf makes the chart of one movement from its rates by programme day and its judgement by j.
// replaced holds by day what corrections replaced; it may be nil.
func RatesOf(p *words.Printer, j *trial.Judge, serial string, rates []trial.Rate, res *trial.Result, replaced map[int][]trial.Rate) Rates {
	prog := j.Programme()
	c := Rates{Serial: serial, Days: make([]RateDay, len(prog.Days))}
	used := usedDays(prog)
	for i, d := range prog.Days {
		day := RateDay{N: d.N, Position: string(d.Position), Temperature: p.Celsius(d.TemperatureC.String()),
			Band: BandOf(prog, d), Free: !used[d.N]}
		day.Turns = i == 0 || d.Position != prog.Days[i-1].Position || d.TemperatureC != prog.Days[i-1].TemperatureC
		if i < len(rates) && rates[i].Known() {
			day.Known, day.Rate, day.Text = true, rates[i].Exact().Float(), p.Signed(rates[i].Decimal(1), 1)
		}
		for _, o := range replaced[d.N] {
			day.Replaced = append(day.Replaced, Old{o.Exact().Float(), p.Signed(o.Decimal(1), 1)})
		}
		c.Days[i] = day
	}
	c.meanAndDeviation(p, j, res)
	return c
}

// meanAndDeviation finds the mean and, when it is known, how far from it single days may lie.
func (c *Rates) meanAndDeviation(p *words.Printer, j *trial.Judge, res *trial.Result) {
	for i, crit := range j.Programme().Criteria {
		v, l := res.Values[i], j.Limit(i)
		switch {
		case crit.Formula.Kind == trial.Mean && v.Known && c.Mean == nil:
			days := crit.Formula.Days
			c.Mean = &Mean{From: slices.Min(days), To: slices.Max(days), Rate: v.Float(),
				Text:   crit.Symbol + " " + p.Criterion(crit, l, v.Exact, words.Decimals(crit)),
				HasMin: l.HasMin, HasMax: l.HasMax, Min: l.Min.Float(), Max: l.Max.Float(),
				MinText: p.Signed(l.Min.Decimal(3), short(l.Min)), MaxText: p.Signed(l.Max.Decimal(3), short(l.Max))}
		case crit.Formula.Kind == trial.GreatestDeviation && l.HasMax && c.Mean != nil:
			days := crit.Formula.Days
			if slices.Min(days) != c.Mean.From || slices.Max(days) != c.Mean.To {
				continue
			}
			mean, ok := meanValue(j, res)
			if !ok {
				continue
			}
			for _, at := range []trial.Exact{mean.Add(l.Max), mean.Sub(l.Max)} {
				c.Lines = append(c.Lines, RateLine{c.Mean.From, c.Mean.To, at.Float(),
					p.Say(words.ChartNamedLimit.With(crit.Symbol, p.Signed(at.Decimal(2), 2)))})
			}
		}
	}
}

func meanValue(j *trial.Judge, res *trial.Result) (trial.Exact, bool) {
	for i, crit := range j.Programme().Criteria {
		if crit.Formula.Kind == trial.Mean && res.Values[i].Known {
			return res.Values[i].Exact, true
		}
	}
	return trial.Exact{}, false
}

// short is the number of decimals a limit needs, up to three.
func short(e trial.Exact) int {
	for places := range 3 {
		if s, err := trial.ParseExact(e.Decimal(places)); err == nil && s.Cmp(e) == 0 {
			return places
		}
	}
	return 3
}

// usedDays tells which days enter a criterion.
func usedDays(p *trial.Programme) map[int]bool {
	used := map[int]bool{}
	add := func(days ...int) {
		for _, d := range days {
			used[d] = true
		}
	}
	for _, c := range p.Criteria {
		f := c.Formula
		add(f.Days...)
		add(f.Of...)
		add(f.From...)
		for _, pair := range f.Pairs {
			add(pair[:]...)
		}
		for _, period := range f.Periods {
			add(period...)
		}
	}
	return used
}

// BandOf tells whether a day is colder or warmer than the temperature that most days have.
func BandOf(p *trial.Programme, d trial.Day) Band {
	count := map[trial.Milli]int{}
	var usual trial.Milli
	for _, o := range p.Days {
		count[o.TemperatureC]++
		if count[o.TemperatureC] > count[usual] {
			usual = o.TemperatureC
		}
	}
	switch {
	case d.TemperatureC < usual:
		return Cold
	case d.TemperatureC > usual:
		return Warm
	}
	return Usual
}

// Empty tells whether there is nothing to draw.
func (c Rates) Empty() bool {
	return !slices.ContainsFunc(c.Days, func(d RateDay) bool { return d.Known || len(d.Replaced) > 0 })
}

// ratesView is the chart in pixels.
type ratesView struct {
	Rates
	box                      string
	left, right, top, bottom float64
	foot, far                float64
	bands                    []rect
	ticks                    []axisTick
	phases                   []phase
	days                     []label
	lines                    []segment
	limits                   []namedLine
	points                   []point
	old                      []oldPoint
	meanY                    float64
}

type (
	rect      struct{ X, Y, W, H, Class string }
	axisTick  struct{ Class, At, Label, LabelAt string }
	phase     struct{ TurnX, X, Position, Temperature, Class string }
	label     struct{ X, Text string }
	segment   struct{ Class, D string }
	namedLine struct{ D, X, Y, Text string }
	point     struct {
		X, Y, Class, Says, Tip              string
		HitX, HitY, TipX, TipY, TipW, TextY string
	}
	oldPoint struct{ D, X, Y, Text string }
)

const (
	deskWidth, deskHeight = 1340, 350
	leafWidth, leafHeight = 760, 300
)

func (c Rates) sized(width, height float64) Rates {
	c.Width, c.Height = width, height
	return c
}

func (c Rates) view(p *words.Printer) ratesView {
	v := ratesView{Rates: c, left: 44, right: c.Width - 92, top: 44, bottom: c.Height - 44, far: c.Width - 78}
	v.foot = v.bottom + 15
	v.box = "0 0 " + strconv.Itoa(int(c.Width)) + " " + strconv.Itoa(int(c.Height))
	lo, hi := c.span()
	ticks := Ticks(lo, hi, max(4, int((v.bottom-v.top)/30)))
	y := NewScale(lo, hi, v.bottom, v.top)
	step := (v.right - v.left) / float64(len(c.Days))
	x := func(day int) float64 { return v.left + (float64(day)-0.5)*step }
	v.drawAxis(p, y, ticks)
	v.drawPhases(step)
	v.drawPoints(p, x, y)
	for _, l := range c.Lines {
		v.limits = append(v.limits, v.limitLine(l, x, y, step))
	}
	if c.Mean != nil {
		v.meanY = y.At(c.Mean.Rate)
	}
	return v
}

// span is the range of the axis: every value and limit, and zero always.
func (c Rates) span() (lo, hi float64) {
	see := func(x float64) { lo, hi = math.Min(lo, x), math.Max(hi, x) }
	for _, d := range c.Days {
		if d.Known {
			see(d.Rate)
		}
		for _, o := range d.Replaced {
			see(o.Rate)
		}
	}
	for _, l := range c.Lines {
		see(l.Rate)
	}
	if m := c.Mean; m != nil {
		if m.HasMin {
			see(m.Min)
		}
		if m.HasMax {
			see(m.Max)
		}
	}
	if lo == hi {
		lo, hi = lo-5, hi+5
	}
	return Widen(lo, hi, 9)
}

func (v *ratesView) drawAxis(p *words.Printer, y Scale, ticks []Tick) {
	for _, t := range ticks {
		class := "grid"
		if t.At == 0 {
			class = "zero"
		}
		at := y.At(t.At)
		v.ticks = append(v.ticks, axisTick{class, px(at), p.Signed(t.Dec, places(ticks)), px(at + 4)})
	}
}

// drawPhases puts a line wherever the movement is turned or moved, and names what begins there.
func (v *ratesView) drawPhases(step float64) {
	for i := 0; i < len(v.Days); {
		j := i + 1
		for j < len(v.Days) && !v.Days[j].Turns {
			j++
		}
		d := v.Days[i]
		from, to := v.left+float64(i)*step, v.left+float64(j)*step
		v.phases = append(v.phases, phase{px(from), px((from + to) / 2), d.Position, d.Temperature, bandText(d.Band)})
		if d.Band != Usual {
			v.bands = append(v.bands, rect{px(from), px(v.top), px(to - from), px(v.bottom - v.top), "b" + string(d.Band)})
		}
		i = j
	}
	for i, d := range v.Days {
		v.days = append(v.days, label{px(v.left + (float64(i)+0.5)*step), strconv.Itoa(d.N)})
	}
}

func bandText(b Band) string {
	if b == Usual {
		return "mid"
	}
	return "mid t" + string(b)
}

func (v *ratesView) drawPoints(p *words.Printer, x func(int) float64, y Scale) {
	for i, d := range v.Days {
		if i > 0 && d.Known && v.Days[i-1].Known {
			class := "line"
			if d.Turns {
				class = "link"
			}
			v.lines = append(v.lines, segment{class, "M" + px(x(i)) + " " + px(y.At(v.Days[i-1].Rate)) + "L" + px(x(i+1)) + " " + px(y.At(d.Rate))})
		}
		for _, o := range d.Replaced {
			cx, cy := x(i+1), y.At(o.Rate)
			v.old = append(v.old, oldPoint{"M" + px(cx-5) + " " + px(cy-5) + "l10 10m0-10l-10 10", px(cx + 10), px(cy + 4), p.Say(words.ChartReplaced.With(o.Text))})
		}
		if d.Known {
			v.points = append(v.points, newPoint(p, d, x(i+1), y.At(d.Rate)))
		}
	}
}

func newPoint(p *words.Printer, d RateDay, x, y float64) point {
	day := strconv.Itoa(d.N)
	says := p.Say(words.ChartDayRate.With(day, d.Position, d.Temperature, p.Unit(d.Text, p.Say(words.UnitSecondsPerDay))))
	class := "dot"
	if d.Free {
		says, class = p.Say(words.ChartDayFree.With(says)), "dot free"
	}
	tip := p.Say(words.ChartTip.With(day, d.Text))
	w := textWidth(tip)
	return point{px(x), px(y), class, says, tip, px(x - 12), px(y - 12), px(x - w/2), px(y - 34), px(w), px(y - 20)}
}

func (v *ratesView) limitLine(l RateLine, x func(int) float64, y Scale, step float64) namedLine {
	at := y.At(l.Rate)
	text := at - 5
	if v.Mean != nil && l.Rate < v.Mean.Rate {
		text = at + 14
	}
	from := x(l.From) - step/2
	return namedLine{"M" + px(from) + " " + px(at) + "H" + px(x(l.To)+step/2), px(from + 8), px(text), l.Text}
}

// meanMark is the bracket at the right with the mean between its limits, and the guide through its
// days.
type meanMark struct {
	Guide, Ends, Axis   string
	X, Y, TextX, TextY  string
	MinY, MaxY, LimitsX string
}

func (v ratesView) meanMark() meanMark {
	lo, hi := v.span()
	y := NewScale(lo, hi, v.bottom, v.top)
	step := (v.right - v.left) / float64(len(v.Days))
	m := v.Mean
	at := y.At(m.Rate)
	mark := meanMark{
		Guide: "M" + px(v.left+float64(m.From-1)*step) + " " + px(at) + "H" + px(v.left+float64(m.To)*step),
		X:     px(v.far), Y: px(at), TextX: px(v.far + 10), TextY: px(at + 4), LimitsX: px(v.far + 10),
	}
	from, to := at, at
	if m.HasMin {
		from = y.At(m.Min)
		mark.Ends += "M" + px(v.far-4) + " " + px(from) + "h8"
		mark.MinY = px(apart(from+4, at+4, 13))
	}
	if m.HasMax {
		to = y.At(m.Max)
		mark.Ends += "M" + px(v.far-4) + " " + px(to) + "h8"
		mark.MaxY = px(apart(to+4, at+4, -13))
	}
	mark.Axis = "M" + px(v.far) + " " + px(from) + "V" + px(to)
	return mark
}

// apart moves a label away from another one when they would overlap.
func apart(y, other, by float64) float64 {
	if math.Abs(y-other) < math.Abs(by) {
		return other + by
	}
	return y
}
