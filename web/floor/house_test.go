package floor_test

import (
	"fmt"
	"log/slog"
	"net/http"
	"net/http/httptest"
	"strings"
	"sync/atomic"
	"testing"
	"time"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/web"
	"ratehouse/web/webtest"
)

// bench is a technician at a tab of a laboratory.
func bench(t *testing.T) (*storetest.House, *webtest.Tab) {
	t.Helper()
	h := storetest.New(t)
	return h, webtest.Start(t, webtest.Serve(t, h.Lab))
}

// in lays a batch into holders of a type.
func in(kind string) func(*store.NewBatch) {
	return func(n *store.NewBatch) { n.HolderType = kind }
}

// ready is a laboratory with one batch 26-001 of n movements whose round 0 is open, and a technician at
// its page.
func ready(t *testing.T, n int, change ...func(*store.NewBatch)) (*storetest.House, *webtest.Tab) {
	t.Helper()
	h, tab := bench(t)
	h.Batch(t, "26-001", n, change...)
	open(t, h, 0)
	tab.SignIn("technician", storetest.Password)
	tab.Go("/batches/26-001/rounds/0")
	return h, tab
}

func open(t *testing.T, h *storetest.House, k int) {
	t.Helper()
	if err := h.OpenRound(t.Context(), h.Technician, "26-001", k); err != nil {
		t.Fatal(err)
	}
}

// tomorrow is the next morning: the round of that day is open, and whoever comes in signs in again.
func tomorrow(t *testing.T, h *storetest.House, tab *webtest.Tab, k int) {
	t.Helper()
	h.Clock.Advance(24 * time.Hour)
	open(t, h, k)
	tab.SignIn("technician", storetest.Password)
	tab.Go(fmt.Sprintf("/batches/26-001/rounds/%d", k))
}

// settled waits until the queue of the page is empty.
func settled(tab *webtest.Tab) {
	tab.T.Helper()
	tab.Until(`document.querySelectorAll(".holder .kept").length === 0 && document.querySelector("#saved").textContent !== ""`)
}

// readings lists what is kept of movement i of 26-001: step, entry, value or observation, reason.
func readings(t *testing.T, h *storetest.House, i int) (out []string) {
	t.Helper()
	s, err := h.MovementSheet(t.Context(), h.Lead, "26-001", storetest.Serial(i))
	if err != nil {
		t.Fatal(err)
	}
	for _, r := range s.Readings {
		out = append(out, strings.TrimSpace(fmt.Sprintf("%d/%d %s%s %s", r.Step, r.Nth, r.Value, r.Code, r.Reason)))
	}
	return out
}

func wantReadings(t *testing.T, h *storetest.House, i int, want ...string) {
	t.Helper()
	if got := readings(t, h, i); strings.Join(got, "; ") != strings.Join(want, "; ") {
		t.Errorf("readings of %s: %q, want %q", storetest.Serial(i), got, want)
	}
}

// faulty serves the laboratory through a network that can fail.
type faulty struct {
	mode  atomic.Value // "", "down": 503 before anything is done; "lost": 503 after it was done
	calls atomic.Int64 // of readings
}

func (f *faulty) serve(t *testing.T, lab *store.Lab) string {
	t.Helper()
	f.mode.Store("")
	inner, err := web.New(web.Config{Lab: lab, Logger: slog.New(slog.DiscardHandler)})
	if err != nil {
		t.Fatal(err)
	}
	s := httptest.NewServer(http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		if r.Method != http.MethodPost || !strings.HasSuffix(r.URL.Path, "/readings") {
			inner.ServeHTTP(w, r)
			return
		}
		f.calls.Add(1)
		switch f.mode.Load() {
		case "down":
			http.Error(w, "down", http.StatusServiceUnavailable)
		case "lost":
			inner.ServeHTTP(httptest.NewRecorder(), r)
			http.Error(w, "lost on its way", http.StatusServiceUnavailable)
		default:
			inner.ServeHTTP(w, r)
		}
	}))
	t.Cleanup(s.Close)
	return s.URL
}

// run runs a statement in the page.
func run(tab *webtest.Tab, js string) {
	tab.T.Helper()
	webtest.Eval[bool](tab, "(("+js+"), true)")
}
