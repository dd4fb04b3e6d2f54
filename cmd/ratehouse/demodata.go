package main

import (
	"context"
	"fmt"
	"math/rand/v2"
	"time"

	"github.com/google/uuid"

	"ratehouse/store"
	"ratehouse/store/proof"
	"ratehouse/trial"
	"ratehouse/trial/simulate"
)

// The invented laboratory. Every name here is made up.
const (
	demoFinished = "26-118"
	demoRunning  = "26-121"
	demoTrouble  = "26-123"
	demoLast     = "26-124" // made last: when it is there, all is
)

func demoZone() *time.Location {
	zone, err := time.LoadLocation("Europe/Zurich")
	if err != nil {
		return time.UTC
	}
	return zone
}

func demoAccounts() []store.DemoAccount {
	return []store.DemoAccount{
		{Name: "technician", Password: "quiet-morning-round", Role: store.Technician},
		{Name: "lead", Password: "four-eyes-release", Role: store.Lead},
		{Name: "adjuster", Password: "two-divisions-plus", Role: store.Adjuster},
		{Name: "manager", Password: "chambers-and-hands", Role: store.Manager},
	}
}

var demoTitles = map[store.Role]string{store.Technician: "Ilse Marden", store.Lead: "Nadja Quill", store.Adjuster: "Ole Varnhagen", store.Manager: "Edda Lorne"}

// demo makes the invented laboratory with the laboratory's own verbs, on a clock that it moves
// through the past weeks.
type demo struct {
	now  time.Time
	key  proof.Key
	at   time.Time
	lab  *store.Lab
	rng  *rand.Rand
	tech store.Actor
	lead store.Actor
}

// batchPlan is one batch of the demo.
type batchPlan struct {
	code, calibre, depositor, prefix string
	size, first, rounds              int // rounds already read
	start                            time.Time
	entry                            store.EntryKind
	holder                           string
}

func (d *demo) build(ctx context.Context, dsn string) (err error) {
	d.at, d.rng = d.now.AddDate(0, 0, -20), rand.New(rand.NewPCG(3159, 118))
	if d.lab, err = store.Open(ctx, store.Config{DSN: dsn, Clock: func() time.Time { return d.at }, Engine: engine(), Key: d.key}); err != nil {
		return err
	}
	defer d.lab.Close()
	house := store.House{Title: "Hollinfell Timing Laboratory", Address: []string{"4 Alder Row", "00417 Hollinfell"}, Contact: "certificates@hollinfell.example",
		Zone: demoZone(), Demo: true}
	if err := d.lab.Found(ctx, house); err != nil {
		return err
	}
	for _, step := range []func(context.Context) error{d.people, d.setUp, d.finished, d.running, d.trouble, d.starting} {
		if err := step(ctx); err != nil {
			return fmt.Errorf("demo: %w", err)
		}
	}
	_, err = d.lab.Drain(ctx)
	return err
}

func (d *demo) people(ctx context.Context) error {
	for _, a := range demoAccounts() {
		made, err := d.lab.AddAccount(ctx, store.Program, store.NewAccount{Name: a.Name, Title: demoTitles[a.Role], Password: a.Password, Role: a.Role})
		if err != nil {
			return err
		}
		actor := store.Actor{Account: made.ID, Name: made.Name, Title: made.Title, Role: made.Role, Via: "page"}
		switch a.Role {
		case store.Technician:
			d.tech = actor
		case store.Lead:
			d.lead = actor
		}
	}
	return nil
}

func (d *demo) setUp(ctx context.Context) error {
	for _, x := range []store.Depositor{{Code: "ONDREL", Title: "Ondrel Movements", Address: "12 Mill Lane\nOndrel"},
		{Code: "KESTWICK", Title: "Kestwick Works", Address: "Kestwick Yard 3"}, {Code: "AVERLOU", Title: "Manufacture Averlou", Address: "Quai d’Averlou 9"}} {
		if _, err := d.lab.AddDepositor(ctx, d.lead, x); err != nil {
			return err
		}
	}
	for _, c := range []store.Calibre{
		{Code: "OD-4410", Title: "OD 4410, small seconds", DiameterUM: 27_400, WindingTurns: 28, Seconds: "small", SecondsOclock: 6, BeatsPerHour: 28_800, ReserveHours: 42, Organ: "index", OrganStepMilli: 2500},
		{Code: "KW-21", Title: "KW 21, centre seconds", DiameterUM: 25_600, WindingTurns: 34, Seconds: "centre", BeatsPerHour: 28_800, ReserveHours: 50, Automatic: "out", Organ: "screws", OrganStepMilli: 4000},
		{Code: "AV-9", Title: "AV 9, shaped", AreaUM2: 288_000_000, WindingTurns: 22, Seconds: "small", SecondsOclock: 6, BeatsPerHour: 21_600, ReserveHours: 38, Organ: "index", OrganStepMilli: 3000},
	} {
		if _, err := d.lab.AddCalibre(ctx, d.lead, c); err != nil {
			return err
		}
	}
	return nil
}

