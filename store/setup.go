package store

import (
	"context"
	"fmt"
	"regexp"
	"strings"

	"github.com/google/uuid"

	"ratehouse/store/rows"
	"ratehouse/trial"
	"ratehouse/trial/sheet"
)

var codeForm = regexp.MustCompile(`^[A-Z0-9][A-Z0-9._-]{0,39}$`)

// reservedCode would clash with the page that makes a new thing.
const reservedCode = "NEW"

func checkCode(field, code string) *Error {
	switch {
	case code == "":
		return invalid(field, "needed")
	case !codeForm.MatchString(code) || code == reservedCode:
		return invalid(field, "code_form", "code", code)
	}
	return nil
}

// Depositor sends movements in and receives papers.
type Depositor struct {
	ID          uuid.UUID
	Code, Title string
	Address     string
	Language    string
}

// AddDepositor adds a depositor.
func (l *Lab) AddDepositor(ctx context.Context, a Actor, d Depositor) (Depositor, error) {
	var f faults
	f.add(checkCode("code", d.Code))
	if d.Title = strings.TrimSpace(d.Title); d.Title == "" {
		f.add(invalid("title", "needed"))
	}
	if err := f.err(); err != nil {
		return d, err
	}
	d.ID = l.newID()
	return d, l.do(ctx, a, verb{"add_depositor", RightSetup}, func(w *work) error {
		w.act.Body = map[string]any{"depositor": d.ID.String(), "code": d.Code, "title": d.Title, "address": d.Address}
		rows.QueueDepositor(w.out, rows.Depositor{ID: d.ID, Site: l.site, Code: d.Code, Title: d.Title, Address: d.Address,
			Language: optional(d.Language), Act: w.act.ID})
		return nil
	})
}

// Depositors lists all depositors by code.
func (l *Lab) Depositors(ctx context.Context, a Actor) ([]Depositor, error) {
	if !a.May(RightBatches) {
		return nil, failure(KindForbidden, "not_allowed", "right", string(RightBatches))
	}
	list, err := rows.Depositors(ctx, l.pool, l.site)
	if err != nil {
		return nil, fmt.Errorf("depositors: %w", err)
	}
	out := make([]Depositor, len(list))
	for i, r := range list {
		out[i] = Depositor{r.ID, r.Code, r.Title, r.Address, value(r.Language)}
	}
	return out, nil
}

// Calibre is a calibre with its card: what the bench must know about it. Zero fields of the card
// are not known; HasCard is false while nobody wrote one.
type Calibre struct {
	ID              uuid.UUID
	Code            string
	HasCard         bool
	Version         int
	Title           string
	DiameterUM      int   // of a round movement, else 0
	AreaUM2         int64 // of a shaped one, else 0
	WindingTurns    int
	WindingNote     string
	Automatic       string // "none", "in", "out": the device is fitted or taken out for the trial
	Seconds         string // "small", "centre"
	SecondsOclock   int
	SecondsRadiusUM int
	DialHours       int // 12 or 24: states fold to half of it
	NoMinuteHand    bool
	BeatsPerHour    int
	StopSeconds     bool
	CrownOclock     int
	Accessory       string
	AccessoryNote   string
	ReserveHours    int
	Organ           string // "index", "screws", …
	OrganStepMilli  int    // thousandths of s/d per division or turn
}

// Category is the size category of the calibre, "" while its card is missing.
func (c Calibre) Category() string {
	if !c.HasCard {
		return ""
	}
	return trial.SizeCategory(c.DiameterUM, c.AreaUM2)
}

