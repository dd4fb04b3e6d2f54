package floor_test

import (
	"fmt"
	"io"
	"net/http"
	"net/http/cookiejar"
	"net/url"
	"strings"
	"testing"
	"time"

	"github.com/google/uuid"
	"golang.org/x/net/html"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/web/webtest"
)

// visitor is somebody signed in who asks without a browser, and without scripts.
type visitor struct {
	t      *testing.T
	base   string
	client *http.Client
}

func visit(t *testing.T, h *storetest.House, name string) *visitor {
	t.Helper()
	jar, err := cookiejar.New(nil)
	if err != nil {
		t.Fatal(err)
	}
	v := &visitor{t, webtest.Serve(t, h.Lab), &http.Client{Jar: jar, CheckRedirect: func(*http.Request, []*http.Request) error { return http.ErrUseLastResponse }}}
	if status, _ := v.send("/login", "", url.Values{"name": {name}, "password": {storetest.Password}}.Encode()); status != http.StatusSeeOther {
		t.Fatalf("signing in: %d", status)
	}
	return v
}

// send posts a body, a form unless the kind says otherwise; an empty one is a GET.
func (v *visitor) send(path, kind, body string) (int, string) {
	v.t.Helper()
	method := http.MethodPost
	if body == "" {
		method = http.MethodGet
	}
	r, err := http.NewRequestWithContext(v.t.Context(), method, v.base+path, strings.NewReader(body))
	if err != nil {
		v.t.Fatal(err)
	}
	if kind == "" {
		kind = "application/x-www-form-urlencoded"
	}
	r.Header.Set("Content-Type", kind)
	res, err := v.client.Do(r)
	if err != nil {
		v.t.Fatal(err)
	}
	defer res.Body.Close()
	text, err := io.ReadAll(res.Body)
	if err != nil {
		v.t.Fatal(err)
	}
	return res.StatusCode, string(text)
}

// fields are the named inputs of the reading form of a page, and the text of the element with an id.
func fields(t *testing.T, page string) (form url.Values, texts map[string]string) {
	t.Helper()
	root, err := html.Parse(strings.NewReader(page))
	if err != nil {
		t.Fatal(err)
	}
	form, texts = url.Values{}, map[string]string{}
	for n := range root.Descendants() {
		attr := map[string]string{}
		for _, a := range n.Attr {
			attr[a.Key] = a.Val
		}
		if n.Data == "input" && attr["name"] != "" && attr["name"] != "to" {
			form.Add(attr["name"], attr["value"])
		}
		if id := attr["id"]; id != "" {
			for d := range n.Descendants() {
				if d.Type == html.TextNode {
					texts[id] += d.Data
				}
			}
		}
	}
	return form, texts
}

// The page works without its script: one reading a form, with the same questions, equally blind.
func TestPlainForm(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 3, func(n *store.NewBatch) { n.Depositor = "KESTWICK" })
	open(t, h, 0)
	v := visit(t, h, "technician")
	const path = "/batches/26-001/rounds/0"
	type answer func(form url.Values)
	step := func(want int, change answer) map[string]string {
		t.Helper()
		_, page := v.send(path, "", "")
		form, _ := fields(t, page)
		change(form)
		status, body := v.send(path, "", form.Encode())
		if status != want {
			t.Errorf("status %d, want %d", status, want)
		}
		_, texts := fields(t, body)
		return texts
	}
	step(http.StatusSeeOther, func(f url.Values) { f.Set("value", "+27.3") })
	wantReadings(t, h, 1, "0/1 27.3")
	step(http.StatusSeeOther, func(f url.Values) { f.Set("seen", "unreadable") })
	wantReadings(t, h, 2, "0/1 unreadable")
	if got := step(http.StatusUnprocessableEntity, func(f url.Values) { f.Set("value", "1,5e3") })["why"]; !strings.Contains(got, "1,5e3") {
		t.Errorf("a mistyped number says %q", got)
	}
	if status, page := v.send(path+"?holder=TRAY10-0001&place=1", "", ""); status != http.StatusOK || !strings.Contains(page, "You typed +27.3") {
		t.Errorf("%d: the reader does not see his own value", status)
	}
	if _, page := v.send(path, "", ""); strings.Contains(page, "27.3") || strings.Contains(page, "KESTWICK") {
		t.Error("the page shows a value or the depositor")
	}
}

