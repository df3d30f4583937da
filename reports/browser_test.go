package reports

import (
	"context"
	"fmt"
	"io"
	"net/url"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/chromedp/cdproto/emulation"
	"github.com/chromedp/cdproto/log"
	"github.com/chromedp/cdproto/network"
	cdppage "github.com/chromedp/cdproto/page"
	cdpruntime "github.com/chromedp/cdproto/runtime"
	"github.com/chromedp/chromedp"

	"hazewright"
)

// findBrowser returns the path of a Chromium. Without one the test is skipped, unless
// HAZEWRIGHT_BROWSER=required, as CI sets it: there it fails.
func findBrowser(t *testing.T) string {
	t.Helper()
	for _, name := range []string{"chromium", "chromium-browser", "google-chrome"} {
		if path, err := exec.LookPath(name); err == nil {
			return path
		}
	}
	if os.Getenv("HAZEWRIGHT_BROWSER") == "required" {
		t.Fatal("no Chromium on this machine, but HAZEWRIGHT_BROWSER=required")
	}
	t.Skip("no Chromium on this machine")
	return ""
}

// tab is one browser with one page, and all that it asked for or complained about.
type tab struct {
	context.Context
	t *testing.T

	mu       sync.Mutex
	requests []string
	messages []string
}

func openTab(t *testing.T) *tab {
	t.Helper()
	binary := findBrowser(t)
	options := append(chromedp.DefaultExecAllocatorOptions[:], chromedp.ExecPath(binary), chromedp.NoSandbox, chromedp.DisableGPU,
		chromedp.UserDataDir(t.TempDir()), chromedp.Flag("disable-quic", true), chromedp.Flag("disable-component-update", true),
		chromedp.Flag("host-resolver-rules", "MAP * ~NOTFOUND"))
	ctx, stopAllocator := chromedp.NewExecAllocator(context.Background(), options...)
	ctx, stopWaiting := context.WithTimeout(ctx, 90*time.Second)
	ctx, stopTab := chromedp.NewContext(ctx)
	t.Cleanup(func() { stopTab(); stopWaiting(); stopAllocator() })
	b := &tab{Context: ctx, t: t}
	note := func(list *[]string, format string, args ...any) {
		b.mu.Lock()
		defer b.mu.Unlock()
		*list = append(*list, fmt.Sprintf(format, args...))
	}
	err := chromedp.Listen(ctx, func(event any) {
		switch e := event.(type) {
		case *network.EventRequestWillBeSent:
			note(&b.requests, "%s", e.Request.URL)
		case *log.EventEntryAdded:
			note(&b.messages, "log: %s", e.Entry.Text)
		case *cdpruntime.EventConsoleAPICalled:
			note(&b.messages, "console: %v", e.Type)
		case *cdpruntime.EventExceptionThrown:
			note(&b.messages, "exception: %s", e.ExceptionDetails.Text)
		case *cdppage.EventJavascriptDialogOpening:
			note(&b.messages, "dialog: %s", e.Message)
		}
	})
	if err != nil {
		t.Fatal(err)
	}
	b.call("network", func() error { _, err := chromedp.Call(ctx, network.Enable, network.EnableParams{}); return err })
	b.call("log", func() error { _, err := chromedp.Call(ctx, log.Enable, struct{}{}); return err })
	return b
}

func (b *tab) call(what string, f func() error) {
	b.t.Helper()
	if err := f(); err != nil {
		b.t.Fatalf("%s: %v", what, err)
	}
}

// open opens the report of r.
func (b *tab) open(r *hazewright.Result) {
	b.t.Helper()
	b.openPage(func(w io.Writer) error { return HTML(w, r, fixtureProvenance) })
}

// openPage writes a page to a file, opens it and waits until its charts are drawn.
func (b *tab) openPage(write func(io.Writer) error) {
	b.t.Helper()
	path := filepath.Join(b.t.TempDir(), "report.html")
	file, err := os.Create(path)
	if err != nil {
		b.t.Fatal(err)
	}
	if err := write(file); err != nil {
		b.t.Fatal(err)
	}
	if err := file.Close(); err != nil {
		b.t.Fatal(err)
	}
	address := (&url.URL{Scheme: "file", Path: path}).String()
	b.call("open", func() error {
		return chromedp.Do(b, chromedp.Navigate(address), chromedp.WaitVisible(chromedp.CSS("body[data-ready]")))
	})
}