// AddCalibre adds a calibre with the first version of its card.
func (l *Lab) AddCalibre(ctx context.Context, a Actor, c Calibre) (Calibre, error) {
	var f faults
	f.add(checkCode("code", c.Code))
	if c.Title = strings.TrimSpace(c.Title); c.Title == "" {
		f.add(invalid("title", "needed"))
	}
	if (c.DiameterUM > 0) == (c.AreaUM2 > 0) {
		f.add(invalid("diameter", "diameter_or_area"))
	}
	if err := f.err(); err != nil {
		return c, err
	}
	c.ID, c.HasCard, c.Version = l.newID(), true, 1
	return c, l.do(ctx, a, verb{"add_calibre", RightSetup}, func(w *work) error {
		w.act.Body = map[string]any{"calibre": c.ID.String(), "code": c.Code, "title": c.Title, "diameter_um": c.DiameterUM, "area_um2": c.AreaUM2}
		rows.QueueCalibre(w.out, c.ID, l.site, c.Code, w.act.ID)
		rows.QueueCard(w.out, cardRow(c), 1, w.act.ID)
		return nil
	})
}

func cardRow(c Calibre) rows.Calibre {
	minute := !c.NoMinuteHand
	return rows.Calibre{ID: c.ID, Code: c.Code, Title: &c.Title, DiameterUM: some[int32](c.DiameterUM), AreaUM2: some[int64](c.AreaUM2),
		WindingTurns: some[int16](c.WindingTurns), WindingNote: optional(c.WindingNote), Automatic: either(c.Automatic, "none"),
		Seconds: either(c.Seconds, "small"), SecondsOclock: some[int16](c.SecondsOclock), SecondsRadiusUM: some[int32](c.SecondsRadiusUM),
		DialHours: orElse[int16](c.DialHours, 12), MinuteHand: &minute, BeatsPerHour: some[int32](c.BeatsPerHour),
		StopSeconds: &c.StopSeconds, CrownOclock: orElse[int16](c.CrownOclock, 3), Accessory: optional(c.Accessory),
		AccessoryNote: optional(c.AccessoryNote), ReserveHours: some[int16](c.ReserveHours), Organ: optional(c.Organ),
		OrganStepMilli: some[int32](c.OrganStepMilli)}
}

func calibreOf(r rows.Calibre) Calibre {
	return Calibre{ID: r.ID, Code: r.Code, HasCard: r.Version != nil, Version: int(value(r.Version)), Title: value(r.Title),
		DiameterUM: int(value(r.DiameterUM)), AreaUM2: value(r.AreaUM2), WindingTurns: int(value(r.WindingTurns)),
		WindingNote: value(r.WindingNote), Automatic: value(r.Automatic), Seconds: value(r.Seconds),
		SecondsOclock: int(value(r.SecondsOclock)), SecondsRadiusUM: int(value(r.SecondsRadiusUM)),
		DialHours: max(12, int(value(r.DialHours))), NoMinuteHand: r.MinuteHand != nil && !*r.MinuteHand,
		BeatsPerHour: int(value(r.BeatsPerHour)), StopSeconds: value(r.StopSeconds), CrownOclock: int(value(r.CrownOclock)),
		Accessory: value(r.Accessory), AccessoryNote: value(r.AccessoryNote), ReserveHours: int(value(r.ReserveHours)),
		Organ: value(r.Organ), OrganStepMilli: int(value(r.OrganStepMilli))}
}

// Calibres lists all calibres by code.
func (l *Lab) Calibres(ctx context.Context, a Actor) ([]Calibre, error) {
	if !a.May(RightBatches) {
		return nil, failure(KindForbidden, "not_allowed", "right", string(RightBatches))
	}
	list, err := rows.Calibres(ctx, l.pool, l.site)
	if err != nil {
		return nil, fmt.Errorf("calibres: %w", err)
	}
	out := make([]Calibre, len(list))
	for i, r := range list {
		out[i] = calibreOf(r)
	}
	return out, nil
}

// HolderType is what a tray, strip or rack looks like: places are numbered from the origin corner
// along rows or columns; blocked places carry nothing.
type HolderType struct {
	Code, Title   string
	Rows, Columns int
	Origin        string // "top_left", "top_right", "bottom_left", "bottom_right"
	Along         string // "rows", "columns"
	Blocked       []int  // place numbers, from 1
	Carries       string // "movements", "holders"
}

