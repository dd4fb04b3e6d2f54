package store

import (
	"context"
	"encoding/json"
	"fmt"
	"log/slog"
	"sync"
	"time"

	"github.com/jackc/pgx/v5"
)

// listenPause is how long the listener waits before it asks a database again that did not answer.
const listenPause = time.Second

// hub tells who looks at a batch that it changed. The zero value has nobody.
type hub struct {
	mu       sync.Mutex
	watchers map[chan struct{}]string // the code they watch
}

// watch returns a channel that gets something after the batch changed; several changes may come as
// one. The caller ends it with done.
func (h *hub) watch(code string) (changed <-chan struct{}, done func()) {
	ch := make(chan struct{}, 1)
	h.mu.Lock()
	defer h.mu.Unlock()
	if h.watchers == nil {
		h.watchers = map[chan struct{}]string{}
	}
	h.watchers[ch] = code
	return ch, func() {
		h.mu.Lock()
		defer h.mu.Unlock()
		delete(h.watchers, ch)
	}
}

// tell passes a notice on: the codes of the batches that changed, or "*" for any of them.
func (h *hub) tell(codes ...string) {
	named := map[string]bool{}
	for _, c := range codes {
		named[c] = true
	}
	h.mu.Lock()
	defer h.mu.Unlock()
	for ch, code := range h.watchers {
		if named["*"] || named[code] {
			select {
			case ch <- struct{}{}:
			default: // it has not yet seen the last one
			}
		}
	}
}

// WatchBatch returns a channel that gets something after the batch changed, wherever that was done,
// while RunListener runs; done ends it.
func (l *Lab) WatchBatch(code string) (changed <-chan struct{}, done func()) {
	return l.live.watch(code)
}

// RunListener hears what the drain of any process tells and passes it on, until ctx ends. It has one
// connection of its own, outside the pool. After a break everybody is told: nobody knows what was missed.
func (l *Lab) RunListener(ctx context.Context, log *slog.Logger) {
	for {
		err := l.listen(ctx)
		if ctx.Err() != nil {
			return
		}
		log.Error("listener", "error", err)
		select {
		case <-ctx.Done():
			return
		case <-time.After(listenPause):
		}
	}
}

func (l *Lab) listen(ctx context.Context) error {
	conn, err := pgx.ConnectConfig(ctx, l.pool.Config().ConnConfig)
	if err != nil {
		return fmt.Errorf("connect: %w", err)
	}
	defer conn.Close(context.WithoutCancel(ctx)) //nolint:errcheck // nothing is lost with it
	if _, err := conn.Exec(ctx, "LISTEN "+Channel); err != nil {
		return err
	}
	l.live.tell("*")
	for {
		n, err := conn.WaitForNotification(ctx)
		if err != nil {
			return err
		}
		var codes []string
		if json.Unmarshal([]byte(n.Payload), &codes) != nil {
			codes = []string{"*"}
		}
		l.live.tell(codes...)
	}
}
