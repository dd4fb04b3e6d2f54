package web

import (
	"bytes"
	"encoding/json"
	"errors"
	"io"
	"log/slog"
	"net/http"
	"net/http/cookiejar"
	"net/http/httptest"
	"net/netip"
	"net/url"
	"strings"
	"testing"
	"time"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/web/page"
)

// client is a browser without a window: it keeps cookies and follows nothing.
type client struct {
	t    *testing.T
	http *http.Client
	base string
}

func serve(t *testing.T, c Config) (*client, *bytes.Buffer) {
	t.Helper()
	var log bytes.Buffer
	c.Logger = slog.New(slog.NewJSONHandler(&log, nil))
	h, err := New(c)
	if err != nil {
		t.Fatal(err)
	}
	s := httptest.NewServer(h)
	t.Cleanup(s.Close)
	jar, err := cookiejar.New(nil)
	if err != nil {
		t.Fatal(err)
	}
	return &client{t, &http.Client{Jar: jar, CheckRedirect: func(*http.Request, []*http.Request) error { return http.ErrUseLastResponse }}, s.URL}, &log
}

func (c *client) do(r *http.Request, err error) (*http.Response, string) {
	c.t.Helper()
	if err != nil {
		c.t.Fatal(err)
	}
	res, err := c.http.Do(r)
	if err != nil {
		c.t.Fatal(err)
	}
	body, err := io.ReadAll(res.Body)
	if err := errors.Join(err, res.Body.Close()); err != nil {
		c.t.Fatal(err)
	}
	return res, string(body)
}

func (c *client) get(path string, header ...string) (*http.Response, string) {
	c.t.Helper()
	r, err := http.NewRequestWithContext(c.t.Context(), "GET", c.base+path, nil)
	for i := 0; i+1 < len(header); i += 2 {
		r.Header.Set(header[i], header[i+1])
	}
	return c.do(r, err)
}

func (c *client) post(path string, form url.Values, header ...string) (*http.Response, string) {
	c.t.Helper()
	r, err := http.NewRequestWithContext(c.t.Context(), "POST", c.base+path, strings.NewReader(form.Encode()))
	r.Header.Set("Content-Type", "application/x-www-form-urlencoded")
	for i := 0; i+1 < len(header); i += 2 {
		r.Header.Set(header[i], header[i+1])
	}
	return c.do(r, err)
}

func (c *client) signIn(name, password, next string) (*http.Response, string) {
	c.t.Helper()
	return c.post("/login", url.Values{"name": {name}, "password": {password}, "next": {next}})
}

func TestSignInAndOut(t *testing.T) {
	t.Parallel()
	house := storetest.New(t)
	c, log := serve(t, Config{Lab: house.Lab})
	res, _ := c.signIn("Lead", storetest.Password, "/accounts?x=1")
	if res.StatusCode != 303 || res.Header.Get("Location") != "/accounts?x=1" {
		t.Errorf("signing in: %d to %q", res.StatusCode, res.Header.Get("Location"))
	}
	cookie := res.Header.Get("Set-Cookie")
	for _, want := range []string{"session=", "HttpOnly", "SameSite=Lax", "Path=/"} {
		if !strings.Contains(cookie, want) {
			t.Errorf("cookie %q lacks %s", cookie, want)
		}
	}
	if strings.Contains(cookie, "Expires") || strings.Contains(cookie, "Secure") {
		t.Errorf("over http the cookie is %q", cookie)
	}
	token := strings.TrimPrefix(strings.Split(cookie, ";")[0], "session=")
	if _, err := house.Session(t.Context(), token); err != nil {
		t.Errorf("the session: %v", err)
	}
	res, _ = c.post("/logout", nil)
	if res.StatusCode != 303 || res.Header.Get("Location") != "/login" {
		t.Errorf("signing out: %d to %q", res.StatusCode, res.Header.Get("Location"))
	}
	if _, err := house.Session(t.Context(), token); store.KindOf(err) != store.KindUnauthenticated {
		t.Errorf("after signing out the session gives %v", err)
	}
	c.get("/login?next=x=1")
	if s := log.String(); strings.Contains(s, token) || strings.Contains(s, storetest.Password) || strings.Contains(s, "x=1") {
		t.Error("the log holds a secret or a query")
	}
}