func evaluate[T any](b *tab, script string) T {
	b.t.Helper()
	v, err := chromedp.Run(b, chromedp.Evaluate[T](script))
	if err != nil {
		b.t.Fatalf("%s: %v", script, err)
	}
	return v
}

// quiet fails if the page asked for anything but itself, or anything was reported.
func (b *tab) quiet() {
	b.t.Helper()
	b.mu.Lock()
	defer b.mu.Unlock()
	for _, r := range b.requests {
		if !strings.HasPrefix(r, "file:") && !strings.HasPrefix(r, "data:") {
			b.t.Errorf("the report asked for %s", r)
		}
	}
	if len(b.requests) == 0 {
		b.t.Error("no request was seen, not even the page: the listener does not work")
	}
	for _, m := range b.messages {
		b.t.Errorf("the browser reported: %s", m)
	}
}

// drawn fails unless there are so many charts at least, and every one has marks and labels.
func (b *tab) drawn(least int) {
	b.t.Helper()
	type box struct {
		ID    string
		Error string
		Paths int
		Texts int
		Alt   string
	}
	boxes := evaluate[[]box](b, `Array.from(document.querySelectorAll("[data-chart]")).map(e => ({ID: e.id, Error: e.getAttribute("data-error") || "",
		Paths: e.querySelectorAll("svg path").length, Texts: e.querySelectorAll("svg text").length, Alt: e.getAttribute("aria-label") || ""}))`)
	if len(boxes) < least {
		b.t.Errorf("%d charts, want at least %d", len(boxes), least)
	}
	for _, c := range boxes {
		if c.Error != "" || c.Paths < 3 || c.Texts < 3 || len(c.Alt) < 40 {
			b.t.Errorf("chart %s: error %q, %d paths, %d texts, text alternative %q", c.ID, c.Error, c.Paths, c.Texts, c.Alt)
		}
	}
}

// shoot keeps a picture for a person to look at, if HAZEWRIGHT_SHOTS names a folder.
func (b *tab) shoot(name string, width, height int) {
	b.t.Helper()
	dir := os.Getenv("HAZEWRIGHT_SHOTS")
	if dir == "" {
		return
	}
	b.call("viewport", func() error { return chromedp.Do(b, chromedp.EmulateViewport(int64(width), int64(height))) })
	b.wait()
	png, err := chromedp.Run(b, chromedp.CaptureScreenshot())
	if err != nil {
		b.t.Fatal(err)
	}
	if err := os.WriteFile(filepath.Join(dir, name), png, 0o644); err != nil {
		b.t.Fatal(err)
	}
}

func TestReportInBrowser(t *testing.T) {
	b := openTab(t)
	b.open(fixture())
	b.drawn(10)
	b.shoot("light.png", 1200, 8000)

	if overflow := b.narrow(); overflow != "" {
		t.Errorf("390 px wide: %s", overflow)
	}
	b.shoot("narrow.png", 390, 8000)
	b.wide()

	// A tooltip is text in the drawing, and says what it is that it shows.
	evaluate[bool](b, `(() => { const chart = document.querySelector("#chart-warming"); chart.scrollIntoView({block: "center", behavior: "instant"});
		const box = chart.getBoundingClientRect();
		chart.querySelector("svg").parentNode.dispatchEvent(new MouseEvent("mousemove", {clientX: box.left + 200, clientY: box.top + 150, bubbles: true}));
		return true; })()`)
	b.wait()
	if got := evaluate[string](b, `document.querySelector("#chart-warming svg").textContent`); !strings.Contains(got, "Burden [mg/m²]: ") {
		t.Errorf("no tooltip with the burden in the warming chart: %q", got)
	}

	b.dark()
	b.drawn(10)
	if got := evaluate[string](b, `getComputedStyle(document.body).backgroundColor`); got != "rgb(23, 27, 31)" {
		t.Errorf("dark background is %s", got)
	}
	if got := evaluate[string](b, `document.querySelector("#chart-warming svg").innerHTML.includes("#56B4E9") ? "dark" : "light"`); got != "dark" {
		t.Errorf("the charts are %s", got)
	}
	b.shoot("dark.png", 1200, 8000)
	b.print("dark.pdf")
	b.drawn(10)
	b.quiet()
}

// wait gives the page time to draw anew: longer than it waits itself after a change of width.
func (b *tab) wait() { time.Sleep(400 * time.Millisecond) }

