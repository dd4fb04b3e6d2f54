package store_test

import (
	"context"
	"fmt"
	"math/rand/v2"
	"net"
	"sync"
	"sync/atomic"
	"testing"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"ratehouse/store"
	"ratehouse/store/storetest"
)

// tripConn counts round trips: how often an answer is awaited after something was sent.
type tripConn struct {
	net.Conn
	sent  atomic.Bool
	trips *atomic.Int64
}

func (c *tripConn) Write(b []byte) (int, error) {
	c.sent.Store(true)
	return c.Conn.Write(b)
}

func (c *tripConn) Read(b []byte) (int, error) {
	n, err := c.Conn.Read(b)
	if n > 0 && c.sent.Swap(false) {
		c.trips.Add(1)
	}
	return n, err
}

// counting opens the laboratory of h again, on one connection whose round trips are counted.
func counting(t *testing.T, h *storetest.House) (*store.Lab, *atomic.Int64) {
	t.Helper()
	trips := &atomic.Int64{}
	lab, err := store.Open(t.Context(), store.Config{DSN: h.DB.App, Clock: h.Clock.Now, Engine: "test", Conns: 1,
		Dial: func(ctx context.Context, network, addr string) (net.Conn, error) {
			c, err := (&net.Dialer{}).DialContext(ctx, network, addr)
			return &tripConn{Conn: c, trips: trips}, err
		}})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(lab.Close)
	return lab, trips
}

func TestSaveTakesTwoRoundTrips(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 500)
	lab, trips := counting(t, h)
	save := func(entries ...store.Entry) int64 {
		before := trips.Load()
		answers, err := lab.Save(t.Context(), h.Technician, h.Clock.Now(), entries)
		if err != nil {
			t.Fatal(err)
		}
		for _, a := range answers {
			if a.Status != store.Accepted {
				t.Fatalf("%+v", a)
			}
		}
		return trips.Load() - before
	}
	save(h.State("26-001", 1, 0, "1")) // prepares the statements of this connection
	if n := save(h.State("26-001", 2, 0, "1")); n != 2 {
		t.Errorf("one reading took %d round trips, want 2", n)
	}
	var many []store.Entry
	for i := 3; i <= 500; i++ {
		many = append(many, h.State("26-001", i, 0, "0.2"))
	}
	if n := save(many...); n != 2 {
		t.Errorf("%d readings took %d round trips, want 2", len(many), n)
	}
}

func TestSaveIsReplaySafe(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 3)
	call := []store.Entry{h.State("26-001", 1, 0, "1"), h.State("26-001", 2, 0, "2"), h.State("26-001", 3, 0, "3")}
	h.MustSave(t, h.Technician, call...)
	answers, err := h.Save(t.Context(), h.Technician, time.Time{}, call)
	if err != nil {
		t.Fatal(err)
	}
	for _, a := range answers {
		if a.Status != store.Duplicate || a.Nth != 1 {
			t.Errorf("replay answered %+v", a)
		}
	}
	changed := call[0]
	changed.Value = "1.1"
	if a := saveOne(t, h, h.Technician, changed); a.Status != store.Refused || a.Code != "id_reused" {
		t.Errorf("same id, other value: %+v", a)
	}
	moved := call[0]
	moved.Serial = storetest.Serial(2)
	if a := saveOne(t, h, h.Technician, moved); a.Code != "id_reused" {
		t.Errorf("same id, other cell: %+v", a)
	}
	if n := h.Count(t, "reading"); n != 3 {
		t.Errorf("%d readings, want 3", n)
	}
}

func saveOne(t *testing.T, h *storetest.House, a store.Actor, e store.Entry) store.Answer {
	t.Helper()
	answers, err := h.Save(t.Context(), a, time.Time{}, []store.Entry{e})
	if err != nil {
		t.Fatal(err)
	}
	return answers[0]
}

