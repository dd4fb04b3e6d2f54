package store

import (
	"context"
	"errors"
	"fmt"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgconn"
	"github.com/jackc/pgx/v5/pgxpool"

	"ratehouse/store/proof"
	"ratehouse/store/rows"
)

// verb is the name of an act in the journal and the coarse right it needs.
type verb struct {
	name  string
	right Right
}

// work is one transaction under way: what it reads comes in one pipelined trip that also begins
// it, what it writes is queued and leaves in one trip that also records the act and commits.
type work struct {
	lab   *Lab
	actor Actor
	now   time.Time
	conn  *pgxpool.Conn
	begun bool
	out   *pgx.Batch
	act   rows.Act
	skip  bool  // nothing happened that the journal should know
	once  *once // the call may be repeated, and is done once
}

// do is the one way to write. It checks the coarse right, runs fn, and commits what fn queued
// together with the act and its outbox row; any error takes everything back.
func (l *Lab) do(ctx context.Context, a Actor, v verb, fn func(*work) error) error {
	if !a.May(v.right) {
		return failure(KindForbidden, "not_allowed", "right", string(v.right))
	}
	conn, err := l.pool.Acquire(ctx)
	if err != nil {
		return fmt.Errorf("%s: connection: %w", v.name, err)
	}
	defer conn.Release()
	w := &work{lab: l, actor: a, now: l.Now(), conn: conn, out: &pgx.Batch{}, once: onceIn(ctx)}
	w.act = rows.Act{ID: l.newID(), Site: l.site, At: w.now, Actor: a.Account, Via: a.Via, Verb: v.name}
	if err := fn(w); err != nil {
		return errors.Join(err, w.rollback(ctx))
	}
	if err := w.commit(ctx); err != nil {
		return errors.Join(named(err, v.name), w.rollback(ctx))
	}
	l.nudge()
	return nil
}

// read runs what the verb must know before it decides; the first one begins the transaction in
// the same round trip.
func (w *work) read(ctx context.Context, b *pgx.Batch) error {
	first := !w.begun
	if first {
		w.begun = true
		begin := &pgx.Batch{}
		begin.Queue("begin")
		if w.once != nil {
			w.once.look(begin, w.actor)
		}
		b.QueuedQueries = append(begin.QueuedQueries, b.QueuedQueries...)
	}
	if err := w.conn.SendBatch(ctx, b).Close(); err != nil {
		return named(err, w.act.Verb)
	}
	if first && w.once != nil {
		return w.once.check()
	}
	return nil
}

func (w *work) commit(ctx context.Context) error {
	if w.skip && w.out.Len() == 0 {
		return w.rollback(ctx)
	}
	if w.once != nil && !w.begun {
		if err := w.read(ctx, &pgx.Batch{}); err != nil {
			return err
		}
	}
	last := &pgx.Batch{}
	if !w.begun {
		last.Queue("begin")
		w.begun = true
	}
	if !w.skip {
		body, err := proof.Canonical(w.act.Body)
		if err != nil {
			return fmt.Errorf("act body: %w", err)
		}
		w.act.Canonical = string(body)
		rows.QueueAct(last, w.act)
	}
	last.QueuedQueries = append(last.QueuedQueries, w.out.QueuedQueries...)
	if o := w.once; o != nil {
		rows.QueueRequest(last, w.actor.Account, o.Key, o.Route, o.Hash, w.now)
	}
	last.Queue("commit")
	err := w.conn.SendBatch(ctx, last).Close()
	if err == nil {
		w.begun = false
	}
	return err
}

// rollback survives a cancelled caller; a connection that cannot roll back is thrown away.
func (w *work) rollback(ctx context.Context) error {
	if !w.begun {
		return nil
	}
	w.begun = false
	ctx, cancel := context.WithTimeout(context.WithoutCancel(ctx), 5*time.Second)
	defer cancel()
	if _, err := w.conn.Exec(ctx, "rollback"); err != nil {
		return errors.Join(fmt.Errorf("roll back: %w", err), w.conn.Conn().Close(ctx))
	}
	return nil
}

// taken maps the names of unique constraints to what they mean to the caller.
var taken = map[string]*Error{
	"batch_code_once":        {Kind: KindInvalid, Code: "batch_code_taken", Field: "code"},
	"movement_serial_once":   {Kind: KindInvalid, Code: "serial_repeated", Field: "serials"},
	"account_name_once":      {Kind: KindInvalid, Code: "account_name_taken", Field: "name"},
	"depositor_code_once":    {Kind: KindInvalid, Code: "depositor_code_taken", Field: "code"},
	"calibre_code_once":      {Kind: KindInvalid, Code: "calibre_code_taken", Field: "code"},
	"holder_code_once":       {Kind: KindInvalid, Code: "holder_code_taken", Field: "code"},
	"holder_type_pkey":       {Kind: KindInvalid, Code: "holder_type_code_taken", Field: "code"},
	"programme_version_once": {Kind: KindInvalid, Code: "programme_version_taken", Field: "version"},
	"programme_pkey":         {Kind: KindInvalid, Code: "programme_known", Field: "programme"},
	"place_pkey":             {Kind: KindConflict, Code: "place_taken"},
	"place_one_each":         {Kind: KindConflict, Code: "movement_placed_twice"},
	"certificate_first_once": {Kind: KindConflict, Code: "released_already"},
	"certificate_pkey":       {Kind: KindConflict, Code: "released_already"},
	"revocation_pkey":        {Kind: KindConflict, Code: "revoked_already"},
	"reading_pkey":           {Kind: KindConflict, Code: "reading_changed_meanwhile"},
	"round_event_pkey":       {Kind: KindConflict, Code: "round_changed_meanwhile"},
	"ending_pkey":            {Kind: KindConflict, Code: "end_changed_meanwhile"},
	"remark_state_pkey":      {Kind: KindConflict, Code: "remark_changed_meanwhile"},
}

// named turns a violated constraint into what it means, and anything else into a fault of verb.
func named(err error, verb string) error {
	if pg, ok := errors.AsType[*pgconn.PgError](err); ok {
		if e := taken[pg.ConstraintName]; e != nil {
			copied := *e
			return &copied
		}
	}
	return fmt.Errorf("%s: %w", verb, err)
}

func (w *work) batch(id uuid.UUID) { w.act.Batch = &id }