// morning is an hour of the day some days from now, on the wall clock of the house.
func (d *demo) morning(days, hour, minute int) time.Time {
	y, m, day := d.now.In(demoZone()).Date()
	return time.Date(y, m, day+days, hour, minute, 0, 0, demoZone())
}

// finished is a batch of 200 whose last round was yesterday; the first hundred are released.
func (d *demo) finished(ctx context.Context) error {
	plan := batchPlan{code: demoFinished, calibre: "OD-4410", depositor: "ONDREL", prefix: "OD44-", size: 200, first: 118200, rounds: 16, start: d.morning(-16, 6, 45),
		entry: store.EntryState, holder: "TRAY20"}
	if _, err := d.read(ctx, plan, nil); err != nil {
		return err
	}
	d.at = d.now.Add(-time.Hour)
	var serials []string
	for i := range 100 {
		serials = append(serials, plan.serial(i))
	}
	_, err := d.lab.Release(ctx, d.lead, plan.code, serials)
	return err
}

// running is a batch of 60 on day 9: its round of today is to be read.
func (d *demo) running(ctx context.Context) error {
	_, err := d.read(ctx, batchPlan{code: demoRunning, calibre: "KW-21", depositor: "KESTWICK", prefix: "KW21-", size: 60, first: 4381, rounds: 9, start: d.morning(-9, 8, 10),
		entry: store.EntryState, holder: "TRAY10"}, nil)
	return err
}

// starting is a batch whose round 0 is due today.
func (d *demo) starting(ctx context.Context) error {
	d.at = d.now.Add(-2 * time.Hour)
	_, err := d.register(ctx, batchPlan{code: demoLast, calibre: "AV-9", depositor: "AVERLOU", prefix: "AV9-", size: 40, first: 70011, start: d.morning(0, 10, 0),
		entry: store.EntryState, holder: "STRIP5"})
	return err
}

// trouble is a batch of 25 on day 6 to which everything happened: a piece stopped, a reading was
// missed, one was corrected later, one was asked for again, one piece was withdrawn, one cannot pass.
func (d *demo) trouble(ctx context.Context) error {
	plan := batchPlan{code: demoTrouble, calibre: "OD-4410", depositor: "ONDREL", prefix: "OD44-", size: 25, first: 119001, rounds: 6, start: d.morning(-6, 7, 30),
		entry: store.EntryState, holder: "STRIP5"}
	const stopped, missed, corrected, asked, withdrawn, hopeless = 3, 7, 9, 14, 12, 17
	disturb := func(i, k int, e *store.Entry) bool {
		switch {
		case i == stopped && k == 3:
			e.Value = string(store.Stopped)
		case i == missed && k == 4, i == stopped && k > 3, i == withdrawn && k > 3:
			return false
		case i == corrected && k == 2:
			e.Value = plus(e.Value, 10_000)
		case i == asked && k == 5:
			e.Confirm, e.Value = []string{e.Value, plus(e.Value, 100)}, plus(e.Value, 70_000)
		case i == hopeless && k >= 2:
			e.Value = plus(e.Value, 9_000)
		}
		return true
	}
	after := map[int]func() error{
		2: func() error { return d.correct(ctx, plan, corrected, 2, "slip of ten seconds, seen on the sheet") },
		3: func() error {
			return d.end(ctx, plan, stopped, store.Rejected, "stopped between rounds 2 and 3", store.Stopped,
				withdrawn, store.Withdrawn, "taken back by the depositor by letter")
		},
		4: func() error {
			return d.lab.AddRemark(ctx, d.tech, plan.code, plan.serial(missed), 4, "Not read: the strip stood behind the rack, seen only after winding.")
		},
	}
	_, err := d.read(ctx, plan, disturb, after)
	return err
}

func (p batchPlan) serial(i int) string { return fmt.Sprintf("%s%06d", p.prefix, p.first+3*i) }

func (d *demo) register(ctx context.Context, p batchPlan) (store.Batch, error) {
	n := store.NewBatch{Code: p.code, Programme: "iso3159", Calibre: p.calibre, Depositor: p.depositor, StartsAt: p.start, Entry: p.entry, HolderType: p.holder,
		DeliveryNote: "D-" + p.code, Condition: "no damage seen", ReceivedAt: p.start.Add(-44 * time.Hour)}
	for i := range p.size {
		n.Pieces = append(n.Pieces, store.Piece{Serial: p.serial(i)})
	}
	return d.lab.Register(ctx, d.tech, n)
}

