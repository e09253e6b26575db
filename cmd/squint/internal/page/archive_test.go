package page

import (
	"archive/zip"
	"bytes"
	"compress/flate"
	"encoding/ascii85"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"math/rand/v2"
	"regexp"
	"strings"
	"testing"
)

// small is an archive made by hand, with names that try to leave the page.
func small(name string) *Archive {
	a := &Archive{blobs: map[string]blobData{}}
	a.Design = Design{Schema: Schema, SchemaVersion: SchemaVersion, Asked: 0, Levels: levels()}
	a.Design.Words = Words{Title: `</title><script>x()</script>`, Alternative: name, Outcome: "not met", Sentence: "Glare & light.",
		Verdicts: []Verdict{{Outcome: "not met", Text: `desk "1" <b>`}}, Row: Row{Views: 2, ViewsMet: 1, WorstOver: 0.2, RearDA: 0.5}}
	a.Design.Room.Parts = []PartName{{Name: "</script><script>y()</script>"}}
	var p packer
	pack(&p, "used", "u8", []uint8{1, 2, 3})
	pack(&p, "wide", "u16", []uint16{1, 256, 65535})
	pack(&p, "signed", "i16", []int16{-1, 2})
	a.Design.Records = a.add(&p)
	var none packer // such as a room without systems
	pack(&none, "nothing", "u8", []uint8{})
	a.Design.Days = a.add(&none)
	return a
}

func written(t *testing.T, a *Archive) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := a.Write(&b); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func TestArchiveComesBack(t *testing.T) {
	a := small("one")
	data := written(t, a)
	if !bytes.Equal(data, written(t, small("one"))) {
		t.Error("the same design gave other bytes")
	}
	b, err := Read("x.zip", bytes.NewReader(data), int64(len(data)))
	if err != nil {
		t.Fatal(err)
	}
	packed, err := b.deflated(a.Design.Records.ID)
	if err != nil {
		t.Fatal(err)
	}
	raw, err := io.ReadAll(flate.NewReader(bytes.NewReader(packed)))
	if err != nil {
		t.Fatal(err)
	}
	// Lowest bytes of a list first, then the next ones.
	if want := []byte{1, 2, 3, 1, 0, 255, 0, 1, 255, 255, 2, 255, 0}; !bytes.Equal(raw, want) {
		t.Errorf("numbers: got %v, want %v", raw, want)
	}
	var one, two bytes.Buffer
	if err := errors.Join(Write(&one, []*Archive{a}, Options{}), Write(&two, []*Archive{b}, Options{})); err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(one.Bytes(), two.Bytes()) {
		t.Error("the page of an archive that was read differs from that of the one that was written")
	}
	if !bytes.Equal(data, written(t, b)) {
		t.Error("an archive that was read is written otherwise than it was")
	}
}

// Numbers whose name is not that of their bytes are refused: damaged ones, and
// names that try to leave the page.
func TestDamagedNumbers(t *testing.T) {
	whole := []byte("some numbers")
	packed := func(raw []byte) []byte {
		var b bytes.Buffer
		z, err := flate.NewWriter(&b, flate.BestCompression)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := z.Write(raw); err != nil {
			t.Fatal(err)
		}
		if err := z.Close(); err != nil {
			t.Fatal(err)
		}
		return b.Bytes()
	}
	for _, c := range []struct {
		name, want string
		packed     []byte
	}{
		{blobID(whole), "", packed(whole)}, // the twin: sound ones are taken
		{blobID(whole), "as their bytes give", packed([]byte("other numbers"))},
		{blobID(whole), "got damaged numbers", packed(whole)[:5]},
		{"\"></script><script>x()</script>", "as their bytes give", packed(whole)},
		{blobID(whole), "more than 64 MiB", packed(make([]byte, mostNumbers+1))},
	} {
		_, err := inflate(c.name, c.packed)
		if c.want == "" && err != nil || c.want != "" && (err == nil || !strings.Contains(err.Error(), c.want)) {
			t.Errorf("%q: got %v, want %q", c.name, err, c.want)
		}
		var b bytes.Buffer
		z := zip.NewWriter(&b)
		z.RegisterCompressor(zip.Deflate, func(w io.Writer) (io.WriteCloser, error) { return flate.NewWriter(w, flate.BestSpeed) })
		if err := errors.Join(put(z, designFile, []byte(`{"schema":"squint page data","schema_version":2}`)), put(z, blobDir+c.name, []byte("other numbers")), z.Close()); err != nil {
			t.Fatal(err)
		}
		if _, err := Read("x.zip", bytes.NewReader(b.Bytes()), int64(b.Len())); err == nil || !strings.Contains(err.Error(), "as their bytes give") {
			t.Errorf("archive with numbers named %q: got %v, want them refused", c.name, err)
		}
	}
}

