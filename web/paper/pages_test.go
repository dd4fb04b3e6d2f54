package paper_test

import (
	"context"
	"fmt"
	"regexp"
	"strings"
	"testing"
	"time"

	"ratehouse/store"
	"ratehouse/store/proof"
	"ratehouse/store/storetest"
	"ratehouse/web/webtest"
)

var (
	passing = []string{"1.2", "1.6", "0.4", "-0.3", "2.9", "2.5", "3.8", "3.3", "2.1", "2.6", "8.9", "2.4", "-8.7", "1.5", "1.9"}
	failing = []string{"8.4", "8.1", "-6.9", "-7.6", "6.2", "6.8", "-0.4", "0.1", "-1.2", "-0.8", "2.6", "-1.0", "-7.3", "7.6", "7.2"}
	partly  = []string{"1.2", "1.6", "0.4", "-0.3", "", "2.5", "3.8", "3.3", "2.1", "2.6", "8.9", "2.4", "-8.7", "1.5", "1.9"}
)

// address is the public one of the test laboratory: papers carry it, whatever address a test serves on.
const address = "https://papers.example"

// house is a laboratory that was read through one batch, B1.
func house(t *testing.T, change func(*storetest.House), rates ...[]string) *storetest.House {
	t.Helper()
	h := storetest.New(t)
	h.Lab.Close()
	lab, err := store.Open(t.Context(), store.Config{DSN: h.DB.App, Clock: h.Clock.Now, Engine: "1.0.0 test", Key: h.Key, URL: address, Conns: 10})
	must(t, err)
	t.Cleanup(lab.Close)
	h.Lab = lab
	if change != nil {
		change(h)
	}
	h.Batch(t, "B1", len(rates))
	h.Run(t, "B1", rates)
	return h
}

func must(t testing.TB, err error) {
	t.Helper()
	if err != nil {
		t.Fatal(err)
	}
}

func released(t *testing.T, h *storetest.House, serials ...string) {
	t.Helper()
	out, err := h.Release(t.Context(), h.Lead, "B1", serials)
	must(t, err)
	for _, r := range out {
		if r.Why != "" {
			t.Fatalf("%s is held: %s", r.Serial, r.Why)
		}
	}
}

func paperOf(t *testing.T, h *storetest.House, number string) store.Certificate {
	t.Helper()
	c, err := h.Certificate(context.WithoutCancel(t.Context()), h.Lead, number)
	must(t, err)
	return c
}

func signedIn(t *testing.T, h *storetest.House) *webtest.Tab {
	t.Helper()
	tab := webtest.Start(t, webtest.Serve(t, h.Lab))
	tab.SignIn("lead", storetest.Password)
	return tab
}

func TestReleasePage(t *testing.T) {
	t.Parallel()
	h := house(t, nil, passing, passing, failing, partly, passing, passing)
	must(t, h.EndMovement(t.Context(), h.Lead, "B1", "S-0005", store.Withdrawn, "the depositor wants it back", ""))
	must(t, h.AddRemark(t.Context(), h.Technician, "B1", "S-0006", 6, "placed late"))
	tab := signedIn(t, h)
	tab.Go("/batches/B1/release")
	tab.Shots("release")
	tab.AxeBoth()
	if got := tab.Text("button[data-count]"); got != "Release 3 papers" {
		t.Errorf("the button says %q", got)
	}
	held := strings.Join(tab.Texts("main section:last-of-type tbody tr"), "\n")
	for _, want := range []string{"readings are missing", "S-0004", "withdrawn by the depositor", "S-0005", "a remark is open", "S-0006"} {
		if !strings.Contains(held, want) {
			t.Errorf("%q is not among what is held:\n%s", want, held)
		}
	}
	for _, want := range []string{"protected in some countries", "Accreditation and local rules", "after published descriptions", "uncertainty"} {
		if !strings.Contains(tab.Text("aside"), want) {
			t.Errorf("the caution %q does not stand beside the button", want)
		}
	}
	tab.Click(`input[value="S-0002"]`)
	if got := tab.Text("button[data-count]"); got != "Release 2 papers" {
		t.Errorf("with one unticked the button says %q", got)
	}
	tab.Press("button[data-count]")
	if got := tab.Text(".notice.good"); !strings.Contains(got, "2 papers released") || !strings.Contains(got, "1 certificate, 1 report") {
		t.Errorf("after the release: %q", got)
	}
	tab.Shot("release-done")
	tab.Axe()
	if got := tab.Texts(`main section[aria-labelledby=h-fresh] tbody th`); strings.Join(got, " ") != "B1-0001 B1-0003" {
		t.Errorf("released just now: %q", got)
	}
	submitTwice(t, h, tab)
}

