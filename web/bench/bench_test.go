package bench_test

import (
	"io"
	"math/rand/v2"
	"net/http"
	"net/http/cookiejar"
	"net/url"
	"regexp"
	"slices"
	"strings"
	"testing"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/trial"
	"ratehouse/trial/balance"
	"ratehouse/trial/simulate"
	"ratehouse/web/webtest"
)

// visitor is somebody signed in, asking for pages without a browser.
type visitor struct {
	t      *testing.T
	base   string
	client *http.Client
}

func visit(t *testing.T, base, name string) *visitor {
	t.Helper()
	jar, err := cookiejar.New(nil)
	if err != nil {
		t.Fatal(err)
	}
	v := &visitor{t, base, &http.Client{Jar: jar}}
	res, err := v.client.PostForm(base+"/login", url.Values{"name": {name}, "password": {storetest.Password}})
	if err != nil {
		t.Fatal(err)
	}
	res.Body.Close()
	return v
}

var (
	main  = regexp.MustCompile(`(?s)<main.*</main>`)
	tags  = regexp.MustCompile(`<[^>]*>`)
	links = regexp.MustCompile(`href="(/bench/[^"?]+)"`)
)

// get is the status of a page, what is read on its sheet, and the notes it leads to in their order.
func (v *visitor) get(path string) (status int, text string, notes []string) {
	v.t.Helper()
	res, err := v.client.Get(v.base + path)
	if err != nil {
		v.t.Fatal(err)
	}
	defer res.Body.Close()
	body, err := io.ReadAll(res.Body)
	if err != nil {
		v.t.Fatal(err)
	}
	part := main.FindString(string(body))
	for _, m := range links.FindAllStringSubmatch(part, -1) {
		notes = append(notes, m[1])
	}
	return res.StatusCode, strings.Join(strings.Fields(tags.ReplaceAllString(part, " ")), " "), notes
}

// want fails unless a page says all of it; a leading "no " wants that the rest is not said.
func (v *visitor) want(path string, all ...string) {
	v.t.Helper()
	status, text, _ := v.get(path)
	if status != http.StatusOK {
		v.t.Errorf("%s answers %d", path, status)
	}
	for _, one := range all {
		bad, not := strings.CutPrefix(one, "no ")
		if strings.Contains(text, bad) == not {
			v.t.Errorf("%s: %q in: %s", path, one, text)
		}
	}
}

// bench is a laboratory with its server and a calibre whose card says what a division does.
func bench(t *testing.T) (h *storetest.House, base string) {
	t.Helper()
	h = storetest.New(t)
	_, err := h.AddCalibre(t.Context(), h.Lead, store.Calibre{Code: "OD-4410", Title: "OD 4410", DiameterUM: 27_400, Organ: "index", OrganStepMilli: 2500})
	if err != nil {
		t.Fatal(err)
	}
	return h, webtest.Serve(t, h.Lab)
}

func calibre(code string) func(*store.NewBatch) { return func(n *store.NewBatch) { n.Calibre = code } }

func all(rate string) []string { return strings.Fields(strings.Repeat(rate+" ", 15)) }

// in is a movement at 0 but for two days.
func in(first int, rate string) []string {
	days := all("0")
	days[first-1], days[first] = rate, rate
	return days
}

