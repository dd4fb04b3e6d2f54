package migrations

import (
	"context"
	"embed"
	"errors"
	"fmt"
	"path"
	"slices"

	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgconn"
	"github.com/jackc/pgx/v5/stdlib"
	"github.com/pressly/goose/v3"
	"github.com/pressly/goose/v3/lock"
)

// Files are the migrations, NNNNN_name.sql.
//
//go:embed *.sql
var Files embed.FS

// table notes which migrations a database has had. Everybody may read it, only the owner writes.
const table = "rh.schema_version"

// alone, before other statements of one call, lets programs that start at once through one by one:
// even IF NOT EXISTS fails for the second of two that run together.
const alone = "SELECT pg_advisory_xact_lock(hashtext('" + table + "')); "

// Querier is a pool, connection or transaction.
type Querier interface {
	QueryRow(ctx context.Context, sql string, args ...any) pgx.Row
}

// Up applies what the database still lacks, each file in its own transaction, and returns the names
// of the files it applied. ownerDSN must log in as the schema's owner. Several programs may call it
// at once: one works, the others wait and find nothing to do.
func Up(ctx context.Context, ownerDSN string) (applied []string, err error) {
	config, err := pgx.ParseConfig(ownerDSN)
	if err != nil {
		return nil, fmt.Errorf("migrations: the owner's connection string: %w", err)
	}
	db := stdlib.OpenDB(*config)
	defer func() { err = errors.Join(err, db.Close()) }()
	if _, err := db.ExecContext(ctx, alone+"CREATE SCHEMA IF NOT EXISTS rh"); err != nil {
		return nil, fmt.Errorf("migrations: the schema rh: %w", err)
	}
	locker, err := lock.NewPostgresSessionLocker(lock.WithLockTimeout(1, 600)) // try each second for ten minutes
	if err != nil {
		return nil, err
	}
	provider, err := goose.NewProvider(goose.DialectPostgres, db, Files,
		goose.WithTableName(table), goose.WithSessionLocker(locker), goose.WithDisableGlobalRegistry(true))
	if err != nil {
		return nil, fmt.Errorf("migrations: %w", err)
	}
	results, err := provider.Up(ctx)
	for _, r := range results {
		applied = append(applied, path.Base(r.Source.Path))
	}
	if err != nil {
		return applied, fmt.Errorf("migrations: %w", err)
	}
	// A migration may have granted rights on all tables of the schema; this one is only for looking.
	_, err = db.ExecContext(ctx, alone+"REVOKE ALL ON "+table+" FROM rh_app, rh_read; GRANT SELECT ON "+table+" TO rh_app, rh_read")
	return applied, err
}

// Current returns nil when the database has had exactly the migrations of this program, and an error
// that says what to do when it has had fewer or more. Any of the house's roles may ask.
func Current(ctx context.Context, q Querier) error {
	want, err := versions()
	if err != nil {
		return err
	}
	var had []int64
	err = q.QueryRow(ctx, "SELECT coalesce(array_agg(version_id ORDER BY version_id), '{}') FROM "+table+" WHERE is_applied AND version_id > 0").Scan(&had)
	if said, ok := errors.AsType[*pgconn.PgError](err); ok && (said.Code == "42P01" || said.Code == "3F000") {
		return errors.New("the database has no schema yet: run 'ratehouse migrate'")
	}
	if err != nil {
		return fmt.Errorf("migrations: reading the schema's version: %w", err)
	}
	return compare(had, want)
}

func compare(had, want []int64) error {
	for _, v := range want {
		if !slices.Contains(had, v) {
			return fmt.Errorf("the database lacks migration %d of this program: make a backup, then run 'ratehouse migrate'", v)
		}
	}
	for _, v := range had {
		if !slices.Contains(want, v) {
			return fmt.Errorf("the database has migration %d, which this program does not know: it was used by a newer version; start that one", v)
		}
	}
	return nil
}

// versions lists the numbers of the embedded files in order.
func versions() ([]int64, error) {
	entries, err := Files.ReadDir(".")
	if err != nil {
		return nil, err
	}
	var all []int64
	for _, e := range entries {
		v, err := goose.NumericComponent(e.Name())
		if err != nil {
			return nil, fmt.Errorf("migrations: %w", err)
		}
		all = append(all, v)
	}
	slices.Sort(all)
	return all, nil
}
