package desk_test

import (
	"fmt"
	"net/http"
	"net/url"
	"strings"
	"testing"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/trial"
	"ratehouse/web/words"
)

// shifted judges the movements anew with a shift added to every rate: what the page must say, found
// the long way. Only those judged in full, neither rejected for cause nor withdrawn nor void, count.
func shifted(t *testing.T, h *storetest.House, code string, by int64) (pass, of int) {
	t.Helper()
	here := judgeHere(t, h, code)
	for _, m := range here.sheet.Movements {
		r := here.results[m.Serial]
		full := true
		for i, v := range r.Values {
			full = full && (v.Known || !here.judge.Limit(i).Any())
		}
		if !full || m.End != store.InTrial && m.End != store.Removed {
			continue
		}
		of++
		rates := append([]trial.Rate(nil), m.Rates...)
		for i, rate := range rates {
			if rate.Known() {
				rates[i] = rate.Shifted(by, 86_400)
			}
		}
		var moved trial.Result
		here.judge.Rates(rates, &moved)
		if moved.Verdict == trial.Pass {
			pass++
		}
	}
	return pass, of
}

// Every line of the table is what judging each movement anew at that shift gives.
func TestShiftsAgreeWithTheJudge(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	muddle(t, h, "26-001", 120, 5)
	lead := visit(t, base, "lead")
	rows, varied := lead.page("/batches/26-001/aim").all("#aim table tbody tr"), map[string]bool{}
	for _, row := range rows {
		e, err := trial.ParseExact(strings.NewReplacer("−", "-", "+", "").Replace(row.all("th")[0].text()))
		must(t, err)
		pass, of := shifted(t, h, "26-001", e.Times(trial.Ratio(1000, 1)).Rat().Num().Int64())
		if got := row.all("td")[0].text(); got != fmt.Sprint(pass) {
			t.Errorf("shifted by %s: the page says %s of %d pass, the judge %d", e, got, of, pass)
		}
		varied[row.all("td")[0].text()] = true
	}
	if len(rows) < 8 || len(varied) < 3 {
		t.Errorf("%d shifts with %d different counts", len(rows), len(varied))
	}
	pass, of := shifted(t, h, "26-001", -1250)
	want := fmt.Sprintf("Shifted by −1.25 s/d: %d of %d pass, %s.", pass, of, words.New(words.EN, nil).Share(pass, of))
	if got := lead.page("/batches/26-001/aim?shift=-1.25").all("#aim .asked")[0].text(); got != strings.Join(strings.Fields(want), " ") {
		t.Errorf("asked for −1.25: %q, want %q", got, want)
	}
}

// A batch that loses 6.0 s/d and holds M alone outside: the aim is found, and all it needed was
// regulating.
func TestAimOfASlowBatch(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	h.Batch(t, "26-001", 10)
	rates := make([][]string, 10)
	for i := range rates {
		rates[i] = strings.Fields(strings.Repeat("-6.0 ", 15)) // M in -4 ... +6: passes from +2.0 to +12.0
	}
	rates[9][3] = "10" // its mean is −4.4, and it fails in P whatever that is
	h.Run(t, "26-001", rates)
	text := visit(t, base, "lead").page("/batches/26-001/aim").all("#aim")[0].text()
	for _, want := range []string{"As they are, 0 of 10 movements", "Most would pass, 9, with all rates shifted by +2.0 … +12.0 s/d.",
		"9 of 10 that fail in the mean rate needed nothing but regulating."} {
		if !strings.Contains(text, want) {
			t.Errorf("%q is not in: %s", want, text)
		}
	}
}

// The page of the batch holds the place and a link, and no more; a wrong number comes back with its
// fault; who reads gets nothing.
func TestAimIsAskedForLater(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	h.Batch(t, "26-001", 2)
	lead := visit(t, base, "lead")
	if n := len(lead.page("/batches/26-001").all("#aim")); n != 0 {
		t.Error("a batch without verdicts offers the aim")
	}
	if got := lead.page("/batches/26-001/aim").all("#aim")[0].text(); !strings.Contains(got, "nothing to shift") {
		t.Errorf("without verdicts: %s", got)
	}
	good := strings.Fields(strings.Repeat("1.0 ", 15))
	h.Run(t, "26-001", [][]string{good, good})
	lead = visit(t, base, "lead") // the session of a fortnight ago is over
	place := lead.page("/batches/26-001").all("#aim")
	if len(place) != 1 || len(place[0].all("table")) != 0 {
		t.Fatalf("the page of the batch holds %v", place)
	}
	link := place[0].all("a")[0]
	alone, _ := link.attr("data-later")
	status, body, _ := lead.get(alone)
	if status != http.StatusOK || strings.Contains(body, "<html") || len(parse(t, body).all("#aim table tbody tr")) == 0 {
		t.Errorf("%s answers %d with %d bytes", alone, status, len(body))
	}
	for _, wrong := range []string{"1e3", "fast", "601", "1,5"} {
		status, body, _ := lead.get("/batches/26-001/aim?" + url.Values{"shift": {wrong}}.Encode())
		if status != http.StatusUnprocessableEntity || len(parse(t, body).all("#aim .why")) != 1 {
			t.Errorf("a shift of %q answers %d", wrong, status)
		}
	}
	if status, _, _ := visit(t, base, "technician").get("/batches/26-001/aim"); status != http.StatusForbidden {
		t.Errorf("a technician asking for the aim gets %d", status)
	}
}
