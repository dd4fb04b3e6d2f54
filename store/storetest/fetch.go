package storetest

import (
	"context"
	"testing"

	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgtype"
)

// Fetcher gives a function that reads the bare series of a batch and nothing else, on a connection
// of its own: the floor that benchmarks of pages compare with. It returns how many it read.
func (h *House) Fetcher(b testing.TB) func(code string) int {
	b.Helper()
	conn, err := pgx.Connect(b.Context(), h.DB.App)
	if err != nil {
		b.Fatal(err)
	}
	b.Cleanup(func() { conn.Close(context.WithoutCancel(b.Context())) })
	type series struct {
		No                      int16
		Rate, Found, AsLeft, At []pgtype.Int4
		Code                    []pgtype.Int2
		Ended                   int16
	}
	return func(code string) int {
		rows, err := conn.Query(b.Context(), `SELECT s.no, s.rate, s.found, s.as_left, s.at_s, s.code, s.ended FROM rh.series s
			WHERE s.batch = (SELECT id FROM rh.batch WHERE code = $1) ORDER BY s.no`, code)
		if err != nil {
			b.Fatal(err)
		}
		all, err := pgx.CollectRows(rows, pgx.RowToStructByPos[series])
		if err != nil {
			b.Fatal(err)
		}
		return len(all)
	}
}