func TestNextStaysHere(t *testing.T) {
	t.Parallel()
	house := storetest.New(t)
	c, _ := serve(t, Config{Lab: house.Lab})
	for _, next := range []string{"//evil.example/x", "https://evil.example", `/\evil.example`, "/\t/evil.example", "evil", ""} {
		res, _ := c.signIn("lead", storetest.Password, next)
		if to := res.Header.Get("Location"); res.StatusCode != 303 || strings.Contains(to, "evil") {
			t.Errorf("next %q leads to %q (%d)", next, to, res.StatusCode)
		}
	}
}

func TestGuessingIsSlowedDown(t *testing.T) {
	t.Parallel()
	house := storetest.New(t)
	c, _ := serve(t, Config{Lab: house.Lab})
	for i := range triesFree {
		if res, _ := c.signIn("lead", "wrong password", ""); res.StatusCode != 422 {
			t.Fatalf("attempt %d: status %d, want 422", i+1, res.StatusCode)
		}
	}
	if res, body := c.signIn("lead", storetest.Password, ""); res.StatusCode != 429 || !strings.Contains(body, "Too many attempts") {
		t.Errorf("after %d failures the right password gives %d", triesFree, res.StatusCode)
	}
	if res, _ := c.signIn("manager", storetest.Password, ""); res.StatusCode != 303 {
		t.Errorf("another account: %d, want 303", res.StatusCode)
	}
	house.Clock.Advance(triesSpan + time.Second)
	if res, _ := c.signIn("lead", storetest.Password, ""); res.StatusCode != 303 {
		t.Errorf("after the wait: %d, want 303", res.StatusCode)
	}
}

func TestTriesDoNotGrow(t *testing.T) {
	t.Parallel()
	now := time.Date(2026, 12, 1, 8, 0, 0, 0, time.UTC)
	tr := newTries(func() time.Time { now = now.Add(time.Microsecond); return now })
	for i := range triesMost + 50 {
		tr.failed(string(rune(i)) + "x")
	}
	if len(tr.seen) > triesMost {
		t.Errorf("%d pairs are remembered, at most %d should be", len(tr.seen), triesMost)
	}
}

func TestForeignSitesAreRefused(t *testing.T) {
	t.Parallel()
	house := storetest.New(t)
	c, _ := serve(t, Config{Lab: house.Lab})
	form := url.Values{"name": {"lead"}, "password": {storetest.Password}}
	for _, header := range [][]string{{"Sec-Fetch-Site", "cross-site"}, {"Sec-Fetch-Site", "same-site"}, {"Origin", "https://evil.example"}} {
		if res, _ := c.post("/login", form, header...); res.StatusCode != 403 || res.Header.Get("Set-Cookie") != "" {
			t.Errorf("%v: status %d with cookie %q", header, res.StatusCode, res.Header.Get("Set-Cookie"))
		}
	}
	if res, _ := c.post("/login", form, "Sec-Fetch-Site", "same-origin"); res.StatusCode != 303 {
		t.Errorf("same origin: %d, want 303", res.StatusCode)
	}
}

func TestPublicAddressOverTLS(t *testing.T) {
	t.Parallel()
	house := storetest.New(t)
	c, _ := serve(t, Config{Lab: house.Lab, BaseURL: "https://bench.example"})
	res, _ := c.signIn("lead", storetest.Password, "")
	cookie := res.Header.Get("Set-Cookie")
	if !strings.HasPrefix(cookie, "__Host-session=") || !strings.Contains(cookie, "Secure") {
		t.Errorf("over https the cookie is %q", cookie)
	}
	for _, bad := range []string{"bench.example", "ftp://x", "https://", "https://x/path", "://"} {
		if _, err := New(Config{Lab: house.Lab, BaseURL: bad}); err == nil {
			t.Errorf("the public address %q was taken", bad)
		}
	}
}

