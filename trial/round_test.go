package trial_test

import (
	"fmt"
	"strings"
	"testing"

	"ratehouse/trial"
)

// The whole fortnight, written out by hand from practice.md W11 and W12: round k closes day k and
// opens day k+1; the accessory runs from the reading that closes day 9 to the one that closes 10.
func TestRoundsOfTheBuiltInProgramme(t *testing.T) {
	t.Parallel()
	want := `0 0 1 read wind
1 1 2 read wind
2 2 3 read wind turn:6H>3H
3 3 4 read wind
4 4 5 read wind turn:3H>9H
5 5 6 read wind
6 6 7 read wind turn:9H>FH
7 7 8 read wind
8 8 9 read wind turn:FH>CH
9 9 10 read wind accessory_on
10 10 11 read accessory_off wind move:23>8
11 11 12 read wind move:8>23
12 12 13 read wind move:23>38
13 13 14 read wind turn:CH>6H move:38>23
14 14 15 read wind
15 15 0 read`
	var lines []string
	for _, r := range trial.ISO3159().Rounds() {
		line := fmt.Sprint(r.K, " ", r.Closes, " ", r.Opens)
		for _, a := range r.Acts {
			line += " " + string(a.Kind)
			switch a.Kind {
			case trial.ActTurn:
				line += fmt.Sprintf(":%s>%s", a.From, a.To)
			case trial.ActMove:
				line += fmt.Sprintf(":%s>%s", a.FromC, a.ToC)
			}
		}
		lines = append(lines, line)
	}
	if got := strings.Join(lines, "\n"); got != want {
		t.Errorf("\n%s\nwant\n%s", got, want)
	}
}

func TestRoundsOfAnotherProgramme(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	p.Days = []trial.Day{{N: 1, Position: trial.CH, TemperatureC: 23_000, Accessory: true}, {N: 2, Position: trial.CH, TemperatureC: 23_000, Accessory: true}}
	r := p.Rounds()
	if len(r) != 3 || !r[0].Has(trial.ActAccessoryOn) || !r[0].Has(trial.ActTurn) || r[1].Has(trial.ActAccessoryOn) ||
		r[1].Has(trial.ActAccessoryOff) || !r[2].Has(trial.ActAccessoryOff) || r[2].Has(trial.ActWind) {
		t.Errorf("%+v", r)
	}
}

func TestBuiltInProgrammeAgreesWithTheCheckValues(t *testing.T) {
	t.Parallel()
	var file struct {
		Limits    map[string]any `json:"limits"`
		Programme []struct {
			Day      int
			Position string
			Celsius  int64 `json:"temperature_C"`
			Note     string
		}
	}
	readJSON(t, "iso3159.json", &file)
	p := trial.ISO3159()
	if len(p.Days) != len(file.Programme) || len(p.Days) != 15 {
		t.Fatalf("%d days", len(p.Days))
	}
	for i, want := range file.Programme {
		d := p.Days[i]
		if d.N != want.Day || string(d.Position) != want.Position || int64(d.TemperatureC) != 1000*want.Celsius ||
			d.Accessory != strings.Contains(want.Note, "engaged") {
			t.Errorf("day %d: %+v", i+1, d)
		}
	}
	for _, c := range p.Criteria {
		for _, category := range []string{"1", "2"} {
			want := file.Limits["category_"+category].(map[string]any)[c.Symbol].([]any)
			l := c.Limits[category]
			least := "0" // the check values write magnitudes from 0
			if l.HasMin {
				least = l.Min.Decimal(1)
			}
			if trimmed(least) != want[0] || !l.HasMax || trimmed(l.Max.Decimal(1)) != want[1] {
				t.Errorf("%s category %s: %v to %v", c.Symbol, category, least, l.Max)
			}
		}
	}
	if p.TextChecked != nil {
		t.Error("nobody has compared the text")
	}
	if err := p.Check(); err != nil {
		t.Error(err)
	}
}

func trimmed(s string) string { return strings.TrimSuffix(s, ".0") }

func TestPositions(t *testing.T) {
	t.Parallel()
	var file struct {
		Positions map[string]map[string]any `json:"positions"`
	}
	readJSON(t, "positions.json", &file)
	if len(file.Positions) != 6 {
		t.Fatalf("%d positions", len(file.Positions))
	}
	for symbol, facts := range file.Positions {
		p, ok := trial.ParsePosition(" " + strings.ToLower(symbol) + " ")
		if !ok || string(p) != symbol {
			t.Errorf("%s is read as %s", symbol, p)
		}
		_, upright := facts["bottom_clock_angle_deg"]
		if p.Vertical() != upright {
			t.Errorf("%s vertical %v", symbol, p.Vertical())
		}
		crown, ok := facts["crown"].(string)
		if !ok {
			crown = "horizontal"
		}
		if p.Crown() != crown {
			t.Errorf("%s: crown %s, want %s", symbol, p.Crown(), crown)
		}
	}
	if p, ok := trial.ParsePosition("CB"); !ok || p != trial.FH {
		t.Errorf("CB is read as %s", p)
	}
	for _, s := range []string{"", "DU", "1H", "33H", "C H"} {
		if p, ok := trial.ParsePosition(s); ok {
			t.Errorf("%q is read as %s", s, p)
		}
	}
	if trial.Position("X").Crown() != "" {
		t.Error("an unknown position has a crown")
	}
}

func TestJudgeNeedsASoundProgramme(t *testing.T) {
	t.Parallel()
	for name, bend := range map[string]func(*trial.Programme){
		"criteria[0].formula.days[0]: day 99 is not a day of the programme": func(p *trial.Programme) { p.Criteria[0].Formula.Days = []int{99} },
		"criteria[0].formula.days: is empty":                                func(p *trial.Programme) { p.Criteria[0].Formula.Days = nil },
		"criteria[1].formula.pairs[0]: day 0 is not a day of the programme": func(p *trial.Programme) { p.Criteria[1].Formula.Pairs = [][2]int{{0, 1}} },
		"criteria[0].formula.kind: median is not a kind of formula":         func(p *trial.Programme) { p.Criteria[0].Formula.Kind = "median" },
		"categories: category 9 is not one of the programme's":              func(*trial.Programme) {},
		"days: is empty": func(p *trial.Programme) { p.Days = nil },
	} {
		p := trial.ISO3159()
		bend(p)
		category := "1"
		if strings.HasPrefix(name, "categories") {
			category = "9"
		}
		if _, err := trial.NewJudge(p, category); err == nil || err.Error() != name {
			t.Errorf("%v, want %s", err, name)
		}
	}
}
