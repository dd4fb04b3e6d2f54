package desk_test

import (
	"net/http"
	"slices"
	"strconv"
	"strings"
	"testing"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/trial"
	"ratehouse/web/page"
	"ratehouse/web/webtest"
	"ratehouse/web/words"
)

// hinge is one line of the list on the page.
type hinge struct {
	round  int
	left   bool
	change trial.Exact
	to     string
}

func hingesOn(t *testing.T, d doc) (list []hinge) {
	t.Helper()
	for _, row := range d.all("#doubt table.hinges tbody tr") {
		number, left, _ := strings.Cut(row.all("th")[0].text(), " ")
		round, err := strconv.Atoi(number)
		must(t, err)
		change, err := trial.ParseExact(strings.NewReplacer("−", "-", "+", "").Replace(row.all("td")[0].text()))
		must(t, err)
		list = append(list, hinge{round, left != "", change, row.all("td")[1].text()})
	}
	return list
}

func stateAt(t *testing.T, sheet store.MovementSheet, k int) trial.Exact {
	t.Helper()
	for _, l := range sheet.Readings {
		if l.Step == k && l.Kind == store.KindState && !l.Replaced {
			e, err := trial.ParseExact(l.Value)
			must(t, err)
			return e
		}
	}
	t.Fatalf("round %d has no state", k)
	return trial.Exact{}
}

// setAtEveryRound notes that the hands of a movement were set after each round, to where they were.
func setAtEveryRound(t *testing.T, h *storetest.House, code, serial string) {
	t.Helper()
	sheet, err := h.MovementSheet(t.Context(), h.Lead, code, serial)
	must(t, err)
	for k := 1; k < 15; k++ {
		e := h.State(code, 1, k, stateAt(t, sheet, k).Decimal(3))
		e.Serial, e.Kind, e.Reason = serial, store.KindLeft, "noted late"
		for _, l := range sheet.Readings {
			if l.Step == k {
				e.ReadAt = l.ReadAt
			}
		}
		h.MustSave(t, h.Lead, e)
	}
}

// The reading that the sheet names, changed by what it names, makes the verdict it names; by a
// thousandth less it does not. Both changes are made as corrections, so the whole house decides. The hands
// of the first movement were set after every round, to where they were: its days share no reading, and a
// state as found moves one rate alone.
func TestHingeFlipsTheVerdict(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	lot(t, h, "26-001", 12, 15, 77)
	setAtEveryRound(t, h, "26-001", "S-0001")
	lead, tried := visit(t, base, "lead"), map[string]bool{}
	for _, serial := range serialsOf(t, h, "26-001") {
		path := page.MovementURL("26-001", serial)
		stands := lead.page(path).all("dl.cells span.v")[0].text()
		list := slices.DeleteFunc(hingesOn(t, lead.page(path+"/doubt")), func(k hinge) bool { return k.left })
		if len(list) == 0 || tried[stands] {
			continue
		}
		tried[stands] = true
		sheet, err := h.MovementSheet(t.Context(), h.Lead, "26-001", serial)
		must(t, err)
		first, was, milli := list[0], stateAt(t, sheet, list[0].round), trial.Ratio(int64(list[0].change.Sign()), 1000)
		for _, c := range []struct {
			by   trial.Exact
			want string
		}{{first.change.Sub(milli), stands}, {first.change, first.to}} {
			correct(t, h, "26-001", serial, first.round, was.Add(c.by).Decimal(3), "tried")
			if got := lead.page(path).all("dl.cells span.v")[0].text(); got != c.want {
				t.Errorf("%s, round %d changed by %s: %q, the sheet said %q", serial, first.round, c.by.Decimal(3), got, c.want)
			}
		}
	}
	if !tried["pass"] || !tried["fail"] {
		t.Errorf("only tried %v", tried)
	}
}

