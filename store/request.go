package store

import (
	"bytes"
	"context"
	"fmt"
	"time"

	"github.com/jackc/pgx/v5"

	"ratehouse/store/rows"
)

// Request is a call that its sender may repeat under the same key, because it does not know whether
// the first one arrived. The verb it leads to is done once: its transaction notes the key, so that
// neither a crash nor two calls at the same moment can do it twice.
type Request struct {
	Key   string // chosen by the sender, unique among its calls
	Route string // what was called
	Hash  []byte // SHA-256 of the body
}

// Repeat is the error of a call that was done before: it answers what the first one answered.
// Status is 0 when the program died before it noted its answer; the deed is done all the same.
type Repeat struct {
	Status int
	Answer string
}

// Error says that nothing was done now.
func (r *Repeat) Error() string { return "done before under the same key" }

// requestsKept is how long a key is remembered.
const requestsKept = 30 * 24 * time.Hour

type requestKey struct{}

// WithRequest makes the one verb called with the context be done once for the request.
func WithRequest(ctx context.Context, r Request) context.Context {
	return context.WithValue(ctx, requestKey{}, r)
}

// Answered notes what a call under a key answered, for its repetitions.
func (l *Lab) Answered(ctx context.Context, a Actor, key string, status int, answer string) error {
	if err := rows.AnswerRequest(ctx, l.pool, a.Account, key, int16(status), answer, l.Now().Add(-requestsKept)); err != nil {
		return fmt.Errorf("note the answer: %w", err)
	}
	return nil
}

// once is a request on its way through a verb.
type once struct {
	Request
	locked bool
	before []rows.Request
}

func onceIn(ctx context.Context) *once {
	if r, ok := ctx.Value(requestKey{}).(Request); ok {
		return &once{Request: r}
	}
	return nil
}

// look asks, in the trip that begins the transaction, whether the call is under way or done.
func (o *once) look(b *pgx.Batch, a Actor) {
	rows.LockRequest(b, &o.locked, &o.before, a.Account, o.Key)
}

// check lets the first call through and answers the others.
func (o *once) check() error {
	switch {
	case !o.locked:
		return failure(KindConflict, "request_under_way", "key", o.Key)
	case len(o.before) == 0:
		return nil
	case o.before[0].Route != o.Route || !bytes.Equal(o.before[0].BodyHash, o.Hash):
		return failure(KindInvalid, "key_reused", "key", o.Key)
	}
	return &Repeat{Status: int(value(o.before[0].Status)), Answer: value(o.before[0].Answer)}
}
