package store

import (
	"context"
	"encoding/json"
	"fmt"
	"log/slog"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"ratehouse/store/rows"
)

// Channel is where the drain tells every process which batches changed: a JSON list of codes.
const Channel = "ratehouse_batches"

// drainPause is how long a drain waits when nobody in its process wrote anything.
const drainPause = time.Second

// drainAtOnce is how many acts one pass takes.
const drainAtOnce = 2000

// nudge tells a drain in this process that there is work; a drain elsewhere looks by itself.
func (l *Lab) nudge() {
	select {
	case l.wake <- struct{}{}:
	default:
	}
}

// RunDrain empties the outbox until ctx ends. Any process may run one: whoever gets the lock
// works, the others wait. Faults are logged and tried again.
func (l *Lab) RunDrain(ctx context.Context, log *slog.Logger) {
	tick := time.NewTicker(drainPause)
	defer tick.Stop()
	for {
		if _, err := l.Drain(ctx); err != nil && ctx.Err() == nil {
			log.Error("drain", "error", err)
		}
		select {
		case <-ctx.Done():
			return
		case <-l.wake:
		case <-tick.C:
		}
	}
}

// Drain takes what is in the outbox once: marks the summaries of touched batches stale, brings
// them up to date, and sends one notice with all batches touched. Writers never notify, because
// NOTIFY serialises commits. It returns how many acts it took; 0 when another drain is at work.
func (l *Lab) Drain(ctx context.Context) (int, error) {
	total := 0
	for {
		n, touched, err := l.drainPass(ctx)
		if err != nil {
			return total, fmt.Errorf("drain: %w", err)
		}
		for _, id := range touched {
			if err := l.summarise(ctx, id); err != nil {
				return total, fmt.Errorf("drain: %w", err)
			}
		}
		if total += n; n < drainAtOnce {
			return total, nil
		}
	}
}

func (l *Lab) drainPass(ctx context.Context) (n int, touched []uuid.UUID, err error) {
	err = pgx.BeginFunc(ctx, l.pool, func(tx pgx.Tx) error {
		free, err := rows.TryDrain(ctx, tx, l.site)
		if err != nil || !free {
			return err
		}
		acts, err := rows.TakeOutbox(ctx, tx, drainAtOnce)
		if err != nil || len(acts) == 0 {
			return err
		}
		n = len(acts)
		codes := []string{}
		seen := map[uuid.UUID]bool{}
		for _, a := range acts {
			if a.Batch != nil && !seen[*a.Batch] {
				seen[*a.Batch] = true
				touched, codes = append(touched, *a.Batch), append(codes, *a.Code)
			}
		}
		if len(touched) == 0 {
			return nil
		}
		notice, err := json.Marshal(codes)
		if err != nil {
			return err
		}
		b := &pgx.Batch{}
		rows.QueueStale(b, touched)
		rows.QueueNotice(b, Channel, notices(notice))
		return rows.Run(ctx, tx, b)
	})
	return n, touched, err
}

// notices keeps within what NOTIFY can carry: too long a list becomes "all".
func notices(list []byte) string {
	const most = 7000
	if len(list) > most {
		return `["*"]`
	}
	return string(list)
}
