package desk_test

import (
	"fmt"
	"testing"
	"time"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/web/page"
	"ratehouse/web/webtest"
)

// everyday is a laboratory on an ordinary morning: one batch finished, one on day 9 in trouble, one
// that began, one that waits.
func everyday(t testing.TB) (h *storetest.House, base string) {
	h, base = house(t)
	start := h.Clock.Now()
	lead, ctx := h.Lead, t.Context()
	_, err := h.AddDepositor(ctx, lead, store.Depositor{Code: "KESTWICK", Title: "Kestwick Works"})
	must(t, err)
	_, err = h.AddDepositor(ctx, lead, store.Depositor{Code: "ONDREL", Title: "Ondrel Movements"})
	must(t, err)
	lot(t, h, "26-118", 60, 15, 118, forWhom("ONDREL", "OD4410"), numbered("OD44", 118201))
	must(t, h.EndMovement(ctx, lead, "26-118", "OD44-118240", store.Rejected, "stopped on day 4", store.Stopped))
	must(t, h.EndMovement(ctx, lead, "26-118", "OD44-118270", store.Void, "dropped at the bench", store.Dropped))
	must(t, h.EndMovement(ctx, lead, "26-118", "OD44-118276", store.Withdrawn, "asked back by telephone", ""))
	h.Clock.Set(start.Add(7 * day))
	b := lot(t, h, "26-121", 42, 9, 121, forWhom("KESTWICK", "KW21"), numbered("KW21", 4381))
	must(t, h.EndMovement(ctx, h.Technician, "26-121", "KW21-004462", store.Void, "dropped at the bench", store.Dropped))
	must(t, h.AddRemark(ctx, h.Technician, "26-121", "KW21-004420", 5, "read 14 min late; the rate is taken over the time that really passed"))
	must(t, h.AddRemark(ctx, h.Technician, "26-121", "", 7, "chamber door found open for two minutes"))
	correct(t, h, "26-121", "KW21-004504", 6, "-15.7", "the image shows three tenths more")
	h.Clock.Set(b.Due(10).Add(10 * time.Minute))
	must(t, h.OpenRound(ctx, h.Technician, "26-121", 10))
	h.Batch(t, "26-124", 40, forWhom("KESTWICK", "KW21"), numbered("KW21", 7001), func(n *store.NewBatch) { n.StartsAt = h.Clock.Now().Add(-time.Hour) })
	h.Batch(t, "26-125", 5, forWhom("ONDREL", ""), numbered("OD44", 220001), func(n *store.NewBatch) { n.StartsAt = h.Clock.Now().Add(30 * time.Hour) })
	return h, base
}

// correct replaces the state of a movement at a round.
func correct(t testing.TB, h *storetest.House, code, serial string, k int, by, why string) {
	t.Helper()
	s, err := h.MovementSheet(t.Context(), h.Lead, code, serial)
	must(t, err)
	e := h.State(code, 1, k, by)
	e.Serial, e.Reason = serial, why
	for _, l := range s.Readings {
		if l.Step == k && l.Kind == store.KindState {
			e.Base, e.ReadAt = l.Nth, l.ReadAt
		}
	}
	h.MustSave(t, h.Lead, e)
}

// look takes pictures of pages as somebody sees them, in all forms, and wants no fault of access in
// them.
func look(t *testing.T, base, name string, pages [][2]string) {
	t.Helper()
	each(t, base, name, pages, func(tab *webtest.Tab, picture string) {
		tab.Shots(picture)
		tab.AxeBoth()
	})
}

// glance is look for another state of a page: one picture.
func glance(t *testing.T, base, name string, pages [][2]string) {
	t.Helper()
	each(t, base, name, pages, func(tab *webtest.Tab, picture string) {
		tab.Shot(picture)
		tab.Axe()
	})
}

// each shows pages to somebody one after the other, whole, and wants them to fit a tablet.
func each(t *testing.T, base, name string, pages [][2]string, see func(tab *webtest.Tab, picture string)) {
	t.Helper()
	tab := webtest.Start(t, base)
	tab.SignIn(name, storetest.Password)
	for _, p := range pages {
		tab.Go(p[1])
		settled(tab)
		see(tab, "desk/"+p[0])
		narrow(tab, p[0])
	}
}

