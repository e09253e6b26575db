package report

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"math"
	"strings"
	"testing"
	"unicode/utf8"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare"
	"squint/glare/falsecolour"
	"squint/glare/luminance"
	"squint/glare/photograph"
	"squint/scene/view"
)

// evaluated is an image of 300 cd/m2 with a source of 9000 up on the left and
// the sun beside it, w x h pixels.
func evaluated(t *testing.T, w, h int, p view.Projection) *Image {
	t.Helper()
	fov := math.Pi
	if p == view.Perspective {
		fov = math.Pi / 2
	}
	im := &luminance.Image{Width: w, Height: h, Lum: make([]float32, w*h)}
	for i := range im.Lum {
		im.Lum[i] = 300
		if x, y := i%w, i/w; x > w/4 && x < w*3/8 && y > h/4 && y < h*3/8 {
			im.Lum[i] = 9000
		}
	}
	photo, err := photograph.Develop(im, photograph.Settings{Projection: p, FOVRad: fov})
	if err != nil {
		t.Fatal(err)
	}
	out := &Image{File: "lobby.exr", Photo: photo, Indices: p.Fisheye(), AgeYears: 40, Covered: 1}
	sun := glare.Disc{Dir: r3.Unit(r3.Vec{X: 1, Y: -0.5, Z: 0.4}), OmegaSr: 6.8e-5, Luminance: 8e8}
	f := glare.NewField(photo.View)
	out.Inside = f.Inside
	out.Result = glare.Evaluate(f, photo.Lum, []glare.Disc{sun}, out.Options, nil)
	out.Contrast = glare.ContrastOf(f, photo.Lum, out.Options)
	return out
}

func TestWhere(t *testing.T) {
	for want, d := range map[string]r3.Vec{
		"on the line of sight": {X: 1},
		"45° left, 0° up":      {X: 1, Y: 1},
		"45° right, 35° down":  {X: 1, Y: -1, Z: -1}, // exact: atan(1/sqrt 2) = 35.26°
		"0° right, 45° up":     {X: 1, Z: 1},
	} {
		if got := where(d); got != want {
			t.Errorf("%v: got %q, want %q", d, got, want)
		}
	}
}

func TestNumber3(t *testing.T) {
	for x, want := range map[float64]string{
		0: "0", 0.012345: "0.0123", 1.234: "1.23", 12.34: "12.3", 123.4: "123", 1234: "1,230", 12345: "12,300",
		999600: "10⁶", 8.95e8: "8.95×10⁸", math.NaN(): "unknown", math.Inf(1): "unknown",
	} {
		if got := number3(x); got != want {
			t.Errorf("%g: got %q, want %q", x, got, want)
		}
	}
}

// Every line of the text fits, whatever a file's name is.
func TestImagesTextFits(t *testing.T) {
	one := evaluated(t, 64, 64, view.Equidistant)
	evil := evaluated(t, 64, 64, view.Equisolid)
	evil.File = strings.Repeat("very-long-", 12) + "\x1b[31m.exr"
	evil.Warnings = []string{"something is wrong with it, and it takes some words to say what it is that is wrong."}
	flat := evaluated(t, 64, 48, view.Perspective)
	for _, images := range [][]*Image{{one}, {evil}, {flat}, {one, evil, flat}} {
		var b bytes.Buffer
		if err := ImagesText(&b, images, "", nil); err != nil {
			t.Fatal(err)
		}
		for _, line := range strings.Split(b.String(), "\n") {
			if utf8.RuneCountInString(line) > columns || strings.ContainsAny(line, "\x1b\t") || strings.TrimRight(line, " ") != line {
				t.Errorf("not a plain line of %d columns: %q", columns, line)
			}
		}
		if len(images) == 1 && images[0].Indices && !strings.Contains(strings.Join(strings.Fields(b.String()), " "), "not valid here: the sun") {
			t.Errorf("DGPs with the sun in view is not called invalid:\n%s", b.String())
		}
		if !strings.Contains(strings.Join(strings.Fields(b.String()), " "), "not for windows") && len(images) == 1 && images[0].Indices {
			t.Errorf("UGR without its statement:\n%s", b.String())
		}
	}
}

func TestImageFiles(t *testing.T) {
	one, flat := evaluated(t, 64, 64, view.Equidistant), evaluated(t, 64, 48, view.Perspective)
	one.Result.UGR = math.Inf(1)
	images := []*Image{one, flat}
	var b bytes.Buffer
	if err := ImagesJSON(&b, images); err != nil {
		t.Fatal(err)
	}
	var back []map[string]any
	if err := json.Unmarshal(b.Bytes(), &back); err != nil || len(back) != 2 {
		t.Fatalf("got %d images and %v", len(back), err)
	}
	first, _ := back[0]["glare"].(map[string]any)
	if first["ugr"] != nil || first["dgps_valid"] != false || back[1]["glare"] != nil || back[1]["image_circle_px"] != nil {
		t.Errorf("got %v and %v", first, back[1]["glare"])
	}
	sources, _ := first["sources"].([]any)
	if len(sources) != len(one.Result.Sources) {
		t.Errorf("got %d sources, want %d", len(sources), len(one.Result.Sources))
	}
	total := 0.0
	for _, s := range sources {
		m, _ := s.(map[string]any)
		share, _ := m["share_of_sum"].(float64)
		total += share
	}
	if math.Abs(total-1) > 1e-9 {
		t.Errorf("shares add up to %g, want 1", total)
	}
	b.Reset()
	if err := ImagesCSV(&b, images); err != nil {
		t.Fatal(err)
	}
	rows, err := csv.NewReader(&b).ReadAll() // wants all rows of one length
	if err != nil || len(rows) != 3 || rows[2][1] != "" || rows[1][8] != "" {
		t.Errorf("got %v and %v", rows, err)
	}
	b.Reset()
	if err := SourcesCSV(&b, images); err != nil {
		t.Fatal(err)
	}
	if rows, err := csv.NewReader(&b).ReadAll(); err != nil || len(rows) != 1+len(one.Result.Sources) {
		t.Errorf("got %d rows and %v", len(rows), err)
	}
}

// A large image is made smaller, and its marks with it: the disc lies where the
// shrunk picture has its direction.
func TestImageFigure(t *testing.T) {
	small, large := evaluated(t, 64, 64, view.Equidistant), evaluated(t, 300, 300, view.Equidistant)
	scale := ImagesScale([]*Image{small, large})
	for _, im := range []*Image{small, large} {
		f := ImageFigure(im, scale, Overlay{}, 100)
		if f.Width > 100 || len(f.Marks) != 2 {
			t.Fatalf("%d pixels: got %d wide and %d marks, want at most 100 and 2", im.Photo.View.Width, f.Width, len(f.Marks))
		}
		// The sun is the first source by far.
		x, y, _ := im.Photo.View.LocalProject(im.Result.Sources[0].Dir)
		m, share := f.Marks[0], float64(f.Width)/float64(im.Photo.View.Width)
		if math.Abs(m.X-x*share) > 1e-9 || math.Abs(m.Y-y*share) > 1e-9 {
			t.Errorf("disc drawn at (%g, %g), want (%g, %g)", m.X, m.Y, x*share, y*share)
		}
		for _, i := range f.Marks[1].Pixels {
			if f.Values[i] < 300 {
				t.Errorf("mark on a pixel of %g cd/m2", f.Values[i])
			}
		}
		if _, err := falsecolour.Render(f); err != nil {
			t.Error(err)
		}
	}
	if _, err := ImagesSheet([]*Image{small, large}, scale, Overlay{}); err != nil {
		t.Error(err)
	}
}
