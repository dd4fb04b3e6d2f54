package store_test

import (
	"context"
	"errors"
	"sync"
	"testing"

	"github.com/jackc/pgx/v5"

	"ratehouse/store"
	"ratehouse/store/storetest"
)

func under(ctx context.Context, key, route, body string) context.Context {
	return store.WithRequest(ctx, store.Request{Key: key, Route: route, Hash: []byte(body)})
}

func wantCode(t *testing.T, err error, code string) {
	t.Helper()
	if e, ok := errors.AsType[*store.Error](err); !ok || e.Code != code {
		t.Errorf("got %v, want %s", err, code)
	}
}

func wantRepeat(t *testing.T, err error, want store.Repeat) {
	t.Helper()
	if r, ok := errors.AsType[*store.Repeat](err); !ok || *r != want {
		t.Errorf("got %v (%+v), want the repeat %+v", err, r, want)
	}
}

func TestRequestIsDoneOnce(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	add := func(a store.Actor, key, route, body string) error {
		_, err := h.AddDepositor(under(t.Context(), key, route, body), a, store.Depositor{Code: "KESTWICK", Title: "Kestwick"})
		return err
	}
	if err := add(h.Lead, "k1", "r", "b"); err != nil {
		t.Fatal(err)
	}
	wantRepeat(t, add(h.Lead, "k1", "r", "b"), store.Repeat{})
	if err := h.Answered(t.Context(), h.Lead, "k1", 201, `{"code": "KESTWICK"}`); err != nil {
		t.Fatal(err)
	}
	wantRepeat(t, add(h.Lead, "k1", "r", "b"), store.Repeat{Status: 201, Answer: `{"code": "KESTWICK"}`})
	wantCode(t, add(h.Lead, "k1", "r", "c"), "key_reused")
	wantCode(t, add(h.Lead, "k1", "s", "b"), "key_reused")
	// The key is the sender's own; another sender and another key are other calls.
	wantCode(t, add(h.Manager, "k1", "r", "b"), "depositor_code_taken")
	wantCode(t, add(h.Lead, "k2", "r", "b"), "depositor_code_taken")
	// What was refused is not done, so its key can be used once it is put right.
	_, err := h.AddDepositor(under(t.Context(), "k2", "r", "b2"), h.Lead, store.Depositor{Code: "ORLEY", Title: "Orley"})
	if err != nil {
		t.Error(err)
	}
}

func TestRequestUnderWay(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	conn, err := pgx.Connect(t.Context(), h.DB.App)
	if err != nil {
		t.Fatal(err)
	}
	defer conn.Close(context.WithoutCancel(t.Context()))
	if _, err := conn.Exec(t.Context(), `SELECT pg_advisory_lock(7, hashtext($1))`, h.Lead.Account.String()+" k"); err != nil {
		t.Fatal(err)
	}
	add := func() error {
		_, err := h.AddDepositor(under(t.Context(), "k", "r", "b"), h.Lead, store.Depositor{Code: "KESTWICK", Title: "Kestwick"})
		return err
	}
	wantCode(t, add(), "request_under_way")
	if _, err := conn.Exec(t.Context(), `SELECT pg_advisory_unlock_all()`); err != nil {
		t.Fatal(err)
	}
	if err := add(); err != nil {
		t.Errorf("after the other one broke off: %v", err)
	}
}

// Whoever comes at the same moment is told to wait or that it is done, never that the code is taken.
func TestRequestRace(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	errs := make([]error, 16)
	var wg sync.WaitGroup
	for i := range errs {
		wg.Go(func() {
			_, errs[i] = h.AddDepositor(under(t.Context(), "k", "r", "b"), h.Lead, store.Depositor{Code: "KESTWICK", Title: "Kestwick"})
		})
	}
	wg.Wait()
	done := 0
	for _, err := range errs {
		_, repeat := errors.AsType[*store.Repeat](err)
		e, _ := errors.AsType[*store.Error](err)
		switch {
		case err == nil:
			done++
		case !repeat && (e == nil || e.Code != "request_under_way"):
			t.Errorf("got %v", err)
		}
	}
	if done != 1 {
		t.Errorf("done %d times", done)
	}
}
