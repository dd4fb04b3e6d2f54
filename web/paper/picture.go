package paper

import (
	"fmt"
	"math"
	"regexp"
	"slices"

	"ratehouse/store/proof"
	"ratehouse/web/chart"
)

// picture is the chart of a paper, drawn in the columns of the table above it; its unit is a tenth of a
// millimetre. It shows figures of the record and computes none.
type picture struct {
	Box    string
	Ticks  []text
	Lines  []line
	Points []text
	Labels []text
}

type (
	line struct{ Class, D string }
	text struct{ Class, D, X, Y, Text string }
)

// The sheet between its margins is 182 mm wide, the first column of the table 19 mm (paper.css).
const (
	pictureWidth = 1820.0
	pictureLeft  = 190.0
	pictureEdge  = 14.0 // above and below the axis
	bracketX     = 12.0

	pictureLeast = 26.2 // mm
	pictureGrows = 22.0 // mm, where the leaf has room
)

// picture draws the chart so many mm higher than it must be.
func (s *sheet) picture(more float64) (v picture) {
	height := 10 * (pictureLeast + more)
	v.Box = fmt.Sprintf("0 0 %.0f %.0f", pictureWidth, height)
	mean := s.meanRate()
	lo, hi := s.reach(mean)
	y := chart.NewScale(lo, hi, height-pictureEdge, pictureEdge)
	skip := 0.0
	if s.Days.Start {
		skip = 1
	}
	step := (pictureWidth - pictureLeft) / (float64(len(s.Record.Days)) + skip)
	x := func(i int) float64 { return pictureLeft + (float64(i)+skip+0.5)*step }
	for _, t := range chart.Ticks(lo, hi, 7) {
		class := "grid"
		if t.At == 0 {
			class = "zero"
		}
		v.Ticks = append(v.Ticks, text{Class: class, D: fmt.Sprintf("M%.0f %.1fH%.0f", pictureLeft, y.At(t.At), pictureWidth),
			X: fmt.Sprintf("%.0f", pictureLeft-12), Y: fmt.Sprintf("%.1f", y.At(t.At)+8), Text: s.p.Signed(t.Dec, places(t.Dec))})
	}
	v.course(s.Record.Days, x, y, step, height)
	if mean != nil {
		v.bracket(s, *mean, x, y, step)
	}
	return v
}

// meanForm is the definition of a mean of rates.
var meanForm = regexp.MustCompile(`^(\(R[0-9+.R]+\)/[0-9]+|R[0-9]+)$`)

// meanRate is the criterion drawn beside the rates: the first that is a mean of some.
func (s *sheet) meanRate() *proof.Criterion {
	for i, k := range s.Record.Criteria {
		if meanForm.MatchString(k.Definition) && k.Value != "" && k.Unit == "s/d" {
			return &s.Record.Criteria[i]
		}
	}
	return nil
}

// reach is the range of the axis: all rates, the limits of the mean, and zero.
func (s *sheet) reach(mean *proof.Criterion) (lo, hi float64) {
	see := func(d proof.Decimal) {
		if d != "" {
			lo, hi = math.Min(lo, float(string(d))), math.Max(hi, float(string(d)))
		}
	}
	for _, d := range s.Record.Days {
		see(d.Rate)
	}
	if mean != nil {
		see(mean.Min)
		see(mean.Max)
	}
	if lo == hi {
		lo, hi = -5, 5
	}
	return chart.Widen(lo, hi, 7)
}

// course joins the rates: solid within a position and temperature, dotted across a turn, hollow where a
// day enters no criterion.
func (v *picture) course(days []proof.Day, x func(int) float64, y chart.Scale, step, height float64) {
	for i, d := range days {
		turned := i > 0 && (d.Position != days[i-1].Position || d.TemperatureC != days[i-1].TemperatureC)
		if turned {
			v.Lines = append(v.Lines, line{"turn", fmt.Sprintf("M%.1f 0V%.0f", x(i)-step/2, height)})
		}
		if d.Rate == "" {
			continue
		}
		at := y.At(float(string(d.Rate)))
		if i > 0 && days[i-1].Rate != "" {
			class := "line"
			if turned {
				class = "link"
			}
			v.Lines = append(v.Lines, line{class, fmt.Sprintf("M%.1f %.1fL%.1f %.1f", x(i-1), y.At(float(string(days[i-1].Rate))), x(i), at)})
		}
		class := "dot"
		if len(d.Enters) == 0 {
			class = "dot free"
		}
		v.Points = append(v.Points, text{Class: class, X: fmt.Sprintf("%.1f", x(i)), Y: fmt.Sprintf("%.1f", at)})
	}
}

// bracket draws the mean between its limits at the left, and a dashed line through its days.
func (v *picture) bracket(s *sheet, k proof.Criterion, x func(int) float64, y chart.Scale, step float64) {
	at := y.At(float(string(k.Printed)))
	from, to := at, at
	label := func(y float64, class, says string) {
		v.Labels = append(v.Labels, text{Class: class, X: fmt.Sprint(bracketX + 20), Y: fmt.Sprintf("%.1f", y+8), Text: says})
	}
	for _, l := range []proof.Decimal{k.Min, k.Max} {
		if l == "" {
			continue
		}
		end := y.At(float(string(l)))
		from, to = math.Min(from, end), math.Max(to, end)
		v.Lines = append(v.Lines, line{"limit", fmt.Sprintf("M%.0f %.1fh20", bracketX-10, end)})
		if math.Abs(end-at) > 24 {
			label(end, "", s.number(k, string(l)))
		}
	}
	v.Lines = append(v.Lines, line{"axis", fmt.Sprintf("M%.0f %.1fV%.1f", bracketX, from, to)})
	v.Points = append(v.Points, text{Class: "dot", X: fmt.Sprint(bracketX), Y: fmt.Sprintf("%.1f", at)})
	label(at, "em", k.Symbol+" "+s.number(k, string(k.Printed)))
	days := s.Record.Days
	enters := func(d proof.Day) bool { return slices.Contains(d.Enters, k.Symbol) }
	first := slices.IndexFunc(days, enters)
	if first < 0 {
		return
	}
	last := first
	for i, d := range days {
		if enters(d) {
			last = i
		}
	}
	v.Lines = append(v.Lines, line{"guide", fmt.Sprintf("M%.1f %.1fH%.1f", x(first)-step/2, at, x(last)+step/2)})
}
