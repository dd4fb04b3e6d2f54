package main

import (
	"fmt"
	"net/http"
	"strings"
	"testing"
	"time"

	"ratehouse/store/storetest"
	"ratehouse/web/webtest"
)

// The whole job, as its people do it in a browser: a technician registers a batch and reads all its
// rounds, the QA lead sees the verdicts, releases and prints.

// jobRates are five movements of category 1 with known fates. The first four are vectors of the
// project's domain notes (1.7: typical_pass, D_sign_discriminator, M_just_over in the mean,
// V_just_over), the fifth is the first with another sign on some days, made here.
var jobRates = [][]string{
	{"1.2", "1.6", "0.4", "-0.3", "2.9", "2.5", "3.8", "3.3", "2.1", "2.6", "4.9", "2.4", "-1.7", "1.5", "1.9"},
	{"-3", "-3", "0.5", "0.5", "1", "1", "2.5", "2.5", "4", "4", "3", "4", "5", "-3", "-3"},
	{"6", "6", "6", "6", "6", "6", "6", "6", "6", "6.1", "5", "6", "7", "6", "6"},
	{"0", "2", "0", "2", "0", "2", "0", "2", "0", "2.1", "0", "0", "0", "0", "0"},
	{"-1.2", "-1.6", "0.4", "-0.3", "-2.9", "-2.5", "3.8", "3.3", "2.1", "2.6", "4.9", "2.4", "-1.7", "1.5", "1.9"},
}

var jobWant = []string{"pass", "fail", "fail", "fail", "pass"}

func TestWholeJobByKeyboard(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	base := webtest.Serve(t, h.Lab)
	tab := webtest.Start(t, base)
	register(tab, "26-500", "rate", len(jobRates))
	for k := 1; k <= 15; k++ {
		round(h, tab, "26-500", k, func() {
			for i := range jobRates {
				if k == 6 && i == 1 { // a slip, seen at once and corrected in the open round
					tab.Keys("+9.1\r")
					choose(tab, 2)
				}
				tab.Keys(typed(jobRates[i][k-1]) + "\r")
			}
		})
	}
	want := judged(t)
	lead := webtest.Start(t, base)
	lead.SignIn("lead", storetest.Password)
	lead.Go("/batches/26-500")
	lead.Shot("job-batch")
	if got := download(t, lead, base+"/batches/26-500/sheets.csv"); got != want {
		t.Errorf("verdicts on the page's file:\n%s\njudge on the same numbers:\n%s", got, want)
	}
	for i, verdict := range jobWant {
		lead.Go("/batches/26-500/movements/" + jobSerial(i))
		if text := lead.Text("main"); !strings.Contains(text, verdict) {
			t.Errorf("rate sheet of %s does not say %s", jobSerial(i), verdict)
		}
	}
	lead.Shot("job-ratesheet")
	release(t, lead, "26-500", 5)
}

// touchRates are the daily rates of two movements whose states are read in full seconds by touch.
var touchRates = []int{1, 7}

// The whole job again at a tablet, by touch: states at all sixteen rounds. One gains 1 s/d and passes,
// the other 7 s/d, which category 1 does not allow.
func TestWholeJobByTouch(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	base := webtest.Serve(t, h.Lab)
	tab := webtest.Start(t, base)
	tab.Resize(webtest.Tablet)
	register(tab, "26-501", "state", len(touchRates))
	for k := range 16 {
		round(h, tab, "26-501", k, func() {
			for _, rate := range touchRates {
				touch(tab, fmt.Sprintf("+%d", rate*k))
			}
		})
	}
	lead := webtest.Start(t, base)
	lead.Resize(webtest.Tablet)
	lead.SignIn("lead", storetest.Password)
	for i, want := range []string{"pass", "fail"} {
		lead.Go("/batches/26-501/movements/" + jobSerial(i))
		if text := lead.Text("main"); !strings.Contains(text, want) {
			t.Errorf("rate sheet of %s does not say %s", jobSerial(i), want)
		}
	}
	release(t, lead, "26-501", len(touchRates))
}

// touch enters a value at the page's own keys.
func touch(tab *webtest.Tab, value string) {
	for _, sign := range value {
		tab.Tap(fmt.Sprintf(`[data-key="%c"]`, sign))
	}
	tab.Tap("#enter")
}

func jobSerial(i int) string { return fmt.Sprintf("KW-%03d", 7*i+11) }

