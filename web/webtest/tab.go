package webtest

import (
	"bytes"
	"context"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/chromedp/cdproto/cdp"
	"github.com/chromedp/cdproto/emulation"
	"github.com/chromedp/cdproto/log"
	cdruntime "github.com/chromedp/cdproto/runtime"
	"github.com/chromedp/chromedp"
)

// Tab is one test's page in the browser. Its methods fail the test when they cannot do their work, and
// leave a picture of what was there instead.
type Tab struct {
	T    testing.TB
	Ctx  context.Context // for chromedp itself
	Base string

	cancel  context.CancelFunc
	mu      sync.Mutex
	heard   []string
	allowed []string
}

// Size is a window.
type Size struct {
	Width, Height int
	Touch         bool
}

// The sizes that every page is looked at in.
var (
	Wide   = Size{Width: 1440, Height: 900}
	Tablet = Size{Width: 820, Height: 1180, Touch: true}
	a4     = Size{Width: 794, Height: 1123}
)

// hear collects what a page must not do: throw, log errors, break the policy. It runs on the browser's
// reading goroutine and must be quick.
func (b *Tab) hear(ev any) {
	switch ev := ev.(type) {
	case *cdruntime.EventExceptionThrown:
		b.note("exception: " + ev.ExceptionDetails.Text + " " + describe(ev.ExceptionDetails.Exception))
	case *cdruntime.EventConsoleAPICalled:
		if ev.Type == "error" || ev.Type == "assert" {
			var s []string
			for _, a := range ev.Args {
				s = append(s, describe(a))
			}
			b.note("console: " + strings.Join(s, " "))
		}
	case *log.EventEntryAdded:
		if ev.Entry.Level == "error" || strings.Contains(ev.Entry.Text, "Content Security Policy") {
			b.note(string(ev.Entry.Source) + ": " + ev.Entry.Text + " " + ev.Entry.URL)
		}
	}
}

func describe(o *cdruntime.RemoteObject) string {
	switch {
	case o == nil:
		return ""
	case o.Description != "":
		return o.Description
	}
	return string(o.Value)
}

func (b *Tab) note(s string) {
	b.mu.Lock()
	defer b.mu.Unlock()
	b.heard = append(b.heard, s)
}

// Allow lets errors pass that hold the text: Allow("status of 404") on a page that is not there.
func (b *Tab) Allow(text string) {
	b.mu.Lock()
	defer b.mu.Unlock()
	b.allowed = append(b.allowed, text)
}

// Heard lists the errors so far that were not allowed.
func (b *Tab) Heard() (out []string) {
	b.mu.Lock()
	defer b.mu.Unlock()
next:
	for _, h := range b.heard {
		for _, a := range b.allowed {
			if strings.Contains(h, a) {
				continue next
			}
		}
		out = append(out, h)
	}
	return out
}

func (b *Tab) finish() {
	for _, h := range b.Heard() {
		b.T.Errorf("the browser reports: %s", h)
	}
	if b.T.Failed() {
		if png, err := chromedp.Run(b.Ctx, chromedp.FullScreenshot(100)); err == nil {
			if path, err := write("failed/"+strings.ReplaceAll(b.T.Name(), "/", "-")+".png", png); err == nil {
				b.T.Logf("what was there at the end: %s", path)
			}
		}
	}
	b.cancel()
}

// Do runs steps of chromedp.
func (b *Tab) Do(steps ...chromedp.Action[chromedp.Void]) {
	b.T.Helper()
	if err := chromedp.Do(b.Ctx, steps...); err != nil {
		b.T.Fatal(err)
	}
}

// Eval runs JavaScript in the tab; a promise is waited for.
func Eval[T any](b *Tab, js string) T {
	b.T.Helper()
	v, err := chromedp.Run(b.Ctx, chromedp.Evaluate[T](js, chromedp.EvalAwaitPromise))
	if err != nil {
		b.T.Fatalf("%s: %v", js, err)
	}
	return v
}

// Go opens an address of the server, "/today", and waits until its fonts are there.
func (b *Tab) Go(path string) {
	b.T.Helper()
	b.Do(chromedp.Navigate(b.Base + path))
	Eval[bool](b, `document.fonts.ready.then(() => true)`)
}

