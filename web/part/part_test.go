package part

import (
	"strconv"
	"testing"

	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/web/words"
)

func TestEndsWinOverVerdicts(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		verdict trial.Verdict
		cannot  bool
		end     store.End
		mark    Mark
		word    string
	}{
		{trial.Pass, false, "", Pass, "pass"}, {trial.Fail, true, "", Fail, "fail"}, {trial.Open, false, "", Open, "open"},
		{trial.Open, true, "", Cannot, "cannot pass"}, {trial.None, false, "", Open, "no limits"},
		{trial.Pass, false, store.Withdrawn, Void, "withdrawn"}, {trial.Pass, false, store.Void, Void, "void"},
		{trial.Pass, false, store.Rejected, Fail, "rejected"}, {trial.Open, true, store.Removed, Fail, "removed"},
	} {
		got := JudgedOf(c.verdict, c.cannot, c.end)
		if word := words.New(words.EN, nil).Say(got.Word); got.Mark != c.mark || word != c.word {
			t.Errorf("%v, cannot %v, end %q: %s %q, want %s %q", c.verdict, c.cannot, c.end, got.Mark, word, c.mark, c.word)
		}
	}
}

func TestGaugeDotStandsOnTheSideTheEngineSays(t *testing.T) {
	t.Parallel()
	prog := trial.ISO3159()
	for _, c := range []struct {
		symbol, value string
		low, high     float64
	}{
		{"M", "6", gaugeMin, gaugeMax}, {"M", "6.00001", gaugeMax + 1, gaugeMost}, {"M", "-4.00001", gaugeLeast, gaugeMin - 1},
		{"M", "600", gaugeMost, gaugeMost}, {"V", "0", gaugeMin, gaugeMin}, {"V", "2", gaugeMax, gaugeMax}, {"V", "2.001", gaugeMax + 1, gaugeMost},
	} {
		crit, _ := prog.Criterion(c.symbol)
		l := crit.Limits["1"]
		e, err := trial.ParseExact(c.value)
		if err != nil {
			t.Fatal(err)
		}
		v := trial.Value{Exact: e, Known: true, Outcome: trial.Inside}
		if !l.Contains(e) {
			v.Outcome = trial.Outside
		}
		x, err := strconv.ParseFloat(GaugeOf(crit, l, v).Dot, 64)
		if err != nil || x < c.low || x > c.high {
			t.Errorf("%s of %s is drawn at %v, want %v to %v", c.symbol, c.value, x, c.low, c.high)
		}
	}
	crit, _ := prog.Criterion("M")
	if g := GaugeOf(crit, trial.Limit{}, trial.Value{Known: true}); g != (Gauge{}) {
		t.Errorf("without limits %+v is drawn", g)
	}
	if g := GaugeOf(crit, crit.Limits["1"], trial.Value{}); g.Dot != "" {
		t.Error("a value that is not known has a dot")
	}
}

func TestStripFollowsTheProgramme(t *testing.T) {
	t.Parallel()
	p, prog := words.New(words.EN, nil), trial.ISO3159()
	s := StripOf(p, prog, 8, nil)
	turns, states, warm := 0, "", ""
	for _, d := range s.Days {
		if d.Turns {
			turns++
		}
		states += string(d.State[0])
		warm += string(append([]byte(d.Warmth), '-')[0])
	}
	if turns != 8 || states != "ddddddddnaaaaaa" || warm != "----------c-w--" {
		t.Errorf("%d turns, states %s, warmth %s", turns, states, warm)
	}
	if v := s.small(p); v.Says != "Day 8 of 15" || v.Box != "0 0 302 30" {
		t.Errorf("small strip %q in %q", v.Says, v.Box)
	}
	if end := StripOf(p, prog, 15, nil); end.Days[14].State != DayDone {
		t.Error("a finished trial is not done")
	}
}

func TestHolesStayHoles(t *testing.T) {
	t.Parallel()
	p := words.New(words.EN, nil)
	h := Holder{Code: "3", Rows: 1, Cols: 4, Places: []HolderPlace{
		{N: "1", Row: 1, Col: 4, State: PlaceToDo, Serial: "A"}, {N: "2", Row: 1, Col: 3, State: PlaceEmpty},
		{N: "3", Row: 1, Col: 2, State: PlaceBlocked}, {N: "4", Row: 1, Col: 1, State: PlaceOff, Serial: "B", Word: "void"},
	}}
	v := h.mapView(p)
	if len(v.Places) != 3 || v.Places[0].X != "107" || v.Places[1].Class != "place s-empty" || v.Places[2].X != "20" {
		t.Errorf("places %+v: a blocked one is left out, an empty one keeps its place", v.Places)
	}
	for i, want := range []string{"Place 1, A: to read", "Place 2: empty", "Place 3: cannot be used", "Place 4, B: void"} {
		if got := h.Places[i].says(p); got != want {
			t.Errorf("place %d says %q, want %q", i+1, got, want)
		}
	}
	if h.at(h.Places[0]) != "at-r1 at-c4" || h.class() != "holder cols-4" {
		t.Errorf("laid out as %q in %q", h.at(h.Places[0]), h.class())
	}
	if h.at(HolderPlace{Row: 1, Col: 40}) != "" {
		t.Error("a place beyond the grid has a class that no style sheet knows")
	}
}
