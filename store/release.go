package store

import (
	"context"
	"fmt"
	"slices"
	"time"

	"github.com/jackc/pgx/v5"

	"ratehouse/store/proof"
	"ratehouse/store/rows"
	"ratehouse/trial"
)

// Released is what became of one movement of a release.
type Released struct {
	Serial string
	Number string // of the paper: the new one, or with the reason "released_already" the one it has
	Kind   string // "certificate", "rejection"
	Why    string // code, if it was held: see HoldCodes
}

// HoldCodes is the closed list of reasons that hold a release.
var HoldCodes = []string{"no_movement", "open", "running", "withdrawn", "void", "no_verdict", "released_already", "certified_elsewhere",
	"open_remark", "four_eyes", "no_anchor", "read_ahead"}

// mostReleased movements in one transaction: about 3 MB of records.
const mostReleased = 500

// enteredAtMost is the share of a movement's readings that its releaser may have entered himself,
// one in so many. Who corrected one, confirmed a second look or decided a remark on it is barred
// altogether (practice notes X8).
const enteredAtMost = 4

// Releasable is how one movement of a batch stands before a release: which paper it would get, or
// why it gets none.
type Releasable struct {
	No          int
	Serial      string
	Kind        string // "certificate", "rejection"; "" where there is no verdict to print
	Why         string // code that holds it (see HoldCodes), "" if it can be released
	Verdict     trial.Verdict
	Failed      []string // symbols outside their limits
	End         End
	Cause       string
	Corrections int
	Remarks     int
	Paper       string // the newest paper it has
	Replaces    string // the revoked paper that the new one would replace
}

// ReleaseList is a batch with all its movements as the actor may or may not release them.
type ReleaseList struct {
	Batch     Batch
	CanSign   bool // this program has the key that signs papers
	Movements []Releasable
}

// Releasable looks at every movement of a batch as a release by the actor would, and writes nothing.
func (l *Lab) Releasable(ctx context.Context, a Actor, code string) (ReleaseList, error) {
	if !a.May(RightRelease) {
		return ReleaseList{}, failure(KindForbidden, "not_allowed", "right", string(RightRelease))
	}
	d := &dossier{lab: l, actor: a, now: l.Now()}
	b := &pgx.Batch{}
	d.queue(b, code, nil)
	if err := rows.Run(ctx, l.pool, b); err != nil {
		return ReleaseList{}, fmt.Errorf("what batch %s can release: %w", code, err)
	}
	if err := d.open(ctx, l.pool, code); err != nil {
		return ReleaseList{}, err
	}
	list := ReleaseList{Batch: d.batch, CanSign: !l.key.IsZero(), Movements: make([]Releasable, len(d.rows))}
	for i := range d.rows {
		list.Movements[i] = d.weigh(&d.rows[i]).Releasable
	}
	return list, nil
}

// Release freezes the judgement of the movements: a certificate for those that pass, a rejection
// report for those that fail. What may not be released is held, with the reason; the others go.
// Asking again is harmless: a movement that has its paper is held as released already.
func (l *Lab) Release(ctx context.Context, a Actor, code string, serials []string) ([]Released, error) {
	if l.key.IsZero() {
		return nil, failure(KindForbidden, "no_signing_key")
	}
	if !a.May(RightRelease) {
		return nil, failure(KindForbidden, "not_allowed", "right", string(RightRelease))
	}
	var out []Released
	for part := range slices.Chunk(distinct(serials), mostReleased) {
		done, err := l.releasePart(ctx, a, code, part)
		if err != nil {
			return out, err
		}
		out = append(out, done...)
	}
	return out, nil
}

// distinct drops what is named twice and keeps the order.
func distinct(list []string) []string {
	seen := make(map[string]bool, len(list))
	out := make([]string, 0, len(list))
	for _, s := range list {
		if !seen[s] {
			seen[s] = true
			out = append(out, s)
		}
	}
	return out
}

func (l *Lab) releasePart(ctx context.Context, a Actor, code string, serials []string) (out []Released, err error) {
	err = l.do(ctx, a, verb{"release", RightRelease}, func(w *work) error {
		r := &release{dossier: &dossier{lab: l, actor: a, now: w.now}, work: w}
		if err := r.look(ctx, code, serials); err != nil {
			return err
		}
		for _, serial := range serials {
			one, err := r.decide(serial)
			if err != nil {
				return err
			}
			out = append(out, one)
		}
		r.finish(out)
		return nil
	})
	return out, err
}