// SignIn goes through the log-in page.
func (b *Tab) SignIn(name, password string) {
	b.T.Helper()
	b.Go("/login")
	b.Type(`input[name=name]`, name)
	b.Type(`input[name=password]`, password)
	b.Press(`main form button[type=submit]`)
	if p := b.Path(); strings.HasPrefix(p, "/login") && b.Count(".faults") > 0 {
		b.T.Fatalf("signing in as %s: %s", name, b.Text(".faults"))
	}
}

// Path is where the tab is now, with the query.
func (b *Tab) Path() string {
	b.T.Helper()
	return Eval[string](b, `location.pathname + location.search`)
}

// Click clicks an element that leaves the page where it is.
func (b *Tab) Click(css string) {
	b.T.Helper()
	b.Do(chromedp.Click(chromedp.CSS(css)))
}

// Press clicks an element that leads to another page, and waits until that is there.
func (b *Tab) Press(css string) {
	b.T.Helper()
	b.leaves(func() { b.Do(chromedp.Click(chromedp.CSS(css))) })
}

// leaves runs what loads a new page, and waits for it.
func (b *Tab) leaves(act func()) {
	b.T.Helper()
	Eval[bool](b, `window.stillHere = true`)
	act()
	b.Until(`!window.stillHere && document.readyState === "complete"`)
	Eval[bool](b, `document.fonts.ready.then(() => true)`)
}

// Type types into a field, after what stands there; "\r" is Enter.
func (b *Tab) Type(css, text string) {
	b.T.Helper()
	b.Do(chromedp.SendKeys(chromedp.CSS(css), text))
}

// Fill replaces what stands in a field.
func (b *Tab) Fill(css, text string) {
	b.T.Helper()
	b.Do(chromedp.Clear(chromedp.CSS(css)), chromedp.SendKeys(chromedp.CSS(css), text))
}

// Keys types at whatever has the focus; "\r" is Enter, "\t" Tab.
func (b *Tab) Keys(keys string) {
	b.T.Helper()
	b.Do(chromedp.KeyEvent(keys))
}

// Tap touches an element, as a finger does.
func (b *Tab) Tap(css string) {
	b.T.Helper()
	b.Do(chromedp.Tap(chromedp.CSS(css)))
}

// Until waits until an expression is true, over the change of page as well.
func (b *Tab) Until(js string) {
	b.T.Helper()
	deadline := time.Now().Add(untilWithin)
	for {
		_, err := chromedp.Run(b.Ctx, chromedp.Poll[bool](js, chromedp.WithPollingInterval(10*time.Millisecond), chromedp.WithPollingTimeout(untilWithin)))
		if err == nil {
			return
		}
		if b.Ctx.Err() != nil || time.Now().After(deadline) || !strings.Contains(err.Error(), "-32000") {
			b.T.Fatalf("waiting for %s: %v", js, err)
		}
		// The page went away under the question; the next one answers it.
	}
}

const untilWithin = 30 * time.Second

// WaitText waits until an element holds the text.
func (b *Tab) WaitText(css, text string) {
	b.T.Helper()
	b.Until(fmt.Sprintf(`(document.querySelector(%q)?.textContent ?? "").includes(%q)`, css, text))
}

// Text is the text of an element as it is seen, "" if it is not there.
func (b *Tab) Text(css string) string {
	b.T.Helper()
	return strings.TrimSpace(Eval[string](b, fmt.Sprintf(`document.querySelector(%q)?.innerText ?? ""`, css)))
}

// Texts is the text of every such element.
func (b *Tab) Texts(css string) []string {
	b.T.Helper()
	return Eval[[]string](b, fmt.Sprintf(`[...document.querySelectorAll(%q)].map(e => e.innerText.trim())`, css))
}

// Value is what stands in a field.
func (b *Tab) Value(css string) string {
	b.T.Helper()
	return Eval[string](b, fmt.Sprintf(`document.querySelector(%q)?.value ?? ""`, css))
}

// Count is the number of such elements.
func (b *Tab) Count(css string) int {
	b.T.Helper()
	return Eval[int](b, fmt.Sprintf(`document.querySelectorAll(%q).length`, css))
}

