package rows

import (
	"context"
	"fmt"

	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgconn"
)

// Reader is a pool, a connection or a transaction: whatever can answer a query.
type Reader interface {
	Query(ctx context.Context, sql string, args ...any) (pgx.Rows, error)
	QueryRow(ctx context.Context, sql string, args ...any) pgx.Row
	Exec(ctx context.Context, sql string, args ...any) (pgconn.CommandTag, error)
	SendBatch(ctx context.Context, b *pgx.Batch) pgx.BatchResults
}

// Run sends a batch of reads as one round trip; what it read is in the variables it was queued with.
func Run(ctx context.Context, db Reader, b *pgx.Batch) error {
	return db.SendBatch(ctx, b).Close()
}

// list queues a query whose rows become into; columns must match T's fields by name.
func list[T any](b *pgx.Batch, into *[]T, sql string, args ...any) {
	b.Queue(sql, args...).Query(func(r pgx.Rows) error {
		got, err := pgx.CollectRows(r, pgx.RowToStructByName[T])
		*into = got
		return err
	})
}

// collect runs one query whose rows become values of T by column name.
func collect[T any](ctx context.Context, db Reader, sql string, args ...any) ([]T, error) {
	r, err := db.Query(ctx, sql, args...)
	if err != nil {
		return nil, err
	}
	return pgx.CollectRows(r, pgx.RowToStructByName[T])
}

// one runs a query that must give exactly one row; pgx.ErrNoRows otherwise.
func one[T any](ctx context.Context, db Reader, sql string, args ...any) (T, error) {
	r, err := db.Query(ctx, sql, args...)
	if err != nil {
		var zero T
		return zero, err
	}
	v, err := pgx.CollectExactlyOneRow(r, pgx.RowToStructByName[T])
	if err != nil {
		return v, fmt.Errorf("one row: %w", err)
	}
	return v, nil
}
