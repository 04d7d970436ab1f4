//go:build browser

package main

import (
	"context"
	"encoding/csv"
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/chromedp/cdproto/cdp"
	"github.com/chromedp/cdproto/emulation"
	"github.com/chromedp/cdproto/log"
	"github.com/chromedp/cdproto/network"
	"github.com/chromedp/cdproto/page"
	"github.com/chromedp/cdproto/runtime"
	"github.com/chromedp/chromedp"
	"github.com/chromedp/chromedp/kb"
)

// These tests look at a report with a Chromium: make browser. Where PICTURES
// names a folder, what was seen is left there.

// tab is a page in a browser, with what it complained of and what it loaded.
type tab struct {
	*testing.T
	ctx context.Context

	guard        sync.Mutex
	said, loaded []string
}

// show opens a file in a window of the given width.
func show(t *testing.T, path string, width int, scripts bool) *tab {
	t.Helper()
	ctx, cancel := chromedp.NewExecAllocator(context.Background(), append(chromedp.DefaultExecAllocatorOptions[:], chromedp.NoSandbox)...)
	t.Cleanup(cancel)
	ctx, cancel = chromedp.NewContext(ctx)
	t.Cleanup(cancel)
	b := &tab{T: t, ctx: ctx}
	b.must(chromedp.Do(ctx))
	b.must(chromedp.Listen(ctx, b.hear))
	call(b, log.Enable, cdp.Empty{})
	call(b, network.Enable, network.EnableParams{})
	call(b, emulation.SetDeviceMetricsOverride, emulation.SetDeviceMetricsOverrideParams{Width: int64(width), Height: 900, DeviceScaleFactor: 1})
	if !scripts {
		call(b, emulation.SetScriptExecutionDisabled, emulation.SetScriptExecutionDisabledParams{Value: true})
	}
	absolute, err := filepath.Abs(path)
	b.must(err)
	b.must(chromedp.Do(ctx, chromedp.Navigate("file://"+absolute), chromedp.Sleep(300*time.Millisecond)))
	return b
}

func (b *tab) must(err error) {
	b.Helper()
	if err != nil {
		b.Fatal(err)
	}
}

func call[P, R any](b *tab, c cdp.Command[P, R], p P) R {
	b.Helper()
	r, err := chromedp.Call(b.ctx, c, p)
	b.must(err)
	return r
}

func (b *tab) hear(event any) {
	b.guard.Lock()
	defer b.guard.Unlock()
	switch e := event.(type) {
	case *log.EventEntryAdded:
		b.said = append(b.said, e.Entry.Text)
	case *runtime.EventConsoleAPICalled:
		b.said = append(b.said, fmt.Sprint("console.", e.Type))
	case *runtime.EventExceptionThrown:
		b.said = append(b.said, e.ExceptionDetails.Text)
	case *network.EventRequestWillBeSent:
		b.loaded = append(b.loaded, e.Request.URL)
	}
}

// eval asks the page.
func eval[T any](b *tab, script string) T {
	b.Helper()
	v, err := chromedp.Run(b.ctx, chromedp.Evaluate[T](script))
	b.must(err)
	return v
}

// quiet checks that the page said nothing and loaded nothing but itself.
func (b *tab) quiet() {
	b.Helper()
	b.guard.Lock()
	defer b.guard.Unlock()
	if len(b.said) > 0 {
		b.Errorf("the browser says %q", b.said)
	}
	if len(b.loaded) != 1 || !strings.HasPrefix(b.loaded[0], "file://") {
		b.Errorf("loaded %q; only the file itself is due", b.loaded)
	}
}

// picture keeps what is seen, the given height of it.
func (b *tab) picture(name string, width, height float64) {
	b.Helper()
	folder := os.Getenv("PICTURES")
	if folder == "" {
		return
	}
	beyond := true
	r := call(b, page.CaptureScreenshot, page.CaptureScreenshotParams{
		CaptureBeyondViewport: &beyond, Clip: &page.Viewport{Width: width, Height: height, Scale: 1},
	})
	b.must(os.WriteFile(filepath.Join(folder, name+".png"), r.Data, 0o644))
}

// escaped lists the texts of pictures that leave their picture.
const escaped = `[...document.querySelectorAll("svg text")].filter(t => t.getClientRects().length).flatMap(t => {
	const a = t.getBoundingClientRect(), b = t.ownerSVGElement.getBoundingClientRect(), s = 1;
	return a.left < b.left - s || a.right > b.right + s || a.top < b.top - s || a.bottom > b.bottom + s ? [t.textContent] : [];
})`

// sideways is by how much the page is wider than its window, and what makes
// it so.
const sideways = `document.documentElement.scrollWidth - document.documentElement.clientWidth`