// settled goes to the parts that are asked for later, waits until they have come, and goes back.
func settled(tab *webtest.Tab) {
	tab.T.Helper()
	tab.Until(`(() => { const a = document.querySelector("a[data-later]"); a?.scrollIntoView(); return !a })()`)
	webtest.Eval[bool](tab, `(scrollTo(0, 0), true)`)
}

// narrow wants a page to fit a tablet's width, and leaves the window wide.
func narrow(tab *webtest.Tab, name string) {
	tab.T.Helper()
	tab.Resize(webtest.Tablet)
	if wide := webtest.Eval[bool](tab, `document.documentElement.scrollWidth > innerWidth`); wide {
		tab.T.Errorf("%s is wider than a tablet", name)
	}
	tab.Resize(webtest.Wide)
}

func TestPagesLook(t *testing.T) {
	t.Parallel()
	_, base := everyday(t)
	look(t, base, "lead", [][2]string{
		{"batches", "/batches"},
		{"batch-running", "/batches/26-121"},
		{"batch-finished", "/batches/26-118"},
		{"batch-new", "/batches/26-124"},
		{"ratesheet", "/batches/26-121/movements/KW21-004504"},
		{"search", "/search?q=OD44-1182"},
	})
	glance(t, base, "lead", [][2]string{
		{"batch-chosen", "/batches/26-118?verdict=fail&sort=-M&dist=V&remark=new"},
		{"ratesheet-fail", "/batches/26-118/movements/OD44-118240"},
		{"aim", "/batches/26-118/aim?shift=1.5"},
		{"doubt", "/batches/26-118/movements/OD44-118243/doubt"},
		{"ratesheet-forms", "/batches/26-118/movements/OD44-118243?do=correct&remark=new"},
	})
	glance(t, base, "technician", [][2]string{
		{"plain-batches", "/batches"},
		{"plain-batch", "/batches/26-121"},
		{"plain-ratesheet", "/batches/26-121/movements/KW21-004504?do=end"},
	})
}

// The longest words of the three languages are German.
func TestGermanLook(t *testing.T) {
	t.Parallel()
	_, base := everyday(t)
	tab := webtest.Start(t, base)
	tab.SignIn("lead", storetest.Password)
	tab.Press(`button[value=de]`)
	for _, p := range [][2]string{{"batches-de", "/batches"}, {"batch-de", "/batches/26-118"}, {"ratesheet-de", "/batches/26-121/movements/KW21-004504?do=correct"}} {
		tab.Go(p[1])
		settled(tab)
		tab.Shot("desk/" + p[0])
		if wide := webtest.Eval[bool](tab, `document.documentElement.scrollWidth > innerWidth`); wide {
			t.Errorf("%s is wider than the screen", p[0])
		}
	}
}

func TestEmptyLook(t *testing.T) {
	t.Parallel()
	_, base := house(t)
	look(t, base, "lead", [][2]string{{"batches-empty", "/batches"}, {"search-empty", "/search"}})
	glance(t, base, "lead", [][2]string{{"search-nothing", "/search?q=0815"}})
}

// Long names, and more movements than the table shows at once.
func TestLongLook(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	_, err := h.AddDepositor(t.Context(), h.Lead, store.Depositor{Code: "LONG", Title: "Vereinigte Manufakturen für Präzisionszeitmesser von Hinterwalden und Umgebung"})
	must(t, err)
	code := "2026-HINTERWALDEN-SONDERLOS-VIERZIG-0001"
	serial := func(i int) string { return fmt.Sprintf("WERK-%048d", i) }
	lot(t, h, code, 500, 15, 5, forWhom("LONG", "KALIBER-MIT-SEHR-LANGEM-NAMEN-0123456789"), func(n *store.NewBatch) {
		for i := range n.Pieces {
			n.Pieces[i].Serial = serial(i)
		}
	})
	must(t, h.EndMovement(t.Context(), h.Lead, code, serial(3), store.Rejected,
		"stands still since the third round although it was wound, the crown turns without resistance and the barrel arbor is seen to slip", store.Stopped))
	must(t, h.AddRemark(t.Context(), h.Lead, code, "", -1,
		"The box arrived with a cracked lid; the depositor was told on the telephone and asked us to go on, in writing on the next day. Nothing was seen on the movements themselves."))
	glance(t, base, "lead", [][2]string{{"batches-long", "/batches"}, {"batch-long", "/batches/" + code}, {"ratesheet-long", page.MovementURL(code, serial(3))}})
}
