package main

import (
	"context"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	cdplog "github.com/chromedp/cdproto/log"
	"github.com/chromedp/cdproto/network"
	"github.com/chromedp/cdproto/runtime"
	"github.com/chromedp/chromedp"
)

// tab is a page in a real browser, with everything that it complained of or
// asked for.
type tab struct {
	ctx context.Context
	mu  sync.Mutex
	// Complaints are errors and all that is written to the console; requests are for
	// anything but the page's file and what it holds itself.
	complaints, requests []string
}

// openTab opens a file in Chromium. Where there is none the test skips and
// says so, unless SQUINT_REQUIRE_BROWSER is set.
func openTab(t *testing.T, file string, flags ...chromedp.ExecAllocatorOption) *tab {
	t.Helper()
	if !haveBrowser() {
		if os.Getenv("SQUINT_REQUIRE_BROWSER") != "" {
			t.Fatal("got no Chromium, want one, as SQUINT_REQUIRE_BROWSER is set; install the package chromium")
		}
		t.Skip("no Chromium on this machine: the page is not tried in a browser")
	}
	// The sandbox does not work for root, and there is no graphics card.
	flags = append(flags, chromedp.Headless, chromedp.NoFirstRun, chromedp.NoSandbox, chromedp.Flag("enable-unsafe-swiftshader", true), chromedp.WSURLReadTimeout(time.Minute))
	alloc, stop := chromedp.NewExecAllocator(context.Background(), flags...)
	t.Cleanup(stop)
	ctx, cancel := chromedp.NewContext(alloc)
	t.Cleanup(cancel)
	ctx, late := context.WithTimeout(ctx, 4*time.Minute)
	t.Cleanup(late)
	b := &tab{ctx: ctx}
	err := chromedp.Listen(ctx, func(ev any) {
		b.mu.Lock()
		defer b.mu.Unlock()
		switch e := ev.(type) {
		case *runtime.EventConsoleAPICalled:
			var words []string
			for _, a := range e.Args {
				words = append(words, string(a.Value)+a.Description)
			}
			b.complaints = append(b.complaints, fmt.Sprintf("console %s: %s", e.Type, strings.Join(words, " ")))
		case *runtime.EventExceptionThrown:
			b.complaints = append(b.complaints, "exception: "+e.ExceptionDetails.Text)
		case *cdplog.EventEntryAdded:
			// Reading a canvas back, which only the tests do, is told as a warning.
			if e.Entry.Level == cdplog.EntryLevelError {
				b.complaints = append(b.complaints, "log: "+e.Entry.Text)
			}
		case *network.EventRequestWillBeSent:
			if u := e.Request.URL; !strings.HasPrefix(u, "data:") && !strings.HasPrefix(u, "blob:") && !strings.HasPrefix(u, "file://"+file) {
				b.requests = append(b.requests, u)
			}
		}
	})
	if err != nil {
		t.Fatal(err)
	}
	b.do(t, chromedp.EmulateViewport(1280, 900))
	b.do(t, chromedp.Navigate("file://"+file))
	eval[bool](t, b, "squint.ready")
	return b
}

func haveBrowser() bool {
	for _, name := range []string{"chromium", "chromium-browser", "google-chrome", "chrome"} {
		if _, err := exec.LookPath(name); err == nil {
			return true
		}
	}
	return false
}

func (b *tab) do(t *testing.T, a chromedp.Action[chromedp.Void]) {
	t.Helper()
	if err := chromedp.Do(b.ctx, a); err != nil {
		t.Fatal(err)
	}
}

// eval is what a script comes to, awaited.
func eval[T any](t *testing.T, b *tab, script string) T {
	t.Helper()
	v, err := chromedp.Run(b.ctx, chromedp.Evaluate[T](script, chromedp.EvalAwaitPromise))
	if err != nil {
		t.Fatalf("%s: %v", script, err)
	}
	return v
}

// settle waits until what was asked for is drawn.
func (b *tab) settle(t *testing.T) {
	t.Helper()
	eval[bool](t, b, "new Promise(r=>requestAnimationFrame(()=>requestAnimationFrame(()=>squint.draw().then(()=>r(true)))))")
}

// keep saves what was looked at where SQUINT_ARTEFACTS names a folder.
func keep(t *testing.T, name string, data []byte) {
	t.Helper()
	dir := os.Getenv("SQUINT_ARTEFACTS")
	if dir == "" {
		return
	}
	if err := os.MkdirAll(dir, 0o777); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(filepath.Join(dir, name), data, 0o666); err != nil {
		t.Fatal(err)
	}
}
