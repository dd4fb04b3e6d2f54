package main

import (
	"context"
	"crypto/tls"
	"errors"
	"fmt"
	"io"
	"log/slog"
	"net"
	"net/http"
	"sync"
	"time"

	"github.com/jackc/pgx/v5"
	"github.com/prometheus/client_golang/prometheus"
	"github.com/prometheus/client_golang/prometheus/collectors"
	"github.com/prometheus/client_golang/prometheus/promhttp"

	"ratehouse/store"
	"ratehouse/web"
)

func serveFlags(w io.Writer) {
	fmt.Fprint(w, "Usage: ratehouse serve [settings]\n\nPrints 'listening on http://HOST:PORT' when it is ready to answer. Ends on SIGINT or SIGTERM, after the\n"+
		"requests under way; a second signal ends it at once.\n")
	listSettings(w, settings())
	fmt.Fprint(w, "  -grace\n        how long /readyz says no before the listener closes, behind a load balancer (0s)\n")
}

// runServe runs the web service until the program is asked to end.
func runServe(ctx context.Context, p program, args []string) int {
	var s service
	flags := flagsOf(p, "serve", &s.config, settings())
	flags.DurationVar(&s.grace, "grace", 0, "")
	flags.Usage = func() { serveFlags(p.stderr) }
	if code, ok := parsed(flags.Parse(args)); !ok {
		return code
	}
	s.program, s.log = p, slog.New(slog.NewTextHandler(p.stderr, nil))
	if err := s.config.check(); err != nil {
		return p.fail("serve", err)
	}
	s.log.Info("configuration", "config", s.config)
	if err := s.run(ctx); err != nil {
		return p.fail("serve", err)
	}
	return exitDone
}

// service is one running laboratory.
type service struct {
	program
	config
	log   *slog.Logger
	grace time.Duration
}

// run opens everything in order and closes it in the reverse one.
func (s *service) run(ctx context.Context) (err error) {
	d, err := openDatabase(ctx, &s.config, s.log)
	if err != nil {
		return err
	}
	defer func() { err = errors.Join(err, d.close(ctx)) }()
	if s.private() && d.cluster == nil {
		return fmt.Errorf("the folder %s is in use by another running program: stop that one first, or choose another folder", s.Data)
	}
	if err := refuseOwner(ctx, d.app); err != nil {
		return err
	}
	key, err := signingKey(s.keyFile())
	if err != nil {
		return err
	}
	lab, err := d.openLab(ctx, &s.config, key)
	if err != nil {
		return err
	}
	defer lab.Close()
	if lab.House().Demo {
		return errors.New("this database belongs to a demonstration: use 'ratehouse demo' for it, or choose another one")
	}
	if err := lab.Found(ctx, store.House{Title: "Ratehouse", Zone: time.UTC}); err != nil {
		return err
	}
	return s.serve(ctx, lab, d.done())
}

// refuseOwner keeps the service from running with rights it must not have: as a role that could
// change or remove evidence.
func refuseOwner(ctx context.Context, dsn string) (err error) {
	conn, err := pgx.Connect(ctx, dsn)
	if err != nil {
		return fmt.Errorf("the database does not answer: %w", err)
	}
	defer func() { err = errors.Join(err, conn.Close(context.WithoutCancel(ctx))) }()
	var role string
	var mighty bool
	err = conn.QueryRow(ctx, `SELECT current_user, r.rolsuper OR pg_has_role(current_user, n.nspowner, 'MEMBER')
			OR has_table_privilege('rh.reading', 'UPDATE') OR has_table_privilege('rh.reading', 'DELETE') OR has_table_privilege('rh.reading', 'TRUNCATE')
		FROM pg_roles r, pg_namespace n WHERE r.rolname = current_user AND n.nspname = 'rh'`).Scan(&role, &mighty)
	if err != nil {
		return fmt.Errorf("rights of the database role: %w", err)
	}
	if mighty {
		return fmt.Errorf("the role %s of DATABASE_URL could change or remove evidence: use the application role rh_app, and keep %s for 'ratehouse migrate'", role, role)
	}
	return nil
}