// Places lists the usable place numbers in reading order.
func (t HolderType) Places() []int {
	var out []int
	for n := 1; n <= t.Rows*t.Columns; n++ {
		if !contains(t.Blocked, n) {
			out = append(out, n)
		}
	}
	return out
}

func contains(list []int, n int) bool {
	for _, x := range list {
		if x == n {
			return true
		}
	}
	return false
}

// AddHolderType adds a holder type.
func (l *Lab) AddHolderType(ctx context.Context, a Actor, t HolderType) error {
	if err := t.check(); err != nil {
		return err
	}
	return l.do(ctx, a, verb{"add_holder_type", RightSetup}, func(w *work) error {
		w.act.Body = map[string]any{"code": t.Code, "title": t.Title, "rows": t.Rows, "columns": t.Columns, "origin": t.Origin, "along": t.Along}
		rows.QueueHolderType(w.out, l.site, typeRow(t), w.act.ID)
		return nil
	})
}

func (t *HolderType) check() error {
	t.Origin, t.Along, t.Carries = *either(t.Origin, "top_left"), *either(t.Along, "rows"), *either(t.Carries, "movements")
	var f faults
	f.add(checkCode("code", t.Code))
	if t.Rows < 1 || t.Rows > 50 {
		f.add(invalid("rows", "between", "least", "1", "most", "50"))
	}
	if t.Columns < 1 || t.Columns > 50 {
		f.add(invalid("columns", "between", "least", "1", "most", "50"))
	}
	for _, n := range t.Blocked {
		if n < 1 || n > t.Rows*t.Columns {
			f.add(invalid("blocked", "no_such_place", "place", fmt.Sprint(n)))
		}
	}
	return f.err()
}

func typeRow(t HolderType) rows.HolderType {
	r := rows.HolderType{Code: t.Code, Title: t.Title, Rows: int16(t.Rows), Columns: int16(t.Columns), Origin: t.Origin, Along: t.Along, Carries: t.Carries, Blocked: []int16{}}
	for _, n := range t.Blocked {
		r.Blocked = append(r.Blocked, int16(n))
	}
	return r
}

func holderTypeOf(r rows.HolderType) HolderType {
	t := HolderType{Code: r.Code, Title: r.Title, Rows: int(r.Rows), Columns: int(r.Columns), Origin: r.Origin, Along: r.Along, Carries: r.Carries}
	for _, n := range r.Blocked {
		t.Blocked = append(t.Blocked, int(n))
	}
	return t
}

// HolderTypes lists all holder types by code.
func (l *Lab) HolderTypes(ctx context.Context, a Actor) ([]HolderType, error) {
	list, err := rows.HolderTypes(ctx, l.pool, l.site)
	if err != nil {
		return nil, fmt.Errorf("holder types: %w", err)
	}
	out := make([]HolderType, len(list))
	for i, r := range list {
		out[i] = holderTypeOf(r)
	}
	return out, nil
}

// Programmes lists the programmes known here, newest version of each code first.
func (l *Lab) Programmes(ctx context.Context, a Actor) ([]*trial.Programme, error) {
	list, err := rows.Programmes(ctx, l.pool, l.site)
	if err != nil {
		return nil, fmt.Errorf("programmes: %w", err)
	}
	out := make([]*trial.Programme, len(list))
	for i, r := range list {
		if out[i], err = l.learn(r); err != nil {
			return nil, err
		}
	}
	return out, nil
}

// learn reads a stored programme once; it never changes, so it is kept.
func (l *Lab) learn(r rows.Programme) (*trial.Programme, error) {
	hash := [32]byte(r.Hash)
	l.mu.RLock()
	p := l.programmes[hash]
	l.mu.RUnlock()
	if p != nil {
		return p, nil
	}
	p, err := sheet.ParseProgramme([]byte(r.Body))
	if err != nil {
		return nil, fmt.Errorf("stored programme %s version %s: %w", r.Code, r.Version, err)
	}
	l.mu.Lock()
	defer l.mu.Unlock()
	l.programmes[hash] = p
	return p, nil
}

