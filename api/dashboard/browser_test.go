package dashboard_test

import (
	"bytes"
	"context"
	"flag"
	"fmt"
	"image"
	"image/png"
	"net/http/httptest"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/chromedp/cdproto/emulation"
	"github.com/chromedp/chromedp"

	"spanwright/estimate/document"
)

// browser is the one Chromium of this package's tests; each test has a tab.
var browser context.Context

func TestMain(m *testing.M) {
	options := append(slices.Clone(chromedp.DefaultExecAllocatorOptions[:]), chromedp.Flag("no-proxy-server", true))
	allocator, stop := chromedp.NewExecAllocator(context.Background(), options...)
	ctx, end := chromedp.NewContext(allocator)
	if err := chromedp.Do(ctx); err != nil {
		fmt.Fprintln(os.Stderr, "the tests of the pages need a headless Chromium (Debian: apt-get install chromium):", err)
		os.Exit(1)
	}
	browser = ctx
	code := m.Run()
	end()
	stop()
	os.Exit(code)
}

// tab opens a tab of its own cookies and collects what the browser complains of.
func tab(t *testing.T) (context.Context, func() []string) {
	t.Helper()
	ctx, cancel := chromedp.NewContext(browser, chromedp.WithNewBrowserContext())
	t.Cleanup(cancel)
	ctx, stop := context.WithTimeout(ctx, 3*time.Minute)
	t.Cleanup(stop)
	var lock sync.Mutex
	var complaints []string
	messages := chromedp.Console(ctx)
	go func() {
		for m, err := range messages {
			if err != nil {
				return
			}
			lock.Lock()
			complaints = append(complaints, m.Text)
			lock.Unlock()
		}
	}()
	return ctx, func() []string {
		lock.Lock()
		defer lock.Unlock()
		return slices.Clone(complaints)
	}
}

// must fails the test on the error of a step in the browser.
func must[T any](t *testing.T, what string) func(T, error) T {
	t.Helper()
	return func(v T, err error) T {
		t.Helper()
		if err != nil {
			t.Fatalf("%s: %v", what, err)
		}
		return v
	}
}

func signInto(t *testing.T, ctx context.Context, s *httptest.Server) {
	t.Helper()
	if err := chromedp.Do(ctx, chromedp.Navigate(s.URL+"/"), chromedp.SendKeys(chromedp.CSS("#token"), token)); err != nil {
		t.Fatal(err)
	}
	follow(t, ctx, chromedp.Submit(chromedp.CSS("#token")), ".who")
}

// follow takes a step that leads to another page and waits until that page is
// loaded and shows what is named.
func follow(t *testing.T, ctx context.Context, step chromedp.Action[chromedp.Void], shows string) {
	t.Helper()
	if _, err := chromedp.RunResponse(ctx, step); err != nil {
		t.Fatal(err)
	}
	if err := chromedp.Do(ctx, chromedp.WaitVisible(chromedp.CSS(shows))); err != nil {
		t.Fatal(err)
	}
}

// full is a fixture with everything that the pages show.
func full(t *testing.T) *fixture {
	t.Helper()
	f := newFixture()
	bare := f.addProject("Brackwater pan house gantry", "EUR")
	f.addScheme(bare, "Portal frames")
	p := f.addProject("Brackwater loading quay", "EUR")
	d := demo(t)
	tower := f.addScheme(p, "Tower at the end")
	d.Job.Scheme = tower.Name
	f.addEstimate(t, tower, negative(t, d))
	f.addScheme(p, "Several supports")
	inner := f.addScheme(p, "Inner support")
	f.addEstimate(t, inner, demo(t))
	return f
}

