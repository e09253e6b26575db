package main

import (
	"bytes"
	"context"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/chromedp/cdproto/emulation"
	"github.com/chromedp/chromedp"

	"squint/cmd/squint/internal/report"
	"squint/glare/falsecolour"
)

// hostile is a mesh group named to break out of the page.
const hostile = `</script><script>window.broken=1</script>`

// pagesProject is the small project in use every day, with two designs, two
// viewpoints, and that group.
func pagesProject(t *testing.T) string {
	t.Helper()
	dir := t.TempDir()
	if err := writeSmall(dir); err != nil {
		t.Fatal(err)
	}
	p := smallProject
	for _, r := range [][2]string{
		{`title = "Small room"`, `title = "Small <room>"`},
		{"[weather]", "[[alternative]]\nname = \"bare\"\n\n[[alternative]]\nname = \"shelf <b>\"\nabout = \"a mirrored shelf\"\n\n[weather]"},
		{`days = ["wed"]`, `days = ["mon", "tue", "wed", "thu", "fri", "sat", "sun"]`},
		{`from = "11:00"`, `from = "09:00"`},
		{`to = "12:00"`, `to = "16:00"`},
		{"[[work_plane]]", "[[viewpoint]]\nname = \"window\"\nposition_m = [2, 2.5, 1.2]\nazimuth_deg = 180\n\n[[work_plane]]"},
		{"[simulation]", "[[finish]]\nname = \"polished\"\ntype = \"mirror\"\nspecular_reflectance = 0.85\n\n[[light_shelf]]\nname = \"shelf\"\nopening = \"window\"\nonly = [\"shelf <b>\"]\nheight_m = 1\ninside_depth_m = 0.4\noutside_depth_m = 0.4\ntop = \"polished\"\nunderside = \"white\"\n\n[criteria]\nglare = \"high\"\n\n[simulation]"},
	} {
		if !strings.Contains(p, r[0]) {
			t.Fatalf("small project: got no %q in it", r[0])
		}
		p = strings.Replace(p, r[0], r[1], 1)
	}
	room := strings.Replace(smallRoom(), "g ceiling", "g "+hostile, 1)
	for name, text := range map[string]string{"project.toml": p, "room.obj": room} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	var out, errs bytes.Buffer
	if st := run(context.Background(), testHost(&out, &errs), []string{"check", filepath.Join(dir, "project.toml"), "--out", filepath.Join(dir, "results")}); st != statusDone {
		t.Fatalf("check: got status %d: %s", st, errs.String())
	}
	return filepath.Join(dir, "results")
}

// summaryOf is what the tests need of a summary.json.
type summaryOf struct {
	Outcome  string
	Verdicts []struct{ Text, Outcome string }
	Views    []struct {
		WorstHour *struct{ Record int } `json:"worst_hour"`
	}
}

