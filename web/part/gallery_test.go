package part_test

import (
	"context"
	"fmt"
	"io"
	"strconv"
	"strings"
	"testing"

	"github.com/a-h/templ"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/web/chart"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/webtest"
	"ratehouse/web/words"
)

// join writes components one after the other; tags are literal HTML around them.
func join(list ...any) templ.Component {
	return templ.ComponentFunc(func(ctx context.Context, w io.Writer) error {
		for _, one := range list {
			var err error
			switch one := one.(type) {
			case string:
				_, err = io.WriteString(w, one)
			case templ.Component:
				err = one.Render(ctx, w)
			}
			if err != nil {
				return err
			}
		}
		return nil
	})
}

func rates(t testing.TB, list string) []trial.Rate {
	t.Helper()
	var out []trial.Rate
	for s := range strings.FieldsSeq(list) {
		if s == "." {
			out = append(out, trial.Rate{})
			continue
		}
		f, err := strconv.ParseFloat(s, 64)
		if err != nil {
			t.Fatal(err)
		}
		out = append(out, trial.RateOf(int64(f*1000+0.5*sign(f))))
	}
	return out
}

func sign(f float64) float64 {
	if f < 0 {
		return -1
	}
	return 1
}

func judge(t testing.TB) *trial.Judge {
	t.Helper()
	j, err := trial.NewJudge(trial.ISO3159(), "1")
	if err != nil {
		t.Fatal(err)
	}
	return j
}

func judged(j *trial.Judge, r []trial.Rate) *trial.Result {
	res := new(trial.Result)
	j.Rates(r, res)
	return res
}

// lot is n plain movements, spread by a fixed sequence: for pictures only.
func lot(t testing.TB, j *trial.Judge, n int) []trial.Result {
	t.Helper()
	seed := uint32(7)
	next := func() int64 {
		sum := int64(0)
		for range 6 {
			seed = seed*1664525 + 1013904223
			sum += int64(seed>>16) % 2000
		}
		return sum - 6000
	}
	out := make([]trial.Result, n)
	for i := range out {
		base := 1400 + next()*2
		var r []trial.Rate
		for range 15 {
			r = append(r, trial.RateOf(base+next()/2))
		}
		j.Rates(r, &out[i])
	}
	return out
}

const (
	failing  = "8.4 8.1 -6.9 -7.6 6.2 6.8 -0.4 0.1 -1.2 -0.8 2.6 -1.0 -7.3 7.6 7.2"
	underWay = "3.4 3.1 1.0 1.2 . 2.2 2.0 2.1"
)

func TestPartsInTheBrowser(t *testing.T) {
	t.Parallel()
	j := judge(t)
	fail, open := judged(j, rates(t, failing)), judged(j, rates(t, underWay))
	tab := webtest.Show(t, page.Sheet{Title: "Parts", Sub: "Every part in every state", Nav: page.BatchesURL,
		Notices: []page.Notice{{Tone: page.Attn, Title: "Two readings of day 5 are missing.", Text: "Holder 2, places 3 and 4.", Act: &page.Link{Text: "Go to holder 2", URL: "/x"}}},
		Acts:    []page.Act{{Text: "Plain", URL: "/x"}, {Text: "Revoke", URL: "/x", Grave: true, Post: true}, {Text: "Not yet", Disabled: "why"}, {Text: "Main", URL: "/x", Main: true}},
		Cells:   []page.Cell{page.TextCell("Trial day", "9 of 15"), page.TextCell("Programme", "15-day trial, version 2")},
	}, func(c *page.Context) templ.Component {
		return gallery(c, j, fail, open, lot(t, j, 200))
	})
	for _, lang := range []string{"fr", "de"} {
		tab.Go("/" + lang)
		tab.Shot("parts-" + lang)
	}
	tab.Go("/en")
	tab.Shots("parts")
	tab.AxeBoth()
	if n := tab.Count(`circle[cx=NaN], [d*=NaN], [x=NaN], [y=NaN], [height^="-"], [width^="-"]`); n > 0 {
		t.Errorf("%d shapes without a place", n)
	}
}

