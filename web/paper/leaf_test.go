package paper_test

import (
	"encoding/json"
	"os"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"testing"
	"time"

	"github.com/a-h/templ"

	"ratehouse/store"
	"ratehouse/store/proof"
	"ratehouse/trial"
	"ratehouse/web/page"
	"ratehouse/web/paper"
	"ratehouse/web/webtest"
	"ratehouse/web/words"
)

// golden is a record made outside this project, its definitions written out as the laboratory does.
func golden(t testing.TB, kind proof.Kind) proof.Record {
	t.Helper()
	raw, err := os.ReadFile(filepath.Join("..", "..", "testdata", "proof", string(kind)+".record.json"))
	if err != nil {
		t.Fatal(err)
	}
	var r proof.Record
	if err := json.Unmarshal(raw, &r); err != nil {
		t.Fatal(err)
	}
	p := trial.ISO3159()
	for i, c := range p.Criteria {
		r.Criteria[i].Definition = p.Expression(c.Formula)
	}
	return r
}

// kept is the record as the laboratory keeps it.
func kept(t testing.TB, r proof.Record) store.Certificate {
	t.Helper()
	hash, err := r.Hash()
	if err != nil {
		t.Fatal(err)
	}
	return store.Certificate{Record: r, Code: proof.ShortCode(hash)}
}

// look opens papers alone in the browser, each in English, French and German.
func look(t *testing.T, list ...store.Certificate) *webtest.Tab {
	t.Helper()
	return webtest.Show(t, page.Sheet{Title: "Papers", Bare: true, Styles: []string{"paper.css"}}, func(*page.Context) templ.Component {
		var all []templ.Component
		for _, lang := range words.Langs {
			all = append(all, paper.Drawn(string(lang), list...))
		}
		return templ.Join(all...)
	})
}

// longest has every text as long as people can type it, or longer.
func longest(t testing.TB, kind proof.Kind) proof.Record {
	r := golden(t, kind)
	r.Number = strings.Repeat("LONG-BATCH-CODE.", 3) + "0001-2"
	r.Movement.Serial = strings.Repeat("W8", 32)
	r.Movement.Depositor.Title = "Manufacture d’horlogerie et de mécanique de précision des frères Ondrel & Søns, successeurs de la maison fondée à Nürn"
	r.Movement.Calibre = "CALIBRE-WITH-A-CODE-OF-FORTY-CHARACTERS-"
	r.Laboratory.Name = "Bureau indépendant de contrôle officiel de la marche des mouvements mécaniques de Hollinfell-les-Bains"
	r.Laboratory.Address = []string{"Division of Timekeeping and Comparison", "Building 4, Second Floor, Alder Row 4-18", "00417 Hollinfell-les-Bains", "Invented Country"}
	r.Received.Condition = "one screw of the bridge worn, dial feet bent, otherwise no damage seen at the loupe"
	r.Received.Order = "ORDER-2026-000000118"
	r.ReleasedBy = "Dr. Nadja Alexandra von Quill-Hollinfell"
	for i := range r.Readings {
		r.Readings[i].ReadBy, r.Readings[i].EnteredBy = "Ole Christian Varnhagen-Mårtensson", "Ilse Marden"
	}
	return r
}

// corrected has so many corrections beside the one of the golden record.
func corrected(r proof.Record, n int) proof.Record {
	r.Readings = append([]proof.Reading{}, r.Readings...)
	for i := range n {
		old := r.Readings[i%15]
		old.Superseded, old.Value, old.Nth, old.Step = true, "17.4", 1, 20+i
		now := old
		now.Superseded, now.Value, now.Nth, now.Reason = false, "27.4", 2, "slip of ten seconds, read again by a second person at the same bench"
		r.Readings = append(r.Readings, old, now)
	}
	r.Demo = false
	return r
}