func TestSecondWriterSeesTheFirst(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 1)
	h.MustSave(t, h.Technician, h.State("26-001", 1, 0, "1.5"))
	other := h.State("26-001", 1, 0, "1.7")
	a := saveOne(t, h, h.Second, other)
	if a.Status != store.Conflict || a.Current == nil || a.Current.Value != "1.5" || a.Current.Nth != 1 || a.Current.ReadBy != h.Technician.Title {
		t.Fatalf("second writer got %+v", a)
	}
	other.Base = 1
	if a = saveOne(t, h, h.Second, other); a.Code != "reason_needed" {
		t.Errorf("correction of another's reading without reason: %+v", a)
	}
	other.Reason = "read again with the loupe"
	if a = saveOne(t, h, h.Second, other); a.Status != store.Accepted || a.Nth != 2 {
		t.Errorf("correction with reason: %+v", a)
	}
	sheet, err := h.MovementSheet(t.Context(), h.Lead, "26-001", storetest.Serial(1))
	if err != nil {
		t.Fatal(err)
	}
	if len(sheet.Readings) != 2 || !sheet.Readings[0].Replaced || sheet.Readings[1].Replaced || sheet.Readings[1].Reason == "" {
		t.Errorf("readings %+v", sheet.Readings)
	}
}

func TestReaderCorrectsInHisOpenRound(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 1)
	fix := func(value string, base int) store.Entry {
		e := h.State("26-001", 1, 0, value)
		e.Base = base
		return e
	}
	must(t, h.OpenRound(t.Context(), h.Technician, "26-001", 0))
	h.MustSave(t, h.Technician, fix("1", 0))
	h.MustSave(t, h.Technician, fix("2", 1))
	sheet, err := h.MovementSheet(t.Context(), h.Lead, "26-001", storetest.Serial(1))
	must(t, err)
	if got := sheet.Readings[1].Reason; got != "at entry" {
		t.Errorf("reason %q, want the server's own", got)
	}
	must(t, h.CloseRound(t.Context(), h.Technician, "26-001", 0))
	if a := saveOne(t, h, h.Technician, fix("3", 2)); a.Code != "reason_needed" {
		t.Errorf("after closing: %+v", a)
	}
}

func must(t *testing.T, err error) {
	t.Helper()
	if err != nil {
		t.Fatal(err)
	}
}

func TestSecondLook(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 4)
	h.MustSave(t, h.Technician, h.State("26-001", 1, 0, "0"), h.State("26-001", 2, 0, "0"), h.State("26-001", 3, 0, "0"))
	h.Clock.Advance(24 * time.Hour)
	for _, c := range []struct {
		name    string
		i       int
		value   string
		confirm []string
		status  store.Status
		want    string
	}{
		{"asked", 1, "61", nil, store.LookAgain, ""},
		{"agrees: the first counts", 1, "61", []string{"61.3"}, store.Accepted, "61"},
		{"a third is missing", 2, "62", []string{"65"}, store.LookAgain, ""},
		{"median of three", 2, "62", []string{"65", "64.9"}, store.Accepted, "64.9"},
		{"an honest second", 3, "66", []string{"6", "6.1"}, store.Accepted, "6.1"},
	} {
		e := h.State("26-001", c.i, 1, c.value)
		e.ID = idOf(c.i) // the id is not used up by being asked again
		e.Confirm = c.confirm
		if a := saveOne(t, h, h.Technician, e); a.Status != c.status {
			t.Fatalf("%s: %+v", c.name, a)
		}
		sheet, err := h.MovementSheet(t.Context(), h.Lead, "26-001", storetest.Serial(c.i))
		must(t, err)
		if last := sheet.Readings[len(sheet.Readings)-1]; c.want != "" && last.Value != c.want {
			t.Errorf("%s: %s counts, want %s", c.name, last.Value, c.want)
		}
		if c.status == store.LookAgain && len(sheet.Looks) == 0 {
			t.Errorf("%s: what was typed is lost", c.name)
		}
	}
}

func idOf(i int) uuid.UUID { return uuid.NewSHA1(uuid.Nil, []byte(fmt.Sprint("second look", i))) }

