package falsecolour

import (
	"bytes"
	"errors"
	"image"
	"image/png"
	"io"
	"math"
	"strings"
	"testing"
)

// plain is a small figure without lines and labels.
func plain() Figure {
	return Figure{
		Width: 3, Height: 2, Values: []float32{1, 10, 100, 1000, 3, 30},
		Scale: Scale{Min: 1, Max: 1000, Log: true, Quantity: "Luminance", Unit: "cd/m2"},
	}
}

func TestRenderPixels(t *testing.T) {
	f := plain()
	f.MinWidthPx = 30
	f.Inside = []bool{true, true, true, true, false, true}
	f.Values[2] = float32(math.NaN())
	im, err := Render(f)
	if err != nil {
		t.Fatal(err)
	}
	const margin, k = 24, 10
	for i := range f.Values {
		want := rgb(paper)
		if f.drawn(i) {
			want = f.Map.At(f.Scale.Fraction(float64(f.Values[i])))
		}
		for y := range k {
			for x := range k {
				if got := im.RGBAAt(margin+i%3*k+x, margin+i/3*k+y); got != want {
					t.Fatalf("pixel %d: got %v, want %v", i, got, want)
				}
			}
		}
	}
}

// TestRoundMask: outside of the circle the sheet is paper.
func TestRoundMask(t *testing.T) {
	for _, smooth := range []bool{false, true} {
		f := office(64, 0.1)
		f.Title, f.Marks, f.Points, f.Contours, f.Smooth = "", nil, nil, nil, smooth
		im, err := Render(f)
		if err != nil {
			t.Fatal(err)
		}
		const margin, side = 24, 640
		paperPixels, inside := 0, 0
		for y := range side {
			for x := range side {
				d := math.Hypot(float64(x)+0.5-side/2, float64(y)+0.5-side/2)
				got := im.RGBAAt(margin+x, margin+y)
				if d > side/2+1.5 { // the edge is a line of 1 pixel, blended
					if paperPixels++; got != rgb(paper) {
						t.Fatalf("smooth %t: (%d, %d) outside of the circle: got %v", smooth, x, y, got)
					}
				} else if d < side/2-1.5 {
					if inside++; got == rgb(paper) {
						t.Fatalf("smooth %t: (%d, %d) inside of the circle is paper", smooth, x, y)
					}
				}
			}
		}
		if paperPixels == 0 || inside == 0 {
			t.Fatal("nothing was checked")
		}
	}
}

// TestTextFits lays out figures and sheets with long and short texts: every
// line is within the margins and below the one before, and what is drawn
// leaves the border of the sheet blank.
func TestTextFits(t *testing.T) {
	long := strings.Repeat("the low sun through the strip above the shelf ", 9)
	word := strings.Repeat("Tageslichtversorgung", 12)
	for name, change := range map[string]func(*Figure){
		"usual":     func(*Figure) {},
		"long":      func(f *Figure) { f.Title, f.Caption = long, []string{long, word} },
		"word":      func(f *Figure) { f.Title = word },
		"bare":      func(f *Figure) { f.Title, f.Caption, f.Scale.Quantity, f.Scale.Unit = "", nil, "", "" },
		"many rows": func(f *Figure) { f.Caption = strings.Split(strings.Repeat("a\n", 30), "\n") },
		"narrow":    func(f *Figure) { f.MinWidthPx = 200 },
		"unit":      func(f *Figure) { f.Scale.Unit = "kcd/m2" },
	} {
		for columns := range 3 {
			f := office(64, 0.1)
			change(&f)
			s := &sheet{title: f.Title, caption: f.Caption, columns: max(columns, 1), figures: []Figure{f}, width: defaultWidthPx}
			if columns > 0 {
				s.figures, s.cells, s.width = []Figure{f, f, f}, true, 300
			}
			im, err := compose(s)
			if err != nil {
				t.Fatalf("%s: %v", name, err)
			}
			margin := s.px(24)
			for _, p := range s.texts {
				if end := float64(p.x) + p.style.width(p.text); p.x < margin || end > float64(im.Rect.Max.X-margin)+0.01 {
					t.Errorf("%s: %q spans %d to %.0f of %d, margin %d", name, p.text, p.x, end, im.Rect.Max.X, margin)
				}
				if p.baseline-p.style.ascent < 0 || p.baseline+p.style.height/3 > im.Rect.Max.Y {
					t.Errorf("%s: %q stands at %d of %d", name, p.text, p.baseline, im.Rect.Max.Y)
				}
			}
			border := s.px(10)
			for y := range im.Rect.Max.Y {
				for x := range im.Rect.Max.X {
					if x >= border && x < im.Rect.Max.X-border && y >= border && y < im.Rect.Max.Y-border {
						continue
					}
					if im.RGBAAt(x, y) != rgb(paper) {
						t.Fatalf("%s in %d columns: something is drawn at (%d, %d) of %v", name, columns, x, y, im.Rect.Max)
					}
				}
			}
			boxes := s.legend().draw(image.NewRGBA(im.Rect), margin, 0, im.Rect.Max.X-2*margin)
			for i, b := range boxes {
				if b.Min.X < margin-s.px(12)-1 || b.Max.X > im.Rect.Max.X-margin+s.px(12)+1 || i > 0 && b.Min.X < boxes[i-1].Max.X {
					t.Errorf("%s: legend label %d at %v", name, i, b)
				}
			}
			if len(boxes) < 2 {
				t.Errorf("%s: legend has %d labels", name, len(boxes))
			}
		}
	}
}

