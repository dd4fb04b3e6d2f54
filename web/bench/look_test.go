package bench_test

import (
	"testing"

	"ratehouse/store/storetest"
	"ratehouse/web/webtest"
)

func TestBenchLooks(t *testing.T) {
	t.Parallel()
	h, base := bench(t)
	h.Batch(t, "26-001", 5, calibre("OD-4410"))
	h.Run(t, "26-001", [][]string{all("-6.0"), in(3, "-15.0"), all("1.0"), in(11, "12.0"), in(1, "9.0")})
	tab := webtest.Start(t, base)
	tab.SignIn("adjuster", storetest.Password)
	for _, p := range [][2]string{{"rejects", "/bench"}, {"note", "/bench/26-001/S-0002?from=150&to=180"}} {
		tab.Go(p[1])
		tab.Axe()
		tab.Resize(webtest.Tablet)
		if webtest.Eval[bool](tab, `document.documentElement.scrollWidth > innerWidth`) {
			t.Errorf("%s is wider than a tablet", p[0])
		}
		tab.Resize(webtest.Wide)
		if p[0] == "rejects" {
			tab.Shot("bench/rejects")
		}
	}
	tab.Shots("bench/note")
	tab.Press(`button[value=de]`)
	tab.Shot("bench/note-de")
}
