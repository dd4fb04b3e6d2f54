package main

import (
	"context"
	"fmt"
	"math/rand/v2"
	"os"
	"strings"
	"sync"
	"sync/atomic"
	"syscall"
	"testing"
	"time"

	"github.com/google/uuid"
)

const (
	killMovements = 240 // of one round
	killWriters   = 8
)

// kinds of death, in turn.
var deaths = []string{"server and database", "database", "server"}

// TestSoakKill kills the service, its database or both while a round is being saved through the API,
// starts it again and sends the whole round once more: nothing that was acknowledged is missing, and
// nothing is there twice.
func TestSoakKill(t *testing.T) {
	kills := 2
	if os.Getenv("RATEHOUSE_SOAK") != "" {
		kills = 20
	}
	data := dataDir(t)
	env := []string{"RATEHOUSE_DATA=" + data}
	s := serve(t, env)
	runs(t, "a quiet morning\n", env, "account", "add", "-role", "technician", "-title", "Ilse Marden", "ilse").want(t, 0, "ilse")
	token := strings.TrimSpace(runs(t, "", env, "token", "add", "-account", "ilse", "-scope", "read,readings,batches", "bench").want(t, 0, "rh_").stdout)
	acked := 0
	for n := range kills {
		k := &killed{t: t, token: token, code: fmt.Sprintf("KILL-%d", n), began: time.Now().UTC()}
		k.register(s.base)
		k.make()
		go k.write(s.base)
		acked += k.strike(s, data, deaths[n%len(deaths)], 20+rand.IntN(killMovements/2))
		s = serve(t, env)
		k.again(s.base)
		k.check(s.base)
	}
	t.Logf("%d kills; %d readings were acknowledged before them, none is missing or doubled", kills, acked)
}

// killed is one round and what is known of it.
type killed struct {
	t     *testing.T
	token string
	code  string
	began time.Time
	items []item
	acked atomic.Int32
	done  sync.WaitGroup
	key   string
}

// item is one reading to be saved. acked and nth belong to its writer until it is done.
type item struct {
	body  map[string]any
	acked bool
	nth   int
}

type answers struct {
	Items []struct {
		ID     string
		Status string
		Code   string
		Nth    int
	}
}

func (k *killed) register(base string) {
	k.t.Helper()
	k.key = uuid.NewString()
	if err := k.tryRegister(base); err != nil {
		k.t.Fatal(err)
	}
}

func (k *killed) tryRegister(base string) error {
	serials := make([]string, killMovements)
	for i := range serials {
		serials[i] = fmt.Sprintf("S-%04d", i+1)
	}
	_, err := ask(context.Background(), "POST", base+"/api/v1/batches", k.token, map[string]any{"code": k.code, "programme": "iso3159", "category": "1",
		"depositor": "KESTWICK", "starts_at": k.began.Format(time.RFC3339), "entry": "state", "serials": serials}, nil, "Idempotency-Key", k.key)
	return err
}

func (k *killed) make() {
	k.items = make([]item, killMovements)
	k.done.Add(killWriters)
	for i := range k.items {
		k.items[i].body = map[string]any{"id": uuid.Must(uuid.NewV7()).String(), "batch": k.code, "serial": fmt.Sprintf("S-%04d", i+1), "step": 0,
			"kind": "state", "method": "station", "value": fmt.Sprintf("0.%03d", i), "read_at": k.began.Format(time.RFC3339)}
	}
}

// post sends items and gives what became of them.
func (k *killed) post(base string, items []item) (answers, error) {
	var a answers
	bodies := make([]map[string]any, len(items))
	for i := range items {
		bodies[i] = items[i].body
	}
	_, err := ask(context.Background(), "POST", base+"/api/v1/readings", k.token, map[string]any{"sent_at": time.Now().UTC().Format(time.RFC3339Nano), "readings": bodies}, &a)
	if err == nil && len(a.Items) != len(items) {
		err = fmt.Errorf("%d answers to %d items", len(a.Items), len(items))
	}
	return a, err
}

// write saves the round by several writers at once, one to three readings a call, until the service
// dies under them.
func (k *killed) write(base string) {
	for w := range killWriters {
		go func() {
			defer k.done.Done()
			mine := k.items[w*killMovements/killWriters : (w+1)*killMovements/killWriters]
			for len(mine) > 0 {
				n := min(1+len(mine)%3, len(mine))
				a, err := k.post(base, mine[:n])
				if err != nil {
					return // killed, or its database was
				}
				for i, r := range a.Items {
					if r.Status != "accepted" && r.Status != "duplicate" {
						k.t.Errorf("%s: %s %s", mine[i].body["serial"], r.Status, r.Code)
					}
					mine[i].acked, mine[i].nth = true, r.Nth
				}
				k.acked.Add(int32(n))
				mine = mine[n:]
			}
		}()
	}
}

// strike kills once so many readings are acknowledged, waits until all is quiet, and tells how many
// were by then.
func (k *killed) strike(s *serving, data, death string, after int) int {
	k.t.Helper()
	db := postmaster(k.t, data)
	for int(k.acked.Load()) < after {
		select {
		case <-s.ended:
			k.t.Fatalf("the service ended by itself:\n%s", s.said())
		case <-time.After(time.Millisecond):
		}
	}
	if strings.Contains(death, "server") {
		s.cmd.Process.Kill()
	}
	if strings.Contains(death, "database") {
		if err := syscall.Kill(db, syscall.SIGKILL); err != nil {
			k.t.Errorf("the database is not there to be killed: %v", err)
		}
	}
	if code := s.wait(k.t); code == 0 {
		k.t.Errorf("after the death of %s the service ended with code 0", death)
	}
	k.done.Wait()
	if int(k.acked.Load()) == killMovements {
		k.t.Logf("%s: the round was saved before the blow fell", k.code)
	}
	return int(k.acked.Load())
}

// again sends the whole round once more, as a station does that does not know what arrived, and the
// registration too.
func (k *killed) again(base string) {
	k.t.Helper()
	if err := k.tryRegister(base); err != nil {
		k.t.Errorf("registering again: %v", err)
	}
	for from := 0; from < len(k.items); from += 100 {
		part := k.items[from:min(from+100, len(k.items))]
		a, err := k.post(base, part)
		if err != nil {
			k.t.Fatal(err)
		}
		for i, r := range a.Items {
			switch it := part[i]; {
			case it.acked && (r.Status != "duplicate" || r.Nth != it.nth):
				k.t.Errorf("%s was acknowledged as entry %d; sent again: %s %s, entry %d", it.body["serial"], it.nth, r.Status, r.Code, r.Nth)
			case r.Status != "accepted" && r.Status != "duplicate":
				k.t.Errorf("%s sent again: %s %s", it.body["serial"], r.Status, r.Code)
			}
		}
	}
}

// check looks at every movement: one reading, the one that was sent.
func (k *killed) check(base string) {
	k.t.Helper()
	for _, it := range k.items {
		var m struct {
			Readings []struct {
				ID, Value string
				Nth       int
			}
		}
		if _, err := ask(context.Background(), "GET", fmt.Sprintf("%s/api/v1/batches/%s/movements/%s", base, k.code, it.body["serial"]), k.token, nil, &m); err != nil {
			k.t.Fatal(err)
		}
		if len(m.Readings) != 1 || m.Readings[0].ID != it.body["id"] || m.Readings[0].Nth != 1 {
			k.t.Errorf("%s: sent %v, there is %+v", it.body["serial"], it.body["value"], m.Readings)
		}
	}
}
