package main

import (
	"context"
	"os/exec"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/chromedp/cdproto/emulation"
	"github.com/chromedp/cdproto/network"
	"github.com/chromedp/cdproto/page"
	"github.com/chromedp/cdproto/runtime"
	"github.com/chromedp/chromedp"
)

// In a browser the reports raise no error, ask for nothing outside, and do not run over at 320 px nor on A4 paper. The test is passed over
// where no browser is installed.
func TestReportsInABrowser(t *testing.T) {
	browser := ""
	for _, name := range []string{"chromium", "chromium-browser", "google-chrome", "headless-shell"} {
		if path, err := exec.LookPath(name); err == nil {
			browser = path
			break
		}
	}
	if browser == "" {
		t.Skip("no browser is installed (Debian: apt-get install chromium)")
	}
	options := append(chromedp.DefaultExecAllocatorOptions[:], chromedp.ExecPath(browser), chromedp.NoSandbox, chromedp.DisableGPU)
	allocator, stop := chromedp.NewExecAllocator(context.Background(), options...)
	defer stop()
	browsing, closeBrowser := chromedp.NewContext(allocator)
	defer closeBrowser()
	limited, cancel := context.WithTimeout(browsing, 120*time.Second)
	defer cancel()
	var lock sync.Mutex
	var errors, asked []string
	chromedp.ListenTarget(limited, func(event any) {
		lock.Lock()
		defer lock.Unlock()
		switch e := event.(type) {
		case *runtime.EventExceptionThrown:
			errors = append(errors, e.ExceptionDetails.Text)
		case *runtime.EventConsoleAPICalled:
			errors = append(errors, string(e.Type))
		case *network.EventRequestWillBeSent:
			if !strings.HasPrefix(e.Request.URL, "file:") {
				asked = append(asked, e.Request.URL)
			}
		}
	})
	for name, folder := range reports(t) {
		path, err := filepath.Abs(filepath.Join(folder, "report.html"))
		if err != nil {
			t.Fatal(err)
		}
		over := func(width int64, media string) (by int64) {
			err := chromedp.Run(limited, emulation.SetDeviceMetricsOverride(width, 900, 1, false), emulation.SetEmulatedMedia().WithMedia(media),
				chromedp.Navigate("file://"+filepath.ToSlash(path)), chromedp.Evaluate(`document.documentElement.scrollWidth - document.documentElement.clientWidth`, &by))
			if err != nil {
				t.Fatalf("%s: %v", name, err)
			}
			return by
		}
		if by := over(320, "screen"); by > 0 {
			t.Errorf("%s runs over by %d px at 320 px", name, by)
		}
		const paper = 673 // px: A4 less margins of 16 mm, at 96 to the inch
		if by := over(paper, "print"); by > 0 {
			t.Errorf("%s runs over by %d px on A4", name, by)
		}
		var printed []byte
		err = chromedp.Run(limited, chromedp.ActionFunc(func(ctx context.Context) (err error) {
			printed, _, err = page.PrintToPDF().WithPreferCSSPageSize(true).Do(ctx)
			return err
		}))
		if err != nil || len(printed) < 10000 {
			t.Errorf("%s: prints %d bytes, %v", name, len(printed), err)
		}
	}
	if len(errors)+len(asked) > 0 {
		t.Errorf("errors %q, asked for %q", errors, asked)
	}
}