// serve answers until ctx ends or the database does.
func (s *service) serve(ctx context.Context, lab *store.Lab, dead <-chan struct{}) error {
	proxies, err := s.proxies()
	if err != nil {
		return err
	}
	stopping, metrics := make(chan struct{}), prometheus.NewRegistry()
	metrics.MustRegister(collectors.NewGoCollector(), collectors.NewProcessCollector(collectors.ProcessCollectorOpts{}))
	handler, err := web.New(web.Config{Lab: lab, Logger: s.log, BaseURL: s.URL, TrustedProxies: proxies, Stopping: stopping, Metrics: metrics})
	if err != nil {
		return err
	}
	ln, address, err := s.listen(ctx)
	if err != nil {
		return err
	}
	closeMetrics, err := s.serveMetrics(ctx, metrics)
	if err != nil {
		return errors.Join(err, ln.Close())
	}
	defer closeMetrics()
	// Requests under way outlive ctx: what is asked to end, ends what it began.
	serving, stop := context.WithCancelCause(context.WithoutCancel(ctx))
	var background sync.WaitGroup
	background.Go(func() { lab.RunDrain(serving, s.log) })
	background.Go(func() { lab.RunListener(serving, s.log) })
	background.Go(func() { s.watch(ctx, serving, dead, stopping, stop) })
	fmt.Fprintf(s.stdout, "listening on %s\n", address)
	err = web.Serve(serving, ln, handler)
	stop(nil)
	background.Wait()
	if cause := context.Cause(serving); err == nil && !errors.Is(cause, context.Canceled) {
		err = cause
	}
	return err
}

// watch ends the service: gently when it is asked to, at once when its database is gone.
func (s *service) watch(ctx, serving context.Context, dead <-chan struct{}, stopping chan<- struct{}, stop context.CancelCauseFunc) {
	gone := errors.New("the private database has ended by itself; its server.log tells why, and the next start recovers it")
	select {
	case <-serving.Done():
	case <-dead:
		stop(gone)
	case <-ctx.Done():
		s.log.Info("ending", "grace", s.grace)
		close(stopping)
		select {
		case <-time.After(s.grace):
			stop(nil)
		case <-dead:
			stop(gone)
		}
	}
}

// listen opens the address; its text is where a browser finds it.
func (s *service) listen(ctx context.Context) (net.Listener, string, error) {
	ln, err := new(net.ListenConfig).Listen(ctx, "tcp", s.Addr)
	if err != nil {
		return nil, "", fmt.Errorf("RATEHOUSE_ADDR %s: %w", s.Addr, err)
	}
	if s.TLSCert == "" {
		return ln, "http://" + ln.Addr().String(), nil
	}
	pair, err := tls.LoadX509KeyPair(s.TLSCert, s.TLSKey)
	if err != nil {
		return nil, "", errors.Join(fmt.Errorf("RATEHOUSE_TLS_CERT and RATEHOUSE_TLS_KEY: %w", err), ln.Close())
	}
	return tls.NewListener(ln, &tls.Config{Certificates: []tls.Certificate{pair}, MinVersion: tls.VersionTLS12, NextProtos: []string{"h2", "http/1.1"}}),
		"https://" + ln.Addr().String(), nil
}

// serveMetrics answers on an address of its own, so that figures are never public by mistake.
func (s *service) serveMetrics(ctx context.Context, metrics *prometheus.Registry) (closeIt func(), err error) {
	if s.MetricsAddr == "" {
		return func() {}, nil
	}
	ln, err := new(net.ListenConfig).Listen(ctx, "tcp", s.MetricsAddr)
	if err != nil {
		return nil, fmt.Errorf("RATEHOUSE_METRICS_ADDR %s: %w", s.MetricsAddr, err)
	}
	mux := http.NewServeMux()
	mux.Handle("GET /metrics", promhttp.HandlerFor(metrics, promhttp.HandlerOpts{}))
	server := &http.Server{Handler: mux, ReadHeaderTimeout: 10 * time.Second}
	go func() {
		if err := server.Serve(ln); !errors.Is(err, http.ErrServerClosed) {
			s.log.Error("metrics", "error", err)
		}
	}()
	fmt.Fprintf(s.stdout, "metrics on http://%s/metrics\n", ln.Addr())
	return func() { server.Close() }, nil
}