// Two alternatives of equal numbers, at a height where a line more or less is
// rounded to just less than a line: labels come to rest below each other.
func TestTradeLabelsComeToRest(t *testing.T) {
	var all []*Design
	for range 3 {
		a := small("x")
		a.Design.Row.RearDA = 0.2277
		all = append(all, &a.Design)
	}
	text := string(tradeOff(all, 0))
	var at []string
	for _, m := range regexp.MustCompile(`class="name" x="[0-9.]+" y="([0-9.]+)"`).FindAllStringSubmatch(text, -1) {
		at = append(at, m[1])
	}
	if len(at) != 3 || at[0] == at[1] || at[1] == at[2] || at[0] == at[2] {
		t.Errorf("got labels at %v, want three heights", at)
	}
}

// Of many verdicts that are not met a dozen is shown, those with the most hours
// over the limit; the rest stands behind a control.
func TestWorstVerdictsFirst(t *testing.T) {
	a := small("one")
	d := &a.Design
	d.Verdicts, d.Views = nil, nil
	for i := range 40 {
		name := fmt.Sprintf("desk %d", i)
		d.Views = append(d.Views, View{Subject: name, Over: float64(i%20) / 100})
		d.Verdicts = append(d.Verdicts, Verdict{Subject: name, Outcome: "not met", Text: name + " glares"})
	}
	d.Verdicts = append(d.Verdicts, Verdict{Subject: "plane", Outcome: "undecided"}, Verdict{Subject: "desk x", Outcome: "met"})
	f := failing(d)
	if len(f[0]) != mostFailing || len(f[1]) != 41-mostFailing {
		t.Fatalf("got %d shown and %d behind, want %d and %d", len(f[0]), len(f[1]), mostFailing, 41-mostFailing)
	}
	for i, want := range []string{"plane", "desk 19", "desk 39", "desk 18"} {
		if f[0][i].Subject != want {
			t.Errorf("place %d: got %s, want %s", i, f[0][i].Subject, want)
		}
	}
	var b bytes.Buffer
	if err := Write(&b, []*Archive{a}, Options{}); err != nil {
		t.Fatal(err)
	}
	if n := strings.Count(b.String(), " glares</p>"); n != 40 {
		t.Errorf("the page tells %d verdicts of viewpoints, want all 40", n)
	}
}

// Pictures of any hour are held as far as the page may grow: every design its
// first patterns before any has its last.
func TestPicturesFitThePage(t *testing.T) {
	random := rand.New(rand.NewPCG(1, 2))
	design := func(name string, size int) *Archive {
		a := small(name)
		v := View{Shots: Shots{Steps: make([]Step, 6)}}
		noise := func() Blob {
			var p packer
			list := make([]uint8, size)
			for i := range list {
				list[i] = uint8(random.Uint32())
			}
			pack(&p, "noise", "u8", list)
			return a.add(&p)
		}
		v.Shots.Numbers = noise()
		for k := range v.Shots.Steps {
			v.Shots.Steps[k].Numbers = noise()
		}
		a.Design.Views = []View{v}
		return a
	}
	for _, size := range []int{1000, 250e3} {
		all := []*Archive{design("one", size), design("two", size), design("three", size)}
		held, err := hold(all, 1, 0)
		if err != nil {
			t.Fatal(err)
		}
		has, bytes := map[string]bool{}, 0
		for _, b := range held {
			has[b.id] = true
			bytes += len(b.packed) * 5 / 4
		}
		var steps [3]int
		for i, a := range all {
			for _, s := range a.Design.Views[0].Shots.Steps {
				if has[s.Numbers.ID] {
					steps[i]++
				}
			}
		}
		// By hand: a list of 250,000 bytes that do not pack takes 313 kB in
		// base 85, so 12 of them fit 3.9 MB: first steps are two lists, six for the
		// three designs, then two steps more in turn.
		want := [3]int{6, 6, 6}
		if size == 250e3 {
			want = [3]int{3, 3, 3}
		}
		if steps != want || bytes > leastPage {
			t.Errorf("lists of %d bytes: got %v steps and %d bytes, want %v and at most %g", size, steps, bytes, want, leastPage)
		}
	}
}

