package main

import (
	"context"
	"fmt"
	"io"
	"net/http"
	"net/url"
	"os"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"

	"ratehouse/store"
	"ratehouse/store/storetest"
)

func get(t testing.TB, url string) (int, string) {
	t.Helper()
	a, err := client.Get(url)
	if err != nil {
		t.Fatal(err)
	}
	defer a.Body.Close()
	text, err := io.ReadAll(a.Body)
	if err != nil {
		t.Fatal(err)
	}
	return a.StatusCode, string(text)
}

// The private way from nothing: serve on an empty folder, let people and programs in beside it, sign
// in, end, start again.
func TestServeFromNothing(t *testing.T) {
	t.Parallel()
	data := dataDir(t)
	env := []string{"RATEHOUSE_DATA=" + filepath.Join(data, "house"), "RATEHOUSE_METRICS_ADDR=127.0.0.1:0"}
	s := serve(t, env)
	if code, text := get(t, s.base+"/readyz"); code != 200 {
		t.Errorf("/readyz: %d %s", code, text)
	}
	runs(t, "a quiet morning\n", env, "account", "add", "-role", "manager", "-title", "Edda Lorne", "edda").want(t, 0, "Edda Lorne (manager) may now sign in as edda")
	secret := strings.TrimSpace(runs(t, "", env, "token", "add", "-account", "edda", "-scope", "read", "list").want(t, 0, "rh_").stdout)
	if code, err := ask(context.Background(), "GET", s.base+"/api/v1/batches", secret, nil, nil); code != 200 {
		t.Errorf("with the token: %v", err)
	}
	signIn(t, s.base)
	keyFile := filepath.Join(data, "house", "signing.pem")
	info, err := os.Stat(keyFile)
	if err != nil || info.Mode().Perm() != 0o600 {
		t.Errorf("signing key: %v, %v", info, err)
	}
	was, err := os.ReadFile(keyFile)
	if err != nil {
		t.Fatal(err)
	}
	metrics := strings.TrimPrefix(<-s.metrics, "metrics on ")
	if code, text := get(t, metrics); code != 200 || !strings.Contains(text, `ratehouse_requests_total{method="GET",route="/api/v1/batches",status="200"} 1`) || strings.Contains(text, "rh_") {
		t.Errorf("%s: %d %.500s", metrics, code, text)
	}
	runs(t, "", env, "serve").want(t, 2, "is in use by another running program")
	if err := s.cmd.Process.Signal(syscall.SIGTERM); err != nil {
		t.Fatal(err)
	}
	if code := s.wait(t); code != 0 {
		t.Errorf("asked to end, it ended with code %d:\n%s", code, s.said())
	}
	again := serve(t, env)
	if now, err := os.ReadFile(keyFile); err != nil || string(now) != string(was) {
		t.Errorf("the signing key changed: %v", err)
	}
	signIn(t, again.base)
	if text := s.said(); !strings.Contains(text, "RATEHOUSE_METRICS_ADDR") || strings.Contains(text, secret) || strings.Contains(text, "a quiet morning") {
		t.Errorf("the log does not show the configuration, or shows a secret:\n%s", text)
	}
}

func signIn(t testing.TB, base string) {
	t.Helper()
	c := *client
	c.CheckRedirect = func(*http.Request, []*http.Request) error { return http.ErrUseLastResponse }
	a, err := c.PostForm(base+"/login", url.Values{"name": {"edda"}, "password": {"a quiet morning"}})
	if err != nil {
		t.Fatal(err)
	}
	a.Body.Close()
	if a.StatusCode != http.StatusSeeOther {
		t.Errorf("signing in: status %d", a.StatusCode)
	}
}

// While it ends, /readyz says no and requests are still answered.
func TestServeGrace(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	s := serve(t, []string{"DATABASE_URL=" + h.DB.App, "RATEHOUSE_DATA=" + dataDir(t)}, "-grace", "3s")
	if code, _ := get(t, s.base+"/readyz"); code != 200 {
		t.Errorf("/readyz: %d", code)
	}
	if err := s.cmd.Process.Signal(syscall.SIGTERM); err != nil {
		t.Fatal(err)
	}
	for {
		code, text := get(t, s.base+"/readyz") // fails the test if the listener closes before it says no
		if code == 503 && strings.Contains(text, "ending") {
			break
		}
	}
	if code, _ := get(t, s.base+"/login"); code != 200 {
		t.Errorf("/login while ending: %d", code)
	}
	if code := s.wait(t); code != 0 {
		t.Errorf("ended with code %d:\n%s", code, s.said())
	}
}

func TestServeEndsWithItsDatabase(t *testing.T) {
	t.Parallel()
	data := dataDir(t)
	s := serve(t, []string{"RATEHOUSE_DATA=" + data})
	if err := syscall.Kill(postmaster(t, data), syscall.SIGKILL); err != nil {
		t.Fatal(err)
	}
	if code := s.wait(t); code != 2 || !strings.Contains(s.said(), "the private database has ended by itself") {
		t.Errorf("code %d:\n%s", code, s.said())
	}
}

