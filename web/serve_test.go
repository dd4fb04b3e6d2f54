package web

import (
	"context"
	"net"
	"net/http"
	"sync"
	"testing"
	"time"
)

// noted tells when its listener was closed: the server has begun to end.
type noted struct {
	net.Listener
	once   sync.Once
	closed chan struct{}
}

func (n *noted) Close() error {
	n.once.Do(func() { close(n.closed) })
	return n.Listener.Close()
}

func TestRequestUnderWayIsFinished(t *testing.T) {
	t.Parallel()
	ln, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	begun, goOn := make(chan struct{}), make(chan struct{})
	h := http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		close(begun)
		<-goOn
		if r.Context().Err() == nil {
			w.WriteHeader(http.StatusOK)
		} else {
			w.WriteHeader(http.StatusServiceUnavailable)
		}
	})
	closed := &noted{Listener: ln, closed: make(chan struct{})}
	ctx, cancel := context.WithCancel(t.Context())
	ended := make(chan error, 1)
	go func() { ended <- Serve(ctx, closed, h) }()
	status := make(chan int, 1)
	go func() {
		res, err := http.Get("http://" + ln.Addr().String())
		if err != nil {
			status <- 0
			return
		}
		res.Body.Close()
		status <- res.StatusCode
	}()
	<-begun
	cancel()
	<-closed.closed
	select { // a wrong Serve returns at once; a right one cannot, so the wait never fails it
	case err := <-ended:
		t.Fatalf("Serve returned %v with a request under way", err)
	case <-time.After(50 * time.Millisecond):
	}
	close(goOn)
	if got := <-status; got != 200 {
		t.Errorf("the request under way got %d, want 200", got)
	}
	if err := <-ended; err != nil {
		t.Errorf("Serve returned %v, want nil", err)
	}
	if _, err := ln.Accept(); err == nil {
		t.Error("the listener still takes connections")
	}
}

func TestBrokenListener(t *testing.T) {
	t.Parallel()
	ln, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	ln.Close()
	if err := Serve(t.Context(), ln, http.NotFoundHandler()); err == nil {
		t.Error("a broken listener gave no error")
	}
}
