package static

import (
	"compress/gzip"
	"io"
	"net/http/httptest"
	"regexp"
	"strings"
	"testing"
	"testing/fstest"
)

func get(t *testing.T, url string, header ...string) *httptest.ResponseRecorder {
	t.Helper()
	r := httptest.NewRequest("GET", url, nil)
	for i := 0; i+1 < len(header); i += 2 {
		r.Header.Set(header[i], header[i+1])
	}
	w := httptest.NewRecorder()
	Handler().ServeHTTP(w, r)
	return w
}

func TestStyleSheetNamesItsFontsByHash(t *testing.T) {
	t.Parallel()
	w := get(t, URL("base.css"))
	fonts := regexp.MustCompile(`url\("([^"]+)"\)`).FindAllStringSubmatch(w.Body.String(), -1)
	if len(fonts) != 12 {
		t.Fatalf("base.css names %d fonts, want 12", len(fonts))
	}
	for _, f := range fonts {
		font := get(t, f[1])
		if font.Code != 200 || font.Header().Get("Content-Type") != "font/woff2" || font.Body.Len() < 2000 {
			t.Errorf("%s: status %d, %q, %d bytes", f[1], font.Code, font.Header().Get("Content-Type"), font.Body.Len())
		}
	}
}

func TestServedCompressedAndKept(t *testing.T) {
	t.Parallel()
	plain := get(t, URL("base.css"))
	zipped := get(t, URL("base.css"), "Accept-Encoding", "gzip, br")
	z, err := gzip.NewReader(zipped.Body)
	if err != nil {
		t.Fatal(err)
	}
	body, err := io.ReadAll(z)
	if err != nil || string(body) != plain.Body.String() {
		t.Fatalf("compressed body differs (%v)", err)
	}
	if cc := plain.Header().Get("Cache-Control"); !strings.Contains(cc, "immutable") {
		t.Errorf("Cache-Control %q", cc)
	}
	again := get(t, URL("base.css"), "If-None-Match", plain.Header().Get("ETag"))
	if again.Code != 304 || again.Body.Len() != 0 {
		t.Errorf("known entity tag: status %d with %d bytes, want 304 and none", again.Code, again.Body.Len())
	}
	if w := get(t, "/static/base.000000000000.css"); w.Code != 404 || w.Header().Get("Cache-Control") != "" {
		t.Errorf("a stale hash: status %d, cached %q; want 404, not kept", w.Code, w.Header().Get("Cache-Control"))
	}
}

func TestModuleImportsAreRewritten(t *testing.T) {
	t.Parallel()
	src := func(b string) fstest.MapFS {
		return fstest.MapFS{
			"js/a.js": {Data: []byte("import { b } from \"./b.js\";\nexport { c } from './c.js';\nb();\n")},
			"js/b.js": {Data: []byte(b)}, "js/c.js": {Data: []byte("export const c = 1;\n")},
		}
	}
	one, err := build(src("export function b() {}\n"))
	if err != nil {
		t.Fatal(err)
	}
	a := one.byName["a.js"]
	for _, want := range []string{one.byName["b.js"].url, one.byName["c.js"].url} {
		if !strings.Contains(string(a.body), want) {
			t.Errorf("a.js does not import %s:\n%s", want, a.body)
		}
	}
	two, err := build(src("export function b() { return 2; }\n"))
	if err != nil {
		t.Fatal(err)
	}
	if two.byName["a.js"].url == a.url {
		t.Error("b.js changed but a.js, which imports it, kept its name")
	}
	if _, err := build(src("import './a.js';\n")); err == nil {
		t.Error("a circle of imports was accepted")
	}
	if _, err := build(src("import './gone.js';\n")); err == nil {
		t.Error("an import of a missing file was accepted")
	}
}

func TestNoColourOutsideTokens(t *testing.T) {
	t.Parallel()
	css := get(t, URL("base.css")).Body.String()
	if m := regexp.MustCompile(`#[0-9a-fA-F]{3,8}\b|rgb\(|hsl\(`).FindAllString(css, -1); len(m) > 0 {
		t.Errorf("base.css writes colours itself: %v", m)
	}
}