// Movements worked out by hand. All days are +1.0, or all but day 15, which makes R +5.0, its limit
// exactly: a flat prior then makes the doubt one half however small the uncertainty is. With R = 4.95 it
// is Φ(-0.05/0.0456) = 0.137, as R = (s15 - s14) - (s2 - s0)/2 has the variance 2.5 u², u = 0.1/√12.
func TestDoubtByHand(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	h.Batch(t, "26-001", 4)
	far := strings.Fields(strings.Repeat("1.0 ", 15))
	at := append(strings.Fields(strings.Repeat("1.0 ", 14)), "6.0") // R = +5.0, its limit
	near := append(strings.Fields(strings.Repeat("1.0 ", 14)), "5.95")
	h.Run(t, "26-001", [][]string{far, at, far[:8], near})
	lead := visit(t, base, "lead")
	text := func(i string) string {
		return lead.page("/batches/26-001/movements/S-000" + i + "/doubt").all("#doubt")[0].text()
	}
	if got := text("1"); !strings.Contains(got, "pass probability that it is wrong: below 0.1 %") {
		t.Errorf("far from every limit: %s", got)
	}
	if got := text("2"); !strings.Contains(got, "pass probability that it is wrong: 50.0 %") || !strings.Contains(got, "R Resumption of rate 50.0") {
		t.Errorf("at the limit of R: %s", got)
	}
	if got := text("4"); !strings.Contains(got, "pass probability that it is wrong: 13.7 %") {
		t.Errorf("near the limit of R: %s", got)
	}
	must(t, h.EndMovement(t.Context(), h.Lead, "26-001", "S-0001", store.Rejected, "stopped", ""))
	if got := text("1"); !strings.Contains(got, "of its rates alone") {
		t.Errorf("rejected for cause: %s", got)
	}
	if list := hingesOn(t, lead.page("/batches/26-001/movements/S-0002/doubt")); len(list) == 0 || list[0].change.Cmp(trial.Ratio(1, 1000)) > 0 {
		t.Errorf("at the limit of R the nearest hinge is %v", list)
	}
	if got := text("3"); !strings.Contains(got, "There is no verdict to doubt") {
		t.Errorf("without a verdict: %s", got)
	}
	for i := range 4 { // rates without states: what that assumes is said, and what the figures rest on
		if got := text(strconv.Itoa(i + 1)); !strings.Contains(got, "typed without states") || !strings.Contains(got, "0.1 s, standard uncertainty 0.029 s") {
			t.Errorf("what it rests on: %s", got)
		}
	}
}

// Doubt and hinge are for the lead: nobody else is offered them, nobody else gets them by typing the
// address, and no paper bears them. The sheet itself never holds them, only the place they come to.
func TestDoubtIsForTheLead(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	h.Batch(t, "26-001", 1)
	h.Run(t, "26-001", [][]string{strings.Fields(strings.Repeat("1.0 ", 15))})
	path := "/batches/26-001/movements/S-0001"
	for _, name := range []string{"technician", "adjuster", "manager"} {
		v := visit(t, base, name)
		if n := len(v.page(path).all("#doubt")); n != 0 {
			t.Errorf("a %s is offered the doubt", name)
		}
		for _, ending := range []string{"/doubt", "/doubt?alone=yes"} {
			if status, _, _ := v.get(path + ending); status != http.StatusForbidden {
				t.Errorf("a %s asking for %s gets %d", name, ending, status)
			}
		}
	}
	lead := visit(t, base, "lead")
	sheet := lead.page(path)
	if href, _ := sheet.all("#doubt a")[0].attr("href"); href != path+"/doubt" || len(sheet.all("#doubt table")) != 0 {
		t.Errorf("the sheet leads to %q and holds %v", href, sheet.texts("#doubt"))
	}
	papers, err := h.Release(t.Context(), h.Lead, "26-001", []string{"S-0001"})
	must(t, err)
	if len(papers) != 1 || papers[0].Number == "" {
		t.Fatalf("released %v", papers)
	}
	paper := lead.page(page.CertificateURL(papers[0].Number)).text()
	for _, bad := range []string{words.New(words.EN, nil).Say(words.DoubtTitle), "probability", "hinge", "wrong"} {
		if strings.Contains(paper, bad) {
			t.Errorf("the certificate says %q", bad)
		}
	}
}

// The aim stands below a table; nobody asks the laboratory for it before the reader comes near.
func TestLaterIsAskedForWhenNear(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	good := strings.Fields(strings.Repeat("1.0 ", 15))
	h.Batch(t, "26-001", 60)
	h.Run(t, "26-001", slices.Repeat([][]string{good}, 60))
	tab := webtest.Start(t, base)
	tab.SignIn("lead", storetest.Password)
	tab.Go("/batches/26-001")
	tab.Until(`document.readyState === "complete"`)
	asked := `performance.getEntriesByType("resource").filter(e => e.name.includes("/aim")).length`
	if n := webtest.Eval[int](tab, asked); n != 0 {
		t.Errorf("the aim was asked for %d times at the head of the page", n)
	}
	settled(tab)
	if n := webtest.Eval[int](tab, asked); n != 1 {
		t.Errorf("the aim was asked for %d times", n)
	}
	if got := tab.Text("#aim"); !strings.Contains(got, "As they are, 60 of 60") {
		t.Errorf("the aim that came: %s", got)
	}
	if n := tab.Count("#aim"); n != 1 {
		t.Errorf("%d places of the aim", n)
	}
}
