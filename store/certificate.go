package store

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"
	"time"

	"github.com/jackc/pgx/v5"

	"ratehouse/store/proof"
	"ratehouse/store/rows"
	"ratehouse/trial"
)

// Released is what became of one movement of a release.
type Released struct {
	Serial string
	Number string // of the paper, if it was released
	Kind   string // "certificate", "rejection"
	Why    string // code, if it was held: see HoldCodes
}

// HoldCodes is the closed list of reasons that hold a release.
var HoldCodes = []string{"no_movement", "open", "withdrawn", "void", "released_already", "open_remark", "four_eyes", "no_verdict"}

// mostReleased movements in one transaction: about 3 MB of records.
const mostReleased = 500

// enteredAtMost is the share of a movement's readings that its releaser may have entered himself.
// Who corrected one, confirmed a second look or decided a remark on it is barred altogether
// (practice notes X8).
const enteredAtMost = 0.25

// Release freezes the judgement of the movements: a certificate for those that pass, a rejection
// report for those that fail. What may not be released is held, with the reason; the others go.
func (l *Lab) Release(ctx context.Context, a Actor, code string, serials []string) ([]Released, error) {
	if l.key.IsZero() {
		return nil, failure(KindForbidden, "no_signing_key")
	}
	if !a.May(RightRelease) {
		return nil, failure(KindForbidden, "not_allowed", "right", string(RightRelease))
	}
	var out []Released
	for part := range slices.Chunk(serials, mostReleased) {
		done, err := l.releasePart(ctx, a, code, part)
		if err != nil {
			return out, err
		}
		out = append(out, done...)
	}
	return out, nil
}

