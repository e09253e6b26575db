package report

import (
	"bytes"
	"encoding/json"
	"errors"
	"io"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"

	"squint/cmd/squint/internal/study"
	"squint/glare"
	"squint/glare/luminance"
)

// tree reads a folder.
func tree(t *testing.T, dir string) map[string]string {
	t.Helper()
	files := map[string]string{}
	err := filepath.WalkDir(dir, func(path string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		data, err := os.ReadFile(path)
		name, _ := filepath.Rel(dir, path)
		files[filepath.ToSlash(name)] = string(data)
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return files
}

var odd = []string{"desk 1", "<script>", "a/b", "A B", "../../etc/passwd", "con", "", "書斎"}

func TestWrite(t *testing.T) {
	odd := odd
	if testing.Short() {
		odd = odd[:3] // pictures take time
	}
	r := sample(odd...)
	o := Options{Version: "v1.2.3", WeatherSHA256: "ef56"}
	one, two := filepath.Join(t.TempDir(), "new", "results"), t.TempDir()
	if err := Write(one, r, o); err != nil {
		t.Fatal(err)
	}
	r.Settings.Workers = 7 // does not show
	if err := Write(two, r, o); err != nil {
		t.Fatal(err)
	}
	if err := Write(two, r, o); err != nil { // over the old one
		t.Fatal(err)
	}
	got := tree(t, one)
	if !reflect.DeepEqual(got, tree(t, two)) {
		t.Error("the same study gave other bytes")
	}
	var s struct {
		Files []string
		Views []struct {
			Name      string
			WorstHour struct{ Pictures []string } `json:"worst_hour"`
		}
	}
	if err := json.Unmarshal([]byte(got[SummaryFile]), &s); err != nil {
		t.Fatal(err)
	}
	if len(s.Files) != len(got)-1 {
		t.Errorf("summary lists %d files, want all %d but itself", len(s.Files), len(got)-1)
	}
	for _, f := range s.Files {
		if _, ok := got[f]; !ok {
			t.Errorf("summary lists %s, which is not there", f)
		}
	}
	for i, v := range s.Views {
		if v.Name != odd[i] {
			t.Errorf("view %d is named %q, want %q", i, v.Name, odd[i])
		}
		if len(v.WorstHour.Pictures) != 2 {
			t.Errorf("%q has %d pictures, want 2", v.Name, len(v.WorstHour.Pictures))
		}
	}
}

// TestSummaryNaN fills every float that can be reached with NaN and infinity.
func TestSummaryNaN(t *testing.T) {
	for _, bad := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
		r := sample("desk 1", "desk 2")
		spoil(reflect.ValueOf(&r.Views).Elem(), bad)
		spoil(reflect.ValueOf(&r.Planes).Elem(), bad)
		spoil(reflect.ValueOf(&r.Verdicts).Elem(), bad)
		spoil(reflect.ValueOf(&r.Settings).Elem(), bad)
		spoil(reflect.ValueOf(&r.Climate.Fit).Elem(), bad)
		spoil(reflect.ValueOf(&r.Climate.Year.Site).Elem(), bad)
		var b bytes.Buffer
		if err := writeSummary(&b, r, Options{}, nil); err != nil {
			t.Fatal(err)
		}
		if !json.Valid(b.Bytes()) {
			t.Error("not JSON")
		}
		var s summary
		if err := json.Unmarshal(b.Bytes(), &s); err != nil {
			t.Error(err)
		}
		if !strings.Contains(b.String(), `"estimate": null`) {
			t.Error("got no null, so the spoiled values did not arrive")
		}
		printed(t, r)
	}
}

// spoil sets all floats below v, save those of pictures and vectors, whose
// views must stay valid.
func spoil(v reflect.Value, x float64) {
	switch v.Kind() {
	case reflect.Float32, reflect.Float64:
		if v.CanSet() {
			v.SetFloat(x)
		}
	case reflect.Struct:
		for i := range v.NumField() {
			if v.Type().Field(i).IsExported() {
				spoil(v.Field(i), x)
			}
		}
	case reflect.Slice:
		for i := range v.Len() {
			spoil(v.Index(i), x)
		}
	case reflect.Pointer:
		if w, ok := v.Interface().(*study.Worst); ok {
			w.DGP, w.Ev, w.StdErr = x, x, x
		}
	}
}

func TestSummary(t *testing.T) {
	r := sample("desk 1", "desk 2")
	var b bytes.Buffer
	if err := writeSummary(&b, r, Options{Version: "v1", WeatherSHA256: "ef56"}, []string{"z", "a"}); err != nil {
		t.Fatal(err)
	}
	var s map[string]any
	if err := json.Unmarshal(b.Bytes(), &s); err != nil {
		t.Fatal(err)
	}
	get := func(path ...any) any {
		var v any = s
		for _, p := range path {
			switch p := p.(type) {
			case string:
				m, ok := v.(map[string]any)
				if !ok || m[p] == nil {
					t.Fatalf("%v: nothing there", path)
				}
				v = m[p]
			case int:
				v = v.([]any)[p]
			}
		}
		return v
	}
	// want: the numbers put into the sample.
	for _, c := range []struct {
		want any
		path []any
	}{
		{"not met", []any{"outcome"}},
		{143.0, []any{"views", 0, "levels", 0, "hours_over", "estimate"}},
		{0.0, []any{"views", 1, "levels", 0, "hours_over", "surely"}},
		{132.0, []any{"views", 1, "levels", 0, "hours_over", "possibly"}},
		{90.0, []any{"views", 0, "azimuth_deg"}}, // looks along +x, north is +y
		{0.5, []any{"work_planes", 0, "daylight_factor", "uniformity"}},
		{"sDA, unshaded", []any{"work_planes", 0, "sda", "label"}},
		{0.25, []any{"work_planes", 0, "points", 1, "da_300"}},
		{"room.toml", []any{"inputs", "project", "file"}},
		{"ab12", []any{"inputs", "project", "sha256"}},
		{"room.obj", []any{"inputs", "meshes", 0, "file"}},
		{"cd34", []any{"inputs", "meshes", 0, "sha256"}},
		{"../site.epw", []any{"inputs", "weather", "file"}},
		{"ef56", []any{"inputs", "weather", "sha256"}},
		{3.1, []any{"settings", "standard_errors_views"}},
		{"a", []any{"files", 0}},
		{1.0, []any{"schema_version"}},
	} {
		if got := get(c.path...); got != c.want {
			t.Errorf("%v: got %v, want %v", c.path, got, c.want)
		}
	}
	// Sensor 1 and the sample's sun: direct sun is 0 all the year.
	if strings.Contains(b.String(), "office/") {
		t.Error("summary shows a path of the machine")
	}
}

// TestWriteFailure makes writing fail at each file in turn: what was there
// before must stay, and nothing else.
func TestWriteFailure(t *testing.T) {
	r := sample("desk 1", "desk 2")
	dir := t.TempDir()
	if err := Write(dir, r, Options{Version: "old"}); err != nil {
		t.Fatal(err)
	}
	before := tree(t, dir)
	boom := errors.New("disk full")
	for fail := range len(before) {
		f, err := openFolder(dir)
		if err != nil {
			t.Fatal(err)
		}
		n := 0
		for name := range before {
			if err = f.stage(name, func(w io.Writer) error {
				if _, err := io.WriteString(w, "half of a new"); err != nil || n != fail {
					return err
				}
				return boom
			}); err != nil {
				break
			}
			n++
		}
		if !errors.Is(err, boom) {
			t.Fatalf("got %v, want %v", err, boom)
		}
		if err := f.abandon(); err != nil {
			t.Fatal(err)
		}
		if !reflect.DeepEqual(tree(t, dir), before) {
			t.Fatalf("after a failure at file %d the folder is not as before", fail+1)
		}
	}
	// A folder in a file's place, found by Write itself.
	if err := os.Remove(filepath.Join(dir, SummaryFile)); err != nil {
		t.Fatal(err)
	}
	if err := os.Mkdir(filepath.Join(dir, SummaryFile), 0o777); err != nil {
		t.Fatal(err)
	}
	delete(before, SummaryFile)
	if err := Write(dir, r, Options{Version: "new"}); err == nil {
		t.Error("got no error for a folder in the place of summary.json")
	}
	if !reflect.DeepEqual(tree(t, dir), before) {
		t.Error("after a failure of Write the folder is not as before")
	}
}

// TestWriteNowhere checks that a folder made for a failing run goes again.
func TestWriteNowhere(t *testing.T) {
	base := t.TempDir()
	file := filepath.Join(base, "file")
	if err := os.WriteFile(file, nil, 0o644); err != nil {
		t.Fatal(err)
	}
	if err := Write(filepath.Join(file, "results"), sample("desk 1"), Options{}); err == nil {
		t.Error("got no error for a folder below a file")
	}
	r := sample("desk 1")
	r.Views[0].Worst.Lum = r.Views[0].Worst.Lum[:5]
	if err := Write(filepath.Join(base, "a", "b"), r, Options{}); err == nil {
		t.Error("got no error for a picture of the wrong size")
	}
	if got := tree(t, base); len(got) != 1 {
		t.Errorf("got %v, want the one file", got)
	}
	if _, err := os.Stat(filepath.Join(base, "a")); !errors.Is(err, fs.ErrNotExist) {
		t.Errorf("the folder made for it is still there: %v", err)
	}
}

func TestSlugs(t *testing.T) {
	got := slugs([]string{"Desk 1", "desk-1", "<script>", "a/b", "..", "", "CON", "con", "Büro", "書", "x-2", "x", "x", strings.Repeat("long ", 50)}, "viewpoint")
	want := []string{"desk-1", "desk-1-2", "script", "a-b", "viewpoint", "viewpoint-2", "viewpoint-con", "viewpoint-con-2", "b-ro", "viewpoint-3", "x-2", "x", "x-3",
		strings.TrimSuffix(strings.Repeat("long-", 12), "-")}
	for i := range want {
		if got[i] != want[i] {
			t.Errorf("slug %d: got %q, want %q", i, got[i], want[i])
		}
	}
}

// TestImageIlluminance sums the file's pixels: with the disc spread over them
// they must give the illuminance that the evaluation has with the disc apart.
func TestImageIlluminance(t *testing.T) {
	r := sample("desk 1")
	v := &r.Views[0]
	im, err := luminanceImage(r, v, Options{})
	if err != nil {
		t.Fatal(err)
	}
	var b bytes.Buffer
	if err := luminance.WriteEXR(&b, im, luminance.EXROptions{}); err != nil {
		t.Fatal(err)
	}
	back, err := luminance.ReadEXR(&b)
	if err != nil {
		t.Fatal(err)
	}
	f := glare.NewField(v.Worst.InsideOf.View)
	sum := func(lum []float32) float64 {
		e := 0.0
		for i, l := range lum {
			e += float64(l) * f.Omega[i] * f.CosTheta[i]
		}
		return e
	}
	// float32 pixels: 2^-24 each, 1e-6 with room.
	if got, want := sum(back.Lum), v.Worst.Ev; math.Abs(got/want-1) > 1e-6 {
		t.Errorf("the file's illuminance is %.3f lx, want %.3f", got, want)
	}
	if got := sum(v.Worst.Lum); math.Abs(got/v.Worst.Ev-1) < 0.1 {
		t.Error("without the disc it is the same: the test cannot fail")
	}
	if back.Attr.Moment == "" || !strings.Contains(back.Attr.Comment, "5e-05 sr") {
		t.Errorf("attributes %+v, want moment and disc", back.Attr)
	}
}