func TestBrowserShowsReport(t *testing.T) {
	for _, brief := range []string{small, "testdata/dish.yaml"} {
		path := filepath.Join(madeRun(t, brief), reportFile)
		for _, width := range []int{1280, 800, 320} {
			name := fmt.Sprintf("%s-%d", strings.TrimSuffix(filepath.Base(brief), ".yaml"), width)
			t.Run(name, func(t *testing.T) {
				b := show(t, path, width, true)
				if got := eval[[]string](b, escaped); len(got) > 0 {
					t.Errorf("labels leave their pictures: %q", got)
				}
				if got := eval[float64](b, sideways); got > 0 {
					t.Errorf("the page is %g pixels wider than its window of %d", got, width)
				}
				if n := eval[int](b, `document.querySelectorAll(".sheet").length - document.querySelectorAll(".sheet.open").length`); n != mostSheets-1 {
					t.Errorf("%d sheets are closed, all but one are due", n)
				}
				b.picture(name, float64(width), 5000)
				b.quiet()
			})
		}
	}
}

// The table in the browser is front.csv.
func TestBrowserTableIsFrontCSV(t *testing.T) {
	run := madeRun(t, small)
	b := show(t, filepath.Join(run, reportFile), 1280, true)
	shown := eval[[][]string](b, `[[...document.querySelectorAll("#table thead th[data-name]")].map(h => h.dataset.name),
		...[...document.querySelectorAll("#table tbody tr")].map(r => [...r.cells].filter(c => "v" in c.dataset).map(c => c.dataset.v))]`)
	sameAsCSV(t, run, shown)
	names := eval[[]string](b, `[...document.querySelectorAll("#axes select")[0].options].map(o => o.value)`)
	if len(names) < 10 {
		t.Errorf("only %q can be drawn", names)
	}
	b.quiet()
}

