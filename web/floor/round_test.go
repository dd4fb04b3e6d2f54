package floor_test

import (
	"fmt"
	"strings"
	"testing"
	"time"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/web/webtest"
)

// A round of a batch by keyboard alone: a reading costs its digits and one key, and goes over the ends
// of holders.
func TestRoundByKeyboard(t *testing.T) {
	t.Parallel()
	h, tab := ready(t, 12, in("STRIP5"))
	webtest.Eval[bool](tab, `(window.keys = 0, addEventListener("keydown", () => keys++, true), true)`)
	signs := 0
	for i := range 12 {
		value := fmt.Sprintf("%+.1f", float64(i)*1.5-4)
		signs += len(value)
		tab.Keys(value + "\r")
	}
	settled(tab)
	if got := webtest.Eval[int](tab, `keys`); got != signs+12 {
		t.Errorf("%d keys for 12 readings of %d signs, want one more for each", got, signs)
	}
	wantReadings(t, h, 1, "0/1 -4")
	wantReadings(t, h, 6, "0/1 3.5")
	wantReadings(t, h, 12, "0/1 12.5")
	if got := tab.Text("#n-read"); got != "12 of 12" {
		t.Errorf("read %q, want 12 of 12", got)
	}
	tab.WaitText("#saved", "saved at")
	if got := webtest.Eval[bool](tab, `document.querySelector('form[action$="/close"] button').classList.contains("main")`); !got {
		t.Error("closing is not the main act although everything is read")
	}
	tab.Axe()
	tab.Press(`form[action$="/close"] button`)
	if tab.Path() != "/today" {
		t.Errorf("after closing at %s, want /today", tab.Path())
	}
}

// The same by touch at a tablet: one tap for each sign and one for Enter.
func TestRoundByTouch(t *testing.T) {
	t.Parallel()
	h, tab := ready(t, 5, in("STRIP5"))
	tab.Resize(webtest.Tablet)
	webtest.Eval[bool](tab, `(window.taps = 0, addEventListener("click", () => taps++, true), true)`)
	want := 0
	for i := range 4 {
		value := fmt.Sprintf("-%d.5", i+1)
		for _, sign := range value {
			tab.Tap(fmt.Sprintf(`[data-key="%c"]`, sign))
			want++
		}
		tab.Tap("#enter")
		want++
	}
	tab.Tap(`[data-code="S"]`)
	tab.Tap("#enter")
	settled(tab)
	if got := webtest.Eval[int](tab, `taps`); got != want+2 {
		t.Errorf("%d taps, want %d", got, want+2)
	}
	wantReadings(t, h, 1, "0/1 -1.5")
	wantReadings(t, h, 4, "0/1 -4.5")
	wantReadings(t, h, 5, "0/1 stopped")
	if got := webtest.Eval[string](tab, `document.activeElement.id + document.activeElement.inputMode`); got != "valuenone" {
		t.Errorf("the focus is on %q, want the field without system keyboard", got)
	}
	tab.Shot("round-touch-done")
}

// Arrows walk, drafts stay, observations have keys.
func TestRoundKeys(t *testing.T) {
	t.Parallel()
	h, tab := ready(t, 20, in("TRAY10"))
	here := func() string { return tab.Text(".holder:not([hidden] *) [aria-current] .n") }
	const left, up, right, down, next = "\u0302", "\u0304", "\u0303", "\u0301", "\u0307" // as chromedp names keys
	for _, c := range []struct{ key, want string }{{right, "2"}, {right, "3"}, {down, "8"}, {left, "7"}, {up, "2"}, {left, "1"}, {right, "2"}} {
		tab.Keys(c.key)
		if got := here(); got != c.want {
			t.Errorf("after an arrow at place %s, want %s", got, c.want)
		}
	}
	tab.Keys("+1" + right + left)
	if got := tab.Value("#value"); got != "+1" {
		t.Errorf("what was typed and left is %q, want +1", got)
	}
	tab.Keys("\b\b" + "u")
	if got := tab.Value("#value"); got != "unreadable" {
		t.Errorf("after U the field holds %q", got)
	}
	tab.Keys("\r" + "n\r" + "h\r" + "d\r")
	tab.Keys(next + "s\r")
	settled(tab)
	for i, want := range map[int]string{2: "unreadable", 3: "not_there", 4: "hand", 5: "dropped", 11: "stopped"} {
		wantReadings(t, h, i, "0/1 "+want)
	}
	tab.Keys("\r")
	tab.WaitText("#saved", "Type a value")
	tab.Keys("1.2.3\r")
	tab.WaitText("#why", "not a number")
	if got := tab.Value("#value"); got != "1.2.3" {
		t.Errorf("a mistyped number is lost: %q", got)
	}
	tab.Shot("round-codes")
	tab.Axe()
}