func TestPageInABrowser(t *testing.T) {
	if testing.Short() {
		t.Skip("starts a browser")
	}
	results := pagesProject(t)
	page := filepath.Join(results, report.SheetFile)
	b := openTab(t, page)

	t.Run("verdicts are those of summary.json", func(t *testing.T) {
		for i, folder := range []string{"bare", "shelf-b"} {
			data, err := os.ReadFile(filepath.Join(results, folder, report.SummaryFile))
			if err != nil {
				t.Fatal(err)
			}
			var s summaryOf
			if err := json.Unmarshal(data, &s); err != nil {
				t.Fatal(err)
			}
			got := eval[[]string](t, b, fmt.Sprintf(`[...document.querySelectorAll('.design[data-design="%d"] .verdicts li')].map(e=>e.querySelector('.word').textContent+'|'+e.querySelector('.finding').textContent)`, i))
			var want []string
			for _, v := range s.Verdicts {
				want = append(want, v.Outcome+"|"+v.Text)
			}
			if !slices.Equal(got, want) {
				t.Errorf("%s: got %q, want %q", folder, got, want)
			}
			if o := eval[string](t, b, fmt.Sprintf(`document.querySelector('.design[data-design="%d"] .outcome .word').textContent`, i)); o != s.Outcome {
				t.Errorf("%s: outcome: got %q, want %q", folder, o, s.Outcome)
			}
		}
	})

	t.Run("a click in the year is followed by all", func(t *testing.T) {
		before := pictures(t, b)
		// The page opens with the worst hour; a day three months on is another.
		const pick = `(()=>{const f=squint.state.record, y=squint.lit.find(r=>Math.abs(r-f)>24*90); const [x,z]=squint.pointOf(y); const c=document.getElementById('c-year'); c.scrollIntoView({block:'center',behavior:'instant'}); const q=c.getBoundingClientRect(); return [q.left+x,q.top+z,y]})()`
		at := eval[[]float64](t, b, pick)
		b.do(t, chromedp.MouseClickXY(at[0], at[1]))
		b.settle(t)
		if got := eval[int](t, b, "squint.state.record"); got != int(at[2]) {
			t.Errorf("chosen record: got %d, want %d", got, int(at[2]))
		}
		after := pictures(t, b)
		for _, name := range []string{"c-year", "c-plan", "c-eye", "c-room"} {
			if before[name] == after[name] {
				t.Errorf("%s: got the same drawing as before the click", name)
			}
		}
	})

	t.Run("readings are those of the series", func(t *testing.T) { readings(t, b, results) })
	t.Run("everything by keyboard", func(t *testing.T) { byKeyboard(t, b) })
	t.Run("names stay text", func(t *testing.T) {
		if eval[bool](t, b, "'broken' in window") {
			t.Error("a mesh group's name was run as a script")
		}
		if !eval[bool](t, b, fmt.Sprintf("JSON.parse(document.getElementById('data').textContent).designs[0].room.parts.some(p=>p.name.includes(%q))", "</script>")) {
			t.Error("the group's name is not in the page's data")
		}
		if got := eval[string](t, b, "document.querySelector('h1').textContent"); got != "Small <room>" {
			t.Errorf("title: got %q, want %q", got, "Small <room>")
		}
	})
	t.Run("accessible", func(t *testing.T) { accessible(t, b) })
	t.Run("widths", func(t *testing.T) { widths(t, b) })
	t.Run("paper", func(t *testing.T) { onPaper(t, b) })
	if len(b.complaints) > 0 {
		t.Errorf("the browser complained: %q", b.complaints)
	}
	if len(b.requests) > 0 {
		t.Errorf("the page asked for %q, want nothing from outside", b.requests)
	}
}

// pictures are fingerprints of the canvases.
func pictures(t *testing.T, b *tab) map[string]string {
	t.Helper()
	return eval[map[string]string](t, b, `(()=>{const o={}; for(const c of document.querySelectorAll('canvas[id]')){const u=c.toDataURL(); let h=0; for(let i=0;i<u.length;i++)h=(h*31+u.charCodeAt(i))|0; o[c.id]=String(h)} return o})()`)
}

// readings compares what the year chart says, and how it is coloured, with
// hours-views.csv.
func readings(t *testing.T, b *tab, results string) {
	data, err := os.ReadFile(filepath.Join(results, "shelf-b", report.ViewsFile))
	if err != nil {
		t.Fatal(err)
	}
	rows, head := csvRows(t, data)
	eval[bool](t, b, "squint.show({design:1,view:1,series:'dgp'}),true")
	b.settle(t)
	checked := 0
	for _, row := range rows {
		if row[head["DGP: window"]] == "" {
			continue
		}
		record, dgp := number(t, row[head["record"]]), number(t, row[head["DGP: window"]])
		if dgp == 0 {
			continue
		}
		if checked++; checked%29 != 1 {
			continue
		}
		eval[bool](t, b, fmt.Sprintf("squint.show({record:%d}),true", int(record)))
		b.settle(t)
		text := eval[string](t, b, "document.getElementById('r-year').textContent")
		m := regexp.MustCompile(`DGP ([0-9.]+) ± ([0-9.]+), ([0-9\x{202f}]+) lx at the eye`).FindStringSubmatch(text)
		if m == nil {
			t.Fatalf("record %g: got %q, want a DGP in it", record, text)
		}
		// Rounded to the digits that are shown, on the page and in the file.
		if got := number(t, m[1]); math.Abs(got-dgp) > 0.0006+1e-9 {
			t.Errorf("record %g: got DGP %g, want %g", record, got, dgp)
		}
		if got, want := number(t, strings.ReplaceAll(m[3], "\u202f", "")), number(t, row[head["Ev lx: window"]]); math.Abs(got-want) > 1+1e-9 {
			t.Errorf("record %g: got %g lx, want %g", record, got, want)
		}
		eval[bool](t, b, "squint.show({record:0}),true")
		b.settle(t)
		c := eval[[]float64](t, b, fmt.Sprintf("(()=>{const [x,y]=squint.pointOf(%d),c=document.getElementById('c-year'),k=c.width/c.clientWidth; return [...c.getContext('2d').getImageData(x*k,y*k,1,1).data]})()", int(record)))
		// The scale of the chart's legend: 0.15 to 0.6.
		want := falsecolour.Viridis.At((dgp - 0.15) / 0.45)
		if far := math.Abs(c[0]-float64(want.R)) + math.Abs(c[1]-float64(want.G)) + math.Abs(c[2]-float64(want.B)); far > 12 {
			t.Errorf("record %g, DGP %.4f: drawn in %v, want %v", record, dgp, c, want)
		}
	}
	if checked < 40 {
		t.Fatalf("got %d hours to compare, want more", checked)
	}
}

