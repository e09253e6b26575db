package report

import (
	"bytes"
	"image/png"
	"math"
	"strings"
	"testing"

	"squint/glare/falsecolour"
)

func TestFigure(t *testing.T) {
	r := sample("desk 1", "<script>\x1b[1m")
	r.Project.Invented = true
	v := &r.Views[0]
	f := figure(r, v, luminanceScale(r))
	if len(f.Marks) != 2 {
		t.Fatalf("got %d marks, want the window and the sun", len(f.Marks))
	}
	// The sun outweighs the window: 4e8^2 5e-5 against 8000^2 0.2.
	sun, window := f.Marks[0], f.Marks[1]
	if sun.Rank != 1 || sun.Pixels != nil || window.Rank != 2 || len(window.Pixels) != 36 {
		t.Errorf("got marks %+v, want the sun first and 36 pixels of window", f.Marks)
	}
	// Equidistant, 180 degrees over 32 pixels: the angle from the line of
	// sight is the distance from the middle. The sun stands at (1, 0.3, 0.4).
	angle := math.Atan(0.5) / math.Pi * 32
	if x, y := 16-angle*0.6, 16-angle*0.8; math.Abs(sun.X-x) > 1e-9 || math.Abs(sun.Y-y) > 1e-9 {
		t.Errorf("the sun is marked at %.3f, %.3f, want %.3f, %.3f", sun.X, sun.Y, x, y)
	}
	text := f.Title + "\n" + strings.Join(f.Caption, "\n")
	for _, want := range []string{"desk 1, looking east", inventedWords, "DGP 1.737 ± 0.004", "the sun", "lx at the eye"} {
		if !strings.Contains(text, want) {
			t.Errorf("title and caption lack %q:\n%s", want, text)
		}
	}
	if strings.Contains(figure(r, &r.Views[1], luminanceScale(r)).Title, "\x1b") {
		t.Error("the title holds an escape sequence")
	}
	var b bytes.Buffer
	if err := falsecolour.WritePNG(&b, f); err != nil {
		t.Fatal(err)
	}
	im, err := png.Decode(&b)
	if err != nil {
		t.Fatal(err)
	}
	if im.Bounds().Dx() < 600 {
		t.Errorf("the picture is %d pixels wide, want at least 600", im.Bounds().Dx())
	}
}