func TestServeRefusals(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	data := dataDir(t)
	demo := storetest.New(t)
	if err := demo.SetHouse(t.Context(), demo.Manager, store.House{Title: "Demo", Zone: time.UTC, Demo: true}); err != nil {
		t.Fatal(err)
	}
	open := filepath.Join(data, "open")
	if err := os.MkdirAll(open, 0o711); err != nil {
		t.Fatal(err)
	}
	for name, c := range map[string]struct {
		env  []string
		args []string
		said string
	}{
		"owner":            {[]string{"DATABASE_URL=" + h.DB.Owner}, nil, "could change or remove evidence"},
		"demo":             {[]string{"DATABASE_URL=" + demo.DB.App}, nil, "belongs to a demonstration"},
		"no schema":        {[]string{"DATABASE_URL=" + storetest.Empty(t).App}, nil, "run 'ratehouse migrate'"},
		"no database":      {[]string{"DATABASE_URL=host=127.0.0.1 port=1 user=x dbname=x"}, nil, "does not answer"},
		"no address":       {[]string{"DATABASE_URL=postgres://u:geheim@h:x/"}, nil, "DATABASE_URL is no database address"},
		"no port":          {[]string{"RATEHOUSE_ADDR=localhost"}, nil, "RATEHOUSE_ADDR"},
		"flag wins":        {[]string{"DATABASE_URL=" + h.DB.App, "RATEHOUSE_URL=https://bench.example"}, []string{"-url", "bench"}, "RATEHOUSE_URL"},
		"half of TLS":      {[]string{"RATEHOUSE_TLS_CERT=x"}, nil, "belong together"},
		"no certificate":   {[]string{"DATABASE_URL=" + h.DB.App, "RATEHOUSE_TLS_CERT=/nowhere", "RATEHOUSE_TLS_KEY=/nowhere"}, nil, "RATEHOUSE_TLS_CERT"},
		"proxies":          {[]string{"RATEHOUSE_TRUSTED_PROXIES=10.0.0.0/8 x"}, nil, "RATEHOUSE_TRUSTED_PROXIES"},
		"foreign folder":   {[]string{"RATEHOUSE_DATA=/proc"}, nil, "/proc"},
		"unknown flag":     {nil, []string{"-colour", "red"}, "colour"},
		"address not ours": {[]string{"DATABASE_URL=" + h.DB.App}, []string{"-addr", "192.0.2.1:80"}, "RATEHOUSE_ADDR 192.0.2.1:80"},
		"broken key":       {[]string{"DATABASE_URL=" + h.DB.App, "RATEHOUSE_DATA=" + keyed(t, "nonsense", 0o600)}, nil, "signing key"},
		"open key":         {[]string{"DATABASE_URL=" + h.DB.App, "RATEHOUSE_DATA=" + keyed(t, "nonsense", 0o644)}, nil, "can be read by others"},
	} {
		t.Run(name, func(t *testing.T) {
			t.Parallel()
			env := append([]string{"RATEHOUSE_DATA=" + open, "RATEHOUSE_ADDR=127.0.0.1:0"}, c.env...)
			r := runs(t, "", env, append([]string{"serve"}, c.args...)...).want(t, 2, c.said)
			if strings.Contains(r.stderr, "geheim") || strings.Contains(r.stdout, "listening") {
				t.Errorf("it shows a password, or listened:\n%s%s", r.stdout, r.stderr)
			}
		})
	}
}

func keyed(t *testing.T, text string, mode os.FileMode) string {
	t.Helper()
	dir := dataDir(t)
	file := filepath.Join(dir, "signing.pem")
	if err := os.WriteFile(file, []byte(text), mode); err != nil {
		t.Fatal(err)
	}
	if err := os.Chmod(file, mode); err != nil {
		t.Fatal(err)
	}
	return dir
}

// An outside database is migrated by its owner and by nobody else, and then serves.
func TestMigrateThenServe(t *testing.T) {
	t.Parallel()
	db := storetest.Empty(t)
	app, owner := "DATABASE_URL="+db.App, "DATABASE_OWNER_URL="+db.Owner
	data := "RATEHOUSE_DATA=" + dataDir(t)
	runs(t, "", []string{app, data}, "migrate").want(t, 2, "DATABASE_OWNER_URL is missing")
	runs(t, "", []string{"DATABASE_OWNER_URL=" + db.Read, data}, "migrate").want(t, 2, "permission denied")
	runs(t, "", []string{app, owner, data}, "migrate").want(t, 0, "applied 00001_")
	runs(t, "", []string{app, owner, data}, "migrate").want(t, 0, "the database is up to date")
	s := serve(t, []string{app, owner, data})
	if code, text := get(t, s.base+"/readyz"); code != 200 {
		t.Errorf("/readyz: %d %s", code, text)
	}
}

