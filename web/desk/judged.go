package desk

import (
	"strconv"
	"strings"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/web/part"
)

// judged is a batch with every movement judged once: what all parts of its page read.
type judged struct {
	store.BatchSheet
	judge        *trial.Judge
	pieces       []piece
	due          int // the round that is due next; -1 when all are done
	next         int // the programme day it closes; 0 for none
	first, again store.Counts
	cannot       int
}

// piece is one movement with its judgement.
type piece struct {
	*store.Movement
	result trial.Result
	cannot bool        // in trial, open, and no rates to come can save it
	risk   bool        // in trial, open, and a next day like its mean so far would end its chance
	mean   trial.Exact // of the days read so far that enter the mean
	days   int         // how many these are
}

// judgeBatch judges every movement of a batch.
func judgeBatch(s store.BatchSheet) (*judged, error) {
	j, err := trial.NewJudge(s.Batch.Programme, s.Batch.Category)
	if err != nil {
		return nil, err
	}
	b := &judged{BatchSheet: s, judge: j, pieces: make([]piece, len(s.Movements)), due: store.NextDue(s.Rounds)}
	b.next = b.nextDay()
	days := meanDays(s.Batch.Programme)
	for i := range b.pieces {
		p := &b.pieces[i]
		p.Movement = &s.Movements[i]
		j.Rates(p.Rates, &p.result)
		p.mean, p.days = meanOf(p.Rates, days)
		b.look(p)
		counts := &b.first
		if p.Attempt > 1 {
			counts = &b.again
		}
		counts.Add(p.result.Verdict, p.End)
	}
	return b, nil
}

// look finds out whether an open movement can still pass, and whether it is at risk.
func (b *judged) look(p *piece) {
	if p.End != store.InTrial || p.result.Verdict != trial.Open {
		return
	}
	if p.cannot = b.judge.CannotPass(p.Rates); p.cannot {
		b.cannot++
		return
	}
	if b.next == 0 || p.days == 0 || p.Rates[b.next-1].Known() {
		return
	}
	if like, ok := milliOf(p.mean); ok {
		rates := append([]trial.Rate(nil), p.Rates...)
		rates[b.next-1] = trial.RateOf(like)
		p.risk = b.judge.CannotPass(rates)
	}
}

// nextDay is the programme day that the next round closes that closes one.
func (b *judged) nextDay() int {
	for k := max(b.due, 0); b.due >= 0 && k < len(b.Batch.Steps); k++ {
		if d := b.Batch.Steps[k].Day; d > 0 {
			return d
		}
	}
	return 0
}

// meanDays are the days of the first criterion that is a mean, all days where there is none.
func meanDays(p *trial.Programme) []int {
	for _, c := range p.Criteria {
		if c.Formula.Kind == trial.Mean {
			return c.Formula.Days
		}
	}
	all := make([]int, len(p.Days))
	for i := range all {
		all[i] = i + 1
	}
	return all
}

// meanOf is the exact mean of the days that were read.
func meanOf(rates []trial.Rate, days []int) (mean trial.Exact, n int) {
	for _, d := range days {
		if d <= len(rates) && rates[d-1].Known() {
			mean, n = mean.Add(rates[d-1].Exact()), n+1
		}
	}
	if n > 0 {
		mean = mean.Times(trial.Ratio(1, int64(n)))
	}
	return mean, n
}

// milliOf rounds to whole thousandths, as a rate is typed.
func milliOf(e trial.Exact) (int64, bool) {
	n, err := strconv.ParseInt(strings.Replace(e.Decimal(3), ".", "", 1), 10, 64)
	return n, err == nil
}

// standing is how a movement stands, as the filter of the table names it: its end, or its verdict, or
// that it cannot pass.
func (p *piece) standing() string {
	switch {
	case p.End != store.InTrial:
		return string(p.End)
	case p.cannot:
		return standsCannot
	}
	return p.result.Verdict.String()
}

// The standings of movements that are in trial, beside the ends.
const (
	standsPass   = "pass"
	standsFail   = "fail"
	standsOpen   = "open"
	standsNone   = "-"
	standsCannot = "cannot"
)

// standings lists them, the worst first: the order in which the table sorts by verdict.
var standings = []string{standsFail, string(store.Rejected), string(store.Removed), standsCannot, standsOpen, standsNone, standsPass,
	string(store.Withdrawn), string(store.Void)}

// judgedAs is how a standing is drawn.
func judgedAs(standing string) part.Judged {
	switch standing {
	case standsPass:
		return part.JudgedOf(trial.Pass, false, store.InTrial)
	case standsFail:
		return part.JudgedOf(trial.Fail, false, store.InTrial)
	case standsOpen:
		return part.JudgedOf(trial.Open, false, store.InTrial)
	case standsNone:
		return part.JudgedOf(trial.None, false, store.InTrial)
	case standsCannot:
		return part.JudgedOf(trial.Open, true, store.InTrial)
	}
	return part.JudgedOf(trial.Open, false, store.End(standing))
}

// all counts every movement, whatever its attempt.
func (b *judged) all() store.Counts {
	var sum store.Counts
	for i := range b.pieces {
		sum.Add(b.pieces[i].result.Verdict, b.pieces[i].End)
	}
	return sum
}

// failing are the results that the failures by criterion are counted over: failed by their rates, or
// removed. One rejected for cause has a bar of its own.
func (b *judged) failing() (results []trial.Result, rejected, removedOpen int) {
	for i := range b.pieces {
		p := &b.pieces[i]
		switch {
		case p.End == store.Rejected:
			rejected++
		case p.End == store.Removed && p.result.Verdict != trial.Fail:
			removedOpen++
		case p.End == store.Removed, p.End == store.InTrial && p.result.Verdict == trial.Fail:
			results = append(results, p.result)
		}
	}
	return results, rejected, removedOpen
}

// measured are the results that a distribution is drawn over: those that the yield counts or may
// still count.
func (b *judged) measured() []trial.Result {
	out := make([]trial.Result, 0, len(b.pieces))
	for i := range b.pieces {
		if p := &b.pieces[i]; p.End != store.Withdrawn && p.End != store.Void {
			out = append(out, p.result)
		}
	}
	return out
}

// decidedFrom is the first day on which some criterion can be decided.
func decidedFrom(p *trial.Programme, category string) int {
	first := len(p.Days)
	for _, c := range p.Criteria {
		if days := c.Formula.AllDays(); c.Limits[category].Any() && len(days) > 0 {
			first = min(first, days[len(days)-1])
		}
	}
	return first
}
