package storetest

import (
	"fmt"
	"os"
	"sync"
	"testing"
	"time"

	"github.com/google/uuid"

	"ratehouse/store"
	"ratehouse/store/proof"
	"ratehouse/trial"
	"ratehouse/trial/sheet"
)

// Start is the instant at which every test laboratory begins: a Tuesday morning.
var Start = time.Date(2026, time.December, 1, 8, 0, 0, 0, time.UTC)

// Clock is a clock that moves only when told to.
type Clock struct {
	mu sync.Mutex
	at time.Time
}

// Now is the time the clock shows.
func (c *Clock) Now() time.Time {
	c.mu.Lock()
	defer c.mu.Unlock()
	return c.at
}

// Set moves the clock to t.
func (c *Clock) Set(t time.Time) {
	c.mu.Lock()
	defer c.mu.Unlock()
	c.at = t
}

// Advance moves the clock on by d.
func (c *Clock) Advance(d time.Duration) { c.Set(c.Now().Add(d)) }

// House is a laboratory of a test, with people and a clock.
type House struct {
	*store.Lab
	DB         DB
	Clock      *Clock
	Technician store.Actor
	Second     store.Actor // another technician
	Lead       store.Actor
	Adjuster   store.Actor
	Manager    store.Actor
	Key        proof.Key
}

// Password opens every account of a test laboratory.
const Password = "a quiet morning"

// New gives the test a laboratory with one account of each role, on a database of its own.
func New(t testing.TB) *House {
	t.Helper()
	return Open(t, Database(t), &Clock{at: Start})
}

// Open gives the test a laboratory on the database, founded and peopled if it is empty.
func Open(t testing.TB, db DB, clock *Clock) *House {
	t.Helper()
	key, err := proof.GenerateKey()
	if err != nil {
		t.Fatal(err)
	}
	lab, err := store.Open(t.Context(), store.Config{DSN: db.App, Clock: clock.Now, Engine: "test", Key: key, Conns: 20, Memory: 64})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(lab.Close)
	h := &House{Lab: lab, DB: db, Clock: clock, Key: key}
	if err := lab.Found(t.Context(), store.House{Title: "Test Laboratory", Address: []string{"1 Bench Row"}, Zone: time.UTC}); err != nil {
		t.Fatal(err)
	}
	h.Technician = h.person(t, "technician", "Ilse Marden", store.Technician)
	h.Second = h.person(t, "second", "Tomas Wrede", store.Technician)
	h.Lead = h.person(t, "lead", "Nadja Quill", store.Lead)
	h.Adjuster = h.person(t, "adjuster", "Ole Varnhagen", store.Adjuster)
	h.Manager = h.person(t, "manager", "Edda Lorne", store.Manager)
	return h
}

func (h *House) person(t testing.TB, name, title string, role store.Role) store.Actor {
	t.Helper()
	a, err := h.AddAccount(t.Context(), store.Program, store.NewAccount{Name: name, Title: title, Role: role, Password: Password})
	if err != nil {
		t.Fatal(err)
	}
	return store.Actor{Account: a.ID, Name: name, Title: title, Role: role, Via: "page"}
}

// Batch registers n movements S-0001… as a state batch of category 1 whose round 0 is due now.
func (h *House) Batch(t testing.TB, code string, n int, change ...func(*store.NewBatch)) store.Batch {
	t.Helper()
	nb := store.NewBatch{Code: code, Programme: "iso3159", Category: "1", Depositor: "KESTWICK", StartsAt: h.Clock.Now(), Entry: store.EntryState}
	for i := range n {
		nb.Pieces = append(nb.Pieces, store.Piece{Serial: Serial(i + 1)})
	}
	for _, c := range change {
		c(&nb)
	}
	b, err := h.Register(t.Context(), h.Technician, nb)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// Serial is the number of the i-th movement of a test batch.
func Serial(i int) string { return fmt.Sprintf("S-%04d", i) }

// State is an entry of a found state of movement i at step k, read now.
func (h *House) State(code string, i, k int, value string) store.Entry {
	return store.Entry{ID: uuid.Must(uuid.NewV7()), Batch: code, Serial: Serial(i), Step: k, Day: -1, Kind: store.KindState,
		Method: store.Typed, Value: value, ReadAt: h.Clock.Now()}
}

// Rate is an entry of a typed rate of movement i at step k.
func (h *House) Rate(code string, i, k int, value string) store.Entry {
	e := h.State(code, i, k, value)
	e.Kind = store.KindRate
	return e
}

// MustSave saves as the actor and wants every entry accepted.
func (h *House) MustSave(t testing.TB, a store.Actor, entries ...store.Entry) {
	t.Helper()
	answers, err := h.Save(t.Context(), a, time.Time{}, entries)
	if err != nil {
		t.Fatal(err)
	}
	for i, r := range answers {
		if r.Status != store.Accepted {
			t.Fatalf("entry %d (%s %s step %d = %s): %s %s", i, entries[i].Batch, entries[i].Serial, entries[i].Step, entries[i].Value, r.Status, r.Code)
		}
	}
}

// Run reads movements of the batch through all rounds, one a day, from rates in s/d by movement and
// day; a blank rate leaves that state and what hangs on it unread. It moves the clock.
func (h *House) Run(t testing.TB, code string, rates [][]string) {
	t.Helper()
	b, err := h.Lab.Batch(t.Context(), h.Lead, code)
	if err != nil {
		t.Fatal(err)
	}
	for k := range b.Steps {
		h.Clock.Set(b.Due(k))
		if err := h.OpenRound(t.Context(), h.Technician, code, k); err != nil {
			t.Fatal(err)
		}
		var entries []store.Entry
		for i, days := range rates {
			if k > 0 && k <= len(days) && days[k-1] != "" {
				entries = append(entries, h.Rate(code, i+1, k, days[k-1]))
			}
		}
		if len(entries) > 0 {
			h.MustSave(t, h.Technician, entries...)
		}
		if err := h.CloseRound(t.Context(), h.Technician, code, k); err != nil {
			t.Fatal(err)
		}
	}
}

// ProgrammeFile adds the programme of a file, by the verb, and gives it.
func (h *House) ProgrammeFile(t testing.TB, path string, change ...func(*trial.Programme)) *trial.Programme {
	t.Helper()
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	p, err := sheet.ParseProgramme(data)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range change {
		c(p)
	}
	if err := h.AddProgramme(t.Context(), h.Manager, p); err != nil {
		t.Fatal(err)
	}
	return p
}