// TestLabelsApart: numbers in the picture lie in it and do not overlap.
func TestLabelsApart(t *testing.T) {
	f := office(96, 0)
	f.Contours = []float64{50, 100, 200, 500, 1000, 2000, 5000}
	for i := range 12 {
		f.Marks = append(f.Marks, Mark{X: 48 + float64(i%3), Y: 40 + float64(i/3), RadiusPx: 0.2, Rank: 3 + i})
	}
	faces, err := newTypefaces(1)
	if err != nil {
		t.Fatal(err)
	}
	dst := image.NewRGBA(image.Rect(0, 0, 700, 700))
	p := newPicture(&f, dst, image.Pt(10, 10), 7, 1, &faces)
	p.draw()
	if len(p.labels) < len(f.Marks)+len(f.Points)+3 {
		t.Errorf("got %d labels, want those of %d marks, %d points and some lines", len(p.labels), len(f.Marks), len(f.Points))
	}
	for i, a := range p.labels {
		if !a.In(p.rect) {
			t.Errorf("label %d at %v is not in %v", i, a, p.rect)
		}
		for _, b := range p.labels[:i] {
			if a.Overlaps(b) {
				t.Errorf("labels at %v and %v overlap", a, b)
			}
		}
	}
}

// TestMarksOutside: outlines and ranks at the very edge do not leave the
// picture by more than a line's width, and what lies far outside is harmless.
func TestMarksOutside(t *testing.T) {
	f := plain()
	f.Marks = []Mark{{Pixels: []int32{0}, Rank: 1}, {Pixels: []int32{0, 1, 2, 3, 4, 5}, Rank: 2}, {X: -1e5, Y: 3, Rank: 3}, {X: 3, Y: 2, RadiusPx: 400, Label: "sun"}}
	if _, err := Render(f); err != nil {
		t.Fatal(err)
	}
}

func TestMinWidth(t *testing.T) {
	for _, c := range []struct{ width, least, want int }{ // want: by hand, 24 margin on each side
		{64, 0, 640 + 48}, {600, 0, 600 + 48}, {601, 0, 601 + 48}, {599, 0, 1198 + 90}, {96, 900, 960 + 72}, {5, 1, 5 + 48},
	} {
		f := Figure{Width: c.width, Height: 1, Values: make([]float32, c.width), Scale: Scale{Max: 1}, MinWidthPx: c.least}
		im, err := Render(f)
		if err != nil {
			t.Fatal(err)
		}
		// The margin of 24 grows with pictures wider than 640.
		if got := im.Rect.Dx(); got != c.want {
			t.Errorf("%+v: got %d", c, got)
		}
	}
}

func TestDeterministic(t *testing.T) {
	var first []byte
	for i := range 2 {
		f := office(64, 0.1)
		f.Smooth = true
		var b bytes.Buffer
		if err := WritePNG(&b, f); err != nil {
			t.Fatal(err)
		}
		if i == 0 {
			first = b.Bytes()
			if im, err := png.Decode(&b); err != nil || im.Bounds().Dx() != 688 {
				t.Fatalf("got %v, %v", im.Bounds(), err)
			}
		} else if !bytes.Equal(first, b.Bytes()) {
			t.Error("two drawings of the same figure differ")
		}
	}
}

