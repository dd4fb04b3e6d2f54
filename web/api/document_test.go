package api_test

import (
	"bytes"
	"os"
	"path/filepath"
	"testing"

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
