package main

import (
	"bytes"
	"fmt"
	"image/png"
	"math"
	"os"
	"slices"
	"strings"
	"testing"
)

// lines are three of BenchmarkFloor for each size, on exact laws.
func lines() string {
	var b strings.Builder
	b.WriteString("# A day, a machine.\ngoos: linux\ncpu: some\n")
	for _, s := range sizes {
		for _, n := range []float64{20, 40, 80} {
			fmt.Fprintf(&b, "BenchmarkFloor/%s=%g-2  1  7000 ns/op  %g %s  0.5 prepare-cpu-s  %g run-cpu-s  %g peak-MiB\n", s, n, n*1000, s, 3+n/10, 100+n)
		}
	}
	return b.String()
}

func TestRead(t *testing.T) {
	got, err := read(strings.NewReader(lines()))
	if err != nil {
		t.Fatal(err)
	}
	if len(got.about) != 1 || got.about[0] != "A day, a machine." || got.cpu != "some" {
		t.Errorf("got %q on %q, want the line that begins with # on some", got.about, got.cpu)
	}
	if want := []row{{20000, .5, 5, 120}, {40000, .5, 7, 140}, {80000, .5, 11, 180}}; !slices.Equal(got.rows["hours"], want) {
		t.Errorf("got %v, want %v", got.rows["hours"], want)
	}
	for _, c := range []struct{ from, to, want string }{
		{"0.5 prepare-cpu-s", "fast prepare-cpu-s", `line 4: got "fast" before prepare-cpu-s, want a number`},
		{"peak-MiB", "MB", "line 4: got no views"},
		{"BenchmarkFloor/sensors=20", "BenchmarkOther/sensors=20", "got 2 lines of BenchmarkFloor/sensors, want 3 or more"},
	} {
		if _, err := read(strings.NewReader(strings.Replace(lines(), c.from, c.to, 1))); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%q for %q: got %v, want %q", c.to, c.from, err, c.want)
		}
	}
}

// A line is found again, exactly; the twin with one place moved is another.
func TestLaw(t *testing.T) {
	x, y := []float64{1, 2, 4}, []float64{5, 7, 11}
	if a, b := law(x, y); math.Abs(a-3) > 1e-12 || math.Abs(b-2) > 1e-12 {
		t.Errorf("got %g + %g x, want 3 + 2 x", a, b)
	}
	y[2]++
	if a, b := law(x, y); math.Abs(a-3) < .1 || math.Abs(b-2) < .1 {
		t.Errorf("twin: got %g + %g x for places off the line", a, b)
	}
}

func TestSteps(t *testing.T) {
	for _, c := range []struct {
		most float64
		want []float64
	}{
		{320, []float64{0, 100, 200, 300, 400}},
		{7.3, []float64{0, 2, 4, 6, 8}},
		{1000, []float64{0, 200, 400, 600, 800, 1000}},
		{42, []float64{0, 10, 20, 30, 40, 50}},
	} {
		if got := steps(top(c.most)); !slices.Equal(got, c.want) {
			t.Errorf("up to %g: got %v, want %v", c.most, got, c.want)
		}
	}
}

// The picture in the guide is that of the lines beside it.
func TestPictureIsOfTheTable(t *testing.T) {
	const folder = "../../pictures/scale/"
	in, err := os.Open(folder + "measured.txt")
	if err != nil {
		t.Fatal(err)
	}
	defer in.Close()
	table, err := read(in)
	if err != nil {
		t.Fatal(err)
	}
	sheet, err := draw(table)
	if err != nil {
		t.Fatal(err)
	}
	data, err := os.ReadFile(folder + "scale.png")
	if err != nil {
		t.Fatal(err)
	}
	im, err := png.Decode(bytes.NewReader(data))
	if err != nil {
		t.Fatal(err)
	}
	same := im.Bounds() == sheet.Image.Rect
	for y := 0; same && y < im.Bounds().Dy(); y++ {
		for x := range im.Bounds().Dx() {
			r, g, b, _ := im.At(x, y).RGBA()
			want := sheet.Image.RGBAAt(x, y)
			same = same && uint8(r>>8) == want.R && uint8(g>>8) == want.G && uint8(b>>8) == want.B
		}
	}
	if !same {
		t.Error("scale.png is not what measured.txt gives; run go generate ./cmd/squint/guide, or its second line alone")
	}
}