// read registers a batch and reads its first rounds. disturb may change an entry or drop it; after
// says what happens when a round is closed.
func (d *demo) read(ctx context.Context, p batchPlan, disturb func(i, k int, e *store.Entry) bool, after ...map[int]func() error) (store.Batch, error) {
	d.at = p.start.Add(-20 * time.Hour)
	b, err := d.register(ctx, p)
	if err != nil {
		return b, err
	}
	states, late := d.draw(b, p)
	for k := range p.rounds {
		if err := d.round(ctx, p, b, k, late[k], states, disturb); err != nil {
			return b, err
		}
		for _, a := range after {
			if a[k] == nil {
				continue
			}
			if err := a[k](); err != nil {
				return b, err
			}
		}
	}
	return b, nil
}

// draw makes the states of all movements, and how late each round began.
func (d *demo) draw(b store.Batch, p batchPlan) (states [][]trial.State, late []time.Duration) {
	days := len(b.Programme.Days)
	late, hours := make([]time.Duration, days+1), make([]float64, days)
	for k := range late {
		late[k] = time.Duration(d.rng.IntN(420)) * time.Second
		if k > 0 {
			hours[k-1] = 24 + (late[k] - late[k-1]).Hours()
		}
	}
	model := simulate.Default()
	rounds := model.Rounds(days+1, d.rng)
	for range p.size {
		m := model.Draw(d.rng)
		states = append(states, model.States(&m, m.Rates(b.Programme, d.rng), rounds, hours, d.rng))
	}
	return states, late
}

func (d *demo) round(ctx context.Context, p batchPlan, b store.Batch, k int, late time.Duration, states [][]trial.State, disturb func(i, k int, e *store.Entry) bool) error {
	begin := b.Due(k).Add(late)
	d.at = begin
	if err := d.lab.OpenRound(ctx, d.tech, p.code, k); err != nil {
		return err
	}
	var entries []store.Entry
	for i := range states {
		d.at = begin.Add(time.Duration(6*i) * time.Second)
		e := store.Entry{ID: uuid.Must(uuid.NewV7()), Batch: p.code, Serial: p.serial(i), Step: k, Day: -1, Kind: store.KindState, Method: store.Typed,
			Value: states[i][k].String(), ReadAt: d.at}
		if disturb == nil || disturb(i, k, &e) {
			entries = append(entries, e)
		}
	}
	d.at = d.at.Add(time.Minute)
	answers, err := d.lab.Save(ctx, d.tech, d.at, entries)
	if err != nil {
		return err
	}
	for i, a := range answers {
		if a.Status != store.Accepted {
			return fmt.Errorf("round %d of %s, %s: %s %s", k, p.code, entries[i].Serial, a.Status, a.Code)
		}
	}
	return d.lab.CloseRound(ctx, d.tech, p.code, k)
}

// correct takes back a slip of ten seconds an hour after the round.
func (d *demo) correct(ctx context.Context, p batchPlan, i, k int, reason string) error {
	d.at = d.at.Add(time.Hour)
	s, err := d.lab.MovementSheet(ctx, d.lead, p.code, p.serial(i))
	if err != nil {
		return err
	}
	last := s.Readings[len(s.Readings)-1]
	answers, err := d.lab.Save(ctx, d.tech, time.Time{}, []store.Entry{{ID: uuid.Must(uuid.NewV7()), Batch: p.code, Serial: p.serial(i), Step: k, Day: -1,
		Kind: store.KindState, Method: store.Typed, Value: plus(last.Value, -10_000), ReadAt: last.ReadAt, Base: last.Nth, Reason: reason}})
	if err == nil && answers[0].Status != store.Accepted {
		err = fmt.Errorf("correction: %s %s", answers[0].Status, answers[0].Code)
	}
	return err
}

func (d *demo) end(ctx context.Context, p batchPlan, i int, end store.End, cause string, seen store.Observation, j int, end2 store.End, cause2 string) error {
	if err := d.lab.EndMovement(ctx, d.tech, p.code, p.serial(i), end, cause, seen); err != nil {
		return err
	}
	return d.lab.EndMovement(ctx, d.lead, p.code, p.serial(j), end2, cause2, "")
}

// plus adds thousandths to a decimal that has at most three decimals.
func plus(decimal string, milli int64) string {
	e, err := trial.ParseExact(decimal)
	if err != nil {
		return decimal
	}
	return e.Add(trial.Milli(milli).Exact()).Decimal(3)
}
