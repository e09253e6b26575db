package falsecolour

import (
	"fmt"
	"image"
	"image/png"
	"io"
	"math"
	"strings"

	"golang.org/x/image/tiff"
)

// Render draws a figure: title, picture, legend, caption.
func Render(f Figure) (*image.RGBA, error) {
	return compose(&sheet{title: f.Title, caption: f.Caption, columns: 1, figures: []Figure{f}, width: defaultWidthPx})
}

// sheetWidthPx is the least width of a picture in a Sheet. Own choice.
const sheetWidthPx = 380

// Sheet draws several figures side by side, in the given number of columns,
// with one scale and legend. All must have the same Scale and Map; each keeps
// its own title and caption, below its picture.
func Sheet(title string, caption []string, columns int, figures ...Figure) (*image.RGBA, error) {
	if len(figures) == 0 || columns < 1 {
		return nil, fmt.Errorf("%w: sheet: got %d figures in %d columns, want at least one of each", ErrInvalid, len(figures), columns)
	}
	for i, f := range figures {
		if f.Scale != figures[0].Scale || f.Map != figures[0].Map {
			return nil, fmt.Errorf("%w: sheet: figure %d has another scale or colour map than the first; FitScale takes the values of all", ErrInvalid, i+1)
		}
	}
	return compose(&sheet{title: title, caption: caption, columns: min(columns, len(figures)), figures: figures, width: sheetWidthPx, cells: true})
}

// Formats lists the file formats of Encode.
var Formats = []string{"png", "tiff"}

// Encode writes a picture in one of Formats.
func Encode(w io.Writer, im image.Image, format string) error {
	switch format {
	case "png":
		return png.Encode(w, im)
	case "tiff":
		return tiff.Encode(w, im, &tiff.Options{Compression: tiff.Deflate, Predictor: true})
	}
	return fmt.Errorf("%w: format: got %q, want one of %s", ErrInvalid, format, strings.Join(Formats, ", "))
}

// WritePNG renders a figure as a PNG file.
func WritePNG(w io.Writer, f Figure) error {
	im, err := Render(f)
	if err != nil {
		return err
	}
	return Encode(w, im, "png")
}

// sheet is what compose lays out.
type sheet struct {
	title   string
	caption []string
	columns int
	figures []Figure
	width   int  // least width of a picture
	cells   bool // figures have titles and captions of their own

	faces typefaces
	size  float64 // scale of text and lines
	texts []placed
}

// placed is a line of text; the layout is made before anything is drawn.
type placed struct {
	style    *style
	x        int
	baseline int
	text     string
	colour   uint32
}

func (s *sheet) px(v float64) int { return int(math.Round(v * s.size)) }

// paragraph places a text from y on, wrapped to width, and returns the y
// below it.
func (s *sheet) paragraph(st *style, x, y, width int, text string, colour uint32) int {
	if text == "" {
		return y
	}
	for _, line := range st.wrap(text, float64(width)) {
		s.texts = append(s.texts, placed{st, x, y + (st.height+st.ascent)/2, line, colour})
		y += st.height
	}
	return y
}

// compose lays the sheet out and draws it.
func compose(s *sheet) (*image.RGBA, error) {
	enlarged := make([]int, len(s.figures))
	cell := image.Point{}
	for i := range s.figures {
		f := &s.figures[i]
		if err := f.validate(); err != nil {
			if s.cells {
				return nil, fmt.Errorf("figure %d: %w", i+1, err)
			}
			return nil, err
		}
		k, err := f.enlargement(s.width)
		if err != nil {
			return nil, err
		}
		enlarged[i] = k
		cell.X, cell.Y = max(cell.X, f.Width*k), max(cell.Y, f.Height*k)
	}
	// Text is made for pictures some 640 pixels wide.
	s.size = max(1, float64(cell.X)/640)
	var err error
	if s.faces, err = newTypefaces(s.size); err != nil {
		return nil, err
	}

	margin, gutter := s.px(24), s.px(28)
	inner := s.columns*cell.X + (s.columns-1)*gutter
	width := inner + 2*margin
	y := s.px(18)
	if s.title != "" {
		y = s.paragraph(&s.faces.title, margin, y, inner, s.title, ink) + s.px(8)
	} else {
		y = margin
	}
	corners := make([]image.Point, len(s.figures))
	for row := 0; row < len(s.figures); row += s.columns {
		bottom := y
		for i := row; i < min(row+s.columns, len(s.figures)); i++ {
			f := &s.figures[i]
			x := margin + (i-row)*(cell.X+gutter)
			corners[i] = image.Pt(x, y)
			end := y + f.Height*enlarged[i]
			if s.cells {
				end = s.paragraph(&s.faces.bold, x, end+s.px(8), cell.X, f.Title, ink)
				for _, c := range f.Caption {
					end = s.paragraph(&s.faces.small, x, end, cell.X, c, quiet)
				}
			}
			bottom = max(bottom, end)
		}
		y = bottom + s.px(18)
	}
	l := s.legend()
	legendY := y
	y += l.height() + s.px(10)
	for i, c := range s.caption {
		colour := uint32(quiet)
		if i == 0 {
			colour = ink
		}
		// Longer lines are hard to follow.
		y = s.paragraph(&s.faces.text, margin, y, min(inner, s.px(640)), c, colour)
	}
	y += s.px(18)
	if width > maxPixels/y {
		return nil, fmt.Errorf("%w: size: got a sheet of %d x %d pixels, want at most %d in all; reduce the images first", ErrInvalid, width, y, maxPixels)
	}

	dst := image.NewRGBA(image.Rect(0, 0, width, y))
	fill(dst, dst.Rect, rgb(paper))
	for i := range s.figures {
		newPicture(&s.figures[i], dst, corners[i], enlarged[i], s.size, &s.faces).draw()
	}
	l.draw(dst, margin, legendY, inner)
	for _, t := range s.texts {
		t.style.draw(dst, float64(t.x), t.baseline, t.text, rgb(t.colour))
	}
	return dst, nil
}

// legend is that of all figures.
func (s *sheet) legend() *legend {
	f := &s.figures[0]
	l := &legend{scale: f.Scale, colours: f.Map, faces: &s.faces, size: s.size}
	for i := range s.figures {
		l.beyond(&s.figures[i])
		l.contours = append(l.contours, s.figures[i].Contours...)
	}
	return l
}
