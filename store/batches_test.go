package store_test

import (
	"context"
	"encoding/binary"
	"fmt"
	"math/rand/v2"
	"net"
	"slices"
	"sync/atomic"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"github.com/jackc/pgx/v5"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/trial"
)

// whatHappens does one thing to a batch, as a laboratory would.
func whatHappens(t *testing.T, h *storetest.House, r *rand.Rand, code string, n int) {
	t.Helper()
	i, k := 1+r.IntN(n), r.IntN(16)
	serial := storetest.Serial(i)
	sheet, err := h.MovementSheet(t.Context(), h.Lead, code, serial)
	if err != nil {
		t.Fatal(err)
	}
	ended := sheet.Movement.End != store.InTrial
	switch r.IntN(8) {
	case 0:
		end := []store.End{store.Rejected, store.Withdrawn, store.Void, store.Removed}[r.IntN(4)]
		if ended {
			end = store.InTrial
		}
		if err := h.EndMovement(t.Context(), h.Lead, code, serial, end, "as it happened", ""); err != nil {
			t.Fatal(err)
		}
	case 1:
		if err := h.AddRemark(t.Context(), h.Lead, code, serial, -1, "seen"); err != nil {
			t.Fatal(err)
		}
	default:
		if ended || k == 0 {
			return
		}
		e := h.Rate(code, i, k, fmt.Sprintf("%d.%d", r.IntN(14)-6, r.IntN(10)))
		e.Base = len(sheet.Readings) // refused unless it happens to be right: nothing must change then
		for _, line := range sheet.Readings {
			if line.Step == k {
				e.Base, e.Reason = line.Nth, "misread"
			}
		}
		if e.Reason == "" {
			e.Base = 0
		}
		if r.IntN(6) == 0 {
			e.Value = string(store.Stopped)
		}
		if _, err := h.Save(t.Context(), h.Technician, time.Time{}, []store.Entry{e}); err != nil {
			t.Fatal(err)
		}
	}
}

// The summary on the list, kept up while things happen, is the one made from nothing.
func TestSummaryRebuiltIsIncremental(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	const n = 12
	for b := range 3 {
		h.Batch(t, fmt.Sprintf("26-00%d", b), n)
	}
	r := rand.New(rand.NewPCG(7, 11))
	for range 60 {
		h.Clock.Advance(time.Minute)
		for range 1 + r.IntN(4) {
			whatHappens(t, h, r, fmt.Sprintf("26-00%d", r.IntN(3)), n)
		}
		list, err := h.Batches(t.Context(), h.Lead, store.BatchFilter{}, "")
		if err != nil {
			t.Fatal(err)
		}
		for _, line := range list.Lines {
			sheet, err := h.BatchSheet(t.Context(), h.Lead, line.Batch.Code)
			if err != nil {
				t.Fatal(err)
			}
			anew, err := sheet.Summarise()
			if err != nil {
				t.Fatal(err)
			}
			if d := cmp.Diff(&anew, line.Summary, cmpopts.IgnoreFields(store.Summary{}, "MadeAt")); d != "" {
				t.Fatalf("batch %s: made from nothing (-), on the list (+):\n%s", line.Batch.Code, d)
			}
		}
	}
}

// The summary says what the judge says, movement by movement; by criterion it counts those that fail by
// their rates or were removed, and none that was rejected for another cause or left the yield.
func TestSummaryCountsVerdicts(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 7)
	good := slices.Repeat([]string{"1.0"}, 15)
	fast := slices.Repeat([]string{"7.5"}, 15)
	short := append(slices.Repeat([]string{"1.0"}, 9), slices.Repeat([]string{""}, 6)...)
	h.Run(t, "26-001", [][]string{good, fast, short, fast, fast, fast, fast})
	for i, end := range []store.End{store.Withdrawn, store.Rejected, store.Removed, store.Void} {
		if err := h.EndMovement(t.Context(), h.Lead, "26-001", storetest.Serial(4+i), end, "as it came", ""); err != nil {
			t.Fatal(err)
		}
	}
	list, err := h.Batches(t.Context(), h.Lead, store.BatchFilter{}, "")
	if err != nil {
		t.Fatal(err)
	}
	line := list.Lines[0]
	want := store.Counts{Pass: 1, Fail: 1, Open: 1, Withdrawn: 1, Rejected: 1, Removed: 1, VoidEnds: 1}
	if line.Summary.First != want {
		t.Errorf("counts = %+v, want %+v", line.Summary.First, want)
	}
	if line.Summary.First.Judged() != 4 || line.State != store.BatchDone || line.Due != -1 {
		t.Errorf("judged %d, state %s, due %d", line.Summary.First.Judged(), line.State, line.Due)
	}
	var failed trial.Result
	j, err := trial.NewJudge(line.Batch.Programme, "1")
	if err != nil {
		t.Fatal(err)
	}
	rates := slices.Repeat([]trial.Rate{trial.RateOf(7500)}, 15)
	j.Rates(rates, &failed)
	for i := range failed.Values {
		n := 0
		if failed.Values[i].Outcome == trial.Outside {
			n = 2 // by its rates, and removed
		}
		if line.Summary.Failed[i] != n || line.Summary.Alone[i] != n {
			t.Errorf("criterion %d failed %d times, alone %d, want %d", i, line.Summary.Failed[i], line.Summary.Alone[i], n)
		}
	}
	asTechnician, err := h.Batches(t.Context(), h.Technician, store.BatchFilter{}, "")
	if err != nil {
		t.Fatal(err)
	}
	if asTechnician.Lines[0].Summary != nil {
		t.Error("a technician is given verdicts")
	}
}

