package sunpath

import (
	"context"
	"image/png"
	"io"
	"math"
	"strings"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/falsecolour"
	"squint/trace"
)

// The widths of a sheet in pixels; below the least its text cannot be read.
const (
	LeastWidthPx   = 400
	MostWidthPx    = 8192
	defaultWidthPx = 1200
)

// Sheet is a picture of a year of suns.
type Sheet struct {
	Form     Form
	WidthPx  int // LeastWidthPx to MostWidthPx; 0 for 1200
	NorthRad float64
	// World is the scene that is drawn.
	World *trace.World
	// Place stands below the title; Notes below everything else.
	Place string
	Notes []string
	// FromH and ToH are the clock hours of use.
	FromH, ToH float64
}

// Sizes in units of a sheet 640 wide.
const (
	sheetWidth = 640.0
	margin     = 24.0
	discRadius = 236.0
	discRim    = 34.0 // around the disc, for the names of its rim
)

// drawing is a sheet under way.
type drawing struct {
	*Sheet
	*falsecolour.Canvas
	year   *Year
	eye    fisheye
	centre falsecolour.Place
	around *outlook
	taken  []area
}

// WritePNG draws the year as a PNG.
func (y *Year) WritePNG(ctx context.Context, w io.Writer, s Sheet) error {
	d, err := y.draw(ctx, s)
	if err != nil {
		return err
	}
	return png.Encode(w, d.Image)
}

func (y *Year) draw(ctx context.Context, s Sheet) (*drawing, error) {
	if s.WidthPx == 0 {
		s.WidthPx = defaultWidthPx
	}
	c, err := falsecolour.NewCanvas(s.WidthPx)
	if err != nil {
		return nil, err
	}
	eye, err := newFisheye(y.Input.Point, s.Form, s.NorthRad)
	if err != nil {
		return nil, err
	}
	d := &drawing{Sheet: &s, Canvas: c, year: y, eye: eye}
	return d, d.compose(ctx)
}

// written is a line of text whose place is known before the sheet is opened.
type written struct {
	face   falsecolour.Face
	at     falsecolour.Place
	text   string
	colour uint32
}

// paragraph adds the lines of a text from y on and returns the y below.
func (d *drawing) paragraph(to *[]written, face falsecolour.Face, y float64, text string, colour uint32) float64 {
	if text == "" {
		return y
	}
	for _, line := range d.Wrap(face, text, sheetWidth-2*margin) {
		y += d.LineHeight(face)
		*to = append(*to, written{face, falsecolour.Place{X: margin, Y: y - d.LineHeight(face)*0.28}, line, colour})
	}
	return y
}

func (d *drawing) compose(ctx context.Context) error {
	var texts []written
	p := d.year.Input.Point
	y := d.paragraph(&texts, falsecolour.TitleFace, 14, "When the sun gets to "+p.Name, falsecolour.Ink)
	y = d.paragraph(&texts, falsecolour.SmallFace, y, d.Place, falsecolour.Quiet)
	y = d.paragraph(&texts, falsecolour.TextFace, y+6, d.year.Finding(), falsecolour.Ink)
	d.centre = falsecolour.Place{X: sheetWidth / 2, Y: y + discRim + discRadius}
	k := d.Scale()
	var err error
	if d.around, err = newOutlook(ctx, d.World, p, d.eye, d.centre.X*k, d.centre.Y*k, discRadius*k, d.year.Input.Workers); err != nil {
		return err
	}
	keyTop := d.centre.Y + discRadius + discRim
	y = keyTop + d.keyHeight() + 10
	y = d.paragraph(&texts, falsecolour.SmallFace, y, d.formText()+" "+d.year.Clock(), falsecolour.Quiet)
	y = d.paragraph(&texts, falsecolour.SmallFace, y+3, strings.TrimSpace(d.year.View()+" "+d.year.Weather()), falsecolour.Quiet)
	y = d.paragraph(&texts, falsecolour.SmallFace, y+3, Sampling(), falsecolour.Quiet)
	if d.year.Mirrored.All > 0 {
		y = d.paragraph(&texts, falsecolour.SmallFace, y+3, "Marks of mirrored sun that would overlap others are left out. "+d.year.Caution(), falsecolour.Quiet)
	}
	for _, n := range d.Notes {
		y = d.paragraph(&texts, falsecolour.SmallFace, y+3, n, falsecolour.Quiet)
	}
	d.Open(y + 18)
	for _, t := range texts {
		d.Text(t.face, t.at, t.text, t.colour, false)
	}
	d.around.paint(d.Image)
	d.Rings(discRadius, 1, falsecolour.Quiet, d.centre)
	d.directions()
	d.dots()
	arcs, err := d.arcs()
	if err != nil {
		return err
	}
	d.marks()
	if err := d.hourNames(); err != nil {
		return err
	}
	d.arcNames(arcs)
	d.altitudes()
	d.rose(falsecolour.Place{X: margin + 26, Y: d.centre.Y - discRadius + 14})
	d.key(keyTop)
	return nil
}

// formText says what the picture is.
func (d *drawing) formText() string {
	if d.Form == Up {
		return "Equidistant fisheye of 180 degrees from the point to the zenith, laid out as a plan: the rim is the horizon."
	}
	if d.year.Input.Point.Opening {
		return "Equidistant fisheye of 180 degrees out of the opening."
	}
	return "Equidistant fisheye of 180 degrees along the line of sight."
}

// on is where a direction is drawn.
func (d *drawing) on(dir r3.Vec) (falsecolour.Place, bool) {
	x, y, ok := d.eye.project(dir)
	return falsecolour.Place{X: d.centre.X + x*discRadius, Y: d.centre.Y + y*discRadius}, ok
}

// compass is a model direction by true azimuth and altitude, degrees.
func (d *drawing) compass(azDeg, altDeg float64) r3.Vec {
	sa, ca := math.Sincos(azDeg*math.Pi/180 - d.NorthRad)
	se, ce := math.Sincos(altDeg * math.Pi / 180)
	return r3.Vec{X: ce * sa, Y: ce * ca, Z: se}
}

// area is a taken place of the sheet.
type area struct{ x0, y0, x1, y1 float64 }

// name writes a text whose middle lies at a place if nothing is there yet.
func (d *drawing) name(face falsecolour.Face, middle falsecolour.Place, text string, colour uint32) bool {
	w, h := d.TextWidth(face, text), d.Capital(face)
	a := area{middle.X - w/2 - 1.5, middle.Y - h/2 - 1.5, middle.X + w/2 + 1.5, middle.Y + h/2 + 1.5}
	for _, t := range d.taken {
		if a.x0 < t.x1 && t.x0 < a.x1 && a.y0 < t.y1 && t.y0 < a.y1 {
			return false
		}
	}
	d.taken = append(d.taken, a)
	d.Text(face, falsecolour.Place{X: middle.X - w/2, Y: middle.Y + h/2}, text, colour, true)
	return true
}
