package desk_test

import (
	"bytes"
	"compress/gzip"
	"context"
	"encoding/binary"
	"net"
	"net/http"
	"net/http/httptest"
	"sync/atomic"
	"testing"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/web/desk"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

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

// counted opens the laboratory again through a connection that counts.
func counted(t testing.TB, h *storetest.House) (*store.Lab, *asked) {
	t.Helper()
	n := &asked{}
	lab, err := store.Open(t.Context(), store.Config{DSN: h.DB.App, Clock: h.Clock.Now, Engine: "test", Conns: 1,
		Dial: func(ctx context.Context, network, addr string) (net.Conn, error) {
			c, err := new(net.Dialer).DialContext(ctx, network, addr)
			return &listening{Conn: c, asked: n}, err
		}})
	must(t, err)
	t.Cleanup(lab.Close)
	return lab, n
}

// render draws a page as somebody sees it, without a server.
func render(t testing.TB, h *storetest.House, as store.Actor, handler page.Handler, path string, params ...string) []byte {
	t.Helper()
	r := httptest.NewRequestWithContext(t.Context(), http.MethodGet, path, nil)
	for i := 0; i+1 < len(params); i += 2 {
		r.SetPathValue(params[i], params[i+1])
	}
	c := &page.Context{Printer: words.New(words.EN, nil), Actor: as, SignedIn: true, House: h.House(), Now: h.Lab.Now(), Path: path, Nav: page.Navigation}
	w := httptest.NewRecorder()
	must(t, handler(w, r.WithContext(page.With(r.Context(), c))))
	if w.Code != http.StatusOK {
		t.Fatalf("%s: %d", path, w.Code)
	}
	return w.Body.Bytes()
}

func zipped(t testing.TB, body []byte) int {
	t.Helper()
	var b bytes.Buffer
	z := gzip.NewWriter(&b)
	_, err := z.Write(body)
	must(t, err)
	must(t, z.Close())
	return b.Len()
}

// A batch of 5,000 costs as many queries as one of 5, and its page fits into 60 kB.
func TestBatchPageOfFiveThousand(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	lot(t, h, "26-005", 5, 1, 1)
	lot(t, h, "26-500", 5000, 1, 2)
	lab, n := counted(t, h)
	pages := desk.New(lab)
	cost := func(code string) (queries, trips int64, body []byte) {
		render(t, h, h.Lead, pages.Batch, "/batches/"+code, "code", code) // statements are prepared once
		queries, trips = n.queries.Load(), n.trips.Load()
		body = render(t, h, h.Lead, pages.Batch, "/batches/"+code, "code", code)
		return n.queries.Load() - queries, n.trips.Load() - trips, body
	}
	few, fewTrips, _ := cost("26-005")
	many, manyTrips, body := cost("26-500")
	if few != many || few == 0 || fewTrips != manyTrips || manyTrips > 2 {
		t.Errorf("5 movements cost %d queries in %d trips, 5,000 cost %d in %d", few, fewTrips, many, manyTrips)
	}
	fits(t, "5,000 movements", body)
	if rows := len(rowsOf(parse(t, string(body)))); rows != 200 {
		t.Errorf("%d rows on a page", rows)
	}
}

// The heaviest page is one of a finished batch whose holders are still drawn.
func TestBatchPageOfFourHundred(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	lot(t, h, "26-400", 400, 15, 2)
	fits(t, "400 finished movements", render(t, h, h.Lead, desk.New(h.Lab).Batch, "/batches/26-400", "code", "26-400"))
}

func fits(t *testing.T, what string, body []byte) {
	t.Helper()
	const most = 60_000
	size := zipped(t, body)
	if size > most {
		t.Errorf("the page of %s has %d bytes compressed, %d at most", what, size, most)
	}
	t.Logf("the page of %s: %d bytes, %d compressed", what, len(body), size)
}

// BenchmarkBatchPage prints what the page of 5,000 movements costs beside the bare fetch of their
// series: of a running batch, where every movement is asked whether it can still pass, and of a
// finished one.
func BenchmarkBatchPage(b *testing.B) {
	h := storetest.New(b)
	lot(b, h, "26-009", 5000, 9, 2)
	lot(b, h, "26-015", 5000, 15, 2)
	lab, _ := counted(b, h)
	pages := desk.New(lab)
	series := h.Fetcher(b)
	for _, code := range []string{"26-009", "26-015"} {
		var fetch float64
		b.Run(code+"/series", func(b *testing.B) {
			for b.Loop() {
				if n := series(code); n != 5000 {
					b.Fatalf("%d series", n)
				}
			}
			fetch = float64(b.Elapsed().Nanoseconds()) / float64(b.N)
		})
		b.Run(code+"/sheet", func(b *testing.B) {
			for b.Loop() {
				_, err := lab.BatchSheet(b.Context(), h.Lead, code)
				must(b, err)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/fetch, "x_series")
		})
		b.Run(code+"/page", func(b *testing.B) {
			for b.Loop() {
				render(b, h, h.Lead, pages.Batch, "/batches/"+code, "code", code)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/fetch, "x_series")
		})
		b.Run(code+"/aim", func(b *testing.B) { // asked for after the page, by itself
			for b.Loop() {
				render(b, h, h.Lead, pages.Aim, "/batches/"+code+"/aim?alone=yes", "code", code)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/fetch, "x_series")
		})
	}
}