func TestSignInListAndProject(t *testing.T) {
	f := full(t)
	f.sessions = map[string]bool{}
	s := serve(t, f)
	ctx, complaints := tab(t)
	signInto(t, ctx, s)
	if got := must[string](t, "location")(chromedp.Run(ctx, chromedp.Location())); got != s.URL+"/" {
		t.Errorf("after signing in at %s, want the list", got)
	}
	follow(t, ctx, chromedp.Click(chromedp.CSS("tbody tr a")), ".headline")
	if got := must[string](t, "heading")(chromedp.Run(ctx, chromedp.Evaluate[string](`document.querySelector("h1").textContent`))); got != "Brackwater loading quay" {
		t.Errorf("heading %q", got)
	}
	if err := chromedp.Do(ctx, chromedp.Click(chromedp.CSS("tr.doubted + tr.more summary")), chromedp.WaitVisible(chromedp.CSS("details[open] table"))); err != nil {
		t.Fatal(err)
	}
	// The caution is in sight wherever the reader is in the scheme.
	visible := must[bool](t, "caution")(chromedp.Run(ctx, chromedp.Evaluate[bool](
		`(() => { document.getElementById("assumptions").scrollIntoView({behavior: "instant"});
		const r = document.querySelector(".caution").getBoundingClientRect(); return r.top >= 0 && r.bottom <= innerHeight && r.height > 0 })()`)))
	if !visible {
		t.Error("the caution is out of sight in the assumption register")
	}
	follow(t, ctx, chromedp.Click(chromedp.CSS(".who button")), "#token")
	if len(f.sessions) != 0 {
		t.Error("signing out left the session on the server")
	}
	if c := complaints(); len(c) > 0 {
		t.Errorf("the browser complains: %s", strings.Join(c, "\n"))
	}
}

// negative turns a document into one whose base lies above its chosen
// percentile: the chosen percentile becomes P10.
func negative(t *testing.T, d document.Document) document.Document {
	t.Helper()
	d.Totals.Confidence = 0.1
	d.Totals.AtConfidence = decimal(t, "591150.02")
	d.Totals.Contingency = d.Totals.AtConfidence.Sub(d.Totals.Base)
	return d
}

// TestScreenshots draws every page in both themes and two widths, and measures
// that no page is wider than its window, that nothing stands over something
// else, that no text is tiny, and that the themes differ.
func TestScreenshots(t *testing.T) {
	f := full(t)
	project := "/projects/" + f.projects[0].ID.String()
	odd := f.addProject(longWord, "EUR")
	f.addEstimate(t, f.addScheme(odd, nasty), hostile(t, demo(t)))
	s := serve(t, f)
	ctx, complaints := tab(t)
	if err := chromedp.Do(ctx, chromedp.Navigate(s.URL+"/sign-in")); err != nil {
		t.Fatal(err)
	}
	shots := t.ArtifactDir()
	for _, theme := range []string{"light", "dark"} {
		media := emulation.SetEmulatedMediaParams{Features: []*emulation.MediaFeature{{Name: "prefers-color-scheme", Value: theme}}}
		if _, err := chromedp.Call(ctx, emulation.SetEmulatedMedia, media); err != nil {
			t.Fatal(err)
		}
		for _, width := range []int64{1280, 390} {
			for _, p := range []struct{ name, path string }{
				{"sign-in", "/sign-in"}, {"projects", "/"}, {"project", project},
				{"negative", project + "?scheme=" + f.estimates[2].Scheme.String()},
				{"no-estimate", project + "?scheme=" + f.schemes[2].ID.String()},
				{"hostile", "/projects/" + odd.ID.String()},
			} {
				name := fmt.Sprintf("%s-%s-%d", p.name, theme, width)
				if p.name == "projects" && theme == "light" && width == 1280 {
					signInto(t, ctx, s)
				}
				if err := chromedp.Do(ctx, chromedp.EmulateViewport(width, 900), chromedp.Navigate(s.URL+p.path)); err != nil {
					t.Fatal(err)
				}
				open := chromedp.Evaluate[bool](`document.querySelectorAll("tr.doubted + tr.more details").forEach(d => d.open = true), true`)
				must[bool](t, name)(chromedp.Run(ctx, open))
				measure(t, ctx, name)
				shot := must[[]byte](t, name)(chromedp.Run(ctx, picture()))
				if err := os.WriteFile(filepath.Join(shots, name+".png"), shot, 0o644); err != nil {
					t.Fatal(err)
				}
				checkShot(t, name, shot, int(width), theme == "dark")
			}
		}
	}
	if c := complaints(); len(c) > 0 {
		t.Errorf("the browser complains: %s", strings.Join(c, "\n"))
	}
}

// picture takes what is in the window; with -artifacts the whole page, for people
// to look at, which takes ten times as long.
func picture() chromedp.Action[[]byte] {
	if f := flag.Lookup("test.artifacts"); f != nil && f.Value.String() == "true" {
		return chromedp.FullScreenshot(100)
	}
	return chromedp.CaptureScreenshot()
}

