package paper_test

import (
	"encoding/json"
	"fmt"
	"os"
	"path/filepath"
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

// look opens papers alone in the browser, in the language of the address.
func look(t *testing.T, list ...store.Certificate) *webtest.Tab {
	t.Helper()
	return webtest.Show(t, page.Sheet{Title: "Papers", Bare: true, Styles: []string{"paper.css"}}, func(c *page.Context) templ.Component {
		return paper.Drawn(string(c.Lang()), list...)
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
	for name, c := range map[string]struct {
		paper  store.Certificate
		leaves int // 0: as many as it says
	}{
		"pass": {kept(t, pass), 1}, "fail": {kept(t, fail), 1}, "states": {kept(t, fromStates(fail)), 1}, "revoked": {revoked(kept(t, pass)), 1},
		"corrections-3": {kept(t, corrected(fail, 3)), 1}, "corrections-100": {kept(t, corrected(fail, 100)), 0},
		"long": {kept(t, longest(t, proof.KindRejection)), 2}, "long-corrections-30": {revoked(kept(t, corrected(longest(t, proof.KindCertificate), 30))), 0},
	} {
		t.Run(name, func(t *testing.T) {
			tab := look(t, c.paper)
			for _, lang := range []string{"en", "fr", "de"} {
				tab.Go("/" + lang)
				checkLeaves(t, tab, "paper-"+name+"-"+lang, c.leaves)
			}
		})
	}
}

// checkLeaves compares the leaves drawn with those printed and those the paper speaks of.
func checkLeaves(t *testing.T, tab *webtest.Tab, name string, want int) {
	t.Helper()
	heights := webtest.Eval[[]float64](tab, `[...document.querySelectorAll(".paper")].map(a => a.getBoundingClientRect().height * 25.4 / 96)`)
	for i, h := range heights {
		if h > 297.1 {
			t.Errorf("%s: leaf %d is %.1f mm high", name, i+1, h)
		}
	}
	if want > 0 && len(heights) != want {
		t.Errorf("%s: %d leaves, want %d", name, len(heights), want)
	}
	if printed := tab.PDF(name); printed != len(heights) {
		t.Errorf("%s: %d leaves drawn, %d printed", name, len(heights), printed)
	}
	for i, says := range tab.Texts(".paper .leaf") {
		if !strings.Contains(says, fmt.Sprint(i+1)) || !strings.Contains(says, fmt.Sprint(len(heights))) {
			t.Errorf("%s: leaf %d of %d says %q", name, i+1, len(heights), says)
		}
	}
	outside := webtest.Eval[[]string](tab, `[...document.querySelectorAll(".paper")].flatMap(a => { const r = a.getBoundingClientRect();
		return [...a.querySelectorAll("p, td, th, li, dd, svg:not(.across), h2, address")].filter(e => { const b = e.getBoundingClientRect();
			return b.right > r.right - 20 || b.left < r.left + 20 || b.bottom > r.bottom - 10 }).map(e => e.className + " " + e.textContent.slice(0, 40)) })`)
	for _, o := range outside {
		t.Errorf("%s: stands in the margin: %s", name, o)
	}
}