// fromStates has states in place of typed rates, one read at the start.
func fromStates(r proof.Record) proof.Record {
	start := r.Readings[0]
	start.Step, start.Day, start.Kind, start.Value = 0, 0, proof.ReadingState, "-3.4"
	list := []proof.Reading{start}
	for _, x := range r.Readings {
		x.Kind = proof.ReadingState
		list = append(list, x)
	}
	r.Readings = list
	return r
}

func revoked(c store.Certificate) store.Certificate {
	c.Record.Demo, c.RevokedAt, c.Revoked, c.ReplacedBy = false, time.Date(2026, 12, 3, 9, 0, 0, 0, time.UTC), "issued for the wrong piece", "26-118-0113-2"
	return c
}

// A paper is one leaf of A4, unless its notes leave no room; then the leaves are as many as it says,
// and nothing stands outside of them, in any language.
func TestPapersKeepToTheirLeaves(t *testing.T) {
	t.Parallel()
	pass, fail := golden(t, proof.KindCertificate), golden(t, proof.KindRejection)
	var all []store.Certificate
	leaves := 0
	for _, c := range []struct {
		name  string
		paper store.Certificate
		least int
		most  int
	}{
		{"pass", kept(t, pass), 1, 1}, {"fail", kept(t, fail), 1, 1}, {"states", kept(t, fromStates(fail)), 1, 1}, {"revoked", revoked(kept(t, pass)), 1, 1},
		{"corrections", kept(t, corrected(fail, 3)), 1, 1}, {"many corrections", kept(t, corrected(fail, 100)), 3, 4},
		{"long", kept(t, longest(t, proof.KindRejection)), 2, 2}, {"long with corrections", revoked(kept(t, corrected(longest(t, proof.KindCertificate), 30))), 2, 3},
	} {
		all = append(all, c.paper)
		for _, lang := range words.Langs {
			n := strings.Count(rendered(t, string(lang), c.paper), `<article class="paper `)
			if n < c.least || n > c.most {
				t.Errorf("%s in %s: %d leaves, want %d to %d", c.name, lang, n, c.least, c.most)
			}
			leaves += n
		}
	}
	tab := look(t, all...)
	checkLeaves(t, tab, "papers-all", leaves)
}

// checkLeaves compares the leaves drawn with those printed, and wants each paper to count its own.
func checkLeaves(t *testing.T, tab *webtest.Tab, name string, want int) {
	t.Helper()
	heights := webtest.Eval[[]float64](tab, `[...document.querySelectorAll(".paper")].map(a => a.getBoundingClientRect().height * 25.4 / 96)`)
	for i, h := range heights {
		if h > 297.1 {
			t.Errorf("%s: leaf %d is %.1f mm high", name, i+1, h)
		}
	}
	if printed := tab.PDF(name); printed != want || len(heights) != want {
		t.Errorf("%s: %d leaves drawn, %d printed, want %d", name, len(heights), printed, want)
	}
	leaf := 0
	for i, says := range tab.Texts(".paper .leaf span:last-child") {
		numbers := regexp.MustCompile(`\d+`).FindAllString(says, 3)
		if leaf++; numbers[0] != strconv.Itoa(leaf) {
			t.Errorf("%s: leaf %d of the print says %q, want leaf %d", name, i+1, says, leaf)
		}
		if len(numbers) == 2 && numbers[1] != numbers[0] || len(numbers) == 3 && numbers[2] != strconv.Itoa(leaf+1) {
			t.Errorf("%s: leaf %d of the print says %q", name, i+1, says)
		}
		if len(numbers) == 2 {
			leaf = 0 // the last of its paper
		}
	}
	outside := webtest.Eval[[]string](tab, `[...document.querySelectorAll(".paper")].flatMap(a => { const r = a.getBoundingClientRect();
		return [...a.querySelectorAll("p, td, th, li, dd, svg:not(.across), h2, address")].filter(e => { const b = e.getBoundingClientRect();
			return b.right > r.right - 20 || b.left < r.left + 20 || b.bottom > r.bottom - 10 }).map(e => e.className + " " + e.textContent.slice(0, 40)) })`)
	for _, o := range outside {
		t.Errorf("%s: stands in the margin: %s", name, o)
	}
}

