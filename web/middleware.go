package web

import (
	"crypto/rand"
	"errors"
	"fmt"
	"log/slog"
	"net"
	"net/http"
	"net/netip"
	"net/url"
	"runtime/debug"
	"strings"
	"time"

	"github.com/go-chi/chi/v5"
	"github.com/go-chi/chi/v5/middleware"

	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

// Policy lets a page load what this server sends and nothing else: no inline script or style, no
// frame, no form to another place.
const Policy = "default-src 'none'; script-src 'self'; style-src 'self'; font-src 'self'; img-src 'self'; connect-src 'self'; " +
	"form-action 'self'; frame-ancestors 'none'; base-uri 'none'"

func headers(next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		h := w.Header()
		h.Set("Content-Security-Policy", Policy)
		h.Set("X-Content-Type-Options", "nosniff")
		h.Set("Referrer-Policy", "same-origin")
		h.Set("Cross-Origin-Opener-Policy", "same-origin")
		h.Set("Permissions-Policy", "camera=(), geolocation=(), microphone=()")
		next.ServeHTTP(w, r)
	})
}

// number starts the page context with a number for the request, short enough to be read out on the
// telephone. Whoever answers before the session is known has at least this.
func (s *server) number(next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		house := s.lab.House()
		lang, theme := preferences(r)
		c := &page.Context{
			Printer: words.New(words.Choose(lang, r.Header.Get("Accept-Language")), house.Zone),
			House:   house, Now: s.lab.Now(), ID: requestNumber(), Theme: theme, Path: r.URL.RequestURI(), Base: s.base,
		}
		w.Header().Set("X-Request-Id", c.ID)
		next.ServeHTTP(w, r.WithContext(page.With(r.Context(), c)))
	})
}

// requestNumber is 30 random bits in the letters and digits that cannot be mistaken: 7K4-20P.
func requestNumber() string {
	const signs = "0123456789ABCDEFGHJKMNPQRSTVWXYZ"
	var b [6]byte
	rand.Read(b[:]) // never fails
	for i := range b {
		b[i] = signs[b[i]%32]
	}
	return string(b[:3]) + "-" + string(b[3:])
}

// logged writes one line a request: no query, no body, no cookie.
func (s *server) logged(next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		began := time.Now()
		ww := middleware.NewWrapResponseWriter(w, r.ProtoMajor)
		defer func() {
			c := page.Of(r)
			level := slog.LevelInfo
			if strings.HasPrefix(r.URL.Path, "/static/") || r.URL.Path == page.HealthURL || r.URL.Path == page.ReadyURL {
				level = slog.LevelDebug
			}
			route := chi.RouteContext(r.Context()).RoutePattern()
			s.counted.note(r.Method, route, ww.Status(), time.Since(began))
			s.log.Log(r.Context(), level, "request", "request", c.ID, "method", r.Method, "route", route,
				"path", r.URL.Path, "status", ww.Status(), "bytes", ww.BytesWritten(), "ms", time.Since(began).Milliseconds(),
				"account", c.Actor.Name, "from", s.clientAddr(r))
		}()
		next.ServeHTTP(ww, r)
	})
}

// recovered turns a panic into a fault page; the server lives on.
func (s *server) recovered(next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		defer func() {
			p := recover()
			switch {
			case p == nil:
			case p == http.ErrAbortHandler:
				panic(p) // the standard library's own way to break off a response
			default:
				s.log.ErrorContext(r.Context(), "panic", "request", page.Of(r).ID, "method", r.Method, "path", r.URL.Path,
					"panic", fmt.Sprint(p), "stack", string(debug.Stack()))
				page.ShowError(w, r, errors.New("panic"))
			}
		}()
		next.ServeHTTP(w, r)
	})
}

// legible answers an address that holds what no stored name can hold, a NUL or bytes that are no
// UTF-8, as one that leads nowhere. The API says more precisely what is wrong.
func legible(notFound http.Handler) func(http.Handler) http.Handler {
	return func(next http.Handler) http.Handler {
		return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
			query, err := url.QueryUnescape(r.URL.RawQuery)
			if !strings.HasPrefix(r.URL.Path, apiPrefix) && (err != nil || !page.Legible(query) || !page.Legible(r.URL.Path)) {
				notFound.ServeHTTP(w, r)
				return
			}
			next.ServeHTTP(w, r)
		})
	}
}

// limited bounds the body of a request; reading beyond gives an error that becomes status 413.
func (s *server) limited(next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		r.Body = http.MaxBytesReader(w, r.Body, s.limit)
		next.ServeHTTP(w, r)
	})
}

// identified looks the session up and completes the page context: actor, language, what the house bar
// offers.
func (s *server) identified(next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		if !needsSession(r) {
			next.ServeHTTP(w, r)
			return
		}
		c := page.Of(r)
		if token := s.token(r); token != "" {
			session := s.lab.Session
			if unattended(r) {
				session = s.lab.PeekSession
			}
			a, err := session(r.Context(), token)
			switch {
			case err == nil:
				s.admit(c, r, a)
			case store.KindOf(err) == store.KindUnauthenticated:
				s.forget(w)
			default:
				s.adapt(func(http.ResponseWriter, *http.Request) error { return err }).ServeHTTP(w, r)
				return
			}
		}
		next.ServeHTTP(w, r)
	})
}

// needsSession leaves out what is the same for everybody and what carries its own token: neither may
// cost a query. Links of pages to files of the API work with the session.
func needsSession(r *http.Request) bool {
	p := r.URL.Path
	if strings.HasPrefix(p, apiPrefix) {
		return r.Method == http.MethodGet && r.Header.Get("Authorization") == ""
	}
	return !strings.HasPrefix(p, "/static/") && p != page.HealthURL && p != page.ReadyURL
}

func (s *server) admit(c *page.Context, r *http.Request, a store.Actor) {
	c.Actor, c.SignedIn = a, true
	if a.Language != "" {
		c.Printer = words.New(words.Choose(a.Language, r.Header.Get("Accept-Language")), c.House.Zone)
	}
	for _, n := range s.nav {
		if a.May(n.Right) {
			c.Nav = append(c.Nav, n)
		}
	}
}

// clientAddr is the address the request came from: the peer's, or, if that is a trusted proxy, the
// last one in X-Forwarded-For that is none.
func (s *server) clientAddr(r *http.Request) string {
	host, _, err := net.SplitHostPort(r.RemoteAddr)
	if err != nil {
		host = r.RemoteAddr
	}
	hops := strings.Split(strings.Join(r.Header.Values("X-Forwarded-For"), ","), ",")
	for i := len(hops) - 1; i >= 0 && s.trusted(host); i-- {
		hop := strings.TrimSpace(hops[i])
		if _, err := netip.ParseAddr(hop); err != nil {
			break
		}
		host = hop
	}
	return host
}

func (s *server) trusted(host string) bool {
	a, err := netip.ParseAddr(host)
	if err != nil {
		return false
	}
	for _, p := range s.proxies {
		if p.Contains(a.Unmap()) {
			return true
		}
	}
	return false
}
