package cluster

import (
	"context"
	"errors"
	"fmt"

	"github.com/jackc/pgx/v5"
)

// EnsureDatabase makes the database if it is missing, owned by Owner.
func (c *Cluster) EnsureDatabase(ctx context.Context, name string) error {
	return c.asSuperuser(ctx, func(conn *pgx.Conn) error {
		have, err := exists(ctx, conn, `SELECT EXISTS (SELECT FROM pg_database WHERE datname = $1)`, name)
		if err != nil || have {
			return err
		}
		_, err = conn.Exec(ctx, "CREATE DATABASE "+pgx.Identifier{name}.Sanitize()+" OWNER "+Owner)
		return err
	})
}

// KeepOnly drops the databases whose name begins with prefix, all but the one named keep.
func (c *Cluster) KeepOnly(ctx context.Context, prefix, keep string) error {
	return c.asSuperuser(ctx, func(conn *pgx.Conn) error {
		rows, err := conn.Query(ctx, `SELECT datname FROM pg_database WHERE starts_with(datname, $1) AND datname <> $2`, prefix, keep)
		if err != nil {
			return err
		}
		names, err := pgx.CollectRows(rows, pgx.RowTo[string])
		if err != nil {
			return err
		}
		for _, name := range names {
			if _, err := conn.Exec(ctx, "DROP DATABASE "+pgx.Identifier{name}.Sanitize()+" WITH (FORCE)"); err != nil {
				return err
			}
		}
		return nil
	})
}

// ensureRoles makes the login roles; whether one may log in is decided by the socket (writeAccess).
func (c *Cluster) ensureRoles(ctx context.Context) error {
	return c.asSuperuser(ctx, func(conn *pgx.Conn) error {
		for _, role := range []string{Owner, App, Read} {
			have, err := exists(ctx, conn, `SELECT EXISTS (SELECT FROM pg_roles WHERE rolname = $1)`, role)
			if err != nil {
				return err
			}
			if !have {
				if _, err := conn.Exec(ctx, "CREATE ROLE "+role+" LOGIN"); err != nil {
					return err
				}
			}
		}
		return nil
	})
}

func (c *Cluster) asSuperuser(ctx context.Context, work func(*pgx.Conn) error) error {
	conn, err := pgx.Connect(ctx, c.DSN(Superuser, "postgres"))
	if err != nil {
		return fmt.Errorf("private database: %w", err)
	}
	return errors.Join(work(conn), conn.Close(context.WithoutCancel(ctx)))
}

func exists(ctx context.Context, conn *pgx.Conn, query, name string) (bool, error) {
	var have bool
	err := conn.QueryRow(ctx, query, name).Scan(&have)
	return have, err
}