func TestBatchesPageByPage(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	start := h.Clock.Now()
	var want []string
	for i := range 7 {
		code := fmt.Sprintf("26-%03d", i)
		h.Batch(t, code, 1, func(n *store.NewBatch) { n.StartsAt = start.Add(time.Duration(i/2) * time.Hour) })
	}
	for i := 6; i >= 0; i-- {
		want = append(want, fmt.Sprintf("26-%03d", i))
	}
	var got []string
	for cursor, pages := "", 0; ; pages++ {
		list, err := h.Batches(t.Context(), h.Lead, store.BatchFilter{Most: 3}, cursor)
		if err != nil || pages > 3 {
			t.Fatal(pages, err)
		}
		for _, l := range list.Lines {
			got = append(got, l.Batch.Code)
		}
		if cursor = list.Next; cursor == "" {
			break
		}
	}
	if d := cmp.Diff(want, got); d != "" {
		t.Error(d)
	}
	one, err := h.Batches(t.Context(), h.Lead, store.BatchFilter{Words: "-004"}, "")
	if err != nil || len(one.Lines) != 1 || one.Lines[0].Batch.Code != "26-004" {
		t.Errorf("by words: %v, %v", one.Lines, err)
	}
	none, err := h.Batches(t.Context(), h.Lead, store.BatchFilter{Words: "%"}, "")
	if err != nil || len(none.Lines) != 0 {
		t.Errorf("a per cent sign means more than itself: %d batches, %v", len(none.Lines), err)
	}
	if _, err := h.Batches(t.Context(), h.Lead, store.BatchFilter{}, "soon"); store.KindOf(err) != store.KindInvalid {
		t.Errorf("an unknown cursor answers %v", err)
	}
}

// asked counts what a connection asks the database: queries, and round trips (each ends with a Sync
// or is a simple query).
type asked struct{ queries, trips atomic.Int64 }

// listening reads along with what the client sends: messages of one letter and a length, after a first
// one without letter.
type listening struct {
	net.Conn
	*asked
	rest    []byte
	started bool
}

func (c *listening) Write(b []byte) (int, error) {
	c.rest = append(c.rest, b...)
	for {
		head := 5
		if !c.started {
			head = 4
		}
		if len(c.rest) < head {
			break
		}
		size := head - 4 + int(binary.BigEndian.Uint32(c.rest[head-4:]))
		if len(c.rest) < size {
			break
		}
		if c.started {
			c.count(c.rest[0])
		}
		c.rest, c.started = c.rest[size:], true
	}
	return c.Conn.Write(b)
}

func (c *listening) count(letter byte) {
	switch letter {
	case 'E': // Execute
		c.queries.Add(1)
	case 'S': // Sync
		c.trips.Add(1)
	case 'Q': // Query
		c.queries.Add(1)
		c.trips.Add(1)
	}
}

// counted opens the laboratory again with a connection that counts trips.
func counted(t *testing.T, h *storetest.House) (*store.Lab, *asked) {
	t.Helper()
	config, err := pgx.ParseConfig(h.DB.App)
	if err != nil {
		t.Fatal(err)
	}
	dial, n := config.DialFunc, &asked{}
	lab, err := store.Open(t.Context(), store.Config{DSN: h.DB.App, Clock: h.Clock.Now, Engine: "test", Conns: 1,
		Dial: func(ctx context.Context, network, addr string) (net.Conn, error) {
			c, err := dial(ctx, network, addr)
			return &listening{Conn: c, asked: n}, err
		}})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(lab.Close)
	return lab, n
}

// The list costs the same number of trips for one batch as for twenty, whether their summaries are
// fresh or must be made.
func TestBatchesTripsAreConstant(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	lab, n := counted(t, h)
	cost := func() int64 {
		t.Helper()
		before := n.trips.Load()
		if _, err := lab.Batches(t.Context(), h.Lead, store.BatchFilter{}, ""); err != nil {
			t.Fatal(err)
		}
		return n.trips.Load() - before
	}
	batches := 0
	change := func() {
		t.Helper()
		h.Batch(t, fmt.Sprintf("26-%03d", batches), 3)
		batches++
		h.Clock.Advance(time.Second)
	}
	change()
	cost() // statements are prepared once
	cost()
	if err := h.AddRemark(t.Context(), h.Lead, "26-000", "", -1, "seen"); err != nil {
		t.Fatal(err)
	}
	h.Clock.Advance(time.Second)
	few := [2]int64{cost(), cost()}
	for range 20 {
		change()
	}
	many := [2]int64{cost(), cost()}
	if many != few || few[0] < 3 || few[0] > 4 || few[1] != 2 {
		t.Errorf("trips for stale and fresh summaries: 1 batch %v, 21 batches %v; want at most 4 and 2", few, many)
	}
}