func TestLanguageOfTheAccount(t *testing.T) {
	t.Parallel()
	house := storetest.New(t)
	c, _ := serve(t, Config{Lab: house.Lab})
	if _, body := c.get("/login", "Accept-Language", "fr-CH"); !strings.Contains(body, `<html lang="fr"`) || !strings.Contains(body, "Connexion") {
		t.Error("a French browser does not see French")
	}
	c.signIn("lead", storetest.Password, "")
	if res, _ := c.post("/language", url.Values{"language": {"de"}, "to": {"/batches"}}); res.StatusCode != 303 || res.Header.Get("Location") != "/batches" {
		t.Errorf("choosing German: %d to %q", res.StatusCode, res.Header.Get("Location"))
	}
	if _, body := c.get("/nowhere", "Accept-Language", "fr"); !strings.Contains(body, `<html lang="de"`) {
		t.Error("the account's language does not win over the browser's")
	}
	if res, _ := c.post("/language", url.Values{"language": {"xx"}}); res.StatusCode != 422 {
		t.Errorf("an unknown language: %d, want 422", res.StatusCode)
	}
}

func TestLargeBody(t *testing.T) {
	t.Parallel()
	c, _ := serve(t, Config{Lab: storetest.New(t).Lab})
	res, body := c.post("/login", url.Values{"name": {strings.Repeat("x", 10<<20)}})
	if res.StatusCode != 413 || !strings.Contains(body, "1,024") {
		t.Errorf("10 MB: status %d, %.200q", res.StatusCode, body)
	}
}

// What the database cannot keep is answered before it is asked: in a form, a path and a query.
func TestIllegibleText(t *testing.T) {
	t.Parallel()
	c, _ := serve(t, Config{Lab: storetest.New(t).Lab})
	texts := []string{"x\x00", "\xff"}
	for _, bad := range texts {
		if res, _ := c.post("/login", url.Values{"name": {bad}, "password": {"p"}}); res.StatusCode != 422 {
			t.Errorf("a form with %q: %d, want 422", bad, res.StatusCode)
		}
	}
	c.signIn("lead", storetest.Password, "")
	for _, bad := range texts {
		for _, address := range []string{"/batches/" + url.PathEscape(bad), "/search?q=" + url.QueryEscape(bad), "/api/v1/batches/" + url.PathEscape(bad)} {
			if res, _ := c.get(address); res.StatusCode != 404 {
				t.Errorf("%s: %d, want 404", address, res.StatusCode)
			}
		}
	}
}

// A stream of a page ends when the server is to end, and does not keep a session alive.
func TestLiveStream(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 1)
	stopping := make(chan struct{})
	c, _ := serve(t, Config{Lab: h.Lab, Stopping: stopping})
	c.signIn("lead", storetest.Password, "")
	ended := make(chan string)
	go func() {
		res, body := c.get("/batches/26-001/live")
		ended <- res.Header.Get("Content-Type") + " " + body
	}()
	close(stopping)
	if got := <-ended; !strings.HasPrefix(got, "text/event-stream retry:") {
		t.Errorf("the stream was %q", got)
	}
	for range 40 { // 40 times 20 minutes of a page that looks after itself
		h.Clock.Advance(20 * time.Minute)
		c.get("/batches/26-001", page.LiveHeader, "1")
		c.get("/batches/26-001/live")
	}
	if res, _ := c.get("/batches/26-001/live"); res.StatusCode != 303 {
		t.Errorf("after a night: %d, want the way to the log-in", res.StatusCode)
	}
}