func TestInvalid(t *testing.T) {
	nan := math.NaN()
	for want, change := range map[string]func(*Figure){
		"size: got 0 x 2":            func(f *Figure) { f.Width = 0 },
		"values: got 5":              func(f *Figure) { f.Values = f.Values[1:] },
		"inside: got 1":              func(f *Figure) { f.Inside = []bool{true} },
		"colour map: got 9":          func(f *Figure) { f.Map = 9 },
		"width: got -1":              func(f *Figure) { f.MinWidthPx = -1 },
		"got pixel 6":                func(f *Figure) { f.Marks = []Mark{{Pixels: []int32{6}}} },
		"got a circle at (NaN":       func(f *Figure) { f.Marks = []Mark{{X: nan}} },
		"point 1: got (9, 0)":        func(f *Figure) { f.Points = []Point{{X: 9}} },
		"contour: got NaN":           func(f *Figure) { f.Contours = []float64{nan} },
		"scale: got 5 to 5":          func(f *Figure) { f.Scale.Min, f.Scale.Max = 5, 5 },
		"want a log scale to begin":  func(f *Figure) { f.Scale.Min = 0 },
		"want at most 67108864":      func(f *Figure) { f.Width, f.Height, f.Values = 2, 1<<15, make([]float32, 1<<16) },
		"scale: got NaN to 1000":     func(f *Figure) { f.Scale.Min = nan },
		"scale: got -1e+308 to 1e+3": func(f *Figure) { f.Scale = Scale{Min: -1e308, Max: 1e308} },
	} {
		f := plain()
		change(&f)
		if _, err := Render(f); !errors.Is(err, ErrInvalid) || !strings.Contains(err.Error(), want) {
			t.Errorf("got %v, want %q", err, want)
		}
	}
}

func TestSheet(t *testing.T) {
	a, b := plain(), plain()
	b.Width, b.Height = 2, 3
	im, err := Sheet("Two", []string{"x"}, 2, a, b, a)
	if err != nil {
		t.Fatal(err)
	}
	// Pictures of 381 (3 x 127) and 380 (2 x 190) pixels, two beside each
	// other with 28 between and 24 around.
	if got, want := im.Rect.Dx(), 2*381+28+2*24; got != want {
		t.Errorf("width: got %d, want %d", got, want)
	}
	b.Scale.Max = 500
	if _, err := Sheet("", nil, 2, a, b); !errors.Is(err, ErrInvalid) || !strings.Contains(err.Error(), "figure 2 has another scale") {
		t.Errorf("two scales: got %v", err)
	}
	b = plain()
	b.Values = nil
	if _, err := Sheet("", nil, 2, a, b); !errors.Is(err, ErrInvalid) || !strings.Contains(err.Error(), "figure 2: ") {
		t.Errorf("no values: got %v", err)
	}
	for _, n := range []int{0, -1} {
		if _, err := Sheet("", nil, n, a); !errors.Is(err, ErrInvalid) {
			t.Errorf("%d columns: got %v", n, err)
		}
	}
	if _, err := Sheet("", nil, 1); !errors.Is(err, ErrInvalid) {
		t.Errorf("no figure: got %v", err)
	}
}

// TestWrap breaks lines at spaces, long words anywhere, and keeps every letter.
func TestWrap(t *testing.T) {
	faces, err := newTypefaces(1)
	if err != nil {
		t.Fatal(err)
	}
	for _, text := range []string{"", "one", "one two three four five six seven", "a\n\nb", strings.Repeat("x", 90), "short " + strings.Repeat("long", 30) + " end"} {
		lines := faces.text.wrap(text, 100)
		joined := strings.Join(lines, "")
		if got, want := strings.ReplaceAll(joined, " ", ""), strings.Join(strings.Fields(text), ""); got != want {
			t.Errorf("%q: got %q, letters differ", text, lines)
		}
		for _, l := range lines {
			if faces.text.width(l) > 100 {
				t.Errorf("%q: line %q is %g wide", text, l, faces.text.width(l))
			}
		}
	}
	if got := faces.text.wrap("W", 1); len(got) != 1 {
		t.Errorf("a letter wider than the limit: got %q", got)
	}
}

func BenchmarkRender(b *testing.B) {
	f := office(64, 0.1)
	f.Smooth = true
	for b.Loop() {
		if _, err := Render(f); err != nil {
			b.Fatal(err)
		}
	}
}

// The formats hold the same pixels.
func TestEncode(t *testing.T) {
	im, err := Render(office(32, 0.1))
	if err != nil {
		t.Fatal(err)
	}
	for _, format := range Formats {
		var b bytes.Buffer
		if err := Encode(&b, im, format); err != nil {
			t.Fatal(err)
		}
		back, name, err := image.Decode(&b)
		if err != nil || name != format || back.Bounds() != im.Bounds() {
			t.Fatalf("%s: got %q and %v", format, name, err)
		}
		for y := range im.Rect.Dy() {
			for x := range im.Rect.Dx() {
				r, g, bl, a := back.At(x, y).RGBA()
				wr, wg, wb, wa := im.At(x, y).RGBA()
				if r != wr || g != wg || bl != wb || a != wa {
					t.Fatalf("%s: pixel (%d, %d) differs", format, x, y)
				}
			}
		}
	}
	if err := Encode(io.Discard, im, "gif"); !errors.Is(err, ErrInvalid) {
		t.Errorf("gif: got %v, want a refusal", err)
	}
}
