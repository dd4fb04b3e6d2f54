package web

import (
	"errors"
	"fmt"
	"log/slog"
	"net/http"
	"net/netip"
	"net/url"
	"strings"

	"github.com/go-chi/chi/v5"
	"github.com/go-chi/chi/v5/middleware"
	"github.com/prometheus/client_golang/prometheus"

	"ratehouse/store"
	"ratehouse/web/api"
	"ratehouse/web/page"
	"ratehouse/web/static"
)

// Config is what the server hangs on.
type Config struct {
	Lab            *store.Lab
	Logger         *slog.Logger
	BaseURL        string                // public address, "https://bench.example"; "" while nobody knows it
	TrustedProxies []netip.Prefix        // whose X-Forwarded-For is believed
	BodyLimit      int64                 // bytes of a request; 0: 1 MiB
	Stopping       <-chan struct{}       // closed when the program is asked to end; nil: never
	Metrics        prometheus.Registerer // where requests are counted; nil: nowhere
}

const (
	defaultBodyLimit = 1 << 20
	apiPrefix        = "/api/"
	packedLevel      = 5 // gzip: beyond it the time doubles for a few per cent of size (common practice, no source)
)

// server is the web side of one laboratory.
type server struct {
	lab     *store.Lab
	log     *slog.Logger
	base    string
	secure  bool // the public address is https: cookies are bound to it
	proxies []netip.Prefix
	limit   int64
	tries   *tries
	routes  []route
	api     *api.API
	ending  <-chan struct{}
	counted *metrics
	nav     []page.NavItem
	foreign *http.CrossOriginProtection
}

// New builds the server's handler. The error is a public address that is none.
func New(c Config) (http.Handler, error) {
	s, err := newServer(c)
	if err != nil {
		return nil, err
	}
	return s.handler(), nil
}

func newServer(c Config) (*server, error) {
	if c.Logger == nil {
		c.Logger = slog.New(slog.DiscardHandler)
	}
	if c.BodyLimit == 0 {
		c.BodyLimit = defaultBodyLimit
	}
	s := &server{lab: c.Lab, log: c.Logger, base: strings.TrimSuffix(c.BaseURL, "/"), proxies: c.TrustedProxies,
		ending: c.Stopping, counted: newMetrics(c.Metrics), limit: c.BodyLimit, tries: newTries(c.Lab.Now), foreign: http.NewCrossOriginProtection()}
	if s.base != "" {
		u, err := url.Parse(s.base)
		if err != nil || u.Host == "" || u.Scheme != "http" && u.Scheme != "https" || u.Path != "" {
			return nil, fmt.Errorf("public address %q: it must be http:// or https:// and a host, without a path", c.BaseURL)
		}
		s.secure = u.Scheme == "https"
		if err := s.foreign.AddTrustedOrigin(s.base); err != nil {
			return nil, fmt.Errorf("public address: %w", err)
		}
	}
	// The API takes no cookie for anything that changes something, so no other site can misuse one.
	s.foreign.AddInsecureBypassPattern(apiPrefix)
	s.foreign.SetDenyHandler(http.HandlerFunc(page.ShowForeign))
	s.routes = s.table()
	s.api = api.New(api.Config{Lab: c.Lab, Logger: c.Logger})
	s.nav = s.navigation()
	return s, nil
}

// handler mounts the route table. From outside in: number and log of the request, compression,
// recovery, headers, size, address, who is asking, protection against other sites; then the right of the route.
func (s *server) handler() chi.Router {
	r := chi.NewRouter()
	notFound := byPart(s.adapt(func(http.ResponseWriter, *http.Request) error { return page.NotFound() }).ServeHTTP, s.api.NotFound)
	packed := middleware.Compress(packedLevel, "text/html", "text/csv", "application/json", "application/problem+json")
	r.Use(s.number, s.logged, packed, s.recovered, headers, s.limited, legible(notFound), s.identified, s.foreign.Handler)
	r.NotFound(notFound)
	r.MethodNotAllowed(byPart(page.ShowMethod, s.api.MethodNotAllowed))
	for _, one := range s.routes {
		r.Method(one.method, one.pattern, s.guarded(one))
	}
	for _, one := range s.api.Routes() {
		r.Method(one.Method, one.Pattern, one.Handle)
	}
	r.Method(http.MethodGet, static.Prefix+"*", static.Handler())
	r.Method(http.MethodHead, static.Prefix+"*", static.Handler())
	return r
}

// byPart answers with a page, and below the API's addresses with a problem.
func byPart(pages, api http.HandlerFunc) http.HandlerFunc {
	return func(w http.ResponseWriter, r *http.Request) {
		if strings.HasPrefix(r.URL.Path, apiPrefix) {
			api(w, r)
			return
		}
		pages(w, r)
	}
}

func (s *server) adapt(h page.Handler) http.Handler {
	return page.Adapt(h, func(r *http.Request, status int, err error) {
		if status >= 500 && !errors.Is(err, r.Context().Err()) {
			s.log.ErrorContext(r.Context(), "fault", "request", page.Of(r).ID, "method", r.Method, "path", r.URL.Path, "error", err.Error())
		}
	})
}

// navigation is the house bar without the words that lead nowhere in this version.
func (s *server) navigation() (nav []page.NavItem) {
	for _, n := range page.Navigation {
		for _, one := range s.routes {
			if one.method == http.MethodGet && one.pattern == n.URL {
				nav = append(nav, n)
			}
		}
	}
	return nav
}