// Worked out by hand. The first loses 6: M, in -4 to +6, takes +2 to +12, which is 0.8 to 4.8 divisions
// of 2.5 s/d. The second stands at -15 in 3H (days 3, 4) and else at 0: 12 from the mean of -3; with
// R3H = -15, R6H = R9H = 0 the pattern is (7.5, 7.5), 10.61 s/d at 45°.
func TestNotesByHand(t *testing.T) {
	t.Parallel()
	h, base := bench(t)
	h.Batch(t, "26-001", 3, calibre("OD-4410"))
	h.Run(t, "26-001", [][]string{all("-6.0"), in(3, "-15.0"), all("1.0")})
	h.Batch(t, "26-002", 1)
	h.Run(t, "26-002", [][]string{all("-6.0")})
	v := visit(t, base, "adjuster")
	const slow, third = "/bench/26-001/S-0001", "/bench/26-001/S-0002"
	v.want(slow, "Opinion, not part of the report", "Author Ole Varnhagen, adjuster", "fail in M", "Made on Thu 31 Dec 2026", "Regulating alone is enough: shift the rate by +2.0 … +12.0 s/d, best by +7.00 s/d",
		"At the index: +0.8 … +4.8 divisions", "Nothing beyond regulating is outside", "15 days", "no heavy", "no calibre card")
	v.want("/bench/26-002/S-0001", "shift the rate by +2.0 … +12.0 s/d", "The calibre card does not say", "no divisions.")
	v.want("/bench/26-001/S-0003", "It passes as it is, and would with all rates shifted by −5.0 … +5.0 s/d")
	v.want(third, "P would stay outside whatever the mean rate", "no Regulating alone is enough", "The mean rate is inside", "3 up, lies farthest from the mean: −12.00 s/d",
		"Vertical pattern of 10.61 s/d", "at 45° down", "Three vertical positions: nothing tests", "Hairspring centred and flat", "The amplitude is not known: no heavy side is named", "no its heavy side is at",
		"reading resolution alone, 0.1 s (0.029 s a state)")
	// The heavy side needs an amplitude that keeps the sign of its factor: 219.54° turns it about.
	v.want(third+"?from=150&to=180", "its heavy side is at 45° from 12", "Amplitude as given: 150° to 180°", "no The amplitude is not known")
	v.want(third+"?from=250&to=290", "its heavy side is at 225° from 12")
	v.want(third+"?from=200&to=260", "leaves open", "no its heavy side is at")
	for _, wrong := range []string{"?from=150", "?to=180", "?from=180&to=150", "?from=a&to=b", "?from=10&to=180", "?from=150&to=500"} {
		if status, text, _ := v.get(third + wrong); status != http.StatusUnprocessableEntity || !strings.Contains(text, "whole degrees from 30 to 400") || strings.Contains(text, "its heavy side is at") {
			t.Errorf("%s answers %d: %s", wrong, status, text)
		}
	}
}

// The list has every movement that counts as failed and no other, first those that regulating alone
// mends; what their rates say is the judge's.
func TestRejectsAreThoseThatFailed(t *testing.T) {
	t.Parallel()
	h, base := bench(t)
	h.Batch(t, "26-001", 40)
	rng, model := rand.New(rand.NewPCG(4, 3159)), simulate.Default()
	rates := make([][]string, 40)
	for i := range rates {
		m := model.Draw(rng)
		for _, r := range m.Rates(trial.ISO3159(), rng) {
			rates[i] = append(rates[i], trial.Milli(100*int64(10*r)).String())
		}
	}
	h.Run(t, "26-001", rates)
	for i, end := range []store.End{store.Rejected, store.Withdrawn, store.Void, store.Removed} {
		if err := h.EndMovement(t.Context(), h.Lead, "26-001", storetest.Serial(i+1), end, "as it came", ""); err != nil {
			t.Fatal(err)
		}
	}
	s, err := h.BatchSheet(t.Context(), h.Lead, "26-001")
	if err != nil {
		t.Fatal(err)
	}
	j, err := trial.NewJudge(s.Batch.Programme, s.Batch.Category)
	if err != nil {
		t.Fatal(err)
	}
	var easy, hard []string
	for _, m := range s.Movements {
		var r trial.Result
		j.Rates(m.Rates, &r)
		_, regulates := balance.Regulation(j, m.Rates)
		path := "/bench/26-001/" + m.Serial
		switch fails := r.Verdict == trial.Fail; {
		case m.End == store.Withdrawn, m.End == store.Void, m.End == store.InTrial && !fails:
		case fails && regulates:
			easy = append(easy, path)
		default:
			hard = append(hard, path)
		}
	}
	if len(easy) == 0 || len(hard) < 3 {
		t.Fatalf("%d and %d rejects are no test", len(easy), len(hard))
	}
	for _, name := range []string{"adjuster", "lead"} {
		_, text, notes := visit(t, base, name).get("/bench")
		if !slices.Equal(notes, append(slices.Clone(easy), hard...)) {
			t.Errorf("a %s sees %v, want %v and %v", name, notes, easy, hard)
		}
		if strings.Count(text, "not enough") != len(hard) {
			t.Errorf("%d of %d cannot be regulated: %s", strings.Count(text, "not enough"), len(hard), text)
		}
	}
}

// Who reads, and who manages, gets no note.
func TestBenchIsForTheBench(t *testing.T) {
	t.Parallel()
	h, base := bench(t)
	visit(t, base, "adjuster").want("/bench", "Nothing for the bench")
	h.Batch(t, "26-001", 1)
	for _, name := range []string{"technician", "manager"} {
		for _, path := range []string{"/bench", "/bench/26-001/S-0001"} {
			if status, _, _ := visit(t, base, name).get(path); status != http.StatusForbidden {
				t.Errorf("a %s asking for %s gets %d", name, path, status)
			}
		}
	}
	if status, _, _ := visit(t, base, "lead").get("/bench/26-001/none"); status != http.StatusNotFound {
		t.Errorf("no such movement: %d", status)
	}
}