func sameAsCSV(t *testing.T, run string, shown [][]string) {
	t.Helper()
	f, err := os.Open(filepath.Join(run, "front.csv"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	want, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	if len(shown) != len(want) {
		t.Fatalf("%d rows, front.csv has %d", len(shown), len(want))
	}
	for i := range want {
		if strings.Join(shown[i], ",") != strings.Join(want[i], ",") {
			t.Errorf("row %d reads %q, front.csv %q", i, shown[i], want[i])
		}
	}
}

// A click on a point opens its sheet, one without a sheet lights its row; the
// same by keyboard; heads sort; the axes can be changed.
func TestBrowserFollowsThePointer(t *testing.T) {
	run := madeRun(t, small)
	b := show(t, filepath.Join(run, reportFile), 1280, true)
	const opened = `document.querySelector(".sheet.open").id`
	id := eval[string](b, `(() => { const d = [...document.querySelectorAll(".dot")].find(d => { const s = document.getElementById("sheet-" + d.dataset.id); return s && !s.classList.contains("open"); });
		const r = d.querySelector("circle:last-of-type").getBoundingClientRect(); scrollBy(0, r.top - 300); return d.dataset.id; })()`)
	spot := eval[[]float64](b, `(() => { const r = document.querySelector('.dot[data-id="`+id+`"] .halo').getBoundingClientRect(); return [r.left + r.width / 2, r.top + r.height / 2]; })()`)
	b.must(chromedp.Do(b.ctx, chromedp.MouseClickXY(spot[0], spot[1]), chromedp.Sleep(200*time.Millisecond)))
	hit := eval[string](b, `document.querySelector(".dot.lit").dataset.id`)
	if got := eval[string](b, opened); got != "sheet-"+hit {
		t.Errorf("a click on %s opened %s", hit, got)
	}
	if top := eval[float64](b, `document.querySelector(".sheet.open").getBoundingClientRect().top`); top < 0 || top > 200 {
		t.Errorf("the sheet stands at %g", top)
	}
	const bare = `[...document.querySelectorAll(".dot")].find(d => !document.getElementById("sheet-" + d.dataset.id))`
	eval[chromedp.Void](b, bare+`.dispatchEvent(new MouseEvent("click", {bubbles: true}))`)
	if !eval[bool](b, bare+`.dataset.id === document.querySelector("tr.lit").dataset.id && document.getElementById("picked").textContent.includes("no sheet")`) {
		t.Error("a click on a design without a sheet does not light its row")
	}

	// By keyboard: to the last point and back, then Enter.
	eval[chromedp.Void](b, `document.querySelector('.dot[tabindex="0"]').focus()`)
	b.must(chromedp.Do(b.ctx, chromedp.KeyEvent(kb.End), chromedp.Sleep(100*time.Millisecond)))
	last := eval[string](b, `document.activeElement.dataset.id`)
	if want := eval[string](b, `(() => { const c = [...document.querySelectorAll("#table thead th")].findIndex(h => h.dataset.name === "length_m");
		return [...document.querySelectorAll("#table tbody tr")].reduce((a, r) => +r.cells[c].dataset.v > +a.cells[c].dataset.v ? r : a).dataset.id; })()`); last != want {
		t.Errorf("End went to %s, the longest is %s", last, want)
	}
	b.must(chromedp.Do(b.ctx, chromedp.KeyEvent(kb.Enter), chromedp.Sleep(200*time.Millisecond)))
	if got := eval[string](b, opened); got != "sheet-"+last {
		t.Errorf("Enter on %s opened %s", last, got)
	}

	eval[chromedp.Void](b, `[...document.querySelectorAll(".sorter")].find(s => s.textContent.startsWith("length")).click()`)
	if !eval[bool](b, `(() => { const c = [...document.querySelectorAll("#table thead th")].findIndex(h => h.dataset.name === "length_m");
		const v = [...document.querySelectorAll("#table tbody tr")].map(r => +r.cells[c].dataset.v); return v.every((x, i) => !i || v[i - 1] <= x); })()`) {
		t.Error("the table is not sorted by length")
	}
	eval[chromedp.Void](b, `(() => { const s = document.querySelectorAll("#axes select")[1]; s.value = "mass_kg"; s.dispatchEvent(new Event("change")); })()`)
	if !eval[bool](b, `[...document.querySelectorAll("#live text")].some(t => t.textContent === "mass, g")`) {
		t.Error("the axis does not change")
	}
	if got := eval[[]string](b, escaped); len(got) > 0 {
		t.Errorf("labels leave their pictures: %q", got)
	}
	b.quiet()
}

// Without scripts everything is there, and the points are links.
func TestBrowserWithoutScripts(t *testing.T) {
	run := madeRun(t, small)
	b := show(t, filepath.Join(run, reportFile), 1280, false)
	n := eval[int](b, `[...document.querySelectorAll(".sheet")].filter(s => s.getClientRects().length).length`)
	links := eval[int](b, `[...document.querySelectorAll(".still .wide a")].filter(a => document.querySelector(a.getAttribute("href"))).length`)
	if n != mostSheets || links != mostSheets {
		t.Errorf("%d sheets are seen and %d points lead to one, %d are due", n, links, mostSheets)
	}
	if eval[bool](b, `document.querySelector("#live svg") !== null || document.querySelector(".controls").getClientRects().length > 0`) {
		t.Error("something of the script is seen")
	}
	if got := eval[[]string](b, escaped); len(got) > 0 {
		t.Errorf("labels leave their pictures: %q", got)
	}
	b.picture("report-no-scripts", 1280, 3000)
	b.quiet()
}

// On paper every sheet is there, nothing is cut off, no control is seen, and
// no sheet takes two pages.
func TestBrowserOnPaper(t *testing.T) {
	run := madeRun(t, "testdata/dish.yaml")
	b := show(t, filepath.Join(run, reportFile), 690, true)
	call(b, emulation.SetEmulatedMedia, emulation.SetEmulatedMediaParams{Media: "print"})
	if n := eval[int](b, `[...document.querySelectorAll(".sheet")].filter(s => s.getClientRects().length).length`); n != mostSheets {
		t.Errorf("%d sheets are printed, %d are due", n, mostSheets)
	}
	if eval[bool](b, `["nav", ".controls", "#live", "label[for=all]"].some(s => document.querySelector(s).getClientRects().length > 0)`) {
		t.Error("a control is printed")
	}
	if got := eval[[]string](b, escaped); len(got) > 0 {
		t.Errorf("labels leave their pictures: %q", got)
	}
	if got := eval[float64](b, sideways); got > 0 {
		t.Errorf("the page is %g pixels wider than the paper", got)
	}
	pdf, err := chromedp.Run(b.ctx, chromedp.PrintToPDF(chromedp.PDFPaper(chromedp.PaperA4), chromedp.PDFPrintBackground(), func(p *page.PrintToPDFParams) {
		css := true
		p.PreferCSSPageSize = &css
	}))
	b.must(err)
	if n := len(regexp.MustCompile(`/Type /Page\b`).FindAll(pdf, -1)); n < mostSheets || n >= 2*mostSheets {
		t.Errorf("%d sheets and the rest take %d pages", mostSheets, n)
	}
	if folder := os.Getenv("PICTURES"); folder != "" {
		b.must(os.WriteFile(filepath.Join(folder, "report.pdf"), pdf, 0o644))
	}
	b.quiet()
}
