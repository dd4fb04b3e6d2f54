package web

import (
	"context"
	"errors"
	"fmt"
	"net"
	"net/http"
	"time"
)

// The time limits of the server. A request may take writeWithin; Serve gives those under way a little
// more when it ends, so that none that was begun is cut off.
const (
	headersWithin  = 10 * time.Second
	readWithin     = 60 * time.Second
	writeWithin    = 60 * time.Second
	idleWithin     = 120 * time.Second
	shutdownWithin = 65 * time.Second
)

// Serve answers on the listener until ctx ends, then lets the requests under way finish and returns
// nil. The error is a listener that broke, or requests that did not end in time.
func Serve(ctx context.Context, ln net.Listener, h http.Handler) error {
	srv := &http.Server{Handler: h, ReadHeaderTimeout: headersWithin, ReadTimeout: readWithin, WriteTimeout: writeWithin, IdleTimeout: idleWithin}
	failed := make(chan error, 1)
	go func() { failed <- srv.Serve(ln) }()
	select {
	case err := <-failed:
		return fmt.Errorf("serve %s: %w", ln.Addr(), err)
	case <-ctx.Done():
	}
	// The requests under way outlive ctx: they are what is waited for.
	end, cancel := context.WithTimeout(context.WithoutCancel(ctx), shutdownWithin)
	defer cancel()
	if err := srv.Shutdown(end); err != nil {
		return fmt.Errorf("shut down: %w", errors.Join(err, srv.Close()))
	}
	return nil
}