// submitTwice sends the form of the release again, as a nervous hand does.
func submitTwice(t *testing.T, h *storetest.House, tab *webtest.Tab) {
	t.Helper()
	h.Clock.Advance(time.Second)
	again := webtest.Eval[string](tab, `fetch("/batches/B1/release", {method: "POST", body: new URLSearchParams([["serial", "S-0001"], ["serial", "S-0003"]])}).then(r => r.text())`)
	if !strings.Contains(again, "Nothing new was released") {
		t.Error("a form sent twice does not say that nothing new was released")
	}
	if n := h.Count(t, "certificate"); n != 2 {
		t.Errorf("%d papers after a form sent twice", n)
	}
	tab.Allow("status of 422")
	tab.Go("/batches/B1/release?select=none")
	tab.Press("button[data-count]")
	if got := tab.Text(".faults"); !strings.Contains(got, "Choose at least one movement") {
		t.Errorf("nothing chosen: %q", got)
	}
}

func TestNothingToRelease(t *testing.T) {
	t.Parallel()
	h := house(t, nil, partly)
	tab := signedIn(t, h)
	tab.Go("/batches/B1/release")
	tab.Shot("release-empty")
	tab.Axe()
	if tab.Count("button[data-count]") != 0 || !strings.Contains(tab.Text(".empty"), "Nothing is ready") {
		t.Errorf("the empty page: %q", tab.Text("main"))
	}
	tab.Go("/batches/B1/certificates")
	tab.Shot("papers-empty")
	tab.Axe()
}

// All fifteen rates, criteria, limits, definitions, method and cautions stand on the paper; no doubt in
// per cent, and no standard's number as the method.
func TestCertificatePage(t *testing.T) {
	t.Parallel()
	h := house(t, nil, passing, failing)
	released(t, h, "S-0001", "S-0002")
	tab := signedIn(t, h)
	for number, name := range map[string]string{"B1-0001": "certificate", "B1-0002": "report"} {
		tab.Go("/certificates/" + number)
		tab.Shots(name)
		tab.AxeBoth()
		checkLeaves(t, tab, name, 1)
	}
	tab.Go("/certificates/B1-0001")
	text := strings.ReplaceAll(tab.Text(".paper"), "\u00a0", " ")
	wants := []string{"Rate certificate", "Pass.", "met all 7 criteria of category 1", "S-0001", "KESTWICK", "SHA-256", "after published descriptions", "as performed",
		"Simple acceptance", "Not stated: the laboratory has stated no uncertainty budget", "Released", "Nadja Quill", "Ilse Marden", "leaf 1 of 1; end",
		"−4.0 … +6.0", "08:00", "papers.example/verify", "protected in some countries", "Accreditation and local rules", paperOf(t, h, "B1-0001").Code, paperOf(t, h, "B1-0001").Record.Programme.Hash}
	for _, r := range passing {
		sign := "+" + r
		if strings.HasPrefix(r, "-") {
			sign = "−" + r[1:]
		}
		wants = append(wants, sign)
	}
	for _, w := range wants {
		if !strings.Contains(strings.ToLower(text), strings.ToLower(w)) {
			t.Errorf("the certificate does not say %q:\n%s", w, text)
		}
	}
	if strings.Contains(text, "%") {
		t.Error("the certificate prints a share in per cent (practice notes U14)")
	}
	if m := regexp.MustCompile(`(?i)iso[ -]?3159`).FindString(text); m != "" {
		t.Errorf("the certificate names %q as its method while nobody compared the text", m)
	}
	tab.Dark(true)
	if got := webtest.Eval[string](tab, `getComputedStyle(document.querySelector(".paper")).backgroundColor`); got != "rgb(255, 255, 255)" {
		t.Errorf("in the dark the paper is %s", got)
	}
}

// The paper is what was frozen, whatever changes afterwards: the bytes of its drawing stay.
func TestPaperIsDrawnFromItsRecord(t *testing.T) {
	t.Parallel()
	h := house(t, nil, passing)
	released(t, h, "S-0001")
	tab := signedIn(t, h)
	drawing := func() string {
		tab.Go("/certificates/B1-0001")
		return webtest.Eval[string](tab, `document.querySelector(".paper").outerHTML`)
	}
	before := drawing()
	zone, err := time.LoadLocation("Europe/Zurich")
	must(t, err)
	must(t, h.SetHouse(t.Context(), h.Manager, store.House{Title: "Renamed House", Address: []string{"Elsewhere"}, Zone: zone, Demo: true}))
	_, err = h.AddDepositor(t.Context(), h.Lead, store.Depositor{Code: "OTHER", Title: "Other"})
	must(t, err)
	h.Clock.Advance(3 * time.Hour)
	if after := drawing(); after != before {
		t.Error("the drawing of a released paper changed with the laboratory")
	}
}

