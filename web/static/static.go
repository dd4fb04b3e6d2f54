package static

import (
	"bytes"
	"compress/gzip"
	"crypto/sha256"
	"embed"
	"encoding/hex"
	"fmt"
	"io/fs"
	"mime"
	"net/http"
	"path"
	"regexp"
	"slices"
	"strings"
	"sync"
)

//go:embed css/*.css fonts/* js/* icon.svg
var files embed.FS

// Prefix is the path under which every asset is served.
const Prefix = "/static/"

// asset is one file as it is sent: hashed name, bytes with every reference rewritten, and the same
// bytes compressed where that helps.
type asset struct {
	url, ctype, etag string
	body, zipped     []byte
}

// store holds the assets by the name pages use ("base.css") and by the path they are served under.
type store struct {
	byName, byURL map[string]*asset
	building      []string
}

var assets = sync.OnceValue(func() *store {
	s, err := build(files)
	if err != nil {
		panic("static: " + err.Error()) // an embedded file refers to one that is not there
	}
	return s
})

// URL is the address of an asset by its name: styles and scripts without folder ("base.css",
// "queue.js"), fonts with it ("fonts/plex-sans-latin-400.woff2"). The address holds a hash of the
// content, so it may be kept for ever. A name that does not exist is a fault of the caller and panics.
func URL(name string) string {
	a, ok := assets().byName[name]
	if !ok {
		panic(fmt.Sprintf("static: no asset %q", name))
	}
	return a.url
}

// Handler serves the assets under Prefix, with an entity tag, compressed where the browser takes it,
// and to be kept for a year: a changed file has another name.
func Handler() http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		a, ok := assets().byURL[r.URL.Path]
		if !ok {
			http.NotFound(w, r)
			return
		}
		a.serve(w, r)
	})
}

func (a *asset) serve(w http.ResponseWriter, r *http.Request) {
	h := w.Header()
	h.Set("Cache-Control", "public, max-age=31536000, immutable")
	h.Set("Content-Type", a.ctype)
	h.Set("ETag", a.etag)
	h.Set("Vary", "Accept-Encoding")
	if slices.Contains(strings.Split(r.Header.Get("If-None-Match"), ", "), a.etag) {
		w.WriteHeader(http.StatusNotModified)
		return
	}
	body := a.body
	if a.zipped != nil && strings.Contains(r.Header.Get("Accept-Encoding"), "gzip") {
		h.Set("Content-Encoding", "gzip")
		body = a.zipped
	}
	h.Set("Content-Length", fmt.Sprint(len(body)))
	if r.Method != http.MethodHead {
		w.Write(body) //nolint:errcheck // the browser has gone; there is nobody to tell
	}
}

func build(fsys fs.FS) (*store, error) {
	s := &store{byName: map[string]*asset{}, byURL: map[string]*asset{}}
	err := fs.WalkDir(fsys, ".", func(p string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() || strings.HasSuffix(p, ".md") {
			return err
		}
		_, err = s.add(fsys, p)
		return err
	})
	return s, err
}

// add takes in one file after everything it refers to, so that its hash covers theirs.
func (s *store) add(fsys fs.FS, file string) (*asset, error) {
	name := nameOf(file)
	if a, ok := s.byName[name]; ok {
		return a, nil
	}
	if slices.Contains(s.building, file) {
		return nil, fmt.Errorf("%s imports itself by way of %s", file, strings.Join(s.building, ", "))
	}
	s.building = append(s.building, file)
	defer func() { s.building = s.building[:len(s.building)-1] }()
	body, err := fs.ReadFile(fsys, file)
	if err != nil {
		return nil, err
	}
	if body, err = s.rewrite(fsys, file, body); err != nil {
		return nil, fmt.Errorf("%s: %w", file, err)
	}
	a := newAsset(name, body)
	s.byName[name], s.byURL[a.url] = a, a
	return a, nil
}

// references finds what a file points at: font files in a style sheet, imported modules in a script.
var references = map[string]*regexp.Regexp{
	".css": regexp.MustCompile(`url\("([^":]+)"\)`),
	".js":  regexp.MustCompile(`(?m)^(?:import|export)\b[^"';]*["'](\./[^"']+)["']`),
}

func (s *store) rewrite(fsys fs.FS, file string, body []byte) ([]byte, error) {
	re := references[path.Ext(file)]
	if re == nil {
		return body, nil
	}
	var out bytes.Buffer
	last := 0
	for _, at := range re.FindAllSubmatchIndex(body, -1) {
		ref := string(body[at[2]:at[3]])
		target := path.Join(path.Dir(file), ref)
		if path.Ext(file) == ".css" {
			target = ref // the style sheets of the design lie beside fonts/
		}
		a, err := s.add(fsys, target)
		if err != nil {
			return nil, err
		}
		out.Write(body[last:at[2]])
		out.WriteString(a.url)
		last = at[3]
	}
	out.Write(body[last:])
	return out.Bytes(), nil
}

func newAsset(name string, body []byte) *asset {
	sum := sha256.Sum256(body)
	hash := hex.EncodeToString(sum[:6])
	ext := path.Ext(name)
	a := &asset{
		url:   Prefix + strings.TrimSuffix(name, ext) + "." + hash + ext,
		ctype: ctypeOf(ext), etag: `"` + hash + `"`, body: body,
	}
	if ext != ".woff2" { // already compressed
		var z bytes.Buffer
		w, _ := gzip.NewWriterLevel(&z, gzip.BestCompression)
		w.Write(body) //nolint:errcheck // a bytes.Buffer never refuses
		w.Close()     //nolint:errcheck // likewise
		if z.Len() < len(body) {
			a.zipped = z.Bytes()
		}
	}
	return a
}

func nameOf(file string) string {
	return strings.TrimPrefix(strings.TrimPrefix(file, "css/"), "js/")
}

func ctypeOf(ext string) string {
	switch ext {
	case ".js":
		return "text/javascript; charset=utf-8"
	case ".css":
		return "text/css; charset=utf-8"
	case ".svg":
		return "image/svg+xml"
	case ".woff2":
		return "font/woff2"
	}
	return mime.TypeByExtension(ext)
}
