package api_test

import (
	"bytes"
	"net/http/httptest"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/getkin/kin-openapi/openapi3filter"

	"ratehouse/store"
	"ratehouse/web/api"
)

// The document is a contract: a change of it must be seen. UPDATE=1 go test ./web/api writes it anew.
func TestDocumentIsAsItWas(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	got := h.call(t, "", "GET", api.DocumentPath, "").want(t, 200, "").body
	golden := filepath.Join("testdata", "openapi.json")
	if os.Getenv("UPDATE") != "" {
		if err := os.MkdirAll("testdata", 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(golden, got, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(golden)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(got, want) {
		t.Errorf("the served document is not %s; if the change is meant, run UPDATE=1 go test ./web/api -run Document and commit it", golden)
	}
	document, _ := h.described(t)
	if document.OpenAPI != "3.1.0" {
		t.Errorf("version %q", document.OpenAPI)
	}
}

// What the laboratory takes, the document allows: every member of both bodies is used once.
func TestGoodRequestsFitTheDocument(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	if _, err := h.AddCalibre(t.Context(), h.Lead, store.Calibre{Code: "K-41", Title: "K 41", DiameterUM: 28_000}); err != nil {
		t.Fatal(err)
	}
	_, router := h.described(t)
	reading := h.state(1, 0, "-2.4").with("read_by", "second", "station", "BENCH-3", "base", 0, "reason", "", "confirm", []string{},
		"evidence", fields{"sha256": strings.Repeat("ab", 32), "uri": "file:///images/1.png"})
	for path, body := range map[string]string{
		"/api/v1/batches":  newBatch.with("calibre", "K-41").String(),
		"/api/v1/readings": h.body(reading, h.rate(2, 1, "1.5").with("step", nil, "day", 1)),
	} {
		r := httptest.NewRequest("POST", path, strings.NewReader(body))
		r.Header.Set("Content-Type", "application/json")
		route, params, err := router.FindRoute(r)
		if err != nil {
			t.Fatal(err)
		}
		in := &openapi3filter.RequestValidationInput{Request: r, PathParams: params, Route: route,
			Options: &openapi3filter.Options{AuthenticationFunc: openapi3filter.NoopAuthenticationFunc, MultiError: true}}
		if err := openapi3filter.ValidateRequest(t.Context(), in); err != nil {
			t.Errorf("%s: %v", path, err)
		}
	}
	h.call(t, h.all, "POST", "/api/v1/batches", newBatch.with("calibre", "K-41").String()).want(t, 201, "")
	for _, a := range h.post(t, h.all, reading, h.rate(2, 1, "1.5").with("step", nil, "day", 1)) {
		wantStatus(t, a, "accepted", "")
	}
	if r := h.movement(t, 1).Readings[0]; r.ReadBy != "Tomas Wrede" || r.EnteredBy != "Ilse Marden" || r.Station != "BENCH-3" {
		t.Errorf("%+v", r)
	}
}