func TestServeTLS(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	cert, key := selfSigned(t)
	s := serve(t, []string{"DATABASE_URL=" + h.DB.App, "RATEHOUSE_DATA=" + dataDir(t), "RATEHOUSE_TLS_CERT=" + cert, "RATEHOUSE_TLS_KEY=" + key})
	if !strings.HasPrefix(s.base, "https://") {
		t.Fatalf("listening on %s", s.base)
	}
	c := trusting(t, cert)
	a, err := c.Get(s.base + "/healthz")
	if err != nil {
		t.Fatal(err)
	}
	a.Body.Close()
	if a.StatusCode != 200 || a.ProtoMajor != 2 {
		t.Errorf("status %d over %s", a.StatusCode, a.Proto)
	}
}

func TestAccountCommands(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	env := []string{"DATABASE_URL=" + h.DB.App}
	add := func(stdin string, args ...string) ran {
		return runs(t, stdin, env, append([]string{"account", "add"}, args...)...)
	}
	add("a quiet evening\r\n", "-role", "technician", "-title", "Ada Brink", "ada").want(t, 0, "Ada Brink")
	if _, _, err := h.LogIn(t.Context(), "ada", "a quiet evening"); err != nil {
		t.Errorf("signing in: %v", err)
	}
	add("a quiet evening\n", "-role", "technician", "-title", "Ada Brink", "ada").want(t, 1, "already")
	add("short\n", "-role", "technician", "-title", "x", "bob").want(t, 1, "at least 12")
	add("", "-role", "technician", "-title", "x", "bob").want(t, 2, "no password on standard input")
	add("a quiet evening\n", "-role", "boss", "-title", "x", "bob").want(t, 1, "role: ")
	add("a quiet evening\n", "-role", "lead", "bob").want(t, 1, "title: ")
	add("a quiet evening\n", "-password", "a quiet evening", "bob").want(t, 2, "not defined: -password")
	runs(t, "", env, "account", "list").want(t, 0, "ada")
	runs(t, "", env, "account", "disable", "ada").want(t, 0, "")
	if r := runs(t, "", env, "account", "list"); !strings.Contains(line(r.stdout, "ada"), "disabled") {
		t.Errorf("%s", r.stdout)
	}
	runs(t, "", env, "account", "disable", "nobody").want(t, 1, "nobody")
	runs(t, "", env, "account").want(t, 2, "Usage")
	runs(t, "", env, "account", "promote", "ada").want(t, 2, "Usage")
	for _, c := range []string{"account", "token", "serve", "migrate"} {
		r := runs(t, "", nil, c, "-h").want(t, 0, "Example")
		if !strings.Contains(r.stdout, "DATABASE_URL") {
			t.Errorf("%s -h does not name the settings:\n%s", c, r.stdout)
		}
	}
	runs(t, "", nil, "account", "add", "-h").want(t, 0, "Usage")
}

func line(text, with string) string {
	for l := range strings.Lines(text) {
		if strings.Contains(l, with) {
			return l
		}
	}
	return ""
}

func TestTokenCommands(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	env := []string{"DATABASE_URL=" + h.DB.App}
	r := runs(t, "", env, "token", "add", "-account", "technician", "-scope", "readings", "-scope", "read", "-station", "BENCH-3", "-ends", "2030-01-31", "bench 3").want(t, 0, "rh_")
	secret := strings.TrimSpace(r.stdout)
	a, err := h.Token(t.Context(), secret)
	if err != nil || a.Station != "BENCH-3" || !a.Has(store.ScopeRead) || !a.Has(store.ScopeReadings) || a.Has(store.ScopeBatches) {
		t.Errorf("%+v, %v", a, err)
	}
	list := runs(t, "", env, "token", "list").want(t, 0, "bench 3")
	if strings.Contains(list.stdout+list.stderr, secret) {
		t.Error("the list shows the secret")
	}
	id, _, _ := strings.Cut(line(list.stdout, "bench 3"), " ")
	runs(t, "", env, "token", "revoke", id).want(t, 0, "")
	if _, err := h.Token(t.Context(), secret); store.KindOf(err) != store.KindUnauthenticated {
		t.Errorf("after revoking: %v", err)
	}
	for _, c := range []struct {
		args []string
		code int
		said string
	}{
		{[]string{"add", "-account", "nobody", "-scope", "read", "x"}, 1, "nobody"},
		{[]string{"add", "-account", "technician", "x"}, 1, "scopes: "},
		{[]string{"add", "-account", "technician", "-scope", "all", "x"}, 1, "all"},
		{[]string{"add", "-account", "technician", "-scope", "read", "-ends", "soon", "x"}, 2, "-ends"},
		{[]string{"add", "-account", "technician", "-scope", "read", "-ends", "2020-01-31", "x"}, 1, "future"},
		{[]string{"add", "-account", "technician", "-scope", "read"}, 2, "Usage"},
		{[]string{"revoke", "bench"}, 2, "token list"},
		{[]string{"revoke", "00000000-0000-0000-0000-000000000001"}, 1, ""},
		{[]string{"list", "x"}, 2, "Usage"},
		{nil, 2, "Usage"},
	} {
		t.Run(fmt.Sprint(c.args), func(t *testing.T) {
			runs(t, "", env, append([]string{"token"}, c.args...)...).want(t, c.code, c.said)
		})
	}
}