func TestRefusalsAreKept(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 3)
	h.Batch(t, "26-002", 1, func(n *store.NewBatch) { n.Entry = store.EntryRate })
	h.MustSave(t, h.Technician, h.State("26-001", 2, 0, "0"))
	h.Clock.Advance(24 * time.Hour)
	h.MustSave(t, h.Technician, h.State("26-001", 2, 1, "1"), h.Rate("26-002", 1, 1, "1"))
	must(t, h.EndMovement(t.Context(), h.Lead, "26-001", storetest.Serial(3), store.Void, "dropped at the bench", store.Dropped))
	with := func(e store.Entry, change func(*store.Entry)) store.Entry { change(&e); return e }
	base := h.State("26-001", 1, 1, "1")
	cases := map[string]store.Entry{
		"unknown_batch":    with(base, func(e *store.Entry) { e.Batch = "26-999" }),
		"unknown_movement": with(base, func(e *store.Entry) { e.Serial = "S-9999" }),
		"step_or_day":      with(base, func(e *store.Entry) { e.Day = 1 }),
		"unknown_step":     with(base, func(e *store.Entry) { e.Step = 16 }),
		"ended":            h.State("26-001", 3, 1, "1"),
		"kind":             with(base, func(e *store.Entry) { e.Kind = "guess" }),
		"method":           with(base, func(e *store.Entry) { e.Method = "by ear" }),
		"method_not_built": with(base, func(e *store.Entry) { e.Method = store.Hand }),
		"no_rate_at_start": h.Rate("26-001", 1, 0, "1"),
		"read_at_missing":  with(base, func(e *store.Entry) { e.ReadAt = time.Time{} }),
		"future":           with(base, func(e *store.Entry) { e.ReadAt = h.Clock.Now().Add(time.Hour) }),
		"too_early":        with(base, func(e *store.Entry) { e.ReadAt = h.Clock.Now().Add(-240 * time.Hour) }),
		"read_at_order":    with(h.State("26-001", 2, 2, "2"), func(e *store.Entry) { e.ReadAt = h.Clock.Now().Add(-time.Hour) }),
		"unknown_reader":   with(base, func(e *store.Entry) { e.ReadBy = "nobody-here" }),
		"base_ahead":       with(base, func(e *store.Entry) { e.Base = 3 }),
		"id_missing":       with(base, func(e *store.Entry) { e.ID = uuid.Nil }),
		"has_states":       h.Rate("26-001", 2, 1, "1"),
		"has_rate":         h.State("26-002", 1, 1, "1"),
		"beyond_600":       h.Rate("26-001", 1, 1, "600.001"),
		"beyond_half_dial": with(base, func(e *store.Entry) { e.Value = "21600.001" }),
		"evidence_form":    with(base, func(e *store.Entry) { e.Evidence = []byte{1, 2} }),
	}
	before := h.Count(t, "reading")
	for code, e := range cases {
		if code != "id_missing" {
			e.ID = uuid.NewSHA1(uuid.Nil, []byte(code))
		}
		if a := saveOne(t, h, h.Technician, e); a.Status != store.Refused || a.Code != code {
			t.Errorf("want %s, got %s %s", code, a.Status, a.Code)
		}
	}
	if n := h.Count(t, "reading"); n != before {
		t.Errorf("%d readings, want %d", n, before)
	}
	if n := h.Count(t, "stray"); n != len(cases) {
		t.Errorf("%d strays, want %d", n, len(cases))
	}
	// An id that was refused is not used up.
	mended := h.State("26-001", 1, 1, "1")
	mended.ID = uuid.NewSHA1(uuid.Nil, []byte("future"))
	h.MustSave(t, h.Technician, mended)
}

func TestGoodItemsAreSavedBesideBadOnes(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 3)
	answers, err := h.Save(t.Context(), h.Technician, time.Time{}, []store.Entry{
		h.State("26-001", 1, 0, "1"), h.State("26-001", 2, 0, "one"), h.State("26-001", 3, 0, "3"), h.State("26-001", 3, 0, "4")})
	must(t, err)
	want := []store.Status{store.Accepted, store.Refused, store.Accepted, store.Conflict}
	for i, a := range answers {
		if a.Status != want[i] {
			t.Errorf("item %d: %s %s, want %s", i, a.Status, a.Code, want[i])
		}
	}
}