// Pages travel compressed.
func TestPagesArePacked(t *testing.T) {
	t.Parallel()
	c, _ := serve(t, Config{Lab: storetest.New(t).Lab})
	if res, _ := c.get("/login", "Accept-Encoding", "gzip"); res.Header.Get("Content-Encoding") != "gzip" {
		t.Errorf("the encoding is %q, want gzip", res.Header.Get("Content-Encoding"))
	}
	if res, body := c.get("/login", "Accept-Encoding", "identity"); res.Header.Get("Content-Encoding") != "" || !strings.Contains(body, "<html") {
		t.Error("who cannot unpack does not get the page as it is")
	}
}

func TestFaultsAreCountedNotTold(t *testing.T) {
	t.Parallel()
	house := storetest.New(t)
	var log bytes.Buffer
	s, err := newServer(Config{Lab: house.Lab, Logger: slog.New(slog.NewJSONHandler(&log, nil))})
	if err != nil {
		t.Fatal(err)
	}
	s.routes = append(s.routes,
		route{"GET", "/broken", public, func(http.ResponseWriter, *http.Request) error { return errors.New("secret table is gone") }},
		route{"GET", "/panics", public, func(http.ResponseWriter, *http.Request) error { panic("secret state") }})
	h := s.handler()
	for _, path := range []string{"/broken", "/panics"} {
		log.Reset()
		w := httptest.NewRecorder()
		h.ServeHTTP(w, httptest.NewRequest("GET", path, nil))
		id := w.Header().Get("X-Request-Id")
		if w.Code != 500 || strings.Contains(w.Body.String(), "secret") || !strings.Contains(w.Body.String(), id) {
			t.Errorf("%s: status %d; the page must show the number %s and nothing else", path, w.Code, id)
		}
		if !strings.Contains(log.String(), "secret") || !strings.Contains(log.String(), id) {
			t.Errorf("%s: the log does not say what happened to %s: %s", path, id, log.String())
		}
		for line := range strings.Lines(log.String()) {
			if !json.Valid([]byte(line)) {
				t.Errorf("a line of the log is broken: %q", line)
			}
		}
	}
}

func TestHealth(t *testing.T) {
	t.Parallel()
	house := storetest.New(t)
	c, _ := serve(t, Config{Lab: house.Lab})
	for _, path := range []string{"/healthz", "/readyz"} {
		if res, body := c.get(path); res.StatusCode != 200 {
			t.Errorf("%s: %d %s", path, res.StatusCode, body)
		}
	}
	house.Close()
	if res, _ := c.get("/readyz"); res.StatusCode != 503 {
		t.Errorf("without a database readyz says %d, want 503", res.StatusCode)
	}
	if res, _ := c.get("/healthz"); res.StatusCode != 200 {
		t.Errorf("without a database healthz says %d, want 200", res.StatusCode)
	}
}

func TestWhoseAddress(t *testing.T) {
	t.Parallel()
	s := &server{proxies: []netip.Prefix{netip.MustParsePrefix("10.0.0.0/8")}}
	for _, c := range []struct{ peer, forwarded, want string }{
		{"192.0.2.7:1", "", "192.0.2.7"}, {"192.0.2.7:1", "203.0.113.9", "192.0.2.7"}, {"10.0.0.1:1", "203.0.113.9", "203.0.113.9"},
		{"10.0.0.1:1", "1.2.3.4, 203.0.113.9, 10.0.0.2", "203.0.113.9"}, {"10.0.0.1:1", "nonsense", "10.0.0.1"}, {"10.0.0.1:1", "", "10.0.0.1"},
		{"[::1]:1", "x", "::1"},
	} {
		r := httptest.NewRequest("GET", "/", nil)
		r.RemoteAddr = c.peer
		if c.forwarded != "" {
			r.Header.Set("X-Forwarded-For", c.forwarded)
		}
		if got := s.clientAddr(r); got != c.want {
			t.Errorf("peer %s, forwarded %q: %s, want %s", c.peer, c.forwarded, got, c.want)
		}
	}
}
