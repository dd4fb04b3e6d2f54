package paper_test

import (
	"strings"
	"testing"

	"ratehouse/store"
	"ratehouse/store/storetest"
)

// Papers on a laboratory's own programme, with other positions, days and criteria, and on the contest
// programme, which has more criteria than the seven.
func TestPapersOnAnotherProgramme(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	h.ProgrammeFile(t, "../../testdata/programmes/house6.json")
	h.ProgrammeFile(t, "../../trial/sheet/programmes/contest.json")
	h.Batch(t, "B1", 2, func(n *store.NewBatch) { n.Programme, n.Category = "HOUSE6", "LARGE" })
	h.Run(t, "B1", [][]string{{"1.0", "1.4", "0.6", "2.1", "0.2", "1.5", "-1.1", "2.3", "1.2", "1.0"}, {"0", "0", "0", "0", "0", "8.198", "0", "0", "0", "0"}})
	released(t, h, "S-0001", "S-0002")
	h.Batch(t, "B2", 1, func(n *store.NewBatch) { n.Programme, n.Depositor = "contest", "ONDREL" })
	h.Run(t, "B2", [][]string{passing})
	out, err := h.Release(t.Context(), h.Lead, "B2", []string{"S-0001"})
	must(t, err)
	if out[0].Why != "" {
		t.Fatal(out)
	}
	tab := signedIn(t, h)
	tab.Go("/certificates/B1-0001")
	tab.Axe()
	for number, want := range map[string][]string{
		"B1-0001": {"hanging less lying", "√(Σ (R", "|M| + 2·S + 10·|C|", "0.0 … 2.5", "10 days", "6 positions", "12H"},
		"B1-0002": {"S 3.35", "Not passed"},
		"B2-0001": {"1000 − 12.5·|M| − 55·V", "contest score, 1000 at best", "mean variation across changes of position"},
	} {
		tab.Go("/certificates/" + number)
		text := strings.Join(strings.Fields(tab.Text("main")), " ")
		for _, w := range want {
			if !strings.Contains(strings.ToLower(text), strings.ToLower(w)) {
				t.Errorf("%s: %q is not in\n%s", number, w, text)
			}
		}
		checkLeaves(t, tab, "programme-"+number, 1)
	}
}
