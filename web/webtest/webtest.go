// Package webtest drives the pages in a real browser: one Chromium for a test process, a tab with its
// own cookies for a test, every console error and every breach of the Content-Security-Policy a
// failure. Used only by tests.
package webtest

import (
	"context"
	"errors"
	"fmt"
	"log/slog"
	"net/http/httptest"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strconv"
	"strings"
	"sync"
	"sync/atomic"
	"syscall"
	"testing"
	"time"

	"github.com/chromedp/chromedp"

	"ratehouse/store"
	"ratehouse/web"
)

// Serve starts the whole server on the laboratory, on a free port, until the test ends, and gives its
// address. The log of the server is the test's.
func Serve(t testing.TB, lab *store.Lab) (base string) {
	t.Helper()
	h, err := web.New(web.Config{Lab: lab, Logger: slog.New(slog.NewTextHandler(t.Output(), &slog.HandlerOptions{Level: slog.LevelInfo}))})
	if err != nil {
		t.Fatal(err)
	}
	s := httptest.NewServer(h)
	t.Cleanup(s.Close)
	return s.URL
}

// tabWithin bounds what one test may do in its tab; generous, because packages are tested side by side.
const tabWithin = 5 * time.Minute

// browser is the Chromium of this process, started at first use; it ends with the process, because its
// pipe closes.
var browser = sync.OnceValues(func() (context.Context, error) {
	path, err := executable()
	if err != nil {
		return nil, err
	}
	opts := []chromedp.ExecAllocatorOption{
		chromedp.ExecPath(path), chromedp.Headless, chromedp.DisableGPU, chromedp.NoFirstRun, chromedp.UserDataDir(profile()),
		chromedp.WindowSize(Wide.Width, Wide.Height),
	}
	for _, f := range []string{"disable-quic", "disable-background-networking", "disable-component-update", "disable-sync",
		"disable-dev-shm-usage", "hide-scrollbars", "force-color-profile=srgb"} {
		name, value, has := strings.Cut(f, "=")
		if has {
			opts = append(opts, chromedp.Flag(name, value))
		} else {
			opts = append(opts, chromedp.Flag(name, true))
		}
	}
	if os.Geteuid() == 0 {
		opts = append(opts, chromedp.NoSandbox) // Chromium refuses to sandbox root
	}
	alloc, _ := chromedp.NewExecAllocator(context.Background(), opts...) //nolint:govet // ends with the process
	ctx, _ := chromedp.NewContext(alloc)                                 //nolint:govet // likewise
	return ctx, chromedp.Do(ctx)
})

// errMissing: there is no Chromium on this machine.
var errMissing = errors.New("no Chromium found: install it (tools/setup.sh does) or set CHROMIUM to its path")

func executable() (string, error) {
	if p := os.Getenv("CHROMIUM"); p != "" {
		return p, nil
	}
	for _, n := range []string{"chromium", "chromium-browser", "google-chrome", "google-chrome-stable"} {
		if p, err := exec.LookPath(n); err == nil {
			return p, nil
		}
	}
	return "", errMissing
}

// profile is this process's browser profile; those of processes that are gone are swept away.
func profile() string {
	const prefix = "ratehouse-browser-"
	old, _ := filepath.Glob(filepath.Join(os.TempDir(), prefix+"*"))
	for _, dir := range old {
		pid, err := strconv.Atoi(strings.TrimPrefix(filepath.Base(dir), prefix))
		if err == nil && errors.Is(syscall.Kill(pid, 0), syscall.ESRCH) {
			os.RemoveAll(dir) //nolint:errcheck // the next process tries again
		}
	}
	return filepath.Join(os.TempDir(), prefix+strconv.Itoa(os.Getpid()))
}

// skipped counts the browser tests that this process could not run.
var skipped atomic.Int64

// Start gives the test's tab at the server's address. Without Chromium the test fails, except on macOS,
// where it is skipped with a notice that counts.
func Start(t testing.TB, base string) *Tab {
	t.Helper()
	root, err := browser()
	if errors.Is(err, errMissing) && runtime.GOOS == "darwin" {
		t.Skipf("browser test %d of this package skipped: %v", skipped.Add(1), err)
	}
	if err != nil {
		t.Fatal("browser: ", err)
	}
	tab := &Tab{T: t, Base: base}
	ctx, cancel := chromedp.NewContext(root, chromedp.WithNewBrowserContext(), chromedp.WithListener(tab.hear))
	tab.Ctx, tab.cancel = ctx, cancel
	timeout := time.AfterFunc(tabWithin, cancel)
	t.Cleanup(func() {
		timeout.Stop()
		tab.finish()
	})
	tab.Resize(Wide)
	tab.Dark(false)
	return tab
}

// root is the top of the project: where go.mod lies.
var root = sync.OnceValue(func() string {
	dir, err := os.Getwd()
	for err == nil {
		if _, e := os.Stat(filepath.Join(dir, "go.mod")); e == nil {
			return dir
		}
		up := filepath.Dir(dir)
		if up == dir {
			break
		}
		dir = up
	}
	panic("webtest: not inside the project")
})

// artefacts is where pictures go: ARTEFACTS, or artefacts/ at the top of the project.
func artefacts() string {
	if dir := os.Getenv("ARTEFACTS"); dir != "" {
		return dir
	}
	return filepath.Join(root(), "artefacts")
}

func write(name string, data []byte) (string, error) {
	path := filepath.Join(artefacts(), name)
	if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
		return "", err
	}
	if err := os.WriteFile(path, data, 0o644); err != nil {
		return "", fmt.Errorf("artefact: %w", err)
	}
	return path, nil
}