func TestDamagedArchives(t *testing.T) {
	zipped := func(name, text string) []byte {
		var b bytes.Buffer
		z := zip.NewWriter(&b)
		if err := errors.Join(put(z, name, []byte(text)), z.Close()); err != nil {
			t.Fatal(err)
		}
		return b.Bytes()
	}
	for want, data := range map[string][]byte{
		"got no zip file":                   []byte("nothing"),
		"got no design.json":                zipped("other", "{}"),
		"unexpected EOF":                    zipped(designFile, "{"),
		`got "squint page data" version 99`: zipped(designFile, `{"schema":"squint page data","schema_version":99}`),
		"cannot unmarshal string into Go":   zipped(designFile, `{"schema_version":"a"}`),
	} {
		if _, err := Read("x.zip", bytes.NewReader(data), int64(len(data))); err == nil || !strings.Contains(err.Error(), want) || !strings.HasPrefix(err.Error(), "x.zip: ") {
			t.Errorf("got %v, want x.zip: ... %s", err, want)
		}
	}
	a := small("one")
	delete(a.blobs, a.Design.Records.ID)
	if err := Write(io.Discard, []*Archive{a}, Options{}); err == nil || !strings.Contains(err.Error(), "are missing") {
		t.Errorf("missing numbers: got %v", err)
	}
	if err := Write(io.Discard, nil, Options{}); err == nil {
		t.Error("no design: got a page, want an error")
	}
	if err := Write(io.Discard, []*Archive{small("one")}, Options{Pictures: "two"}); !errors.Is(err, ErrNoAlternative) {
		t.Errorf("unknown alternative: got %v", err)
	}
}

func TestPageKeepsNamesAsText(t *testing.T) {
	var b bytes.Buffer
	if err := Write(&b, []*Archive{small("<i>one"), small("two")}, Options{}); err != nil {
		t.Fatal(err)
	}
	text := b.String()
	for _, bad := range []string{"x()</script>", "y()</script>", "<i>one", `"1" <b>`} {
		if strings.Contains(text, bad) {
			t.Errorf("the page holds %q as it stands", bad)
		}
	}
	if n := strings.Count(text, "<script"); n != strings.Count(text, "</script>") || n != 4 {
		t.Errorf("got %d script blocks, want the data, two lists of numbers that both share, and the bundle", n)
	}
	m := regexp.MustCompile(`(?s)<script type="application/json" id="data">(.*?)</script>`).FindStringSubmatch(text)
	var data pageData
	if m == nil || json.Unmarshal([]byte(m[1]), &data) != nil || data.Designs[0].Room.Parts[0].Name != "</script><script>y()</script>" {
		t.Error("the page's data do not hold the names as they were")
	}
	m = regexp.MustCompile(`id="n-[0-9a-f]{16}">"([^"]*)"<`).FindStringSubmatch(text)
	if m == nil {
		t.Fatal("got no numbers in the page")
	}
	back := []byte(m[1])
	for i, c := range back {
		if k := strings.IndexByte(free, c); k >= 0 {
			back[i] = taken[k]
		}
	}
	if packed, err := io.ReadAll(ascii85.NewDecoder(bytes.NewReader(back))); err != nil {
		t.Error(err)
	} else if raw, err := io.ReadAll(flate.NewReader(bytes.NewReader(packed))); err != nil || len(raw) != 13 {
		t.Errorf("the page's numbers: got %d bytes, %v, want 13", len(raw), err)
	}
}

// The page may load nothing from anywhere and run no script but its own.
func TestPageAsksForNothing(t *testing.T) {
	var b bytes.Buffer
	if err := Write(&b, []*Archive{small("one")}, Options{}); err != nil {
		t.Fatal(err)
	}
	for _, pattern := range []string{`(?i)\s(src|srcset|action|formaction|poster)\s*=`, `(?i)href="[^#d]`, `(?i)https?://`, `(?i)@import`, `\bimport\(`, `\bfetch\(`, `XMLHttpRequest`} {
		if m := regexp.MustCompile(pattern).FindString(b.String()); m != "" {
			t.Errorf("the page holds %q", m)
		}
	}
	if !strings.Contains(b.String(), "default-src &#39;none&#39;") {
		t.Error("got no policy that forbids all sources")
	}
}

func TestChosen(t *testing.T) {
	row := func(views, met int, rear float64) *Archive {
		a := small("x")
		a.Design.Row = Row{Views: views, ViewsMet: met, RearDA: rear}
		return a
	}
	for _, c := range []struct {
		all  []*Archive
		want int
	}{
		{[]*Archive{row(3, 1, 0.9), row(3, 2, 0.1)}, 1},
		{[]*Archive{row(3, 2, 0.1), row(3, 2, 0.4)}, 1},
		{[]*Archive{row(3, 2, 0.4), row(3, 2, 0.4)}, 0},
	} {
		if got := Chosen(c.all); got != c.want {
			t.Errorf("got design %d, want %d", got, c.want)
		}
	}
}