// A second look without script: first and second value stay hidden until the third was typed.
func TestPlainSecondLook(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 1)
	h.MustSave(t, h.Technician, h.State("26-001", 1, 0, "17.3"))
	h.Clock.Advance(24 * time.Hour)
	open(t, h, 1)
	v := visit(t, h, "technician")
	const path = "/batches/26-001/rounds/1"
	_, page := v.send(path, "", "")
	form, _ := fields(t, page)
	form.Set("value", "117.3")
	for _, next := range []string{"19.9", "20.0", ""} {
		status, body := v.send(path, "", form.Encode())
		if next == "" {
			if status != http.StatusSeeOther {
				t.Errorf("after the third value: %d", status)
			}
			break
		}
		var texts map[string]string
		if form, texts = fields(t, body); status != http.StatusUnprocessableEntity || !strings.Contains(texts["l-value"], "read") {
			t.Fatalf("%d, %q", status, texts["l-value"])
		}
		for id, text := range texts {
			if strings.Contains(text, "117.3") || strings.Contains(text, "17.3") || strings.Contains(text, "60 s/d") {
				t.Errorf("%s shows %q before the last value is typed", id, text)
			}
		}
		form.Set("value", next)
	}
	wantReadings(t, h, 1, "0/1 17.3", "1/1 20")
}

func item(h *storetest.House, i, k int, value string) string {
	return fmt.Sprintf(`{"id":%q,"batch":"26-001","serial":%q,"step":%d,"kind":"state","method":"typed","value":%q,"read_at":%q}`,
		uuid.Must(uuid.NewV7()), storetest.Serial(i), k, value, h.Clock.Now().Format(time.RFC3339))
}

func TestReadingsEndpoint(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 3)
	open(t, h, 0)
	v := visit(t, h, "technician")
	const path, kind = "/batches/26-001/rounds/0/readings", "application/json"
	first := item(h, 1, 0, "1.5")
	call := func(items ...string) string { return `{"readings":[` + strings.Join(items, ",") + `]}` }
	for _, c := range []struct {
		what, body string
		status     int
		want       string
	}{
		{"good and bad beside each other", call(first, item(h, 2, 0, "two")), 200, `"status":"refused"`},
		{"replayed", call(first), 200, `"status":"duplicate","nth":1`},
		{"of another round", call(item(h, 2, 1, "1")), 422, ""},
		{"no JSON", `{"readings":`, 422, ""},
		{"too many", call(strings.Split(strings.Repeat(item(h, 2, 0, "1")+"\n", 1001), "\n")[:1001]...), 413, ""},
		{"ten megabytes", call(item(h, 3, 0, strings.Repeat("1", 10<<20))), 413, ""},
		{"the ended batch", call(strings.Replace(item(h, 3, 0, "1"), "26-001", "26-002", 1)), 422, ""},
	} {
		status, body := v.send(path, kind, c.body)
		if status != c.status || !strings.Contains(body, c.want) {
			t.Errorf("%s: %d %.200s, want %d %s", c.what, status, body, c.status, c.want)
		}
	}
	wantReadings(t, h, 1, "0/1 1.5")
	wantReadings(t, h, 2)
	wantReadings(t, h, 3)
}

// What stands at a place is told to its own reader in the open round, and to nobody else.
func TestOwnReading(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "26-001", 2)
	open(t, h, 0)
	h.MustSave(t, h.Technician, h.State("26-001", 1, 0, "1.5"))
	own := func(v *visitor, serial string) (int, string) {
		return v.send("/batches/26-001/rounds/0/readings?serial="+serial, "", "")
	}
	reader, other := visit(t, h, "technician"), visit(t, h, "second")
	if _, body := own(reader, "S-0001"); !strings.Contains(body, `"1.5"`) {
		t.Errorf("the reader is told %s", body)
	}
	if _, body := own(other, "S-0001"); strings.Contains(body, "1.5") {
		t.Errorf("another reader is told %s", body)
	}
	if status, _ := own(reader, "S-0009"); status != http.StatusNotFound {
		t.Errorf("an unknown movement: %d", status)
	}
	if err := h.CloseRound(t.Context(), h.Technician, "26-001", 0); err != nil {
		t.Fatal(err)
	}
	if _, body := own(reader, "S-0001"); strings.Contains(body, "1.5") {
		t.Errorf("after closing the reader is told %s", body)
	}
}
