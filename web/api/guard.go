package api

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"mime"
	"net/http"
	"runtime/debug"
	"strings"

	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

type actorKey struct{}

func actorOf(ctx context.Context) store.Actor {
	a, _ := ctx.Value(actorKey{}).(store.Actor)
	return a
}

// guarded lets in who may: the bearer of a token with the scope, or, to look only, a person signed in
// at the pages, so that their links to files work.
func (a *API) guarded(right store.Right, next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		w.Header().Set("Cache-Control", "no-store")
		actor, p := a.identify(r)
		if p == nil && !actor.May(right) {
			p = problem(http.StatusForbidden, "not_allowed", "right", string(right))
			if actor.Via == "api" {
				p = problem(http.StatusForbidden, "scope_missing", "scope", string(scopeOf[right]))
				w.Header().Set("WWW-Authenticate", fmt.Sprintf(`Bearer realm="ratehouse", error="insufficient_scope", scope=%q`, scopeOf[right]))
			}
		}
		if p != nil {
			a.show(w, r, p)
			return
		}
		next.ServeHTTP(w, r.WithContext(context.WithValue(r.Context(), actorKey{}, actor)))
	})
}

func (a *API) identify(r *http.Request) (store.Actor, *Problem) {
	c := page.Of(r)
	header := r.Header.Get("Authorization")
	if header == "" {
		if c.SignedIn && r.Method == http.MethodGet {
			return c.Actor, nil
		}
		return store.Actor{}, problem(http.StatusUnauthorized, "token_missing")
	}
	scheme, secret, _ := strings.Cut(header, " ")
	if !strings.EqualFold(scheme, "Bearer") {
		return store.Actor{}, problem(http.StatusUnauthorized, "token_missing")
	}
	actor, err := a.lab.Token(r.Context(), strings.TrimSpace(secret))
	if err != nil {
		return store.Actor{}, a.problemOf(r.Context(), err)
	}
	c.Actor = actor // for the log
	if actor.Language != "" && r.Header.Get("Accept-Language") == "" {
		c.Printer = words.New(words.Choose(actor.Language, ""), c.House.Zone)
	}
	return actor, nil
}

// bounded reads the body of a request before anything else: JSON of at most the limit.
func (a *API) bounded(next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		body, p := readBody(r)
		if p != nil {
			a.show(w, r, p)
			return
		}
		r.Body = io.NopCloser(bytes.NewReader(body))
		next.ServeHTTP(w, r)
	})
}

func readBody(r *http.Request) ([]byte, *Problem) {
	kind, args, err := mime.ParseMediaType(r.Header.Get("Content-Type"))
	if err != nil || kind != "application/json" || args["charset"] != "" && !strings.EqualFold(args["charset"], "utf-8") {
		return nil, problem(http.StatusUnsupportedMediaType, "media_type", "type", printable(r.Header.Get("Content-Type")))
	}
	if e := r.Header.Get("Content-Encoding"); e != "" && !strings.EqualFold(e, "identity") {
		return nil, problem(http.StatusUnsupportedMediaType, "media_type", "type", printable(e))
	}
	body, err := io.ReadAll(io.LimitReader(r.Body, mostBytes+1))
	if _, over := errors.AsType[*http.MaxBytesError](err); over || len(body) > mostBytes {
		return nil, problem(http.StatusRequestEntityTooLarge, "body_too_large", "most", fmt.Sprint(mostBytes))
	}
	if err != nil {
		return nil, problem(http.StatusBadRequest, "body_cut_off")
	}
	if len(body) == 0 {
		return nil, problem(http.StatusBadRequest, "body_empty")
	}
	return body, nil
}

// recovered turns a panic into a problem; the server lives on.
func (a *API) recovered(next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		defer func() {
			p := recover()
			if p == nil {
				return
			}
			if p == http.ErrAbortHandler {
				panic(p) // the standard library's own way to break off a response
			}
			a.log.ErrorContext(r.Context(), "panic", "request", page.Of(r).ID, "method", r.Method, "path", r.URL.Path,
				"panic", fmt.Sprint(p), "stack", string(debug.Stack()))
			a.show(w, r, problem(http.StatusInternalServerError, "fault"))
		}()
		next.ServeHTTP(w, r)
	})
}
