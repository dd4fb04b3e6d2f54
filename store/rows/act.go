package rows

import (
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
)

// Act is one entry of the journal: who did what, and the canonical text of it.
type Act struct {
	ID        uuid.UUID
	Site      int16
	At        time.Time
	Actor     uuid.UUID
	Via       string
	Verb      string
	Batch     *uuid.UUID
	Reason    *string
	Body      any    // made canonical at commit
	Canonical string // the text that is stored and hashed
}

// QueueAct records the act and puts it into the outbox that the drain empties.
func QueueAct(b *pgx.Batch, a Act) {
	b.Queue(`INSERT INTO act (id, site, at, actor, via, verb, batch, reason, body)
		VALUES ($1, $2, $3, $4, $5, $6, $7, $8, $9)`,
		a.ID, a.Site, a.At, a.Actor, a.Via, a.Verb, a.Batch, a.Reason, a.Canonical)
	b.Queue(`INSERT INTO to_seal (act) VALUES ($1)`, a.ID)
}
