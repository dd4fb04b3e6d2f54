package web

import (
	"sync"
	"time"
)

const (
	triesFree = 5                // attempts before anybody waits
	triesSpan = 15 * time.Minute // in which they are counted
	triesMost = 10_000           // accounts and addresses remembered at once
)

// tries slows down whoever guesses passwords: after five failures of one account from one address
// within a quarter of an hour that pair waits until the quarter of an hour is over. It lives in
// memory: a restart forgives. When it is full the oldest pair is forgotten, so that it cannot be made
// to grow.
type tries struct {
	now  func() time.Time
	mu   sync.Mutex
	seen map[string]*failures
}

type failures struct {
	n     int
	first time.Time
}

func newTries(now func() time.Time) *tries { return &tries{now: now, seen: map[string]*failures{}} }

// wait is how long the pair still has to wait, 0 if it may try.
func (t *tries) wait(key string) time.Duration {
	t.mu.Lock()
	defer t.mu.Unlock()
	f := t.seen[key]
	if f == nil || f.n < triesFree {
		return 0
	}
	return max(f.first.Add(triesSpan).Sub(t.now()), 0)
}

func (t *tries) failed(key string) {
	t.mu.Lock()
	defer t.mu.Unlock()
	now := t.now()
	f := t.seen[key]
	if f == nil || now.Sub(f.first) >= triesSpan {
		if f == nil && len(t.seen) >= triesMost {
			t.forgetOldest()
		}
		f = &failures{first: now}
		t.seen[key] = f
	}
	f.n++
}

func (t *tries) succeeded(key string) {
	t.mu.Lock()
	defer t.mu.Unlock()
	delete(t.seen, key)
}

func (t *tries) forgetOldest() {
	oldest := ""
	for k, f := range t.seen {
		if oldest == "" || f.first.Before(t.seen[oldest].first) {
			oldest = k
		}
	}
	delete(t.seen, oldest)
}
