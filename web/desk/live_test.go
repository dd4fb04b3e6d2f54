package desk_test

import (
	"log/slog"
	"strings"
	"testing"

	"ratehouse/store/storetest"
	"ratehouse/web/webtest"
)

// The batch page fills while it is looked at, without being loaded again, and never takes away what
// somebody is typing.
func TestBatchPageFillsByItself(t *testing.T) {
	t.Parallel()
	h, base := house(t)
	h.Batch(t, "26-001", 3)
	go h.RunListener(t.Context(), slog.New(slog.DiscardHandler))
	read := func(i int) {
		h.MustSave(t, h.Technician, h.Rate("26-001", i, 1, "7.125"))
		if _, err := h.Drain(t.Context()); err != nil {
			t.Error(err)
		}
	}
	tab := webtest.Start(t, base)
	tab.SignIn("lead", storetest.Password)
	tab.Go("/batches/26-001?remark=new")
	webtest.Eval[bool](tab, `window.mark = true`)
	tab.Until(`document.querySelector("main[data-live]") !== null`)
	read(1)
	tab.Until(`document.querySelector("main").innerText.includes("7.1")`)
	webtest.Eval[bool](tab, `(document.querySelector("textarea").value = "the lid was cracked", true)`)
	read(2)
	tab.Until(`"stale" in document.querySelector("main").dataset`)
	tab.Click("textarea")
	webtest.Eval[bool](tab, `(document.activeElement.blur(), true)`)
	read(3)
	if got := tab.Value("textarea"); got != "the lid was cracked" {
		t.Errorf("what was typed is now %q", got)
	}
	webtest.Eval[bool](tab, `(document.querySelector("textarea").value = "", document.querySelector("textarea").focus(), document.activeElement.blur(), true)`)
	tab.Until(`document.querySelector("main").innerText.split("7.1").length > 3`)
	if !webtest.Eval[bool](tab, `window.mark === true`) {
		t.Error("the page was loaded again")
	}
	if strings.Contains(tab.Path(), "login") {
		t.Error("signed out")
	}
}