// rendered is the paper as text.
func rendered(t *testing.T, lang string, c store.Certificate) string {
	t.Helper()
	var b strings.Builder
	if err := paper.Drawn(lang, c).Render(t.Context(), &b); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

// While nobody compared the programme with the text of a standard, the paper bears no standard's number
// as its method, even where the programme's title does (practice notes X18).
func TestNoStandardAsMethodUntilItsTextIsChecked(t *testing.T) {
	t.Parallel()
	r := golden(t, proof.KindCertificate)
	for _, title := range []string{"ISO 3159 chronometer trial", "Trial after ISO/TR-3159:2009", "NIHS 95-10", "Prüfung nach DIN 8319"} {
		r.Programme.Title, r.Programme.TextChecked = title, nil
		got := rendered(t, "en", kept(t, r))
		if strings.Contains(got, title) || !strings.Contains(got, "Trial of 15 days, version") || !strings.Contains(got, "After published descriptions") {
			t.Errorf("the title %q stands on a paper whose text nobody checked", title)
		}
		r.Programme.TextChecked = &proof.TextChecked{By: "Nadja Quill", Date: "2026-11-02", Edition: "edition of 2009"}
		if got := rendered(t, "en", kept(t, r)); !strings.Contains(got, title) || !strings.Contains(got, "Compared with edition of 2009 by Nadja Quill") {
			t.Errorf("the title %q is missing on a paper whose text was checked", title)
		}
	}
}

// What the laboratory did not state is said to be not stated, and what it did state is printed.
func TestUncertaintyIsSaidPlainly(t *testing.T) {
	t.Parallel()
	r := golden(t, proof.KindCertificate)
	if got := rendered(t, "en", kept(t, r)); !strings.Contains(got, "Not stated: the laboratory has stated no uncertainty budget.") {
		t.Error("a missing uncertainty is not said")
	}
	r.Uncertainty = proof.Uncertainty{K: "2", Rate: "0.35", Criteria: []proof.CriterionU{{Symbol: "M", U: "0.13"}}, NotApplicable: []string{"V", "P"}}
	if got := rendered(t, "de", kept(t, r)); !strings.Contains(got, "Erweitert, k = 2: ein täglicher Gang 0,35; M 0,13.") || !strings.Contains(got, "V, P: kein Intervall") {
		t.Error("a stated uncertainty is not printed")
	}
}

// Every reading is on the paper: in its column, or as a note.
func TestEvidenceIsComplete(t *testing.T) {
	t.Parallel()
	r := golden(t, proof.KindRejection)
	add := func(x proof.Reading) {
		x.Method, x.ReadAt, x.ReadBy, x.EnteredBy, x.Nth = "typed", r.Readings[0].ReadAt, "Ilse Marden", "Ilse Marden", 1
		r.Readings = append(r.Readings, x)
	}
	add(proof.Reading{Step: 16, Kind: proof.ReadingState, Value: "7.25"})
	add(proof.Reading{Step: 17, Kind: proof.ReadingReplicate, Value: "-8.5"})
	add(proof.Reading{Step: 18, Day: 3, Kind: proof.ReadingRate, Code: "stopped"})
	r.Remarks = append(r.Remarks, proof.Remark{Code: "note", Step: -1, Text: "the box was wet."}, proof.Remark{Code: "decision", Step: -1, Text: "no effect"})
	got := strings.ReplaceAll(rendered(t, "en", kept(t, r)), "\u00a0", " ")
	for _, want := range []string{"Reading round 16, states: +7.25 s", "Reading round 17, second reading as evidence: −8.5 s", "Reading round 18, daily rates: stopped", "the box was wet.", "Decision: no effect.",
		"+12.9 s/d replaced by +1.0 s/d", "Ole Varnhagen"} {
		if !strings.Contains(got, want) {
			t.Errorf("the paper does not say %q", want)
		}
	}
}