// A slip of one's own is corrected without a dialog while the round is open; its reader alone sees it.
func TestOwnCorrection(t *testing.T) {
	t.Parallel()
	h, tab := ready(t, 5)
	tab.Keys("+27.3\r")
	settled(tab)
	if n := strings.Count(webtest.Eval[string](tab, `document.documentElement.outerHTML`), "27.3"); n != 0 {
		t.Errorf("the value of a place stands %d times on the page while another is open", n)
	}
	tab.Go("/batches/26-001/rounds/0") // as after a break: nothing left in the page's memory
	if strings.Contains(webtest.Eval[string](tab, `document.documentElement.outerHTML`), "27.3") {
		t.Error("the page comes with the value of a place")
	}
	tab.Click(`[data-place="1"]`)
	tab.WaitText("#note", "You typed +27.3")
	if !webtest.Eval[bool](tab, `document.querySelector("#reason").hidden`) {
		t.Error("a reason is asked for one's own slip in the open round")
	}
	tab.Keys("+2.7\r")
	settled(tab)
	tab.Until(`document.querySelector("#saved").textContent.includes("Place 1")`)
	wantReadings(t, h, 1, "0/1 27.3", "0/2 2.7 at entry")
}

// After closing, and for what another person read, the page asks for a reason and shows no value.
func TestCorrectionWithReason(t *testing.T) {
	t.Parallel()
	h, tab := ready(t, 5)
	tab.Keys("+27.3\r")
	settled(tab)
	if err := h.CloseRound(t.Context(), h.Technician, "26-001", 0); err != nil {
		t.Fatal(err)
	}
	tab.Go("/batches/26-001/rounds/0?holder=TRAY10-0001&place=1")
	if strings.Contains(webtest.Eval[string](tab, `document.documentElement.outerHTML`), "27.3") {
		t.Error("the closed round shows the value")
	}
	tab.Keys("+2.7\r")
	tab.WaitText("#why", "Say why")
	tab.Type("#f-reason", "digits turned\r")
	settled(tab)
	wantReadings(t, h, 1, "0/1 27.3", "0/2 2.7 digits turned")
	tab.Shot("round-closed")
	tab.Axe()

	second := webtest.Start(t, tab.Base)
	second.SignIn("second", storetest.Password)
	open(t, h, 0)
	second.Go("/batches/26-001/rounds/0?holder=TRAY10-0001&place=1")
	second.Keys("+2.8\r")
	second.WaitText("#why", "Say why")
	if strings.Contains(webtest.Eval[string](second, `document.documentElement.outerHTML`), "2.7") {
		t.Error("another reader sees the value")
	}
}