// dark sets the reader's preference for dark colours, and gives the charts time to follow.
func (b *tab) dark() {
	b.t.Helper()
	b.call("dark", func() error {
		_, err := chromedp.Call(b, emulation.SetEmulatedMedia, emulation.SetEmulatedMediaParams{
			Features: []*emulation.MediaFeature{{Name: "prefers-color-scheme", Value: "dark"}}})
		return err
	})
	for range 20 { // a busy machine takes its time
		if evaluate[bool](b, `Array.from(document.querySelectorAll("[data-chart] svg")).every(s => s.innerHTML.includes("#a7b0b8"))`) {
			return
		}
		b.wait()
	}
}

// narrow sets the width of a telephone and returns what sticks out sideways.
func (b *tab) narrow() string {
	b.t.Helper()
	b.call("viewport", func() error { return chromedp.Do(b, chromedp.EmulateViewport(390, 844)) })
	b.wait()
	if width := evaluate[int](b, `document.documentElement.scrollWidth`); width > 390 {
		return fmt.Sprintf("the page is %d px wide: %s", width, evaluate[string](b, `Array.from(document.querySelectorAll("body *")).filter(e =>
			e.getBoundingClientRect().right > 390.5 && !e.closest(".scroll")).map(e => e.tagName + "." + e.className + "#" + e.id).slice(0, 5).join(", ")`))
	}
	return ""
}

func (b *tab) wide() {
	b.call("viewport", func() error { return chromedp.Do(b, chromedp.EmulateViewport(1200, 900)) })
}

// print prints to PDF as A4 and fails unless the charts had their paper size.
func (b *tab) print(name string) {
	b.t.Helper()
	evaluate[bool](b, `(() => { window.addEventListener("beforeprint", () => {
		window.paper = Array.from(document.querySelectorAll("[data-chart] svg")).map(s => s.getAttribute("width") + " " + s.outerHTML.includes("#56B4E9")); }); return true; })()`)
	pdf, err := chromedp.Run(b, chromedp.PrintToPDF(chromedp.PDFPreferCSSPageSize(), chromedp.PDFOutlineAndTagged()))
	if err != nil {
		b.t.Fatal(err)
	}
	if !strings.HasPrefix(string(pdf), "%PDF-") || len(pdf) < 50_000 {
		b.t.Errorf("the PDF has %d bytes", len(pdf))
	}
	for _, size := range evaluate[[]string](b, `window.paper || ["no beforeprint"]`) {
		if size != "680 false" {
			b.t.Errorf("a chart on paper has width and dark colours %q, want 680 and light", size)
		}
	}
	if dir := os.Getenv("HAZEWRIGHT_SHOTS"); dir != "" {
		if err := os.WriteFile(filepath.Join(dir, name), pdf, 0o644); err != nil {
			b.t.Fatal(err)
		}
	}
}

// Hostile names must stay text in the page and in the drawings.
func TestReportWithHostileNames(t *testing.T) {
	b := openTab(t)
	b.open(evilFixture())
	b.drawn(10)
	if got := evaluate[string](b, `document.querySelector("h1").textContent`); got != evilTag {
		t.Errorf("the heading is %q, want the title as text", got)
	}
	if n := evaluate[int](b, `document.images.length + document.querySelectorAll("main script:not([type='application/json'])").length`); n != 0 {
		t.Errorf("%d images or scripts came out of names", n)
	}
	if got := evaluate[string](b, `document.title`); got != evilTag+" - hazewright report" {
		t.Errorf("the page's title is %q", got)
	}
	names := evaluate[string](b, `Array.from(document.querySelectorAll("#chart-losses svg text")).map(e => e.textContent).join("")`)
	for _, part := range []string{"</script>", "__f__"} {
		if !strings.Contains(names, part) {
			t.Errorf("the loss chart's labels %q lack %q", names, part)
		}
	}
	legend := evaluate[string](b, `Array.from(document.querySelectorAll("#aloft .legend")).map(e => e.textContent).join(" ")`)
	if !strings.Contains(legend, evilRevive) {
		t.Errorf("the legend %q lacks %q", legend, evilRevive)
	}
	if overflow := b.narrow(); overflow != "" {
		t.Errorf("390 px wide: %s", overflow)
	}
	b.shoot("hostile-narrow.png", 390, 3000)
	b.quiet()
}
