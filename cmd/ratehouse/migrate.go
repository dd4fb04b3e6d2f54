package main

import (
	"context"
	"errors"
	"fmt"
	"io"

	"github.com/jackc/pgx/v5"

	"ratehouse/migrations"
	"ratehouse/store/cluster"
)

func migrateFlags(w io.Writer) {
	fmt.Fprint(w, "Usage: ratehouse migrate [settings]\n\nBrings the schema of an outside database up to date, as the role that owns it.\n"+
		"The private database needs no call: serve migrates it by itself. Make a backup first.\n")
	listSettings(w, databaseSettings())
}

// runMigrate brings the database up to date and says what it did.
func runMigrate(ctx context.Context, p program, args []string) int {
	var c config
	flags := flagsOf(p, "migrate", &c, databaseSettings())
	flags.Usage = func() { migrateFlags(p.stderr) }
	if code, ok := parsed(flags.Parse(args)); !ok {
		return code
	}
	if err := c.check(); err != nil {
		return p.fail("migrate", err)
	}
	applied, err := migrate(ctx, p, &c)
	for _, name := range applied {
		fmt.Fprintf(p.stdout, "applied %s\n", name)
	}
	if err != nil {
		return p.fail("migrate", err)
	}
	if len(applied) == 0 {
		fmt.Fprintln(p.stdout, "the database is up to date")
	}
	return exitDone
}

func migrate(ctx context.Context, p program, c *config) ([]string, error) {
	switch {
	case c.OwnerURL != "":
		if err := checkRoles(ctx, c.OwnerURL); err != nil {
			return nil, err
		}
		return migrations.Up(ctx, c.OwnerURL)
	case !c.private():
		return nil, errors.New("DATABASE_OWNER_URL is missing: the application role of DATABASE_URL may not change the schema")
	}
	d, err := openDatabase(ctx, c, quietLog(p))
	if err != nil {
		return nil, err
	}
	return d.applied, d.close(ctx)
}

// checkRoles finds out beforehand what the first migration would only stumble over.
func checkRoles(ctx context.Context, owner string) (err error) {
	conn, err := pgx.Connect(ctx, owner)
	if err != nil {
		return fmt.Errorf("the database does not answer: %w", err)
	}
	defer func() { err = errors.Join(err, conn.Close(context.WithoutCancel(ctx))) }()
	for _, role := range []string{cluster.App, cluster.Read} {
		var have bool
		if err := conn.QueryRow(ctx, `SELECT EXISTS (SELECT FROM pg_roles WHERE rolname = $1)`, role).Scan(&have); err != nil {
			return err
		}
		if !have {
			return fmt.Errorf("the database server has no role %s: let its superuser run CREATE ROLE %s LOGIN PASSWORD '...'", role, role)
		}
	}
	return nil
}