// measure asks the browser for faults of the layout.
func measure(t *testing.T, ctx context.Context, name string) {
	t.Helper()
	faults := must[[]string](t, name)(chromedp.Run(ctx, chromedp.Evaluate[[]string](`(() => {
		const out = [], seen = e => e.checkVisibility() && !e.closest(".unseen, .skip");
		if (document.documentElement.scrollWidth > innerWidth) out.push("the page is " + document.documentElement.scrollWidth + " wide");
		for (const e of document.querySelectorAll("main *, header *")) {
			const own = [...e.childNodes].some(n => n.nodeType === 3 && n.data.trim());
			if (!own || !seen(e) || e.closest("title, desc")) continue;
			const svg = e.closest("figure svg");
			const scale = svg ? svg.getBoundingClientRect().width / svg.viewBox.baseVal.width : 1;
			const size = parseFloat(getComputedStyle(e).fontSize) * scale;
			if (size < 11) out.push("text of " + size.toFixed(1) + " px: " + e.textContent.trim().slice(0, 30));
		}
		for (const row of document.querySelectorAll("table tr")) {
			let end = -Infinity;
			for (const c of row.children) {
				if (!seen(c)) continue;
				const range = document.createRange(); range.selectNodeContents(c);
				const r = range.getBoundingClientRect();
				if (r.width && r.left < end - 0.5) out.push("cells overlap: " + c.textContent.trim().slice(0, 30));
				if (r.width) end = r.right;
			}
		}
		for (const e of document.querySelectorAll(".scroll")) {
			if (e.scrollWidth > e.clientWidth && e.tabIndex !== 0) out.push("a box scrolls without the keyboard");
		}
		return out;
	})()`)))
	for _, f := range faults {
		t.Errorf("%s: %s", name, f)
	}
}

// checkShot checks a picture's width and that its ground is light or dark.
func checkShot(t *testing.T, name string, data []byte, width int, dark bool) {
	t.Helper()
	img, err := png.Decode(bytes.NewReader(data))
	if err != nil {
		t.Fatalf("%s: %v", name, err)
	}
	if got := img.Bounds().Dx(); got != width {
		t.Errorf("%s: %d px wide, want %d", name, got, width)
	}
	if got := brightness(img, image.Pt(2, img.Bounds().Dy()-3)); (got < 0.2) != dark || (got > 0.9) == dark {
		t.Errorf("%s: the ground has brightness %.2f", name, got)
	}
}

func brightness(img image.Image, p image.Point) float64 {
	r, g, b, _ := img.At(p.X, p.Y).RGBA()
	return float64(r+g+b) / 3 / 0xffff
}

func TestPrint(t *testing.T) {
	f := full(t)
	s := serve(t, f)
	ctx, _ := tab(t)
	signInto(t, ctx, s)
	if err := chromedp.Do(ctx, chromedp.Navigate(s.URL+"/projects/"+f.projects[0].ID.String())); err != nil {
		t.Fatal(err)
	}
	pdf := must[[]byte](t, "print")(chromedp.Run(ctx, chromedp.PrintToPDF(chromedp.PDFPaper(chromedp.PaperA4))))
	if !bytes.HasPrefix(pdf, []byte("%PDF-")) || len(pdf) < 20_000 {
		t.Errorf("a print of %d bytes", len(pdf))
	}
	if err := os.WriteFile(filepath.Join(t.ArtifactDir(), "project.pdf"), pdf, 0o644); err != nil {
		t.Fatal(err)
	}
}

// TestKeyboard walks from the top of the page by Tab: the skip link comes first
// and is seen once it has the focus.
func TestKeyboard(t *testing.T) {
	s := serve(t, full(t))
	ctx, _ := tab(t)
	signInto(t, ctx, s)
	if err := chromedp.Do(ctx, chromedp.Navigate(s.URL+"/"), chromedp.KeyEvent("\t")); err != nil {
		t.Fatal(err)
	}
	got := must[string](t, "focus")(chromedp.Run(ctx, chromedp.Evaluate[string](
		`(() => { const e = document.activeElement, r = e.getBoundingClientRect();
		return e.className + " " + (r.top >= 0) + " " + getComputedStyle(e).outlineStyle })()`)))
	if got != "skip true solid" {
		t.Errorf("the first Tab gives %q, want the skip link in sight with an outline", got)
	}
}