func TestSignedRecordIsAFile(t *testing.T) {
	t.Parallel()
	h := house(t, nil, passing)
	released(t, h, "S-0001")
	tab := signedIn(t, h)
	tab.Go("/certificates/B1-0001")
	file := webtest.Eval[string](tab, `fetch(document.querySelector("a[href$='.jws']").href).then(r => r.text())`)
	key := webtest.Eval[string](tab, `fetch(document.querySelector("a[href$='.jwk']").href).then(r => r.text())`)
	pub, err := proof.ParsePublicKey([]byte(key))
	must(t, err)
	rec, err := proof.VerifyFile(pub, []byte(file))
	if err != nil || rec.Number != "B1-0001" || pub.ID() != h.Key.ID() {
		t.Errorf("the file is %q by key %s: %v", rec.Number, pub.ID(), err)
	}
	tab.Allow("status of 404")
	if got := webtest.Eval[int](tab, `fetch("/certificates/B1-0009.jws").then(r => r.status)`); got != 404 {
		t.Errorf("a file of no paper answers %d", got)
	}
}

func TestRevokeOnThePage(t *testing.T) {
	t.Parallel()
	h := house(t, nil, passing)
	released(t, h, "S-0001")
	tab := signedIn(t, h)
	tab.Allow("status of 422")
	tab.Go("/certificates/B1-0001")
	tab.Click("details.revoke summary")
	tab.Press("details.revoke button")
	if got := tab.Text(".faults"); got == "" {
		t.Error("a revocation without a reason is not refused in words")
	}
	tab.Axe()
	tab.Type(`input[name=reason]`, "issued for the wrong piece")
	tab.Press("details.revoke button")
	if got := tab.Text(".void-mark"); !strings.Contains(got, "REVOKED") || !strings.Contains(got, "issued for the wrong piece") {
		t.Errorf("a revoked paper says %q", got)
	}
	if tab.Count(".across text") != 1 || tab.Count("details.revoke") != 0 {
		t.Error("a revoked paper is not marked across, or offers to be revoked again")
	}
	tab.Shot("certificate-revoked")
	tab.Axe()
	checkLeaves(t, tab, "certificate-revoked", 1)
	tab.Go("/batches/B1/certificates")
	if got := tab.Text("tbody tr"); !strings.Contains(got, "revoked") {
		t.Errorf("the list says %q", got)
	}
}

// Every valid paper of the batch on its own leaf, in one print.
func TestPrintAllPapers(t *testing.T) {
	t.Parallel()
	h := house(t, nil, passing, failing, passing, partly)
	released(t, h, "S-0001", "S-0002", "S-0003")
	must(t, h.Revoke(t.Context(), h.Lead, "B1-0003", "wrong piece"))
	tab := signedIn(t, h)
	tab.Go("/batches/B1/certificates")
	tab.Shots("papers")
	tab.AxeBoth()
	tab.Press(".title .btn.main")
	tab.Shot("papers-print")
	tab.Axe()
	if leaves, drawn := tab.PDF("papers-print"), tab.Count(".paper"); leaves != 2 || drawn != 2 {
		t.Errorf("two valid papers print on %d leaves, %d drawn", leaves, drawn)
	}
}

func TestPaperInItsLanguage(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.Batch(t, "B1", 1, func(n *store.NewBatch) { n.Language = "fr" })
	h.Run(t, "B1", [][]string{passing})
	released(t, h, "S-0001")
	tab := signedIn(t, h)
	tab.Go("/certificates/B1-0001")
	if got := tab.Text(".heading"); got != "Bulletin de marche" {
		t.Errorf("a paper of a French batch is headed %q", got)
	}
	tab.Press(`.languages a[lang=de]`)
	if got := tab.Text(".heading"); got != "Gangschein" {
		t.Errorf("in German it is headed %q", got)
	}
	if got := webtest.Eval[string](tab, `document.querySelector(".paper").lang`); got != "de" {
		t.Errorf("its language is marked as %q", got)
	}
}