// The second look is blind: neither the value typed first, nor yesterday's, nor a reason is on the page
// until it was typed again (E8).
func TestSecondLookIsBlind(t *testing.T) {
	t.Parallel()
	h, tab := ready(t, 5)
	h.MustSave(t, h.Technician, h.State("26-001", 1, 0, "17.3"), h.State("26-001", 2, 0, "18.4"))
	tomorrow(t, h, tab, 1)
	blind := func(when string) {
		t.Helper()
		dom := webtest.Eval[string](tab, `document.documentElement.outerHTML + [...document.querySelectorAll("input")].map(e => e.value).join(" ")`)
		for _, v := range []string{"17.3", "117.", "18.4", "118.", "60 s/d", "beyond"} {
			if strings.Contains(dom, v) && !(v == "60 s/d" && strings.Contains(dom, "asked for again because")) {
				t.Errorf("%s: the page tells %q", when, v)
			}
		}
	}
	blind("before")
	tab.Keys("+117.3\r")
	tab.WaitText("#asks", "Read place 1 again")
	blind("asked")
	if got := tab.Text("#n-look"); got != "1" {
		t.Errorf("second looks: %q, want 1", got)
	}
	wantReadings(t, h, 1, "0/1 17.3")
	tab.Shot("round-second-look")
	tab.Axe()
	tab.Resize(webtest.Tablet)
	tab.Shot("round-second-look-upright")
	fits(t, tab, "second look upright")
	tab.Resize(webtest.Wide)
	tab.Click("#asks button")
	tab.WaitText("#l-value", "read again")
	blind("selected")
	tab.Keys("+19.9\r") // the two differ by more than 0.3: a third is asked, the middle one counts
	tab.WaitText("#saved", "once more")
	blind("asked once more")
	tab.Click(`[data-place="1"]`)
	tab.WaitText("#l-value", "once more")
	tab.Keys("+20.0\r")
	tab.WaitText("#saved", "more than 60 s/d")
	wantReadings(t, h, 1, "0/1 17.3", "1/1 20")
	if tab.Count("#asks:not([hidden])") != 0 || tab.Text("#n-look") != "0" {
		t.Error("the second look is still shown as open")
	}

	tab.Keys("+118.4\r")
	tab.WaitText("#asks", "Read place 2 again")
	tab.Go("/batches/26-001/rounds/1") // a reload keeps the question, and stays blind
	if tab.Count(`[data-place="2"].look`) != 1 {
		t.Error("after a reload the open second look is not shown")
	}
	blind("reloaded")
}

// What no movement does is refused, with what to do.
func TestRefused(t *testing.T) {
	t.Parallel()
	h, tab := ready(t, 5)
	h.MustSave(t, h.Technician, h.State("26-001", 1, 0, "0"))
	tomorrow(t, h, tab, 1)
	tab.Keys("+900\r+2.0\r")
	tab.WaitText("#asks", "600 s/d")
	tab.WaitText("#asks", "choose what is seen")
	if tab.Count(`[data-place="1"].trouble`) != 1 {
		t.Error("the refused place does not stand out")
	}
	tab.Shot("round-refused")
	tab.Axe()
	tab.Click("#asks button")
	tab.Click(`[data-code="H"]`)
	tab.Keys("\r")
	tab.Until(`document.querySelector("#asks").hidden`)
	settled(tab)
	wantReadings(t, h, 1, "0/1 0", "1/1 hand")
	wantReadings(t, h, 2, "1/1 2")
}

// Two people type the same place: both values are shown with who and when, and a person decides.
func TestConflict(t *testing.T) {
	t.Parallel()
	h, tab := ready(t, 5)
	other := webtest.Start(t, tab.Base)
	other.SignIn("second", storetest.Password)
	other.Go("/batches/26-001/rounds/0")
	tab.Keys("+4.6\r+5.5\r")
	settled(tab)
	other.Keys("+4.9\r")
	other.WaitText("#asks", "Ilse Marden read +4.6")
	other.WaitText("#asks", "You typed +4.9")
	other.Shot("round-conflict")
	other.Axe()
	other.Click("#asks button:nth-of-type(2)")
	settled(other)
	other.Until(`document.querySelector("#asks").hidden`)
	wantReadings(t, h, 1, "0/1 4.6", "0/2 4.9 read by two people, agreed at the bench")
	other.Keys("+5.4\r")
	other.WaitText("#asks", "+5.5")
	other.Click("#asks button:nth-of-type(1)")
	other.Until(`document.querySelector("#asks").hidden`)
	wantReadings(t, h, 2, "0/1 5.5")
	tab.Keys("+6.1\r")
	settled(tab)
	other.Keys("+6.1\r")
	other.WaitText("#saved", "had read the same value")
	wantReadings(t, h, 3, "0/1 6.1")
}

