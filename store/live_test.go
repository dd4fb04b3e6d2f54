package store_test

import (
	"context"
	"log/slog"
	"testing"

	"ratehouse/store/storetest"
)

// Who watches a batch hears of it once the drain has told, and of no other.
func TestWatchBatch(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 1)
	h.Batch(t, "26-002", 1)
	drain(t, h)
	mine, done := h.WatchBatch("26-001")
	defer done()
	other, doneOther := h.WatchBatch("26-002")
	defer doneOther()
	ctx, stop := context.WithCancel(t.Context())
	ended := make(chan struct{})
	go func() { defer close(ended); h.RunListener(ctx, slog.New(slog.DiscardHandler)) }()
	<-mine // what was told before it listened may have been missed, so everybody is told
	<-other
	h.MustSave(t, h.Technician, h.Rate("26-001", 1, 1, "1.5"))
	drain(t, h)
	<-mine
	h.MustSave(t, h.Technician, h.Rate("26-002", 1, 1, "1.5"))
	drain(t, h)
	<-other
	select {
	case <-mine:
		t.Error("who watches one batch hears of another")
	default:
	}
	stop()
	<-ended
}

func drain(t *testing.T, h *storetest.House) {
	t.Helper()
	if _, err := h.Drain(t.Context()); err != nil {
		t.Fatal(err)
	}
}
