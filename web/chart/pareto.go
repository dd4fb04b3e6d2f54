package chart

import (
	"slices"

	"ratehouse/trial"
	"ratehouse/trial/lot"
	"ratehouse/web/words"
)

// Pareto counts failures by criterion, the commonest first.
type Pareto struct {
	Rows  []ParetoRow
	Whole int // what the shares are of: pass + fail
}

// ParetoRow is one criterion, or an end with its cause.
type ParetoRow struct {
	Symbol, Title   string
	Alone, Together int // failed by this alone, and by others too
}

// N is how many failed by it.
func (r ParetoRow) N() int { return r.Alone + r.Together }

// ParetoOf counts the failures of a batch by criterion. extra are rows that no criterion has, such as
// movements rejected for cause; they are sorted in with the others.
func ParetoOf(p *words.Printer, j *trial.Judge, results []trial.Result, whole int, extra ...ParetoRow) Pareto {
	crit := j.Programme().Criteria
	rows := make([]ParetoRow, len(crit))
	for i, c := range crit {
		rows[i] = ParetoRow{Symbol: c.Symbol, Title: p.Say(words.CriterionTitle(c.Symbol, c.Title))}
	}
	count := lot.NewFailures(len(crit))
	for i := range results {
		count.Add(&results[i])
	}
	for i := range rows {
		rows[i].Alone, rows[i].Together = count.Alone[i], count.Outside[i]-count.Alone[i]
	}
	rows = append(rows, extra...)
	slices.SortStableFunc(rows, func(a, b ParetoRow) int { return b.N() - a.N() })
	return Pareto{rows, whole}
}

// Empty tells whether nothing failed.
func (c Pareto) Empty() bool {
	return !slices.ContainsFunc(c.Rows, func(r ParetoRow) bool { return r.N() > 0 })
}

type paretoView struct {
	box, axis string
	bars      []paretoBar
}

type paretoBar struct {
	ParetoRow
	TextY, Y             string
	AloneW, RestX, RestW string
	Says, Count, Share   string
	Class                string
}

const paretoLeft, paretoWidth = 216.0, 122.0

func (c Pareto) view(p *words.Printer) paretoView {
	most := 1
	for _, r := range c.Rows {
		most = max(most, r.N())
	}
	x := NewScale(0, float64(most), 0, paretoWidth)
	v := paretoView{box: "0 0 420 " + px(float64(28+26*len(c.Rows))), axis: "M" + px(paretoLeft) + " 20V" + px(float64(22+26*len(c.Rows)))}
	for i, r := range c.Rows {
		y := float64(26 + 26*i)
		alone, rest := x.At(float64(r.Alone)), x.At(float64(r.Together))
		b := paretoBar{ParetoRow: r, TextY: px(y + 11), Y: px(y), AloneW: px(alone), RestX: px(paretoLeft + alone), RestW: px(rest),
			Says:  p.Say(words.ChartParetoRow.With(r.Symbol, r.Title, words.Movements.With(r.N()))),
			Count: p.Count(r.N()), Share: p.Share(r.N(), c.Whole), Class: "em end"}
		if r.N() == 0 {
			b.Class, b.Share = "end", ""
		}
		v.bars = append(v.bars, b)
	}
	return v
}
