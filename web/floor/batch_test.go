package floor_test

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/chromedp/chromedp"

	"ratehouse/store/storetest"
	"ratehouse/web/webtest"
)

// fillIn types what a batch needs besides its numbers.
func fillIn(tab *webtest.Tab, code string) {
	tab.Fill("#f-code", code)
	tab.Fill("#f-depositor", "KESTWICK")
	tab.Fill("#f-starts_at", "2026-12-02 08:30")
	run(tab, `document.querySelector("#f-category").value = "1"`)
}

func TestRegister(t *testing.T) {
	t.Parallel()
	h, tab := bench(t)
	h.Batch(t, "26-118", 1)
	h.Batch(t, "26-125", 1)
	tab.SignIn("technician", storetest.Password)
	tab.Go("/batches/new")
	if got := tab.Value("#f-code"); got != "26-126" {
		t.Errorf("suggested code %q, want 26-126", got)
	}
	tab.Shots("register-empty")
	tab.AxeBoth()
	fillIn(tab, "26-130")
	tab.Type("#f-serials", "KW21-004651\nKW21-004654\nKW21-004657\n")
	tab.WaitText("#preview", "3 movements")
	tab.WaitText("#preview", "1 holder TRAY10")
	tab.Click(`input[value=STRIP5]`)
	tab.WaitText("#preview", "1 holder STRIP5")
	tab.Shot("register-filled")
	tab.Allow("status of 404") // the page of the batch belongs to another room
	tab.Press(`#register .btn.main`)
	if tab.Path() != "/batches/26-130" {
		t.Fatalf("after registering at %s: %s", tab.Path(), tab.Text(".faults"))
	}
	s, err := h.BatchSheet(t.Context(), h.Lead, "26-130")
	if err != nil || len(s.Movements) != 3 || s.Movements[2].Serial != "KW21-004657" || s.Movements[2].Holder != "STRIP5-0001" {
		t.Errorf("registered %+v, %v", s.Movements, err)
	}
	if got := s.Batch.StartsAt.Format("2006-01-02 15:04"); got != "2026-12-02 08:30" {
		t.Errorf("round 0 is due %s", got)
	}
}

// Every fault stands by its field and line, the form comes back filled in, and nothing is registered.
func TestRegisterFaults(t *testing.T) {
	t.Parallel()
	h, tab := bench(t)
	h.Batch(t, "26-118", 1)
	tab.Allow("status of 422")
	tab.SignIn("technician", storetest.Password)
	tab.Go("/batches/new")
	tab.Fill("#f-code", "26-118")
	tab.Fill("#f-depositor", "kestwick works")
	tab.Fill("#f-starts_at", "1.12.2026")
	tab.Click(`input[value=rate]`)
	tab.Type("#f-serials", "A-1\n=B2\nA-1\n\nC-3")
	tab.Press(`#register .btn.main`)
	faults := strings.Join(tab.Texts(".faults li"), "\n")
	for _, want := range []string{
		"Batch code: 26-118 is in use already. The next free one is 26-119.", "It could be KESTWICK-WORKS.",
		"Choose the category", "Write date and time as 2026-12-01 08:30.", "Instantaneous rates cannot be judged",
		`line 2: "=B2" begins with`, `line 3: "A-1" stands on line 1 already`,
	} {
		if !strings.Contains(faults, want) {
			t.Errorf("no fault %q in\n%s", want, faults)
		}
	}
	for css, want := range map[string]string{"#f-code": "26-118", "#f-depositor": "kestwick works", "#f-starts_at": "1.12.2026", "#f-serials": "A-1\n=B2\nA-1\n\nC-3", "input[name=entry]:checked": "rate"} {
		if got := tab.Value(css); got != want {
			t.Errorf("%s comes back as %q, want %q", css, got, want)
		}
	}
	tab.Shot("register-faults")
	tab.Axe()
	if _, err := h.Lab.Batch(t.Context(), h.Lead, "26-119"); err == nil {
		t.Error("something was registered")
	}
}

// A file is read as it is, and its text comes into the field so that it can be corrected there.
func TestRegisterFile(t *testing.T) {
	t.Parallel()
	h, tab := bench(t)
	tab.Allow("status of 422")
	tab.Allow("status of 404")
	tab.SignIn("technician", storetest.Password)
	tab.Go("/batches/new")
	file := filepath.Join(t.TempDir(), "list.csv")
	var list strings.Builder
	list.WriteString("\ufeffserial;place\r\n")
	for i := range 200 {
		fmt.Fprintf(&list, "AV9-%05d;%d\r\n", i+1, i+1)
	}
	list.WriteString("AV9-00007;201\r\n")
	if err := os.WriteFile(file, []byte(list.String()), 0o600); err != nil {
		t.Fatal(err)
	}
	fillIn(tab, "26-200")
	tab.Do(chromedp.SetUploadFiles(chromedp.CSS("#f-file"), []string{file}))
	tab.WaitText("#preview", "line 202")
	tab.Press(`#register .btn.main`)
	if got := tab.Text(".faults"); !strings.Contains(got, "line 202") || !strings.Contains(got, "8") {
		t.Errorf("the repeated number is told as %q", got)
	}
	if got := tab.Value("#f-serials"); !strings.HasPrefix(got, "serial;place") || !strings.Contains(got, "AV9-00200;200") {
		t.Errorf("the list comes back as %.60q", got)
	}
	run(tab, `(f => f.value = f.value.replace(/AV9-00007;201\s*$/, ""))(document.querySelector("#f-serials"))`)
	tab.Press(`#register .btn.main`)
	if tab.Path() != "/batches/26-200" {
		t.Fatalf("at %s: %s", tab.Path(), tab.Text(".faults"))
	}
	s, err := h.BatchSheet(t.Context(), h.Lead, "26-200")
	if err != nil || len(s.Movements) != 200 {
		t.Errorf("%d movements, %v", len(s.Movements), err)
	}
}
