package main

import (
	"bytes"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"testing"
	"time"

	"github.com/chromedp/chromedp"
	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/internal/film"
	"squint/cmd/squint/internal/page"
	"squint/cmd/squint/internal/study"
	"squint/glare/verdict"
	"squint/scene"
	"squint/scene/project"
	"squint/scene/view"
	"squint/trace/annual"
	"squint/trace/coeff"
)

// A floor of 320 viewpoints must stay below 40 MB and open in 3 s. Its room,
// year and pictures are made up: smooth patterns, a grain of 3 %, as samples
// have, and a patch of sun that wanders.
func TestPageOfAFloor(t *testing.T) {
	if os.Getenv("SQUINT_LONG") == "" {
		t.Skip("set SQUINT_LONG=1: takes a minute")
	}
	const views, pixels, rank = 320, 24, 8
	dir := t.TempDir()
	r, w, inside := madeUpYear(t, dir, pixels)
	for i := range views {
		r.Views = append(r.Views, floorView(r, i, w, inside, rank, 1))
	}
	var b bytes.Buffer
	if err := page.Write(&b, []*page.Archive{page.Build(r, page.Words{Title: "Floor", Outcome: "not met"})}, page.Options{}); err != nil {
		t.Fatal(err)
	}
	t.Logf("%d viewpoints: %.1f MB", views, float64(b.Len())/1e6)
	if b.Len() > 40e6 {
		t.Errorf("got a page of %d bytes, want at most 40 MB", b.Len())
	}
	file := filepath.Join(dir, "page.html")
	if err := os.WriteFile(file, b.Bytes(), 0o666); err != nil {
		t.Fatal(err)
	}
	tab := openTab(t, file)
	began := time.Now()
	tab.do(t, chromedp.Navigate("file://"+file))
	eval[bool](t, tab, "squint.ready")
	opened := time.Since(began)
	took := eval[float64](t, tab, `(async()=>{const t=performance.now(); for(let i=0;i<20;i++){Object.assign(squint.state,{record:squint.lit[100+i]}); await squint.draw()} return (performance.now()-t)/20})()`)
	t.Logf("opened in %.1f s, a step of the hour %.0f ms", opened.Seconds(), took)
	if opened > 3*time.Second && os.Getenv("SQUINT_TIMED") != "" {
		t.Errorf("opened in %v, want 3 s", opened)
	}
}

// madeUpYear is a result without views of the small project, in use on weekdays
// from 8 to 18 h, with a view of so many pixels and the pixels inside of it.
func madeUpYear(t *testing.T, dir string, pixels int) (*study.Result, view.View, []int32) {
	t.Helper()
	if err := writeSmall(dir); err != nil {
		t.Fatal(err)
	}
	fsys := os.DirFS(dir)
	all, err := project.LoadAll(fsys, "project.toml")
	if err != nil {
		t.Fatal(err)
	}
	p := all[0]
	p.Occupancy.Days, p.Occupancy.FromH, p.Occupancy.ToH = [7]bool{true, true, true, true, true}, 8, 18
	in, err := study.Prepare(fsys, p, 2)
	if err != nil {
		t.Fatal(err)
	}
	r := &study.Result{Project: p, Scene: in.Scene, Climate: in.Climate, Calendar: in.Calendar, Occupied: in.Occupied, Standings: []string{""}, Stood: []*scene.Scene{in.Scene}, Standing: make([]int16, 8760), Outcome: verdict.NotMet}
	w, err := view.New(r3.Vec{X: 2, Y: 2, Z: 1.2}, r3.Vec{Y: -1}, r3.Vec{Z: 1}, view.Equidistant, math.Pi, pixels, pixels)
	if err != nil {
		t.Fatal(err)
	}
	var inside []int32
	for i := range pixels * pixels {
		if _, ok := w.PixelRay(i%pixels, i/pixels); ok {
			inside = append(inside, int32(i))
		}
	}
	return r, w, inside
}

// floorView makes up a view's year, with perHour records to the hour.
func floorView(r *study.Result, i int, w view.View, inside []int32, rank, perHour int) study.ViewResult {
	random := rand.New(rand.NewPCG(7, uint64(i)))
	n := 8760 * perHour
	v := study.ViewResult{Viewpoint: scene.Viewpoint{Name: "place " + string(rune('A'+i/26)) + string(rune('a'+i%26)), Position: r3.Vec{X: float64(i % 20), Y: float64(i / 20), Z: 1.2}, Direction: r3.Vec{Y: -1}},
		DGP: make([]float32, n), StdErr: make([]float32, n), Ev: make([]float32, n), Cause: make([]int16, n), Asked: -1}
	var records []int
	for _, h := range r.Occupied {
		records = append(records, h)
		v.DGP[h], v.StdErr[h], v.Ev[h], v.Cause[h] = float32(0.2+0.3*random.Float64()), float32(0.002*random.Float64()), float32(3000*random.Float64()), -1
	}
	roll := film.NewRoll(len(inside), len(records), 0.05, 1e6)
	all, sun := make([]float32, len(inside)), make([]float32, len(inside))
	for k, h := range records {
		day, hour := float64(h/24/perHour)/365*2*math.Pi, float64(h%(24*perHour))/24/float64(perHour)*2*math.Pi
		for p, px := range inside {
			x, y := float64(int(px)%w.Width)/float64(w.Width), float64(int(px)/w.Width)/float64(w.Width)
			rest := math.Exp(5 + math.Sin(5*x+float64(i))*math.Cos(day) + math.Cos(4*y)*math.Sin(hour) + 0.3*math.Sin(9*x*y+hour) + 0.03*random.NormFloat64())
			sun[p] = 0
			if math.Hypot(x-0.5-0.4*math.Sin(hour), y-0.6-0.2*math.Cos(day)) < 0.12 {
				sun[p] = 4000
			}
			all[p] = float32(rest) + sun[p]
		}
		roll.Keep(k, all, sun, 0)
	}
	s := &study.Shots{View: w, Eye: w, Inside: inside, Records: records, Film: roll.Develop(rank, film.Fine)}
	s.Discs = make([][]annual.Disc, len(records))
	var seen []coeff.Seen
	for range inside {
		seen = append(seen, coeff.Seen{Part: int32(random.IntN(2)), Via: -1})
	}
	s.Stood, s.SeenInside = []study.Stood{{Scene: r.Scene, Seen: seen}}, inside
	v.Shots = s
	return v
}