func gallery(c *page.Context, j *trial.Judge, fail, open *trial.Result, results []trial.Result) templ.Component {
	p, prog := c.Printer, j.Programme()
	read := []int{0, 60, 60, 60, 59, 59, 59, 59, 59, 12}
	var verdicts []part.Tally
	for i, v := range []part.Judged{part.JudgedOf(trial.Pass, false, ""), part.JudgedOf(trial.Fail, false, ""), part.JudgedOf(trial.Open, false, ""),
		part.JudgedOf(trial.Open, true, ""), part.JudgedOf(trial.Open, false, store.Void), part.JudgedOf(trial.Pass, false, store.Withdrawn),
		part.JudgedOf(trial.Open, false, store.Rejected), part.JudgedOf(trial.Open, true, store.Removed), {Mark: part.Look, Word: words.SecondLook}} {
		verdicts = append(verdicts, part.Tally{Judged: v, N: i * 7, Of: 200, URL: map[bool]string{true: "/x"}[i%2 == 0]})
	}
	var positions []any
	for _, pos := range trial.Positions() {
		positions = append(positions, "<p>", part.Position(p, pos, "23"), "</p>")
	}
	for k := range 16 {
		positions = append(positions, part.Move(p, part.MovedAt(prog, k)))
	}
	return join(
		part.ProgrammeStrip(p, part.StripOf(p, prog, 8, read)),
		`<section class="band first"><h2>Rates</h2>`, chart.RatesChart(p, chart.RatesOf(p, j, "OD44-118238", rates(nil2{}, failing), fail,
			map[int][]trial.Rate{6: rates(nil2{}, "16.8"), 7: rates(nil2{}, "-10.4")})), `</section>`,
		`<section class="band"><h2>Under way</h2>`, chart.RatesChart(p, chart.RatesOf(p, j, "S-1", rates(nil2{}, underWay), open, nil)), `</section>`,
		`<div class="cols"><section class="c4"><h2>M</h2>`, chart.Histogram(p, chart.DistributionOf(p, j, 0, results)),
		`</section><section class="c4"><h2>Vmax</h2>`, chart.Histogram(p, chart.DistributionOf(p, j, 2, results)),
		`</section><section class="c4"><h2>Failures</h2>`, chart.ParetoChart(p, chart.ParetoOf(p, j, results, 200)),
		`</section></div><div class="cols"><section class="c4"><h2>C</h2>`, chart.Histogram(p, chart.DistributionOf(p, j, 5, results[:12])),
		`</section><section class="c4 stack">`, chart.Histogram(p, chart.DistributionOf(p, j, 0, nil)), chart.ParetoChart(p, chart.ParetoOf(p, j, nil, 0)),
		part.EmptyState(part.Empty{Title: "No batch yet", Text: "A batch is a number of movements.", ActText: "Set up the first", Act: "/x"}),
		`</section><section class="c4"><h2>Holders</h2><div class="holders">`, part.HolderMap(p, holderOf("1", 2, 5)), part.HolderMap(p, holderOf("S-14", 1, 5)), `</div>`,
		part.Progress(p, part.Ruler{Done: 23, Whole: 39, Label: "Movements read", Live: true}), part.MiniStrip(p, part.StripOf(p, prog, 8, nil)),
		`</section></div><div class="cols"><section class="c8"><h2>Criteria</h2>`, part.CriteriaTable(p, part.CriteriaOf(p, j, fail, false)),
		part.CriteriaTable(p, second(part.CriteriaOf(p, j, open, false))),
		`</section><section class="c4"><h2>Verdicts</h2>`, part.TallyList(p, verdicts), join(positions...), `</section></div>`,
		`<div class="round floor"><section><h2>Round</h2>`, part.HolderGrid(p, floorHolder()), `</section><section><h2>Strip</h2>`,
		part.HolderGrid(p, reversed()), `</section></div>`)
}

func second(c part.Criteria) part.Criteria {
	c.Name = "second"
	return c
}

// nil2 stands in for a test where a constant of this file is parsed.
type nil2 struct{ testing.TB }

func (nil2) Helper() {}

func holderOf(code string, rows, cols int) part.Holder {
	h := part.Holder{Code: code, Rows: rows, Cols: cols, Note: "1 fail"}
	marks := []part.Judged{{Mark: part.Pass, Word: words.VerdictPass}, {Mark: part.Fail, Word: words.VerdictFail}, {Mark: part.Open, Word: words.VerdictOpen},
		{Mark: part.Cannot, Word: words.VerdictCannot}, {Mark: part.Void, Word: words.EndVoid}}
	for i := range rows * cols {
		pl := part.HolderPlace{N: strconv.Itoa(i + 1), Row: i/cols + 1, Col: i%cols + 1, Serial: fmt.Sprintf("KW21-%06d", i)}
		if i == rows*cols-1 {
			pl.State, pl.Serial = part.PlaceEmpty, ""
		} else {
			pl.Judged, pl.URL = &marks[i%len(marks)], "/x"
		}
		h.Places = append(h.Places, pl)
	}
	return h
}

func floorHolder() part.Holder {
	h := part.Holder{Code: "3", Rows: 2, Cols: 5}
	states := []part.PlaceState{part.PlaceRead, part.PlaceKept, part.PlaceOff, part.PlaceLook, part.PlaceRead, part.PlaceHere, part.PlaceToDo, part.PlaceEmpty, part.PlaceBlocked, part.PlaceToDo}
	for i, s := range states {
		pl := part.HolderPlace{N: strconv.Itoa(i + 1), Row: i/5 + 1, Col: i%5 + 1, State: s, Serial: fmt.Sprintf("KW21-00%d", 4714+3*i), Short: fmt.Sprintf("00%d", 4714+3*i), URL: "/x"}
		switch s {
		case part.PlaceOff:
			pl.Word = "withdrawn"
			pl.Judged = &part.Judged{Mark: part.Void, Word: words.EndWithdrawn}
		case part.PlaceEmpty, part.PlaceBlocked:
			pl.Serial, pl.Short, pl.URL = "", "", ""
		}
		h.Places = append(h.Places, pl)
	}
	return h
}

// reversed is a strip read from its right end: reading order and layout differ.
func reversed() part.Holder {
	h := part.Holder{Code: "S-9", Rows: 1, Cols: 5}
	for i := range 5 {
		h.Places = append(h.Places, part.HolderPlace{N: strconv.Itoa(i + 1), Row: 1, Col: 5 - i, State: part.PlaceToDo, Serial: fmt.Sprint(100 + i), URL: "/x"})
	}
	return h
}
