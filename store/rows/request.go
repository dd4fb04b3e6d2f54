package rows

import (
	"context"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
)

// requestLocks keeps the advisory locks of requests apart from all others.
const requestLocks = 7

// Request is a call made under a key that its sender chose.
type Request struct {
	Route    string
	BodyHash []byte
	Status   *int16 // nil: done, but the program died before it noted what it answered
	Answer   *string
}

// LockRequest queues the lock on one sender's key until the transaction ends; locked stays false if
// another transaction holds it. into has the row of the call already made under the key, or none.
func LockRequest(b *pgx.Batch, locked *bool, into *[]Request, actor uuid.UUID, key string) {
	b.Queue(`SELECT pg_try_advisory_xact_lock($1, hashtext($2))`, requestLocks, actor.String()+" "+key).QueryRow(func(r pgx.Row) error { return r.Scan(locked) })
	list(b, into, `SELECT route, body_hash, status, answer FROM request WHERE actor = $1 AND key = $2`, actor, key)
}

// QueueRequest notes that the call was done, in the transaction that did it.
func QueueRequest(b *pgx.Batch, actor uuid.UUID, key, route string, hash []byte, at time.Time) {
	b.Queue(`INSERT INTO request (actor, key, route, body_hash, at) VALUES ($1, $2, $3, $4, $5)`, actor, key, route, hash, at)
}

// AnswerRequest notes what was answered, and forgets what the sender did before the given time.
func AnswerRequest(ctx context.Context, db Reader, actor uuid.UUID, key string, status int16, answer string, forget time.Time) error {
	b := &pgx.Batch{}
	b.Queue(`UPDATE request SET status = $3, answer = $4 WHERE actor = $1 AND key = $2 AND status IS NULL`, actor, key, status, answer)
	b.Queue(`DELETE FROM request WHERE actor = $1 AND at < $2`, actor, forget)
	return Run(ctx, db, b)
}