// programme is the programme with that content hash, read through the connection at hand: asking
// the pool for another one while holding one would starve under load.
func (l *Lab) programme(ctx context.Context, db rows.Reader, hash []byte) (*trial.Programme, error) {
	l.mu.RLock()
	p := l.programmes[[32]byte(hash)]
	l.mu.RUnlock()
	if p != nil {
		return p, nil
	}
	r, err := rows.ProgrammeByHash(ctx, db, l.site, hash)
	if err != nil {
		return nil, fmt.Errorf("programme %x: %w", hash, err)
	}
	return l.learn(r)
}

// AddProgramme adds a version of a programme; versions are never changed, only superseded. Batches
// registered from then on take it, those registered before keep theirs.
func (l *Lab) AddProgramme(ctx context.Context, a Actor, p *trial.Programme) error {
	if err := usable(p); err != nil {
		return err
	}
	hash, kept := sheet.Hash(p), sheet.Canonical(p)
	err := l.do(ctx, a, verb{"add_programme", RightSetup}, func(w *work) error {
		w.act.Body = map[string]any{"code": p.Code, "version": p.Version, "hash": fmt.Sprintf("%x", hash)}
		rows.QueueProgramme(w.out, l.site, rows.Programme{Hash: hash[:], Code: p.Code, Version: p.Version, Title: p.Title,
			Body: string(kept)}, w.act.ID)
		return nil
	})
	if err != nil {
		return err
	}
	// What the caller holds may change under his hands; what is stored does not.
	_, err = l.learn(rows.Programme{Hash: hash[:], Code: p.Code, Version: p.Version, Body: string(kept)})
	return err
}

// usable tells whether batches can be judged by a programme.
func usable(p *trial.Programme) error {
	if err := p.Check(); err != nil {
		return faulty(err)
	}
	if p.Decision.Rule == trial.Guarded {
		return invalid("programme", "guarded_not_built")
	}
	for _, c := range p.Categories {
		if _, err := trial.NewJudge(p, c.Code); err != nil {
			return faulty(err)
		}
	}
	return nil
}

func faulty(err error) error { return invalid("programme", "programme_faulty", "fault", err.Error()) }

// standardTypes are the holders a new laboratory starts with. Strips of five are common practice,
// no source; the others are ours.
var standardTypes = []HolderType{
	{Code: "STRIP5", Title: "Strip of five", Rows: 1, Columns: 5},
	{Code: "TRAY10", Title: "Tray of ten", Rows: 2, Columns: 5},
	{Code: "TRAY20", Title: "Tray of twenty", Rows: 4, Columns: 5},
}

// Found sets up what every laboratory needs before its first batch: its name, the built-in
// programme, the standard holder types. What is there already stays.
func (l *Lab) Found(ctx context.Context, h House) error {
	if have, err := rows.Settings(ctx, l.pool); err != nil || have.Get("title", "") != "" {
		return err
	}
	if err := l.SetHouse(ctx, Program, h); err != nil {
		return err
	}
	if err := l.AddProgramme(ctx, Program, trial.ISO3159()); err != nil {
		return err
	}
	for _, t := range standardTypes {
		if err := l.AddHolderType(ctx, Program, t); err != nil {
			return err
		}
	}
	return nil
}

type whole interface{ ~int16 | ~int32 | ~int64 }

// some is a pointer to n, nil for 0: not known.
func some[T whole, N ~int | ~int64](n N) *T {
	if n == 0 {
		return nil
	}
	v := T(n)
	return &v
}

func orElse[T whole](n int, absent T) *T {
	if n != 0 {
		absent = T(n)
	}
	return &absent
}

func either(s, absent string) *string {
	if s == "" {
		s = absent
	}
	return &s
}
