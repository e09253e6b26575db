package page

import (
	"archive/zip"
	"bytes"
	"compress/flate"
	"encoding/base64"
	"encoding/json"
	"errors"
	"io"
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
	if n := strings.Count(text, "<script"); n != strings.Count(text, "</script>") || n != 3 {
		t.Errorf("got %d script blocks, want the data, one list of numbers that both share, and the bundle", n)
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
	if _, err := base64.StdEncoding.DecodeString(m[1]); err != nil {
		t.Error(err)
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
