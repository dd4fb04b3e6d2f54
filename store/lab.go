package store

import (
	"context"
	"fmt"
	"sync"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5/pgconn"
	"github.com/jackc/pgx/v5/pgxpool"

	"ratehouse/store/proof"
	"ratehouse/store/rows"
	"ratehouse/trial"
)

// Config says which database a laboratory lives in and what it hangs on from outside.
type Config struct {
	DSN    string           // of the application role
	Clock  func() time.Time // nil: the system's
	Engine string           // build of the engine, frozen on papers and carried by derived tables
	Key    proof.Key        // signs papers; zero: this program cannot release
	URL    string           // public base of the service, for the address on papers; may be empty
	Memory uint32           // KiB that hashing a password takes; 0: 64 MiB. Tests take less.
	Conns  int32            // at most this many connections; 0: the driver's default
	Dial   pgconn.DialFunc  // nil: the driver's; tests count round trips here
}

// House is what the laboratory says about itself, on pages and papers.
type House struct {
	Title        string
	Address      []string
	Contact      string
	Zone         *time.Location // the one display time zone
	Demo         bool           // every paper is marked, passwords are shown
	DemoAccounts []DemoAccount
}

// DemoAccount is a log-in that the demo shows to everybody.
type DemoAccount struct {
	Name, Password string
	Role           Role
}

// Lab is the laboratory: all its verbs are methods, safe for concurrent use.
type Lab struct {
	pool       *pgxpool.Pool
	clock      func() time.Time
	site       int16
	engine     string
	key        proof.Key
	url        string
	memory     uint32
	house      House
	argon      chan struct{} // 64 MiB each: only a few at once
	mu         sync.RWMutex
	programmes map[[32]byte]*trial.Programme // immutable, so cached for ever
	wake       chan struct{}                 // tells a drain of this process that there is work
	live       hub                           // tells pages of this process what changed
}

// Open connects to the database and reads what the laboratory says about itself.
func Open(ctx context.Context, c Config) (*Lab, error) {
	pc, err := pgxpool.ParseConfig(c.DSN)
	if err != nil {
		return nil, fmt.Errorf("database address: %w", err)
	}
	pc.ConnConfig.RuntimeParams["search_path"] = "rh"
	pc.ConnConfig.RuntimeParams["timezone"] = "UTC"
	pc.ConnConfig.RuntimeParams["application_name"] = "ratehouse"
	// A connection is asked whether it lives after half a minute of rest, not after a second: each
	// question is a round trip before a save.
	pc.ShouldPing = func(_ context.Context, p pgxpool.ShouldPingParams) bool { return p.IdleDuration > 30*time.Second }
	if c.Conns > 0 {
		pc.MaxConns = c.Conns
	}
	if c.Dial != nil {
		pc.ConnConfig.DialFunc = c.Dial
	}
	pool, err := pgxpool.NewWithConfig(ctx, pc)
	if err != nil {
		return nil, fmt.Errorf("database pool: %w", err)
	}
	l := &Lab{
		pool: pool, clock: c.Clock, engine: c.Engine, key: c.Key, url: c.URL, argon: make(chan struct{}, 2),
		programmes: map[[32]byte]*trial.Programme{}, wake: make(chan struct{}, 1),
	}
	if l.memory = c.Memory; l.memory == 0 {
		l.memory = argonMemory
	}
	if l.clock == nil {
		l.clock = time.Now
	}
	if err := l.readHouse(ctx); err != nil {
		pool.Close()
		return nil, err
	}
	return l, nil
}

// Close ends all connections.
func (l *Lab) Close() { l.pool.Close() }

// Now is the laboratory's clock, in UTC.
func (l *Lab) Now() time.Time { return l.clock().UTC() }

// House is what the laboratory says about itself.
func (l *Lab) House() House {
	l.mu.RLock()
	defer l.mu.RUnlock()
	return l.house
}

// Ready tells whether the database answers.
func (l *Lab) Ready(ctx context.Context) error { return l.pool.Ping(ctx) }

// Engine is the build of the engine that judges here.
func (l *Lab) Engine() string { return l.engine }

func (l *Lab) readHouse(ctx context.Context) error {
	s, err := rows.Settings(ctx, l.pool)
	if err != nil {
		return fmt.Errorf("read settings: %w", err)
	}
	zone, err := time.LoadLocation(s.Get("zone", "UTC"))
	if err != nil {
		return fmt.Errorf("time zone of the laboratory: %w", err)
	}
	l.mu.Lock()
	defer l.mu.Unlock()
	l.site = s.Int16("site", 1)
	l.house = House{
		Title: s.Get("title", "Ratehouse"), Address: s.Lines("address"), Contact: s.Get("contact", ""), Zone: zone,
		Demo: s.Get("demo", "") != "", DemoAccounts: l.house.DemoAccounts,
	}
	return nil
}

// SetHouse changes what the laboratory says about itself.
func (l *Lab) SetHouse(ctx context.Context, a Actor, h House) error {
	err := l.do(ctx, a, verb{"set_house", RightSetup}, func(w *work) error {
		w.act.Body = map[string]any{"title": h.Title, "address": h.Address, "contact": h.Contact, "zone": h.Zone.String(), "demo": h.Demo}
		demo := ""
		if h.Demo {
			demo = "yes"
		}
		rows.QueueSetting(w.out, "title", h.Title)
		rows.QueueSettingLines(w.out, "address", h.Address)
		rows.QueueSetting(w.out, "contact", h.Contact)
		rows.QueueSetting(w.out, "zone", h.Zone.String())
		rows.QueueSetting(w.out, "demo", demo)
		return nil
	})
	if err != nil {
		return err
	}
	return l.readHouse(ctx)
}

// ShowAccounts makes the log-in page of a demo name its accounts; kept in memory only.
func (l *Lab) ShowAccounts(accounts []DemoAccount) {
	l.mu.Lock()
	defer l.mu.Unlock()
	l.house.DemoAccounts = accounts
}

// newID makes a UUIDv7 whose time is the laboratory's, so that keys sort as things happened.
func (l *Lab) newID() uuid.UUID {
	id := uuid.Must(uuid.NewV7())
	ms := l.Now().UnixMilli()
	for i := range 6 {
		id[i] = byte(ms >> (8 * (5 - i)))
	}
	return id
}
