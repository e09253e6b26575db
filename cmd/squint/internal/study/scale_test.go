package study

import (
	"fmt"
	"os"
	"runtime"
	"runtime/debug"
	"strconv"
	"testing"
)

// smallFloor is what one size is varied of, in BenchmarkFloor: little of
// everything, so that the size varied shows.
func smallFloor() floor {
	return floor{triangles: 25000, viewM: 30, sensorM: 4, days: 60, simulation: `fisheye_pixels = 48
samples_per_pixel = 8
sensor_samples = 1024
texel_m = 1.2
texel_samples = 64
`}
}

// floorCost is what one run of a floor took.
type floorCost struct {
	prepare, run                     float64 // CPU seconds
	mib                              float64
	bytes                            uint64 // allocated
	views, sensors, triangles, hours int
	sides, frames, standings         int
}

// measure prepares and runs a floor as a check does.
func (f floor) measure(t testing.TB, opt Options) (floorCost, *Result) {
	t.Helper()
	files := f.files(t)
	forgetPeak()
	var c floorCost
	var before, after runtime.MemStats
	start := cpuSeconds(t)
	in, err := prepareFile(files, "project.toml", "", opt.Workers)
	if err != nil {
		t.Fatal(err)
	}
	c.prepare = cpuSeconds(t) - start
	c.standings = len(in.Standings)
	if !f.looks {
		in.Project.Criteria.Glare = ""
	}
	runtime.ReadMemStats(&before)
	start = cpuSeconds(t)
	r, err := Run(t.Context(), in, opt)
	if err != nil {
		t.Fatal(err)
	}
	c.run = cpuSeconds(t) - start
	runtime.ReadMemStats(&after)
	c.bytes, c.mib = after.TotalAlloc-before.TotalAlloc, peakMiB()
	c.views, c.sensors, c.triangles = len(in.Scene.Viewpoints), in.Scene.Sensors(), len(in.Scene.Triangles)
	for _, m := range in.Climate.Moments {
		c.hours++
		if m.Occupied {
			c.frames += c.views
		}
	}
	c.sides = r.Settings.TexelSides
	return c, r
}

func (c floorCost) report(b *testing.B) {
	b.ReportMetric(float64(c.views), "views")
	b.ReportMetric(float64(c.sensors), "sensors")
	b.ReportMetric(float64(c.triangles), "triangles")
	b.ReportMetric(float64(c.hours), "hours")
	b.ReportMetric(float64(c.frames), "frames")
	b.ReportMetric(float64(c.sides), "sides")
	b.ReportMetric(float64(c.standings), "combinations")
	b.ReportMetric(c.prepare, "prepare-cpu-s")
	b.ReportMetric(c.run, "run-cpu-s")
	b.ReportMetric(c.mib, "peak-MiB")
}

// BenchmarkFloor varies one size of the floor, the others being small. One run
// each will do: -benchtime 1x.
func BenchmarkFloor(b *testing.B) {
	vary := func(name string, f floor) {
		b.Run(name, func(b *testing.B) {
			for b.Loop() {
				c, _ := f.measure(b, Options{Workers: 1})
				c.report(b)
			}
		})
	}
	for _, c := range []struct {
		views int
		m     float64
	}{{16, 30}, {40, 12}, {80, 6}, {240, 4}, {320, 3}} {
		f := smallFloor()
		f.viewM = c.m
		vary(fmt.Sprintf("views=%d", c.views), f)
	}
	for _, m := range []float64{4, 1.4, 1, .7, .6} {
		f := smallFloor()
		f.sensorM = m
		vary(fmt.Sprintf("sensors=every_%g_m", m), f)
	}
	for _, days := range []int{60, 30, 15, 8, 4} {
		f := smallFloor()
		f.days = days
		vary(fmt.Sprintf("hours=every_%d_days", days), f)
	}
	for _, n := range []int{25000, 50000, 100000, 200000, 400000} {
		f := smallFloor()
		f.triangles = n
		vary(fmt.Sprintf("triangles=%d", n), f)
	}
}

// BenchmarkFloorWhole is the whole floor with a check's settings: 80 viewpoints
// in four directions, 2,970 sensors, 200,000 triangles, three positions of the
// blinds. It takes hours for a whole year: SQUINT_FLOOR_DAYS=n keeps one in n
// days (no multiple of 7, which would keep one weekday), and without it nothing
// is run. SQUINT_FLOOR_MIB=960 holds the collector to what a check does with the
// default of memory_mib. Needs -benchtime 1x -timeout 0.
func BenchmarkFloorWhole(b *testing.B) {
	days, err := strconv.Atoi(os.Getenv("SQUINT_FLOOR_DAYS"))
	if err != nil || days < 1 {
		b.Skip("takes from half an hour to hours; set SQUINT_FLOOR_DAYS=n for one in n days of the year")
	}
	f := floor{triangles: 200000, viewM: 3, sensorM: .6, blinds: true, days: days, looks: true}
	if mib, err := strconv.Atoi(os.Getenv("SQUINT_FLOOR_MIB")); err == nil && mib > 0 {
		defer debug.SetMemoryLimit(debug.SetMemoryLimit(int64(mib) << 20))
	}
	for b.Loop() {
		s := &stageCosts{t: b, last: cpuSeconds(b)}
		c, r := f.measure(b, Options{Workers: runtime.NumCPU(), Progress: s.hear})
		for _, row := range s.rows {
			b.Logf("%8.1f CPU s  %s", row.seconds, row.stage)
		}
		for _, w := range r.Warnings {
			b.Logf("warning: %s", w)
		}
		c.report(b)
	}
}
