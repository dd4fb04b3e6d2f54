package api

import (
	"context"
	"encoding/hex"
	"net/http"
	"time"

	"github.com/danielgtaylor/huma/v2"

	"ratehouse/store"
	"ratehouse/trial"
)

func (a *API) movementRoutes() {
	op := operation(http.MethodGet, "/batches/{code}/movements/{serial}", "get-movement", "Everything about one movement", store.RightVerdicts, http.StatusNotFound)
	huma.Register(a.huma, op, answering(a, a.getMovement))
}

// Movement is one movement: its rates by day, what the criteria say, and the evidence.
type Movement struct {
	Batch       string      `json:"batch"`
	Serial      string      `json:"serial"`
	Depositor   string      `json:"depositor"`
	Calibre     string      `json:"calibre,omitempty"`
	Attempt     int         `json:"attempt" doc:"1 at the first presentation"`
	Programme   Programme   `json:"programme"`
	Category    string      `json:"category"`
	Verdict     string      `json:"verdict" enum:"pass,fail,open,-" doc:"what the rates alone say; - if the category has no limits"`
	Failed      []string    `json:"failed" nullable:"false" doc:"criteria decided outside their limits"`
	Unreachable []string    `json:"unreachable" nullable:"false" doc:"criteria not decided that no rates within ±60 s/d of the blank days can bring inside, each by itself"`
	CannotPass  bool        `json:"cannot_pass" doc:"in trial, open, and no rates of the blank days satisfy all criteria together"`
	End         *End        `json:"end,omitempty" doc:"absent while in trial"`
	Paper       *Paper      `json:"paper,omitempty" doc:"the newest paper released for it"`
	Rates       []DayRate   `json:"rates" nullable:"false"`
	Criteria    []Criterion `json:"criteria" nullable:"false"`
	Readings    []Reading   `json:"readings" nullable:"false" doc:"all of them, superseded ones too, in the order of the trial"`
}

// End is how a movement left the trial.
type End struct {
	Kind  string    `json:"kind" enum:"rejected,withdrawn,void,removed"`
	Cause string    `json:"cause"`
	Code  string    `json:"code,omitempty" doc:"observation that led to it"`
	At    time.Time `json:"at"`
}

// Paper names a released paper.
type Paper struct {
	Number string `json:"number"`
	Kind   string `json:"kind" enum:"certificate,rejection"`
}

// DayRate is the rate of one programme day.
type DayRate struct {
	Day          int     `json:"day"`
	Position     string  `json:"position"`
	TemperatureC string  `json:"temperature_c"`
	Rate         *string `json:"rate" nullable:"true" doc:"s/d, positive = gaining; exact if whole thousandths, else rounded half to even to 6 decimals; null: not read"`
}

// Criterion is one criterion of the programme with its value.
type Criterion struct {
	Symbol  string  `json:"symbol"`
	Title   string  `json:"title"`
	Unit    string  `json:"unit"`
	Value   *string `json:"value" nullable:"true" doc:"6 decimals, half to even; null: some of its days are not read"`
	Outcome string  `json:"outcome" enum:"undecided,inside,outside,unlimited"`
	Min     string  `json:"min,omitempty"`
	Max     string  `json:"max,omitempty"`
	Margin  *string `json:"margin" nullable:"true" doc:"distance to the nearer limit, positive inside; null: undecided or without limits"`
}

// Reading is one entry of the evidence.
type Reading struct {
	ID         string    `json:"id" format:"uuid"`
	Step       int       `json:"step"`
	Kind       string    `json:"kind" enum:"rate,state,left,replicate,late_check"`
	Nth        int       `json:"nth" doc:"the nth entry of its cell; the last one counts"`
	Value      *string   `json:"value" nullable:"true" doc:"s for states, s/d for rates; null with a code"`
	Code       string    `json:"code,omitempty" doc:"observation: stopped, hand, unreadable, not_there, dropped"`
	Typed      string    `json:"typed" doc:"as it was sent"`
	Method     string    `json:"method" enum:"typed,hand,tap,camera,full_time,station"`
	ReadAt     time.Time `json:"read_at"`
	EnteredAt  time.Time `json:"entered_at"`
	ReadBy     string    `json:"read_by"`
	EnteredBy  string    `json:"entered_by"`
	Station    string    `json:"station,omitempty"`
	Reason     string    `json:"reason,omitempty" doc:"of a correction"`
	Superseded bool      `json:"superseded"`
	SecondLook bool      `json:"second_look" doc:"it was asked for again"`
}