func number(t *testing.T, s string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// csvRows reads a file of the results: comment lines, a head, rows.
func csvRows(t *testing.T, data []byte) (rows [][]string, head map[string]int) {
	t.Helper()
	r := csv.NewReader(bytes.NewReader(data))
	r.Comment = '#'
	all, err := r.ReadAll()
	if err != nil || len(all) < 2 {
		t.Fatalf("got %d rows, %v", len(all), err)
	}
	head = map[string]int{}
	for i, name := range all[0] {
		head[name] = i
	}
	return all[1:], head
}

// byKeyboard walks the page by the tabulator key alone and wants to come by
// every control, and the year's arrows to move the hour.
func byKeyboard(t *testing.T, b *tab) {
	eval[bool](t, b, "document.activeElement.blur(), window.scrollTo(0,0), true")
	met := map[string]bool{}
	for range 120 {
		b.do(t, chromedp.KeyEvent("\t"))
		met[eval[string](t, b, "document.activeElement.id||document.activeElement.tagName")] = true
	}
	for _, id := range eval[[]string](t, b, "[...document.querySelectorAll('select[id],input[id],button[id],canvas[tabindex]')].filter(e=>e.getClientRects().length).map(e=>e.id)") {
		if !met[id] {
			t.Errorf("%s: not reached by keyboard", id)
		}
	}
	eval[bool](t, b, "document.getElementById('c-year').focus(),squint.show({record:4000}),true")
	b.settle(t)
	for key, want := range map[string]int{"ArrowRight": 4024, "ArrowUp": 4001} {
		eval[bool](t, b, "squint.show({record:4000}),true")
		eval[bool](t, b, fmt.Sprintf("document.activeElement.dispatchEvent(new KeyboardEvent('keydown',{key:%q,bubbles:true,cancelable:true}))||true", key))
		if got := eval[int](t, b, "squint.state.record"); got != want {
			t.Errorf("%s: got record %d, want %d", key, got, want)
		}
	}
}

// accessible runs axe-core, an audit of accessibility, in light and in dark.
func accessible(t *testing.T, b *tab) {
	axe, err := os.ReadFile(filepath.Join("internal", "page", "web", "node_modules", "axe-core", "axe.min.js"))
	if err != nil {
		if os.Getenv("SQUINT_REQUIRE_BROWSER") != "" {
			t.Fatal("got no axe-core, want it; run npm ci in cmd/squint/internal/page/web")
		}
		t.Skip("axe-core is not there (npm ci in cmd/squint/internal/page/web): the page is not audited")
	}
	eval[bool](t, b, string(axe)+";true")
	for _, scheme := range []string{"light", "dark"} {
		b.scheme(t, scheme)
		b.settle(t)
		found := eval[[]string](t, b, `axe.run().then(r=>r.violations.filter(v=>v.impact==='serious'||v.impact==='critical').map(v=>v.id+': '+v.help+' '+v.nodes.slice(0,4).map(n=>n.target.join(' ')+' '+n.failureSummary).join(' | ')))`)
		for _, f := range found {
			t.Errorf("%s: %s", scheme, f)
		}
		// The twin: an audit that finds nothing in a planted fault is none.
		planted := eval[int](t, b, `(async()=>{const e=document.createElement('button'); document.querySelector('main').append(e); const r=await axe.run(); e.remove(); return r.violations.filter(v=>v.id==='button-name').length})()`)
		if planted != 1 {
			t.Error("a button without a name was not found")
		}
	}
	b.scheme(t, "light")
}

// widths wants the page to fit, and keeps its picture, at three widths and in
// the dark.
func widths(t *testing.T, b *tab) {
	eval[bool](t, b, "squint.show({design:0,view:1,record:squint.lit[40]}),true")
	for _, c := range []struct {
		width  int64
		scheme string
	}{{360, "light"}, {1280, "light"}, {1280, "dark"}, {2560, "light"}} {
		b.do(t, chromedp.EmulateViewport(c.width, 1000))
		b.scheme(t, c.scheme)
		b.settle(t)
		if got := eval[int64](t, b, "document.documentElement.scrollWidth"); got > c.width {
			t.Errorf("%d px: the page is %d px wide", c.width, got)
		}
		shot, err := chromedp.Run(b.ctx, chromedp.FullScreenshot(100))
		if err != nil {
			t.Fatal(err)
		}
		keep(t, fmt.Sprintf("page-%d-%s.png", c.width, c.scheme), shot)
	}
	b.do(t, chromedp.EmulateViewport(1280, 900))
}

// onPaper prints to A4 and counts the pages.
func onPaper(t *testing.T, b *tab) {
	pdf, err := chromedp.Run(b.ctx, chromedp.PrintToPDF(chromedp.PDFPreferCSSPageSize(), chromedp.PDFPrintBackground()))
	if err != nil {
		t.Fatal(err)
	}
	keep(t, "page.pdf", pdf)
	// Verdict with plan, year with view, room, alternatives, method: each of
	// the last four begins a page.
	n := len(regexp.MustCompile(`/Type\s*/Page\b`).FindAll(pdf, -1))
	if n < 5 || n > 9 {
		t.Errorf("got %d pages, want 5 to 9", n)
	}
	if !bytes.Contains(pdf, []byte("/MediaBox [0 0 594")) && !bytes.Contains(pdf, []byte("/MediaBox [0 0 595")) {
		t.Error("got no A4 page")
	}
}

// scheme makes the browser prefer light or dark.
func (b *tab) scheme(t *testing.T, name string) {
	t.Helper()
	_, err := chromedp.Call(b.ctx, emulation.SetEmulatedMedia, emulation.SetEmulatedMediaParams{Features: []*emulation.MediaFeature{{Name: "prefers-color-scheme", Value: name}}})
	if err != nil {
		t.Fatal(err)
	}
}

// Without WebGL the page says so and keeps the rest.
func TestPageWithoutWebGL(t *testing.T) {
	if testing.Short() {
		t.Skip("starts a browser")
	}
	results := pagesProject(t)
	b := openTab(t, filepath.Join(results, report.SheetFile), chromedp.Flag("disable-3d-apis", true))
	if got := eval[string](t, b, "document.getElementById('r-room').textContent"); !strings.Contains(got, "WebGL") || !strings.Contains(got, "plan") {
		t.Errorf("without WebGL: got %q, want a sentence that points to the plan", got)
	}
	if eval[int](t, b, "document.getElementById('c-plan').width") < 100 {
		t.Error("without WebGL: the plan is not drawn")
	}
}

// report makes the same page again, and refuses what is no results folder.
func TestReportCommand(t *testing.T) {
	if testing.Short() {
		t.Skip("takes seconds")
	}
	results := pagesProject(t)
	page := filepath.Join(results, report.SheetFile)
	first, err := os.ReadFile(page)
	if err != nil {
		t.Fatal(err)
	}
	var out, errs bytes.Buffer
	do := func(args ...string) status {
		out.Reset()
		errs.Reset()
		return run(context.Background(), testHost(&out, &errs), append([]string{"report"}, args...))
	}
	if st := do(results); st != statusDone || strings.TrimSpace(out.String()) != page {
		t.Errorf("report: got status %d, %q, %q, want the page's name", st, out.String(), errs.String())
	}
	again, err := os.ReadFile(page)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(first, again) {
		t.Error("the page made again differs")
	}
	if st := do(filepath.Join(results, "bare")); st != statusDone {
		t.Errorf("report of one design: got status %d: %s", st, errs.String())
	}
	if st := do(results, "--alternative", "nothing"); st != statusUsage || !strings.Contains(errs.String(), `got "nothing", want one of bare, shelf <b>`) {
		t.Errorf("unknown alternative: got status %d, %q", st, errs.String())
	}
	empty := t.TempDir()
	if st := do(empty); st != statusUsage || !strings.Contains(errs.String(), "want a folder of results") {
		t.Errorf("empty folder: got status %d, %q", st, errs.String())
	}
	if err := os.WriteFile(filepath.Join(empty, report.SheetDataFile), []byte("no zip"), 0o666); err != nil {
		t.Fatal(err)
	}
	if st := do(empty); st != statusUsage || !strings.Contains(errs.String(), "run squint check again") {
		t.Errorf("damaged data: got status %d, %q", st, errs.String())
	}
}