func (l *Lab) releasePart(ctx context.Context, a Actor, code string, serials []string) (out []Released, err error) {
	err = l.do(ctx, a, verb{"release", RightRelease}, func(w *work) error {
		r := &release{work: w}
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

// release gathers what a release needs.
type release struct {
	*work
	house     House
	batch     Batch
	category  trial.Category
	judge     *trial.Judge
	movements map[string]*rows.Movement
	readings  map[int16][]rows.SeenReading
	remarks   []Remark
	assessors []rows.RemarkActor
}

func (r *release) look(ctx context.Context, code string, serials []string) error {
	var (
		found     []rows.Batch
		cards     []rows.Calibre
		locked    []rows.Series
		movements []rows.Movement
		readings  []rows.SeenReading
		remarks   []rows.Remark
		l, b      = r.lab, &pgx.Batch{}
	)
	rows.LockSeries(b, &locked, l.site, repeat(code, len(serials)), serials)
	rows.FindBatch(b, &found, l.site, code)
	rows.CardOf(b, &cards, l.site, code)
	rows.FindMovements(b, &movements, l.site, code, serials)
	rows.ReadingsOfMany(b, &readings, l.site, code, serials)
	rows.RemarksOf(b, &remarks, l.site, code)
	rows.RemarkActors(b, &r.assessors, l.site, code)
	if err := r.read(ctx, b); err != nil {
		return err
	}
	if len(found) == 0 {
		return failure(KindNotFound, "no_batch", "code", code)
	}
	var err error
	if r.batch, err = l.batchOf(ctx, found[0]); err != nil {
		return err
	}
	if len(cards) == 1 {
		r.batch.Calibre = calibreOf(cards[0])
	}
	if r.judge, err = trial.NewJudge(r.batch.Programme, r.batch.Category); err != nil {
		return fmt.Errorf("batch %s: %w", code, err)
	}
	r.house, r.remarks = l.House(), remarksOf(remarks)
	r.movements, r.readings = map[string]*rows.Movement{}, map[int16][]rows.SeenReading{}
	for i := range movements {
		r.movements[movements[i].Serial] = &movements[i]
	}
	for _, x := range readings {
		r.readings[x.No] = append(r.readings[x.No], x)
	}
	for _, c := range r.batch.Programme.Categories {
		if c.Code == r.batch.Category {
			r.category = c
		}
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
	m := r.movements[serial]
	if m == nil {
		return Released{Serial: serial, Why: "no_movement"}, nil
	}
	moved := movementOf(&r.batch, m)
	var judged trial.Result
	r.judge.Rates(moved.Rates, &judged)
	kind, why := paperFor(moved.End, judged.Verdict)
	if why == "" {
		why = r.holds(m, serial)
	}
	if why != "" {
		return Released{Serial: serial, Why: why}, nil
	}
	return r.issue(kind, m, &moved, &judged)
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

func (r *release) holds(m *rows.Movement, serial string) string {
	if m.Certificate != nil {
		return "released_already"
	}
	for _, k := range r.remarks {
		if k.Serial == serial && k.State != "closed" {
			return "open_remark"
		}
	}
	if r.touched(m.No) {
		return "four_eyes"
	}
	return ""
}

// touched tells whether the releaser had a hand in the movement's readings or remarks.
func (r *release) touched(no int16) bool {
	me, mine, all := r.actor.Account, 0, 0
	for _, x := range r.readings[no] {
		own := x.EnteredBy == me || x.ReadBy == me
		if own && (x.Nth > 1 && x.Kind <= 3 || x.Flags&flagSecondLook != 0) {
			return true
		}
		all++
		if own {
			mine++
		}
	}
	for _, k := range r.assessors {
		if k.No == no && k.Actor == me && k.State != "open" {
			return true
		}
	}
	return float64(mine) > enteredAtMost*float64(all)
}

func (r *release) issue(kind proof.Kind, m *rows.Movement, moved *Movement, judged *trial.Result) (Released, error) {
	rec := r.record(kind, m, moved, judged)
	jws, err := proof.Issue(r.lab.key, rec)
	if err != nil {
		return Released{}, fmt.Errorf("paper for %s of batch %s: %w", m.Serial, r.batch.Code, err)
	}
	text, err := rec.Canonical()
	if err != nil {
		return Released{}, err
	}
	hash, err := rec.Hash()
	if err != nil {
		return Released{}, err
	}
	rows.QueueCertificate(r.out, r.lab.site, rows.Certificate{Number: rec.Number, Batch: m.Batch, No: m.No, Kind: string(kind), Record: string(text),
		Hash: hash[:], JWS: jws, KeyID: r.lab.key.ID(), At: r.now}, r.act.ID)
	return Released{Serial: m.Serial, Number: rec.Number, Kind: string(kind)}, nil
}

// finish writes the act: which papers, by their hashes.
func (r *release) finish(out []Released) {
	list := []any{}
	for _, x := range out {
		if x.Number != "" {
			list = append(list, []any{x.Number, x.Serial, x.Kind})
		}
	}
	if r.skip = len(list) == 0; r.skip {
		return
	}
	key := &pgx.Batch{}
	rows.QueueKey(key, r.lab.site, r.lab.key.ID(), string(r.lab.key.Public().JWK()), r.now)
	r.out.QueuedQueries = append(key.QueuedQueries, r.out.QueuedQueries...)
	r.act.Batch = &r.batch.ID
	r.act.Body = map[string]any{"batch": r.batch.ID.String(), "papers": list}
}

// Certificate is a paper as it was frozen, and what happened to it since.
type Certificate struct {
	Record     proof.Record
	JWS        string
	Code       string // to be read aloud and typed beside the number
	PublicKey  string // JWK
	Replaces   string
	ReplacedBy string
	RevokedAt  time.Time
	Revoked    string // why
}

// Certificate is one paper by its number.
func (l *Lab) Certificate(ctx context.Context, a Actor, number string) (Certificate, error) {
	if !a.May(RightCertificates) {
		return Certificate{}, failure(KindForbidden, "not_allowed", "right", string(RightCertificates))
	}
	return l.paper(ctx, number)
}

func (l *Lab) paper(ctx context.Context, number string) (Certificate, error) {
	row, err := rows.CertificateByNumber(ctx, l.pool, l.site, number)
	if errors.Is(err, pgx.ErrNoRows) {
		return Certificate{}, failure(KindNotFound, "no_certificate", "number", number)
	}
	if err != nil {
		return Certificate{}, fmt.Errorf("certificate %s: %w", number, err)
	}
	return paperOf(row)
}

// paperOf opens a stored paper with its signature checked: what was altered in the database is not
// shown as a paper.
func paperOf(row rows.Certificate) (Certificate, error) {
	c := Certificate{JWS: row.JWS, PublicKey: value(row.PublicJWK), Replaces: value(row.Replaces), ReplacedBy: value(row.ReplacedBy),
		RevokedAt: value(row.RevokedAt).UTC(), Revoked: value(row.Revoked)}
	pub, err := proof.ParsePublicKey([]byte(c.PublicKey))
	if err != nil {
		return c, fmt.Errorf("certificate %s: key: %w", row.Number, err)
	}
	if c.Record, err = proof.Open(pub, row.JWS); err != nil {
		return c, fmt.Errorf("certificate %s: %w", row.Number, err)
	}
	hash, err := c.Record.Hash()
	c.Code = proof.ShortCode(hash)
	return c, err
}

// Certificates lists the papers of a batch.
func (l *Lab) Certificates(ctx context.Context, a Actor, code string) ([]Certificate, error) {
	if !a.May(RightCertificates) {
		return nil, failure(KindForbidden, "not_allowed", "right", string(RightCertificates))
	}
	list, err := rows.CertificatesOf(ctx, l.pool, l.site, code)
	if err != nil {
		return nil, fmt.Errorf("certificates of batch %s: %w", code, err)
	}
	out := make([]Certificate, len(list))
	for i, row := range list {
		if out[i], err = paperOf(row); err != nil {
			return nil, err
		}
	}
	return out, nil
}

// Verify tells the public whether a paper is genuine. It wants the number and the code printed on
// it, never the number alone, so that papers cannot be listed; a wrong code answers like a wrong
// number.
func (l *Lab) Verify(ctx context.Context, number, code string) (Certificate, error) {
	unknown := failure(KindNotFound, "no_certificate", "number", number)
	typed, err := proof.ParseShortCode(code)
	if err != nil {
		return Certificate{}, invalid("code", "paper_code_form")
	}
	c, err := l.paper(ctx, strings.ToUpper(strings.TrimSpace(number)))
	if err != nil {
		return Certificate{}, err
	}
	hash, err := c.Record.Hash()
	if err != nil || !typed.Matches(hash) {
		return Certificate{}, unknown
	}
	return c, nil
}

// Revoke takes a paper back for a reason; it stays readable, marked.
func (l *Lab) Revoke(ctx context.Context, a Actor, number, reason string) error {
	if reason = strings.TrimSpace(reason); reason == "" {
		return invalid("reason", "needed")
	}
	c, err := l.Certificate(ctx, a, number)
	if err != nil {
		return err
	}
	if !c.RevokedAt.IsZero() {
		return failure(KindConflict, "revoked_already", "number", number)
	}
	return l.do(ctx, a, verb{"revoke", RightRelease}, func(w *work) error {
		w.act.Reason = &reason
		w.act.Body = map[string]any{"number": number, "reason": reason}
		rows.QueueRevocation(w.out, number, reason, w.now, w.act.ID)
		return nil
	})
}

// paperNumber is the number of a movement's first paper: batch and number within it.
func paperNumber(batch string, no int16) string { return fmt.Sprintf("%s-%04d", batch, no) }
