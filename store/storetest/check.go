package storetest

import (
	"testing"

	"github.com/jackc/pgx/v5"
)

// Count is how many rows a table holds.
func (h *House) Count(t testing.TB, table string) int {
	t.Helper()
	var n int
	h.query(t, "SELECT count(*) FROM rh."+pgx.Identifier{table}.Sanitize(), &n)
	return n
}

// CheckSeries wants the working series to be what the log says, element by element.
func (h *House) CheckSeries(t testing.TB) {
	t.Helper()
	var wrong int
	h.query(t, `WITH last AS (
			SELECT DISTINCT ON (batch, no, step, kind) batch, no, step, kind, nth, value, code FROM rh.reading WHERE kind <= 3
			ORDER BY batch, no, step, kind, nth DESC),
		told AS (
			SELECT s.batch, s.no, (i - 1) AS step, k.kind, k.nth, k.value
			FROM rh.series s, generate_subscripts(s.rate, 1) i,
			LATERAL (VALUES (1, s.rate_nth[i], s.rate[i]), (2, s.found_nth[i], s.found[i]), (3, s.left_nth[i], s.as_left[i])) k(kind, nth, value))
		SELECT count(*) FROM last FULL JOIN (SELECT * FROM told WHERE nth > 0) told USING (batch, no, step, kind)
		WHERE last.nth IS DISTINCT FROM told.nth OR last.value IS DISTINCT FROM told.value`, &wrong)
	if wrong > 0 {
		t.Errorf("%d elements of the series differ from the log", wrong)
	}
}

func (h *House) query(t testing.TB, sql string, into *int) {
	t.Helper()
	conn, err := pgx.Connect(t.Context(), h.DB.Owner)
	if err != nil {
		t.Fatal(err)
	}
	defer conn.Close(t.Context())
	if err := conn.QueryRow(t.Context(), sql).Scan(into); err != nil {
		t.Fatal(err)
	}
}
