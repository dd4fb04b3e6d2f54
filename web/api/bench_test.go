package api_test

import (
	"bytes"
	"fmt"
	"io"
	"net/http"
	"net/http/httptest"
	"sync"
	"sync/atomic"
	"testing"
	"time"

	"github.com/google/uuid"

	"ratehouse/store"
	"ratehouse/store/storetest"
)

const (
	benchClients   = 16
	benchMovements = 2000
	benchSaves     = 1000 // a leg
	benchLegs      = 4    // each way, in turn, so that a busy moment hits both
)

// BenchmarkSaveOverHTTP saves one reading a call by sixteen clients over HTTP, token and all, and by
// sixteen callers of the same verb; it prints the ratio (target: 2).
func BenchmarkSaveOverHTTP(b *testing.B) {
	h := newHouse(b)
	h.Batch(b, "26-001", benchMovements)
	h.Clock.Advance(15 * 24 * time.Hour)
	server := httptest.NewServer(h.handler)
	defer server.Close()
	client := &http.Client{Transport: &http.Transport{MaxIdleConnsPerHost: benchClients}}
	var next atomic.Int64
	cell := func() (i, k int, at time.Time) {
		n := int(next.Add(1)) - 1
		i, k = n%benchMovements+1, n/benchMovements
		return i, k, storetest.Start.Add(time.Duration(k) * 24 * time.Hour)
	}
	direct := func() error {
		i, k, at := cell()
		answers, err := h.Save(b.Context(), h.Technician, h.Clock.Now(), []store.Entry{{ID: uuid.Must(uuid.NewV7()), Batch: "26-001", Serial: storetest.Serial(i),
			Step: k, Day: -1, Kind: store.KindState, Method: store.Typed, Value: "0.5", ReadAt: at}})
		if err == nil && answers[0].Status != store.Accepted {
			err = fmt.Errorf("%+v", answers[0])
		}
		return err
	}
	overHTTP := func() error {
		i, k, at := cell()
		body := h.body(h.state(i, k, "0.5").with("read_at", at.Format(time.RFC3339)))
		r, err := http.NewRequest("POST", server.URL+"/api/v1/readings", bytes.NewReader([]byte(body)))
		if err != nil {
			return err
		}
		r.Header.Set("Authorization", "Bearer "+h.all)
		r.Header.Set("Content-Type", "application/json")
		a, err := client.Do(r)
		if err != nil {
			return err
		}
		defer a.Body.Close()
		text, err := io.ReadAll(a.Body)
		if err == nil && !bytes.Contains(text, []byte(`"accepted"`)) {
			err = fmt.Errorf("status %d: %s", a.StatusCode, text)
		}
		return err
	}
	for b.Loop() {
		next.Store(0)
		var way [2]time.Duration
		for range benchLegs {
			way[0] += leg(b, direct)
			way[1] += leg(b, overHTTP)
		}
		if b.N > 1 {
			b.Fatal("run it with -benchtime 1x: its cells are counted")
		}
		b.ReportMetric(float64(way[1])/float64(way[0]), "HTTP/direct")
		b.ReportMetric(benchLegs*benchSaves/way[1].Seconds(), "saves/s_HTTP")
		b.ReportMetric(benchLegs*benchSaves/way[0].Seconds(), "saves/s_direct")
	}
}

// leg saves so many readings by so many at once.
func leg(b *testing.B, save func() error) time.Duration {
	b.Helper()
	var left atomic.Int64
	left.Store(benchSaves)
	var wg sync.WaitGroup
	began := time.Now()
	for range benchClients {
		wg.Go(func() {
			for left.Add(-1) >= 0 {
				if err := save(); err != nil {
					b.Error(err)
					return
				}
			}
		})
	}
	wg.Wait()
	return time.Since(began)
}
