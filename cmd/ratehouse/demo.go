package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"net"
	"path/filepath"
	"time"
	_ "time/tzdata" // the house's time zone, on machines without a zone table

	"ratehouse/store"
	"ratehouse/store/proof"
)

func demoFlags(w io.Writer) {
	fmt.Fprint(w, "Usage: ratehouse demo [settings]\n\nServes an invented laboratory on loopback, with batches relative to today. It keeps its own folder 'demo'\n"+
		"under -data, marks every paper DEMONSTRATION and signs with a throw-away key. Passwords are printed at start.\n")
	listSettings(w, settings())
}

// runDemo serves the invented laboratory, made anew on every day it is started.
func runDemo(ctx context.Context, p program, args []string) int {
	s := service{program: p, log: quietLog(p)}
	flags := flagsOf(p, "demo", &s.config, settings())
	flags.Usage = func() { demoFlags(p.stderr) }
	if err := flags.Parse(args); err != nil {
		return exitUsage
	}
	if err := errors.Join(s.config.check(), s.checkDemo()); err != nil {
		return p.fail("demo", err)
	}
	if err := s.runDemo(ctx); err != nil {
		return p.fail("demo", err)
	}
	return exitDone
}

// checkDemo keeps a demonstration away from real data and from the network.
func (s *service) checkDemo() error {
	if !s.private() {
		return errors.New("DATABASE_URL is set, and a demonstration keeps its own database: unset it, or use 'ratehouse serve'")
	}
	host, _, err := net.SplitHostPort(s.Addr)
	if err != nil {
		return err
	}
	if ip := net.ParseIP(host); host != "localhost" && (ip == nil || !ip.IsLoopback()) {
		return fmt.Errorf("RATEHOUSE_ADDR is %s: a demonstration shows its passwords, so it listens on loopback only, like 127.0.0.1:8080", s.Addr)
	}
	s.Data = filepath.Join(s.Data, "demo")
	return nil
}

func (s *service) runDemo(ctx context.Context) (err error) {
	now := time.Now()
	s.name = "demo_" + now.In(demoZone()).Format("20060102")
	d, err := openDatabase(ctx, &s.config, s.log)
	if err != nil {
		return err
	}
	defer func() { err = errors.Join(err, d.close(ctx)) }()
	if d.cluster == nil {
		return fmt.Errorf("a demonstration runs already on the folder %s", s.Data)
	}
	if err := d.cluster.KeepOnly(ctx, "demo_", s.name); err != nil {
		return err
	}
	key, err := proof.GenerateKey()
	if err != nil {
		return err
	}
	if err := s.buildDemo(ctx, d, key, now); err != nil {
		return err
	}
	lab, err := d.openLab(ctx, &s.config, key)
	if err != nil {
		return err
	}
	defer lab.Close()
	lab.ShowAccounts(demoAccounts())
	for _, a := range demoAccounts() {
		fmt.Fprintf(s.stdout, "log in as %-12s password %s\n", a.Name, a.Password)
	}
	return s.serve(ctx, lab, d.done())
}

// buildDemo fills the database with the laboratory's own verbs, unless it is full already; what was
// left half made is made anew.
func (s *service) buildDemo(ctx context.Context, d *database, key proof.Key, now time.Time) error {
	lab, err := d.openLab(ctx, &s.config, key)
	if err != nil {
		return err
	}
	house := lab.House()
	_, missing := lab.Batch(ctx, store.Program, demoLast)
	empty := house.Title == "Ratehouse" && !house.Demo
	lab.Close()
	switch {
	case missing == nil && house.Demo:
		return nil
	case missing == nil || !house.Demo && !empty:
		return errors.New("this database holds something else than a demonstration: give the demonstration another folder with -data")
	case store.KindOf(missing) != store.KindNotFound:
		return missing
	case !empty:
		if err := d.anew(ctx, &s.config); err != nil {
			return err
		}
	}
	fmt.Fprintln(s.stdout, "making the invented laboratory ...")
	return (&demo{now: now, key: key}).build(ctx, d.app)
}
