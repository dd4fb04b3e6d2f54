package main

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"time"

	"github.com/google/uuid"

	"ratehouse/migrations"
	"ratehouse/store"
	"ratehouse/store/cluster"
	"ratehouse/trial"
)

// database looks at the user's database, if it is named, without writing to it, and sends vectors
// through the laboratory's verbs in a throw-away one. An error says that none could be made.
func (v *validation) database(ctx context.Context, p program, c *config, files fs.FS) error {
	v.Database = "throw-away"
	if !c.private() {
		v.Database = "looked at " + withoutSecret(c.DatabaseURL) + ", written to a throw-away"
		look := v.checker("database named", files)
		look.named(ctx, c.DatabaseURL)
	}
	return v.throwAway(ctx, p, files)
}

// named compares version and schema with this program, and the role's rights with what serve may have.
func (c *checker) named(ctx context.Context, dsn string) {
	err := (&database{app: dsn}).current(ctx)
	c.hold(err == nil, "schema: %v", err)
	if err == nil {
		err = refuseOwner(ctx, dsn)
		c.hold(err == nil, "rights: %v", err)
	}
}

func (v *validation) throwAway(ctx context.Context, p program, files fs.FS) (err error) {
	dir, err := os.MkdirTemp("", "ratehouse-validate-")
	if err != nil {
		return err
	}
	defer func() { err = errors.Join(err, os.RemoveAll(dir)) }()
	if err := os.Chmod(dir, 0o711); err != nil { // the server may run as another user; what is inside stays closed
		return err
	}
	log := quietLog(p)
	server, err := cluster.Start(ctx, cluster.Config{Dir: filepath.Join(dir, "postgres"), Throwaway: true, Logf: func(format string, args ...any) { log.Info(fmt.Sprintf(format, args...)) }})
	if err != nil {
		return err
	}
	defer func() {
		stop, cancel := context.WithTimeout(context.WithoutCancel(ctx), time.Minute)
		defer cancel()
		err = errors.Join(err, server.Stop(stop))
	}()
	if err := server.EnsureDatabase(ctx, databaseName); err != nil {
		return err
	}
	if _, err := migrations.Up(ctx, server.DSN(cluster.Owner, databaseName)); err != nil {
		return err
	}
	schema := v.checker("database made", files)
	schema.named(ctx, server.DSN(cluster.App, databaseName))
	through := v.checker("through the laboratory", files)
	if err := through.laboratory(ctx, server.DSN(cluster.App, databaseName)); err != nil {
		through.hold(false, "%v", err)
	}
	return nil
}

// laboratory registers the movements of the criterion vectors, reads them day by day, and judges what
// comes back.
func (c *checker) laboratory(ctx context.Context, dsn string) error {
	var v criterionVectors
	if !c.readJSON("iso3159.json", &v) {
		return nil
	}
	now := time.Date(2026, time.December, 1, 8, 0, 0, 0, time.UTC)
	lab, err := store.Open(ctx, store.Config{DSN: dsn, Clock: func() time.Time { return now }, Engine: engine()})
	if err != nil {
		return err
	}
	defer lab.Close()
	if err := lab.Found(ctx, store.House{Title: "Validation", Zone: time.UTC}); err != nil {
		return err
	}
	account, err := lab.AddAccount(ctx, store.Program, store.NewAccount{Name: "lead", Title: "Validation", Role: store.Lead, Password: uuid.NewString()})
	if err != nil {
		return err
	}
	lead := store.Actor{Account: account.ID, Name: account.Name, Title: account.Title, Role: account.Role, Via: "program"}
	batch := store.NewBatch{Code: "VALIDATION", Programme: "iso3159", Category: "1", Depositor: "VALIDATION", StartsAt: now, Entry: store.EntryRate}
	names := sortedKeys(v.Vectors)
	for i := range names {
		batch.Pieces = append(batch.Pieces, store.Piece{Serial: fmt.Sprintf("V-%04d", i)})
	}
	b, err := lab.Register(ctx, lead, batch)
	if err != nil {
		return err
	}
	for k := range b.Steps {
		now = b.Due(k)
		var entries []store.Entry
		for i, name := range names {
			if rates := v.Vectors[name].Rates; k > 0 && rates[k-1] != nil {
				entries = append(entries, store.Entry{ID: uuid.Must(uuid.NewV7()), Batch: b.Code, Serial: batch.Pieces[i].Serial, Step: k, Day: -1,
					Kind: store.KindRate, Method: store.Typed, Value: *rates[k-1], ReadAt: now})
			}
		}
		if err := c.round(ctx, lab, lead, b.Code, k, entries); err != nil {
			return err
		}
	}
	return c.readBack(ctx, lab, lead, &v, names)
}

// round opens a round, saves its readings, types those again that are asked for a second time, and
// closes it.
func (c *checker) round(ctx context.Context, lab *store.Lab, a store.Actor, code string, k int, entries []store.Entry) error {
	if err := lab.OpenRound(ctx, a, code, k); err != nil {
		return err
	}
	if len(entries) > 0 {
		answers, err := lab.Save(ctx, a, time.Time{}, entries)
		if err != nil {
			return err
		}
		for i, r := range answers {
			if r.Status == store.LookAgain {
				entries[i].Confirm = []string{entries[i].Value}
				again, err := lab.Save(ctx, a, time.Time{}, entries[i:i+1])
				if err != nil {
					return err
				}
				r = again[0]
			}
			c.hold(r.Status == store.Accepted, "%s step %d: %s %s", entries[i].Serial, k, r.Status, r.Code)
		}
	}
	return lab.CloseRound(ctx, a, code, k)
}

func (c *checker) readBack(ctx context.Context, lab *store.Lab, a store.Actor, v *criterionVectors, names []string) error {
	s, err := lab.BatchSheet(ctx, a, "VALIDATION")
	if err != nil {
		return err
	}
	j, err := trial.NewJudge(s.Batch.Programme, s.Batch.Category)
	if err != nil {
		return err
	}
	c.same("movements", len(s.Movements), len(names))
	for i, name := range names[:min(len(names), len(s.Movements))] {
		var r trial.Result
		j.Rates(s.Movements[i].Rates, &r)
		c.criteria(name, j, &r, v.Vectors[name].Criteria, v.Vectors[name].Cat1)
	}
	return nil
}