func TestVerifyPage(t *testing.T) {
	t.Parallel()
	h := house(t, func(h *storetest.House) {
		must(t, h.SetHouse(t.Context(), h.Manager, store.House{Title: "Test Laboratory", Address: []string{"1 Bench Row"}, Zone: time.UTC}))
	}, passing, failing)
	released(t, h, "S-0001", "S-0002")
	one, two := paperOf(t, h, "B1-0001"), paperOf(t, h, "B1-0002")
	tab := webtest.Start(t, webtest.Serve(t, h.Lab))
	tab.Allow("status of 4")
	tab.Go("/verify")
	tab.Shots("verify")
	tab.AxeBoth()
	tab.Type(`input[name=number]`, "b1-0001")
	tab.Type(`input[name=code]`, strings.ToLower(one.Code))
	tab.Press("main button")
	if got := tab.Text(".notice.good"); !strings.Contains(got, "genuine and valid") {
		t.Errorf("a genuine paper: %q", got)
	}
	if got := tab.Text(".paper"); !strings.Contains(got, "S-0001") || !strings.Contains(got, "+8.9") {
		t.Errorf("its figures are not shown: %q", got)
	}
	tab.Shot("verify-good")
	tab.Axe()
	for name, path := range map[string]string{"the number alone": "/verify?number=B1-0001", "an empty code": "/verify?number=B1-0001&code=", "a mistyped code": "/verify?number=B1-0001&code=" + one.Code[:20],
		"another paper's code": "/verify?number=B1-0001&code=" + two.Code} {
		tab.Go(path)
		if got := tab.Text("main"); strings.Contains(got, "S-0001") || strings.Contains(got, "genuine and valid") {
			t.Errorf("%s shows the paper: %q", name, got)
		}
	}
	tab.Shot("verify-none")
	tab.Axe()
	must(t, h.Revoke(t.Context(), h.Lead, "B1-0002", "issued for the wrong piece"))
	tab.Go("/verify?number=B1-0002&code=" + two.Code)
	if got := tab.Text(".notice"); !strings.Contains(got, "no longer valid") || !strings.Contains(got, "issued for the wrong piece") {
		t.Errorf("a revoked paper: %q", got)
	}
	tab.Shot("verify-revoked")
}

// A wrong number cannot be told from a wrong code, and who guesses waits: even between guesses that
// were right.
func TestVerifyIsSlowForGuessers(t *testing.T) {
	t.Parallel()
	h := house(t, nil, passing, failing)
	released(t, h, "S-0001", "S-0002")
	one, two := paperOf(t, h, "B1-0001"), paperOf(t, h, "B1-0002")
	tab := webtest.Start(t, webtest.Serve(t, h.Lab))
	tab.Allow("status of 4")
	tab.Go("/verify")
	ask := func(number, code string) (status int, body string) {
		got := webtest.Eval[[]string](tab, fmt.Sprintf(`fetch("/verify?number=%s&code=%s").then(async r => [String(r.status), (await r.text()).replaceAll(%q, "N").replaceAll(%q, "N")])`, number, code, number, code))
		_, err := fmt.Sscan(got[0], &status)
		must(t, err)
		return status, got[1]
	}
	status1, wrongCode := ask("B1-0001", two.Code)
	status2, wrongNumber := ask("B1-0777", two.Code)
	if status1 != 404 || status2 != 404 || wrongCode != wrongNumber {
		t.Errorf("wrong code %d, wrong number %d, alike %v", status1, status2, wrongCode == wrongNumber)
	}
	for range 3 {
		if status, _ := ask("B1-0001", one.Code); status != 200 {
			t.Errorf("a right answer in between: %d", status)
		}
		if status, _ := ask("B1-0778", two.Code); status != 404 {
			t.Errorf("a further guess: %d", status)
		}
	}
	if status, body := ask("B1-0001", one.Code); status != 429 || !strings.Contains(body, "Too many attempts") {
		t.Errorf("after five guesses: %d", status)
	}
	h.Clock.Advance(16 * time.Minute)
	if status, _ := ask("B1-0001", one.Code); status != 200 {
		t.Errorf("a quarter of an hour later: %d", status)
	}
}

// The demonstration marks every paper, across it and in words.
func TestDemoPaperIsMarked(t *testing.T) {
	t.Parallel()
	h := house(t, func(h *storetest.House) {
		must(t, h.SetHouse(t.Context(), h.Manager, store.House{Title: "Hollinfell Timing Laboratory", Address: []string{"4 Alder Row", "00417 Hollinfell"},
			Contact: "certificates@hollinfell.example", Zone: time.UTC, Demo: true}))
	}, passing)
	released(t, h, "S-0001")
	tab := signedIn(t, h)
	tab.Go("/certificates/B1-0001")
	if !strings.Contains(tab.Text(".void-mark"), "DEMONSTRATION") || tab.Count(".across text") != 1 || !strings.Contains(tab.Text(".leaf"), "DEMONSTRATION") {
		t.Error("the paper of a demonstration is not marked at its top, across it and at its foot")
	}
	tab.Shot("certificate-demo")
	tab.Axe()
	checkLeaves(t, tab, "certificate-demo", 1)
}