// dossier is everything a release is decided on, read in one round trip.
type dossier struct {
	lab      *Lab
	actor    Actor
	now      time.Time
	house    House
	batch    Batch
	category trial.Category
	judge    *trial.Judge
	ended    bool // the last round was closed
	rows     []rows.Movement
	hands    map[int16]rows.Hands
	papers   map[int16][]rows.Paper // oldest first
	rivals   map[int16]bool
	remarks  []Remark
	judged   map[int16]bool // movements on which the actor decided a remark

	found  []rows.Batch
	cards  []rows.Calibre
	events []rows.RoundEvent
	raw    struct {
		hands     []rows.Hands
		papers    []rows.Paper
		rivals    []int16
		remarks   []rows.Remark
		assessors []rows.RemarkActor
	}
}

// queue asks for the movements with these serials, for all of the batch when there are none.
func (d *dossier) queue(b *pgx.Batch, code string, serials []string) {
	site := d.lab.site
	rows.FindBatch(b, &d.found, site, code)
	rows.CardOf(b, &d.cards, site, code)
	rows.RoundsOf(b, &d.events, site, []string{code})
	if serials == nil {
		rows.MovementsOf(b, &d.rows, code, site)
	} else {
		rows.FindMovements(b, &d.rows, site, code, serials)
	}
	rows.HandsOf(b, &d.raw.hands, site, code, d.actor.Account)
	rows.PapersOf(b, &d.raw.papers, site, code)
	rows.RivalsOf(b, &d.raw.rivals, site, code)
	rows.RemarksOf(b, &d.raw.remarks, site, code)
	rows.RemarkActors(b, &d.raw.assessors, site, code)
}

// open puts what was read in order.
func (d *dossier) open(ctx context.Context, db rows.Reader, code string) error {
	if len(d.found) == 0 {
		return failure(KindNotFound, "no_batch", "code", code)
	}
	var err error
	if d.batch, err = d.lab.batchOf(ctx, db, d.found[0]); err != nil {
		return err
	}
	if len(d.cards) == 1 {
		d.batch.Calibre = calibreOf(d.cards[0])
	}
	if d.judge, err = trial.NewJudge(d.batch.Programme, d.batch.Category); err != nil {
		return fmt.Errorf("batch %s: %w", code, err)
	}
	d.house, d.remarks = d.lab.House(), remarksOf(d.raw.remarks)
	d.ended = roundsOf(d.batch, d.events, nil)[d.batch.LastStep()].State == RoundClosed
	d.hands, d.papers = map[int16]rows.Hands{}, map[int16][]rows.Paper{}
	d.rivals, d.judged = map[int16]bool{}, map[int16]bool{}
	for _, h := range d.raw.hands {
		d.hands[h.No] = h
	}
	for _, p := range d.raw.papers {
		d.papers[p.No] = append(d.papers[p.No], p)
	}
	for _, no := range d.raw.rivals {
		d.rivals[no] = true
	}
	for _, k := range d.raw.assessors {
		if k.Actor == d.actor.Account && k.State != "open" {
			d.judged[k.No] = true
		}
	}
	for _, c := range d.batch.Programme.Categories {
		if c.Code == d.batch.Category {
			d.category = c
		}
	}
	return nil
}

// weighed is one movement judged, with what a release makes of it.
type weighed struct {
	Releasable
	movement Movement
	result   trial.Result
}

// weigh judges a movement and says whether it can be released.
func (d *dossier) weigh(row *rows.Movement) *weighed {
	w := &weighed{movement: movementOf(&d.batch, row)}
	m := &w.movement
	d.judge.Rates(m.Rates, &w.result)
	kind, why := paperFor(m.End, w.result.Verdict)
	w.Releasable = Releasable{No: m.No, Serial: m.Serial, Kind: string(kind), Why: why, Verdict: w.result.Verdict, Failed: w.result.Failed(), End: m.End,
		Cause: m.Cause, Corrections: m.Corrections, Remarks: m.Remarks, Paper: m.Paper}
	if why == "" {
		w.Why = d.holds(row, m, kind)
	}
	if m.Paper != "" && !row.Released {
		w.Replaces = m.Paper
	}
	if row.Released {
		w.Why = "released_already"
	}
	return w
}

// paperFor says which paper a movement gets, or why none.
func paperFor(end End, v trial.Verdict) (proof.Kind, string) {
	switch {
	case end == Withdrawn || end == Void:
		return "", string(end)
	case end == Rejected || end == Removed || v == trial.Fail:
		return proof.KindRejection, ""
	case v == trial.Pass:
		return proof.KindCertificate, ""
	case v == trial.None:
		return "", "no_verdict"
	}
	return "", "open"
}

// holds says what holds a movement that would get a paper of this kind. A failing one that is still
// being read is not stopped by a report: to stop it is a decision of its own (EndMovement, Removed).
func (d *dossier) holds(row *rows.Movement, m *Movement, kind proof.Kind) string {
	hands := d.hands[row.No]
	switch {
	case m.End == InTrial && !d.over(row):
		return "running"
	case kind == proof.KindCertificate && d.rivals[row.No]:
		return "certified_elsewhere"
	case d.openRemark(m.Serial):
		return "open_remark"
	case d.touched(row.No):
		return "four_eyes"
	case hands.ByHand:
		return "no_anchor"
	case hands.Last != nil && hands.Last.Truncate(time.Millisecond).After(d.now.Truncate(time.Millisecond)):
		return "read_ahead"
	}
	return ""
}