func TestTwoStepsOfOneMovementInOneCall(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 1)
	h.Clock.Advance(48 * time.Hour)
	var call []store.Entry
	for k, v := range []string{"0", "1", "2.5"} {
		e := h.State("26-001", 1, k, v)
		e.ReadAt = storetest.Start.Add(time.Duration(k) * 24 * time.Hour)
		call = append(call, e)
	}
	h.MustSave(t, h.Technician, call...)
	s, err := h.BatchSheet(t.Context(), h.Lead, "26-001")
	must(t, err)
	if r := s.Movements[0].Rates; r[0].Decimal(1) != "1.0" || r[1].Decimal(1) != "1.5" {
		t.Errorf("rates %s %s", r[0].Decimal(1), r[1].Decimal(1))
	}
	h.CheckSeries(t)
}

func TestClockOfTheSenderIsCorrected(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 1)
	fast := h.Clock.Now().Add(2 * time.Hour) // a tablet two hours ahead
	e := h.State("26-001", 1, 0, "1")
	e.ReadAt = fast
	answers, err := h.Save(t.Context(), h.Technician, fast, []store.Entry{e})
	must(t, err)
	if answers[0].Status != store.Accepted {
		t.Fatalf("%+v", answers[0])
	}
	h.Clock.Advance(24 * time.Hour)
	h.MustSave(t, h.Technician, h.State("26-001", 1, 1, "3"))
	s, err := h.BatchSheet(t.Context(), h.Lead, "26-001")
	must(t, err)
	if got := s.Movements[0].Rates[0].Decimal(3); got != "2.000" {
		t.Errorf("rate %s, want 2.000 over exactly 24 h", got)
	}
}

// Sixteen writers on few movements: no error, no deadlock, every accepted entry once, series = log.
func TestContention(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	const movements, writers, calls = 5, 16, 40
	h.Batch(t, "26-001", movements)
	h.Clock.Advance(24 * time.Hour)
	var accepted, conflicts atomic.Int64
	var wg sync.WaitGroup
	for w := range writers {
		wg.Go(func() {
			rnd := rand.New(rand.NewPCG(3159, uint64(w)))
			base := map[[2]int]int{}
			for range calls {
				var call []store.Entry
				for _, i := range rnd.Perm(movements) { // in any order: the server sorts
					k := rnd.IntN(3)
					e := h.State("26-001", i+1, k, fmt.Sprintf("%d.%d", k, rnd.IntN(10)))
					e.ReadAt, e.Base = storetest.Start.Add(time.Duration(k)*8*time.Hour), base[[2]int{i, k}]
					e.Reason = "read again"
					call = append(call, e)
				}
				answers, err := h.Save(t.Context(), h.Technician, time.Time{}, call)
				if err != nil {
					t.Error(err)
					return
				}
				for n, a := range answers {
					var i int
					fmt.Sscanf(call[n].Serial, "S-%d", &i)
					switch a.Status {
					case store.Accepted:
						accepted.Add(1)
						base[[2]int{i - 1, call[n].Step}] = a.Nth
					case store.Conflict:
						conflicts.Add(1)
						base[[2]int{i - 1, call[n].Step}] = a.Current.Nth
					default:
						t.Errorf("%+v", a)
					}
				}
			}
		})
	}
	wg.Wait()
	if n := h.Count(t, "reading"); int64(n) != accepted.Load() {
		t.Errorf("%d readings, %d accepted", n, accepted.Load())
	}
	if conflicts.Load() == 0 {
		t.Error("no conflict: the writers did not meet")
	}
	h.CheckSeries(t)
	t.Logf("%d writers: %d accepted, %d conflicts", writers, accepted.Load(), conflicts.Load())
}

func TestEvidenceCannotBeChanged(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 1)
	h.MustSave(t, h.Technician, h.State("26-001", 1, 0, "1"))
	for role, dsn := range map[string]string{"application": h.DB.App, "owner": h.DB.Owner} {
		conn, err := pgx.Connect(t.Context(), dsn)
		must(t, err)
		for _, sql := range []string{"UPDATE rh.reading SET value = 2", "DELETE FROM rh.reading", "TRUNCATE rh.reading", "UPDATE rh.act SET body = ''"} {
			if _, err := conn.Exec(t.Context(), sql); err == nil {
				t.Errorf("the %s role could %s", role, sql)
			}
		}
		must(t, conn.Close(t.Context()))
	}
}
