package main

import (
	"context"
	"errors"
	"fmt"
	"log/slog"
	"time"

	"github.com/jackc/pgx/v5"

	"ratehouse/migrations"
	"ratehouse/store"
	"ratehouse/store/cluster"
	"ratehouse/store/proof"
)

// databaseName is the database of the private PostgreSQL.
const databaseName = "ratehouse"

// database is where the laboratory lives: an outside one, or one on a private server that this
// program started or found running.
type database struct {
	app     string
	cluster *cluster.Cluster // nil unless started here
	applied []string         // migrations that were applied on opening
}

// openDatabase starts the private PostgreSQL and brings it up to date, or checks that an outside
// database is. Beside a running service it uses that one's server.
func openDatabase(ctx context.Context, c *config, log *slog.Logger) (*database, error) {
	d := &database{app: c.DatabaseURL}
	if c.private() {
		if err := d.start(ctx, c, log); err != nil {
			return nil, err
		}
	}
	if err := d.current(ctx); err != nil {
		return nil, errors.Join(err, d.close(ctx))
	}
	return d, nil
}

func (d *database) start(ctx context.Context, c *config, log *slog.Logger) error {
	name := c.databaseName()
	server, err := cluster.Start(ctx, cluster.Config{Dir: c.clusterDir(), Logf: func(format string, args ...any) { log.Info(fmt.Sprintf(format, args...)) }})
	if errors.Is(err, cluster.ErrInUse) {
		d.app, err = cluster.RunningDSN(c.clusterDir(), cluster.App, name)
		return err
	}
	if err != nil {
		return err
	}
	d.cluster, d.app = server, server.DSN(cluster.App, name)
	if err = server.EnsureDatabase(ctx, name); err == nil {
		d.applied, err = migrations.Up(ctx, server.DSN(cluster.Owner, name))
	}
	if err != nil {
		return errors.Join(err, d.close(ctx))
	}
	return nil
}

// databaseName is the database of the private server.
func (c *config) databaseName() string {
	if c.name != "" {
		return c.name
	}
	return databaseName
}

// anew throws the private database away and makes it again, empty.
func (d *database) anew(ctx context.Context, c *config) error {
	if d.cluster == nil {
		return errors.New("the demonstration is running already")
	}
	if err := d.cluster.KeepOnly(ctx, c.name, ""); err != nil {
		return err
	}
	if err := d.cluster.EnsureDatabase(ctx, c.name); err != nil {
		return err
	}
	_, err := migrations.Up(ctx, d.cluster.DSN(cluster.Owner, c.name))
	return err
}

// current checks that the database has exactly the migrations of this program.
func (d *database) current(ctx context.Context) error {
	ctx, cancel := context.WithTimeout(ctx, 30*time.Second)
	defer cancel()
	conn, err := pgx.Connect(ctx, d.app)
	if err != nil {
		return fmt.Errorf("the database does not answer: %w", err)
	}
	return errors.Join(migrations.Current(ctx, conn), conn.Close(context.WithoutCancel(ctx)))
}

// close stops the private PostgreSQL, if this program started it.
func (d *database) close(ctx context.Context) error {
	if d.cluster == nil {
		return nil
	}
	ctx, cancel := context.WithTimeout(context.WithoutCancel(ctx), time.Minute)
	defer cancel()
	return d.cluster.Stop(ctx)
}

// done is closed when a private PostgreSQL has ended; it never is for an outside one.
func (d *database) done() <-chan struct{} {
	if d.cluster == nil {
		return nil
	}
	return d.cluster.Done()
}

// openLab opens the laboratory in the database.
func (d *database) openLab(ctx context.Context, c *config, key proof.Key) (*store.Lab, error) {
	return store.Open(ctx, store.Config{DSN: d.app, Engine: engine(), Key: key, URL: c.URL})
}

// withLab runs a short command on the laboratory.
func withLab(ctx context.Context, p program, name string, c *config, work func(*store.Lab) error) int {
	if err := c.check(); err != nil {
		return p.fail(name, err)
	}
	d, err := openDatabase(ctx, c, quietLog(p))
	if err != nil {
		return p.fail(name, err)
	}
	lab, err := d.openLab(ctx, c, proof.Key{})
	if err == nil {
		err = work(lab)
		lab.Close()
	}
	if err := errors.Join(err, d.close(ctx)); err != nil {
		return p.fail(name, err)
	}
	return exitDone
}

// quietLog tells only of trouble.
func quietLog(p program) *slog.Logger {
	return slog.New(slog.NewTextHandler(p.stderr, &slog.HandlerOptions{Level: slog.LevelWarn}))
}
