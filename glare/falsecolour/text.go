package falsecolour

import (
	"fmt"
	"image"
	"image/color"
	"math"
	"strings"

	"golang.org/x/image/font"
	"golang.org/x/image/font/gofont/gobold"
	"golang.org/x/image/font/gofont/goregular"
	"golang.org/x/image/font/opentype"
	"golang.org/x/image/math/fixed"
)

// type sizes, pixels of an em at scale 1.
const (
	titlePx = 20
	textPx  = 14.5
	smallPx = 13.5
)

// style is a face in one size.
type style struct {
	face   font.Face
	em     float64 // pixels
	height int     // of a line
	ascent int     // of capitals and figures
}

// typefaces are those of a sheet. Faces cannot be shared between goroutines,
// so each drawing makes its own.
type typefaces struct{ title, text, small, bold style }

func newTypefaces(scale float64) (t typefaces, err error) {
	for _, s := range [...]struct {
		to  *style
		ttf []byte
		px  float64
	}{{&t.title, gobold.TTF, titlePx}, {&t.text, goregular.TTF, textPx}, {&t.small, goregular.TTF, smallPx}, {&t.bold, gobold.TTF, smallPx}} {
		f, err := opentype.Parse(s.ttf)
		if err != nil {
			return t, fmt.Errorf("typeface: %w", err)
		}
		em := s.px * scale
		// 72 dots per inch make a point a pixel.
		face, err := opentype.NewFace(f, &opentype.FaceOptions{Size: em, DPI: 72, Hinting: font.HintingNone})
		if err != nil {
			return t, fmt.Errorf("typeface: %w", err)
		}
		m := face.Metrics()
		*s.to = style{face, em, int(math.Round(em * 1.35)), m.CapHeight.Ceil()}
	}
	return t, nil
}

// glyphs calls f with every rune of s and where it begins, and returns the
// advance of all. The faces have no thin space; it is drawn as a sixth of an
// em.
func (s style) glyphs(text string, f func(r rune, at fixed.Int26_6)) fixed.Int26_6 {
	var at fixed.Int26_6
	previous := rune(-1)
	for _, r := range text {
		if r == thinSpace {
			at += fixed.Int26_6(s.em / 6 * 64)
			previous = -1
			continue
		}
		if previous >= 0 {
			at += s.face.Kern(previous, r)
		}
		if f != nil {
			f(r, at)
		}
		advance, ok := s.face.GlyphAdvance(r)
		if ok {
			at += advance
		}
		previous = r
	}
	return at
}

// width is the advance of a text, pixels.
func (s style) width(text string) float64 { return float64(s.glyphs(text, nil)) / 64 }

// onto covers the text's shapes, beginning at (x, baseline).
func (s style) onto(l layer, x float64, baseline int, text string) {
	start := fixed.Int26_6(math.Round(x * 64))
	s.glyphs(text, func(r rune, at fixed.Int26_6) {
		d := font.Drawer{Dst: l.Alpha, Src: image.Opaque, Face: s.face, Dot: fixed.Point26_6{X: start + at, Y: fixed.I(baseline)}}
		d.DrawString(string(r))
	})
}

// draw writes a text in one colour.
func (s style) draw(dst *image.RGBA, x float64, baseline int, text string, c color.RGBA) {
	l := newLayer(image.Rect(int(x)-2, baseline-2*s.ascent, int(x+s.width(text))+3, baseline+s.height).Intersect(dst.Rect))
	s.onto(l, x, baseline, text)
	l.paint(dst, c)
}

// cased writes a text with a casing, to be read on any ground.
func (s style) cased(dst *image.RGBA, x float64, baseline int, text string, c, casing color.RGBA, r float64) {
	l := newLayer(image.Rect(int(x)-2, baseline-2*s.ascent, int(x+s.width(text))+3, baseline+s.height))
	s.onto(l, x, baseline, text)
	l.grown(r).paint(dst, casing)
	l.paint(dst, c)
}

// wrap breaks a text into lines no wider than limit, at spaces or, within a
// longer word, anywhere. Line breaks of the text stay.
func (s style) wrap(text string, limit float64) []string {
	var lines []string
	for _, paragraph := range strings.Split(text, "\n") {
		line := ""
		for _, word := range strings.Fields(paragraph) {
			if line != "" && s.width(line+" "+word) <= limit {
				line += " " + word
				continue
			}
			if line != "" {
				lines = append(lines, line)
			}
			for line = word; s.width(line) > limit; {
				runes := []rune(line)
				n := len(runes)
				for n > 1 && s.width(string(runes[:n])) > limit {
					n--
				}
				if n == len(runes) { // a single rune wider than the limit
					break
				}
				lines = append(lines, string(runes[:n]))
				line = string(runes[n:])
			}
		}
		lines = append(lines, line)
	}
	return lines
}