// The server fails in the middle, before and after it saved: the page keeps everything, warns before it
// is left, and in the end stored is typed, once each.
func TestServerFails(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	var net faulty
	tab := webtest.Start(t, net.serve(t, h.Lab))
	tab.Allow("status of 503")
	h.Batch(t, "26-001", 10)
	open(t, h, 0)
	tab.SignIn("technician", storetest.Password)
	tab.Go("/batches/26-001/rounds/0")
	leaves := `(() => { const e = new Event("beforeunload", { cancelable: true }); dispatchEvent(e); return e.defaultPrevented })()`
	tab.Keys("+1.0\r")
	settled(tab)
	if webtest.Eval[bool](tab, leaves) {
		t.Error("the page warns although nothing waits")
	}
	net.mode.Store("lost")
	tab.Keys("+2.0\r")
	tab.Until(`!document.querySelector("#net").hidden`)
	net.mode.Store("down")
	tab.Keys("+3.0\r+4.0\r")
	tab.WaitText("#net", "kept in this page: 3")
	if !webtest.Eval[bool](tab, leaves) {
		t.Error("the page does not warn although readings wait")
	}
	tab.Click(`form[action$="/close"] button`)
	tab.WaitText("#saved", "still to be sent: 3")
	tab.Shot("round-no-network")
	tab.Axe()
	for name, size := range map[string]webtest.Size{"upright": webtest.Tablet, "lying": landscape} {
		tab.Resize(size)
		tab.Shot("round-no-network-" + name)
		fits(t, tab, "no network "+name)
	}
	net.mode.Store("")
	tab.Click("#net button")
	tab.Until(`document.querySelector("#net").hidden && document.querySelectorAll(".kept").length === 0`)
	for i := range 4 {
		wantReadings(t, h, i+1, fmt.Sprintf("0/1 %d", i+1))
	}
	tab.Click(`[data-place="2"]`) // saved when its answer was lost: the page knows it as its own
	tab.WaitText("#note", "You typed +2.0")
	if !webtest.Eval[bool](tab, `document.querySelector("#reason").hidden`) {
		t.Error("a reading saved twice over is taken for somebody else's")
	}
	tab.Click(`[data-place="5"]`)
	before := net.calls.Load()
	tab.Keys("+5.0\r")
	settled(tab)
	tab.WaitText("#n-read", "5 of 10")
	if got := net.calls.Load() - before; got != 1 {
		t.Errorf("one reading took %d calls", got)
	}
}

// Opening, and closing with a reading missing: it is named, and confirmed.
func TestOpenAndClose(t *testing.T) {
	t.Parallel()
	h, tab := bench(t)
	h.Batch(t, "26-001", 3, func(n *store.NewBatch) { n.StartsAt = h.Clock.Now().Add(3 * time.Hour) })
	tab.SignIn("technician", storetest.Password)
	tab.Go("/batches/26-001/rounds/0")
	if tab.Count("#entry") != 0 {
		t.Error("a round can be typed into before it is open")
	}
	if got := tab.Text(".early"); !strings.Contains(got, "11:00") {
		t.Errorf("three hours early the page says %q", got)
	}
	tab.Shot("round-waiting")
	tab.Axe()
	tab.Press(`form[action$="/open"] button`)
	tab.Keys("+1.0\r")
	settled(tab)
	tab.Allow("status of 422")
	tab.Press(`form[action$="/close"] button`)
	if got := tab.Texts(".missing tbody th"); strings.Join(got, " ") != "S-0002 S-0003" {
		t.Errorf("missing: %q", got)
	}
	tab.Shots("round-close-missing")
	tab.AxeBoth()
	h.MustSave(t, h.Second, h.State("26-001", 2, 0, "1.5")) // somebody reads one meanwhile
	tab.Press(".btn.grave")
	if got := tab.Text(".notice"); !strings.Contains(got, "has changed meanwhile") {
		t.Errorf("closing with another list of missing ones says %q", got)
	}
	tab.Press(".btn.grave")
	if tab.Path() != "/today" {
		t.Errorf("at %s after closing", tab.Path())
	}
	if got := tab.Text(".is-done .when"); !strings.HasPrefix(got, "closed at") {
		t.Errorf("Today says %q of the closed round", got)
	}
}