// Resize makes the window so large.
func (b *Tab) Resize(s Size) {
	b.T.Helper()
	opts := []chromedp.EmulateViewportOption{chromedp.EmulateScale(1)}
	if s.Touch {
		opts = append(opts, chromedp.EmulateTouch)
	}
	b.Do(chromedp.EmulateViewport(int64(s.Width), int64(s.Height), opts...))
}

// media sets what the styles are asked for: "print" or "" and "dark" or "light"; never with motion, so
// that no picture or contrast is taken half way.
func (b *Tab) media(kind, scheme string) {
	b.T.Helper()
	b.Do(chromedp.Func(func(ctx context.Context, t *chromedp.Target) error {
		_, err := cdp.Call(ctx, t, emulation.SetEmulatedMedia, emulation.SetEmulatedMediaParams{Media: kind,
			Features: []*emulation.MediaFeature{{Name: "prefers-color-scheme", Value: scheme}, {Name: "prefers-reduced-motion", Value: "reduce"}}})
		return err
	}))
}

// Shot takes a picture of the whole page as it is into the artefacts, NAME.png, and gives its path.
func (b *Tab) Shot(name string) string {
	b.T.Helper()
	png, err := chromedp.Run(b.Ctx, chromedp.FullScreenshot(100))
	if err != nil {
		b.T.Fatalf("picture %s: %v", name, err)
	}
	path, err := write(name+".png", png)
	if err != nil {
		b.T.Fatal(err)
	}
	return path
}

// Shots takes the page wide, in the dark, on a tablet and as printed, and leaves it wide and light.
func (b *Tab) Shots(name string) {
	b.T.Helper()
	defer func() {
		b.media("", "light")
		b.Resize(Wide)
	}()
	b.media("", "light")
	b.Resize(Wide)
	b.Shot(name + "-wide")
	b.media("", "dark")
	b.Shot(name + "-dark")
	b.media("", "light")
	b.Resize(Tablet)
	b.Shot(name + "-tablet")
	b.media("print", "light")
	b.Resize(a4)
	b.Shot(name + "-print")
}

// Dark switches the device between dark and light.
func (b *Tab) Dark(on bool) {
	b.T.Helper()
	b.media("", map[bool]string{true: "dark", false: "light"}[on])
}

// PDF prints the page as a browser would into the artefacts, NAME.pdf, and gives the number of its
// leaves.
func (b *Tab) PDF(name string) (leaves int) {
	b.T.Helper()
	pdf, err := chromedp.Run(b.Ctx, chromedp.PrintToPDF(chromedp.PDFPaper(chromedp.PaperA4), chromedp.PDFPreferCSSPageSize()))
	if err != nil {
		b.T.Fatalf("print %s: %v", name, err)
	}
	if _, err := write(name+".pdf", pdf); err != nil {
		b.T.Fatal(err)
	}
	return bytes.Count(pdf, []byte("/Type /Page\n")) + bytes.Count(pdf, []byte("/Type /Page /"))
}

// Axe runs every rule of axe-core on the page as it is; whatever it finds fails the test.
func (b *Tab) Axe() {
	b.T.Helper()
	b.axe(`{resultTypes: ["violations"]}`)
}

// AxeBoth runs Axe in the light, and in the dark once more what hangs on colour.
func (b *Tab) AxeBoth() {
	b.T.Helper()
	b.Dark(true)
	b.axe(`{resultTypes: ["violations"], runOnly: ["color-contrast", "link-in-text-block"]}`)
	b.Dark(false)
	b.Axe()
}

func (b *Tab) axe(options string) {
	b.T.Helper()
	if !Eval[bool](b, `"axe" in window`) {
		src, err := os.ReadFile(filepath.Join(root(), "testdata", "axe", "axe.min.js"))
		if err != nil {
			b.T.Fatal(err)
		}
		Eval[int](b, string(src)+";0")
	}
	found := Eval[[]string](b, `axe.run(`+options+`).then(r => r.violations.flatMap(v => v.nodes.map(n => v.id + " (" + v.impact + "): " + v.help + ": " + n.target.join(" ") + " " + (n.failureSummary ?? ""))))`)
	for _, f := range found {
		b.T.Errorf("axe on %s: %s", b.Path(), f)
	}
}
