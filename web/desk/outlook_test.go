package desk_test

import (
	"strconv"
	"strings"
	"testing"
)

// The outlook of a batch on day 9 comes from the batch before it; the least likely stand first, and
// nothing of it is for who is reading.
func TestOutlookOfABatch(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	lot(t, h, "26-001", 60, 15, 5, forWhom("KESTWICK", "KW21"), numbered("KW", 1001))
	lot(t, h, "26-002", 12, 9, 6, forWhom("KESTWICK", "KW21"))
	if _, err := h.Drain(t.Context()); err != nil {
		t.Fatal(err)
	}
	lead := visit(t, base, "lead")
	if link := lead.page("/batches/26-002").all("#outlook a"); len(link) != 1 {
		t.Fatalf("%d links to the outlook", len(link))
	}
	section := lead.page("/batches/26-002/outlook")
	text := strings.Join(section.texts("#outlook p"), " ")
	for _, want := range []string{"Of 12 open movements", "From 60 earlier movements of this calibre and 60 in all"} {
		if !strings.Contains(text, want) {
			t.Errorf("%q does not say %q", text, want)
		}
	}
	rows, last := section.all("#outlook tbody tr"), 0.0
	for _, row := range rows {
		p, err := strconv.ParseFloat(strings.NewReplacer("below ", "", "above ", "").Replace(row.all("td")[2].text()), 64)
		if err != nil || p < last || row.all("td")[1].text() != "9" {
			t.Errorf("%q after %v: %v", row.text(), last, err)
		}
		last = p
	}
	if len(rows) != 12 || last < 50 {
		t.Errorf("%d rows, the likeliest at %v", len(rows), last)
	}
	if done := lead.page("/batches/26-001").all("#outlook"); len(done) != 0 {
		t.Error("a finished batch has an outlook")
	}
	technician := visit(t, base, "technician")
	if n := len(technician.page("/batches/26-002").all("#outlook")); n != 0 {
		t.Error("who is reading sees the outlook")
	}
}