// A movement leaves the trial from its place; its hole stays.
func TestEndFromThePlace(t *testing.T) {
	t.Parallel()
	h, tab := ready(t, 5)
	tab.Keys("\u0303s\r") // place 2 stopped
	settled(tab)
	tab.Click(`[data-place="2"]`)
	tab.Press("#menu")
	tab.Allow("status of 422")
	tab.Press(".btn.grave")
	if got := tab.Texts(".faults li"); len(got) != 2 {
		t.Errorf("an end without how and why: %q", got)
	}
	tab.Shots("movement-end")
	tab.AxeBoth()
	if got := tab.Value("select[name=seen]"); got != "stopped" {
		t.Errorf("what was seen is set to %q", got)
	}
	tab.Click(`input[value=rejected]`)
	tab.Fill(`input[name=cause]`, "does not start again after winding")
	tab.Press(".btn.grave")
	if got := tab.Text(`[data-place="2"]`); !strings.Contains(got, "rejected") {
		t.Errorf("the place shows %q", got)
	}
	if tab.Count(`[data-place="2"].off.here`) != 1 {
		t.Error("the place that left the trial does not show that it is the one in hand")
	}
	if got := tab.Text("#n-read"); got != "0 of 4" {
		t.Errorf("read %q, want 0 of 4", got)
	}
	s, err := h.MovementSheet(t.Context(), h.Lead, "26-001", storetest.Serial(2))
	if err != nil || s.Movement.End != store.Rejected || s.Movement.EndCode != store.Stopped {
		t.Errorf("end %q, seen %q, %v", s.Movement.End, s.Movement.EndCode, err)
	}
	tab.Shot("round-hole")
	tab.Press("#menu")
	tab.Type("textarea", "knocked while turning")
	tab.Press(".btn.main")
	tab.WaitText(".notice.good", "saved")
	s, err = h.MovementSheet(t.Context(), h.Lead, "26-001", storetest.Serial(2))
	if err != nil || len(s.Remarks) != 1 || s.Remarks[0].Words != "knocked while turning" || s.Remarks[0].Step != 0 {
		t.Errorf("remarks %+v, %v", s.Remarks, err)
	}
}

// Rates: round 0 has nothing to read, later rounds take rates in French with a comma.
func TestRoundOfRates(t *testing.T) {
	t.Parallel()
	h, tab := ready(t, 3, func(n *store.NewBatch) { n.Entry = store.EntryRate })
	if tab.Count("#entry") != 0 || !strings.Contains(tab.Text(".panel"), "Nothing is read") {
		t.Error("round 0 of rates asks for something")
	}
	tab.Press(`.panel form button`)
	if tab.Path() != "/today" {
		t.Errorf("closing round 0 of rates leads to %s", tab.Path())
	}
	tomorrow(t, h, tab, 1)
	tab.Press(`button[value=fr]`)
	tab.Go("/batches/26-001/rounds/1")
	if got := tab.Text("#l-value"); got != "Emplacement 1 : marche, s/d" && !strings.Contains(got, "marche") {
		t.Errorf("the field is labelled %q", got)
	}
	tab.Keys("-2,4\r")
	tab.Tap(`[data-key="3"]`)
	tab.Tap(`[data-key=","]`)
	tab.Tap(`[data-key="1"]`)
	tab.Tap(`#enter`)
	settled(tab)
	wantReadings(t, h, 1, "1/1 -2.4")
	wantReadings(t, h, 2, "1/1 3.1")
	tab.Shot("round-french")
}