// register fills in the form of a new batch, due now.
func register(tab *webtest.Tab, code, entry string, pieces int) {
	tab.SignIn("technician", storetest.Password)
	tab.Go("/batches/new")
	tab.Fill(`[name=code]`, code)
	tab.Fill(`[name=depositor]`, "KESTWICK")
	tab.Fill(`[name=starts_at]`, storetest.Start.Format("2006-01-02 15:04"))
	webtest.Eval[bool](tab, `(document.querySelector('[name=category]').value = "1") === "1"`)
	tab.Click(fmt.Sprintf(`[name=entry][value=%s]`, entry))
	if entry == "rate" {
		tab.Click(`[name=over_24h]`)
	}
	var list []string
	for i := range pieces {
		list = append(list, jobSerial(i))
	}
	webtest.Eval[bool](tab, fmt.Sprintf(`(document.querySelector("[name=serials]").value = %q) !== ""`, strings.Join(list, "\n")))
	tab.Press(`form#register .btn.main`)
	if got := tab.Path(); !strings.Contains(got, code) {
		tab.T.Fatalf("after registering at %s: %s", got, tab.Text("main"))
	}
}

// round is the morning of round k: sign in when the night has ended the session, open, read, close.
func round(h *storetest.House, tab *webtest.Tab, code string, k int, read func()) {
	h.Clock.Set(storetest.Start.Add(time.Duration(k) * 24 * time.Hour))
	address := fmt.Sprintf("/batches/%s/rounds/%d", code, k)
	if tab.Go(address); !strings.HasPrefix(tab.Path(), address) {
		tab.SignIn("technician", storetest.Password)
		tab.Go(address)
	}
	tab.Press(`form[action$="/open"] button`)
	read()
	tab.Until(`document.querySelectorAll(".holder .kept").length === 0 && document.querySelector("#saved").textContent !== ""`)
	tab.Press(`form[action$="/close"] button`)
}

// choose clicks a place until it is the one in hand, as a person does who looks before typing on.
func choose(tab *webtest.Tab, n int) {
	here := fmt.Sprintf(`document.querySelector('[data-place="%d"][aria-current]') !== null`, n)
	for try := 0; try < 5 && !webtest.Eval[bool](tab, here); try++ {
		tab.Click(fmt.Sprintf(`[data-place="%d"]`, n))
	}
	tab.Until(here)
}

// typed puts the sign before a value, as the bench does.
func typed(v string) string {
	if strings.HasPrefix(v, "-") {
		return v
	}
	return "+" + v
}

// judged is what `ratehouse judge` says of the rates, with the two columns of a batch's file.
func judged(t *testing.T) string {
	t.Helper()
	var in, out, said strings.Builder
	in.WriteString("serial,category")
	for d := range 15 {
		fmt.Fprintf(&in, ",d%d", d+1)
	}
	in.WriteString("\n")
	for i, days := range jobRates {
		fmt.Fprintf(&in, "%s,1,%s\n", jobSerial(i), strings.Join(days, ","))
	}
	if code := judge(nil, strings.NewReader(in.String()), &out, &said); code != exitDone {
		t.Fatalf("judge: exit %d: %s", code, said.String())
	}
	lines := strings.Split(strings.TrimSuffix(out.String(), "\n"), "\n")
	for i := range lines {
		if lines[i] += ",,"; i == 0 {
			lines[i] = strings.TrimSuffix(lines[i], ",,") + ",end,end_cause"
		}
	}
	return strings.Join(lines, "\n") + "\n"
}

// download fetches a file as the person of the tab.
func download(t *testing.T, tab *webtest.Tab, address string) string {
	t.Helper()
	type answer struct {
		Status int    `json:"status"`
		Text   string `json:"text"`
	}
	got := webtest.Eval[answer](tab, fmt.Sprintf(`fetch(%q).then(async r => ({status: r.status, text: await r.text()}))`, address))
	if got.Status != http.StatusOK {
		t.Fatalf("%s: %d %s", address, got.Status, got.Text)
	}
	return got.Text
}

// release frees all papers of a batch and prints the first.
func release(t *testing.T, lead *webtest.Tab, code string, papers int) {
	t.Helper()
	lead.Go("/batches/" + code + "/release")
	lead.Shot("job-release")
	lead.Press(`main form .btn.main`)
	lead.Go("/batches/" + code + "/certificates")
	if n := lead.Count(`main a[href*="/certificates/` + code + `"]`); n < papers {
		t.Errorf("%d papers are listed, want %d", n, papers)
	}
	lead.Go("/certificates/" + code + "-0001")
	if leaves := lead.PDF("job-certificate-" + code); leaves != 1 {
		t.Errorf("the certificate has %d leaves", leaves)
	}
	lead.Shot("job-certificate")
}
