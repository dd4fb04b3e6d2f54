package desk_test

import (
	"fmt"
	"io"
	"math/rand/v2"
	"net/http"
	"net/http/cookiejar"
	"net/url"
	"strings"
	"testing"
	"time"

	"golang.org/x/net/html"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/trial"
	"ratehouse/trial/simulate"
	"ratehouse/web/webtest"
)

// lot registers a batch of n simulated movements whose round 0 is due now, and reads its rounds 0 to
// last; the round after them stays to be read.
func lot(t testing.TB, h *storetest.House, code string, n, last int, seed uint64, change ...func(*store.NewBatch)) store.Batch {
	t.Helper()
	b := h.Batch(t, code, n, change...)
	rng, model := rand.New(rand.NewPCG(seed, 3159)), simulate.Default()
	rounds, states := model.Rounds(len(b.Steps), rng), make([][]trial.State, n)
	hours := make([]float64, len(b.Programme.Days))
	for i := range hours {
		hours[i] = 24
	}
	for i := range states {
		m := model.Draw(rng)
		states[i] = model.States(&m, m.Rates(b.Programme, rng), rounds, hours, rng)
	}
	serials := serialsOf(t, h, code)
	for k := 0; k <= last; k++ {
		h.Clock.Set(b.Due(k))
		if err := h.OpenRound(t.Context(), h.Technician, code, k); err != nil {
			t.Fatal(err)
		}
		entries := make([]store.Entry, 0, n)
		for i := range states {
			e := h.State(code, i+1, k, states[i][k].String())
			e.Serial = serials[i]
			entries = append(entries, e)
		}
		h.MustSave(t, h.Technician, entries...)
		if err := h.CloseRound(t.Context(), h.Technician, code, k); err != nil {
			t.Fatal(err)
		}
	}
	return b
}

func serialsOf(t testing.TB, h *storetest.House, code string) []string {
	t.Helper()
	s, err := h.BatchSheet(t.Context(), h.Lead, code)
	if err != nil {
		t.Fatal(err)
	}
	serials := make([]string, len(s.Movements))
	for i := range serials {
		serials[i] = s.Movements[i].Serial
	}
	return serials
}

// forWhom makes a batch of this depositor and calibre.
func forWhom(depositor, calibre string) func(*store.NewBatch) {
	return func(n *store.NewBatch) { n.Depositor, n.Calibre = depositor, calibre }
}

// numbered gives the movements numbers of their maker.
func numbered(prefix string, first int) func(*store.NewBatch) {
	return func(n *store.NewBatch) {
		for i := range n.Pieces {
			n.Pieces[i].Serial = fmt.Sprintf("%s-%06d", prefix, first+3*i)
		}
	}
}

func must(t testing.TB, err error) {
	t.Helper()
	if err != nil {
		t.Fatal(err)
	}
}

// visitor is somebody signed in, asking for pages without a browser.
type visitor struct {
	t      testing.TB
	base   string
	client *http.Client
}

func visit(t testing.TB, base, name string) *visitor {
	t.Helper()
	jar, err := cookiejar.New(nil)
	must(t, err)
	v := &visitor{t, base, &http.Client{Jar: jar, CheckRedirect: func(*http.Request, []*http.Request) error { return http.ErrUseLastResponse }}}
	status, _, to := v.post("/login", url.Values{"name": {name}, "password": {storetest.Password}})
	if status != http.StatusSeeOther || strings.HasPrefix(to, "/login") {
		t.Fatalf("signing in as %s: %d, %s", name, status, to)
	}
	return v
}

func (v *visitor) do(r *http.Request) (status int, body, location string) {
	v.t.Helper()
	res, err := v.client.Do(r)
	must(v.t, err)
	defer res.Body.Close()
	text, err := io.ReadAll(res.Body)
	must(v.t, err)
	return res.StatusCode, string(text), res.Header.Get("Location")
}

func (v *visitor) get(path string) (status int, body, location string) {
	v.t.Helper()
	r, err := http.NewRequestWithContext(v.t.Context(), http.MethodGet, v.base+path, nil)
	must(v.t, err)
	return v.do(r)
}

func (v *visitor) post(path string, form url.Values) (status int, body, location string) {
	v.t.Helper()
	r, err := http.NewRequestWithContext(v.t.Context(), http.MethodPost, v.base+path, strings.NewReader(form.Encode()))
	must(v.t, err)
	r.Header.Set("Content-Type", "application/x-www-form-urlencoded")
	return v.do(r)
}

// page asks for a page that must be there.
func (v *visitor) page(path string) doc {
	v.t.Helper()
	status, body, _ := v.get(path)
	if status != http.StatusOK {
		v.t.Fatalf("%s answers %d", path, status)
	}
	return parse(v.t, body)
}

// doc is a parsed page or a part of one.
type doc struct{ *html.Node }

func parse(t testing.TB, body string) doc {
	t.Helper()
	n, err := html.Parse(strings.NewReader(body))
	must(t, err)
	return doc{n}
}

// all lists the parts a selector names: "table.pieces tbody tr", "#table td.num"; blanks go down the
// tree, a dot asks for a class, a hash for an id, brackets for an attribute.
func (d doc) all(selector string) []doc {
	found := []doc{d}
	for step := range strings.FieldsSeq(selector) {
		var next []doc
		seen := map[*html.Node]bool{}
		for _, f := range found {
			for n := range f.Descendants() {
				if matches(n, step) && !seen[n] {
					seen[n] = true
					next = append(next, doc{n})
				}
			}
		}
		found = next
	}
	return found
}

func matches(n *html.Node, step string) bool {
	if n.Type != html.ElementNode {
		return false
	}
	step, attr, bracket := strings.Cut(step, "[")
	if bracket {
		name, value, _ := strings.Cut(strings.TrimSuffix(attr, "]"), "=")
		if got, ok := (doc{n}).attr(name); !ok || value != "" && got != value {
			return false
		}
	}
	step, id, hash := strings.Cut(step, "#")
	if got, _ := (doc{n}).attr("id"); hash && got != id {
		return false
	}
	parts := strings.Split(step, ".")
	class, _ := doc{n}.attr("class")
	for _, want := range parts[1:] {
		if !strings.Contains(" "+class+" ", " "+want+" ") {
			return false
		}
	}
	return parts[0] == "" || parts[0] == n.Data
}

func (d doc) attr(name string) (string, bool) {
	for _, a := range d.Attr {
		if a.Key == name {
			return a.Val, true
		}
	}
	return "", false
}

// text is what is read, blanks brought together.
func (d doc) text() string {
	var b strings.Builder
	for n := range d.Descendants() {
		if n.Type == html.TextNode {
			b.WriteString(n.Data)
			b.WriteByte(' ')
		}
	}
	return strings.Join(strings.Fields(b.String()), " ")
}

func (d doc) texts(selector string) (list []string) {
	for _, f := range d.all(selector) {
		list = append(list, f.text())
	}
	return list
}

// house is a laboratory with its server.
func house(t testing.TB) (*storetest.House, string) {
	t.Helper()
	h := storetest.New(t)
	return h, webtest.Serve(t, h.Lab)
}

const day = 24 * time.Hour