type movementIn struct {
	Code   string `path:"code" doc:"code of the batch"`
	Serial string `path:"serial" doc:"number of the movement"`
}

type movementOut struct {
	Body Movement
}

func (a *API) getMovement(ctx context.Context, in *movementIn) (*movementOut, error) {
	if err := sane(in.Code, "no_batch", "code", printable(in.Code)); err != nil {
		return nil, err
	}
	if err := sane(in.Serial, "no_movement", "serial", printable(in.Serial), "code", in.Code); err != nil {
		return nil, err
	}
	s, err := a.lab.MovementSheet(ctx, actorOf(ctx), in.Code, in.Serial)
	if err != nil {
		return nil, err
	}
	b, m := &s.Batch, &s.Movement
	out := &movementOut{Movement{Batch: b.Code, Serial: m.Serial, Depositor: b.Depositor.Code, Calibre: b.Calibre.Code, Attempt: m.Attempt,
		Programme: Programme{b.Programme.Code, b.Programme.Version, hex.EncodeToString(b.Hash[:])}, Category: b.Category,
		Failed: []string{}, Unreachable: []string{}, Readings: []Reading{}}}
	if m.End != store.InTrial {
		out.Body.End = &End{string(m.End), m.Cause, string(m.EndCode), m.EndedAt}
	}
	if m.Paper != "" {
		out.Body.Paper = &Paper{m.Paper, m.PaperKind}
	}
	for _, r := range s.Readings {
		out.Body.Readings = append(out.Body.Readings, readingOf(r))
	}
	return out, out.Body.judge(b, m)
}

// judge fills in what the rates say.
func (out *Movement) judge(b *store.Batch, m *store.Movement) error {
	j, err := trial.NewJudge(b.Programme, b.Category)
	if err != nil {
		return err
	}
	var r trial.Result
	j.Rates(m.Rates, &r)
	out.Verdict = r.Verdict.String()
	out.Failed, out.Unreachable = append(out.Failed, r.Failed()...), append(out.Unreachable, r.Unreachable()...)
	out.CannotPass = m.End == store.InTrial && r.Verdict == trial.Open && j.CannotPass(m.Rates)
	for i, c := range b.Programme.Criteria {
		v, limit := r.Values[i], j.Limit(i)
		one := Criterion{Symbol: c.Symbol, Title: c.Title, Unit: c.Unit, Outcome: v.Outcome.String()}
		if v.Known {
			one.Value = some(v.Decimal(6))
		}
		if limit.HasMin {
			one.Min = limit.Min.String()
		}
		if limit.HasMax {
			one.Max = limit.Max.String()
		}
		if margin, ok := r.Margin(i); ok {
			one.Margin = some(margin.Decimal(6))
		}
		out.Criteria = append(out.Criteria, one)
	}
	for i, d := range b.Programme.Days {
		out.Rates = append(out.Rates, DayRate{Day: d.N, Position: string(d.Position), TemperatureC: d.TemperatureC.String(), Rate: rateText(m.Rates[i])})
	}
	return nil
}

func rateText(r trial.Rate) *string {
	if !r.Known() {
		return nil
	}
	if milli, ok := r.Thousandths(); ok {
		return some(trial.Milli(milli).String())
	}
	return some(r.Decimal(6))
}

func some(s string) *string { return &s }

func readingOf(r store.ReadingLine) Reading {
	out := Reading{ID: r.ID.String(), Step: r.Step, Kind: string(r.Kind), Nth: r.Nth, Code: string(r.Code), Typed: r.Typed, Method: string(r.Method),
		ReadAt: r.ReadAt, EnteredAt: r.EnteredAt, ReadBy: r.ReadBy, EnteredBy: r.EnteredBy, Station: r.Station, Reason: r.Reason,
		Superseded: r.Replaced, SecondLook: r.Second}
	if r.Code == "" {
		out.Value = some(r.Value)
	}
	return out
}
