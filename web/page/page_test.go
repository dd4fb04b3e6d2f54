package page

import (
	"context"
	"net/http"
	"net/http/httptest"
	"net/url"
	"strings"
	"testing"
	"time"

	"ratehouse/store"
	"ratehouse/web/words"
)

func testContext() *Context {
	return &Context{Printer: words.New(words.EN, time.UTC), House: store.House{Title: "Test Laboratory"}, ID: "7K4-20P", Path: "/x", Now: time.Unix(0, 0)}
}

func request(method, body string) *http.Request {
	r := httptest.NewRequest(method, "/x", strings.NewReader(body))
	if body != "" {
		r.Header.Set("Content-Type", "application/x-www-form-urlencoded")
	}
	return r.WithContext(With(context.Background(), testContext()))
}

func TestEveryKindOfErrorHasItsPage(t *testing.T) {
	t.Parallel()
	want := map[store.Kind]int{store.KindFault: 500, store.KindNotFound: 404, store.KindForbidden: 403, store.KindInvalid: 422,
		store.KindConflict: 409, store.KindUnauthenticated: 401, store.KindTooMany: 429, store.KindStale: 409}
	if len(want) != len(kinds) {
		t.Errorf("the table has %d kinds, this test %d", len(kinds), len(want))
	}
	for kind := store.KindFault; kind <= store.KindStale; kind++ {
		w := httptest.NewRecorder()
		status := ShowError(w, request("GET", ""), &store.Error{Kind: kind, Code: "no_batch", Args: map[string]string{"code": "26-1"}})
		if status != want[kind] || w.Code != status || StatusOf(&store.Error{Kind: kind}) != status {
			t.Errorf("kind %d: page %d, status %d, want %d", kind, w.Code, status, want[kind])
		}
		if shows := strings.Contains(w.Body.String(), "7K4-20P"); shows != (status >= 500) {
			t.Errorf("kind %d: the number of the request is shown: %v", kind, shows)
		}
		if says := strings.Contains(w.Body.String(), "There is no batch 26-1."); says != (status == 422 || status == 409) {
			t.Errorf("kind %d: the reason is shown: %v", kind, says)
		}
	}
}

func TestUnknownErrorIsNotTold(t *testing.T) {
	t.Parallel()
	w := httptest.NewRecorder()
	if s := ShowError(w, request("GET", ""), http.ErrHijacked); s != 500 || strings.Contains(w.Body.String(), "hijack") {
		t.Errorf("status %d; the text of the error is on the page", s)
	}
}

func TestLocal(t *testing.T) {
	t.Parallel()
	for target, want := range map[string]bool{"/today": true, "/batches?x=1": true, "": false, "today": false, "//host": false, "/\\host": false,
		"https://host": false, "/a\nb": false, "/ok//x": true, "/\t/host": false} {
		if got := Local(target); got != want {
			t.Errorf("Local(%q) = %v", target, got)
		}
	}
}

func TestAddressesAreEscaped(t *testing.T) {
	t.Parallel()
	for got, want := range map[string]string{
		MovementURL("26-118", "A/B 1?#%"): "/batches/26-118/movements/A%2FB%201%3F%23%25",
		RoundURL("26-118", 4):             "/batches/26-118/rounds/4",
		Query("/x", "a", "", "b", "1&2"):  "/x?b=1%262",
		Query("/x", "a", ""):              "/x",
		CertificateURL("26-118-0001"):     "/certificates/26-118-0001",
	} {
		if got != want {
			t.Errorf("%s, want %s", got, want)
		}
	}
}

func TestFormComesBackFilledIn(t *testing.T) {
	t.Parallel()
	r := request("POST", url.Values{"code": {" 26-118 "}, "serials": {"A\r\nB"}}.Encode())
	f, err := ReadForm(r, Label{"code", words.Batch}, Label{"serials", words.SerialNumbers})
	if err != nil {
		t.Fatal(err)
	}
	taken := f.Take(&store.Error{Kind: store.KindInvalid, Code: "batch_code_taken", Field: "code", Args: map[string]string{"code": "26-118"},
		More: []*store.Error{{Kind: store.KindInvalid, Code: "needed", Field: "nowhere"}}})
	if !taken || f.OK() || f.Status() != 422 {
		t.Errorf("taken %v, ok %v, status %d", taken, f.OK(), f.Status())
	}
	d := f.Field("code")
	if d.Value != " 26-118 " || f.Get("code") != "26-118" || !strings.Contains(d.Why, "26-118") || d.Label != "Batch" {
		t.Errorf("field %+v", d)
	}
	lines := f.faultLines()
	if len(lines) != 2 || lines[0].URL != "#f-code" || lines[1].URL != "" {
		t.Errorf("lines %+v: a fault of no known field belongs to the whole form", lines)
	}
	if f.Take(&store.Error{Kind: store.KindForbidden}) || f.Take(http.ErrHijacked) {
		t.Error("an error that is no refusal was taken for one")
	}
	var out strings.Builder
	if err := TextArea(f.Field("serials"), 4).Render(t.Context(), &out); err != nil || !strings.Contains(out.String(), ">\nA\r\nB</textarea>") {
		t.Errorf("the text area holds %q (%v)", out.String(), err)
	}
	out.Reset()
	if err := Input(f.Field("code").As("password")).Render(t.Context(), &out); err != nil || strings.Contains(out.String(), "26-118\"") {
		t.Errorf("a password goes back to the browser: %s", out.String())
	}
}