// over tells whether nothing more is to be read: the last round was closed, or the movement has
// its entry in it.
func (d *dossier) over(row *rows.Movement) bool {
	last := d.batch.LastStep()
	return d.ended || row.Rate[last] != nil || row.Found[last] != nil || row.Code[last] != nil
}

// openRemark tells whether a remark on the movement, or on the whole batch, is not closed.
func (d *dossier) openRemark(serial string) bool {
	return slices.ContainsFunc(d.remarks, func(k Remark) bool { return (k.Serial == serial || k.Serial == "") && k.State != "closed" })
}

// touched tells whether the releaser had a hand in the movement's readings or remarks.
func (d *dossier) touched(no int16) bool {
	h := d.hands[no]
	return h.Touched || d.judged[no] || int(h.Own)*enteredAtMost > int(h.Readings)
}

// release is a dossier with the evidence that its papers print, under a lock.
type release struct {
	*dossier
	work     *work
	readings map[int16][]rows.SeenReading
	by       map[string]*rows.Movement
}

// look locks before it reads: the depositor, because one identity gets one valid certificate whatever
// the batch, then the movements in key order.
func (r *release) look(ctx context.Context, code string, serials []string) error {
	var (
		locked   []rows.Series
		readings []rows.SeenReading
		b        = &pgx.Batch{}
	)
	rows.LockDepositor(b, r.lab.site, code)
	rows.LockSeries(b, &locked, r.lab.site, repeat(code, len(serials)), serials)
	r.queue(b, code, serials)
	rows.ReadingsOfMany(b, &readings, r.lab.site, code, serials)
	if err := r.work.read(ctx, b); err != nil {
		return err
	}
	if err := r.open(ctx, r.work.conn, code); err != nil {
		return err
	}
	r.by, r.readings = map[string]*rows.Movement{}, map[int16][]rows.SeenReading{}
	for i := range r.rows {
		r.by[r.rows[i].Serial] = &r.rows[i]
	}
	for _, x := range readings {
		r.readings[x.No] = append(r.readings[x.No], x)
	}
	return nil
}

func repeat(s string, n int) []string {
	out := make([]string, n)
	for i := range out {
		out[i] = s
	}
	return out
}

func (r *release) decide(serial string) (Released, error) {
	row := r.by[serial]
	if row == nil {
		return Released{Serial: serial, Why: "no_movement"}, nil
	}
	w := r.weigh(row)
	switch {
	case w.Why == "released_already":
		return Released{Serial: serial, Number: w.Paper, Kind: value(row.PaperKind), Why: w.Why}, nil
	case w.Why != "":
		return Released{Serial: serial, Why: w.Why}, nil
	}
	return r.issue(row, w)
}

func (r *release) issue(row *rows.Movement, w *weighed) (Released, error) {
	rec := r.record(row, w)
	key := r.lab.key
	jws, err := proof.Issue(key, rec)
	if err != nil {
		return Released{}, fmt.Errorf("paper for %s of batch %s: %w", w.Serial, r.batch.Code, err)
	}
	text, err := rec.Canonical()
	if err != nil {
		return Released{}, err
	}
	hash, err := rec.Hash()
	if err != nil {
		return Released{}, err
	}
	rows.QueueCertificate(r.work.out, r.lab.site, rows.Certificate{Number: rec.Number, Batch: row.Batch, No: row.No, Kind: string(rec.Kind), Record: string(text),
		Hash: hash[:], JWS: jws, KeyID: key.ID(), Replaces: optional(rec.Replaces), At: r.now}, r.work.act.ID)
	return Released{Serial: w.Serial, Number: rec.Number, Kind: string(rec.Kind)}, nil
}

// finish writes the act: which papers, for which movements.
func (r *release) finish(out []Released) {
	list := []any{}
	for _, x := range out {
		if x.Why == "" {
			list = append(list, []any{x.Number, x.Serial, x.Kind})
		}
	}
	w := r.work
	if w.skip = len(list) == 0; w.skip {
		return
	}
	key := &pgx.Batch{}
	rows.QueueKey(key, r.lab.site, r.lab.key.ID(), string(r.lab.key.Public().JWK()), r.now)
	w.out.QueuedQueries = append(key.QueuedQueries, w.out.QueuedQueries...)
	w.batch(r.batch.ID)
	w.act.Body = map[string]any{"batch": r.batch.ID.String(), "papers": list}
}
