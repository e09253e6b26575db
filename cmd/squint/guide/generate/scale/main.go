// Command scale draws what the size of a room costs, from the lines that
// BenchmarkFloor of squint/cmd/squint/internal/study printed.
//
// It is run by go generate in squint/cmd/squint/guide and takes the file of
// lines and the picture to write.
package main

import (
	"fmt"
	"image/png"
	"math"
	"os"
	"strings"

	"squint/glare/falsecolour"
)

func main() {
	if len(os.Args) != 3 {
		fmt.Fprintln(os.Stderr, "usage: scale MEASURED PICTURE")
		os.Exit(2)
	}
	if err := run(os.Args[1], os.Args[2]); err != nil {
		fmt.Fprintln(os.Stderr, err)
		os.Exit(1)
	}
}

func run(from, to string) error {
	in, err := os.Open(from)
	if err != nil {
		return err
	}
	defer in.Close()
	t, err := read(in)
	if err != nil {
		return fmt.Errorf("%s: %w", from, err)
	}
	sheet, err := draw(t)
	if err != nil {
		return err
	}
	out, err := os.Create(to)
	if err != nil {
		return err
	}
	defer out.Close()
	if err := (&png.Encoder{CompressionLevel: png.BestCompression}).Encode(out, sheet.Image); err != nil {
		return err
	}
	return out.Close()
}

// Sizes in units of a sheet 640 wide.
const (
	widthPx   = 1280
	margin    = 24.0
	headHigh  = 96.0
	panelHigh = 150.0
	panelGap  = 56.0
	leftRoom  = 44.0 // for the numbers of the vertical axis
	rightRoom = 14.0 // for half of the last number below
	dotRadius = 3.2
)

// words are the axes' names.
var words = map[string]string{"views": "viewpoints", "sensors": "sensors", "hours": "hours with daylight", "triangles": "triangles, by their logarithm"}

func draw(t *table) (*falsecolour.Canvas, error) {
	c, err := falsecolour.NewCanvas(widthPx)
	if err != nil {
		return nil, err
	}
	const wide = (640 - 2*margin - panelGap) / 2 // of a column
	foot := c.Wrap(falsecolour.SmallFace, "Dots are measured, lines are the laws that fit them best: a fixed part and one that grows in proportion. "+t.prepared()+" "+strings.Join(t.about, " ")+" Processor: "+t.cpu+".", 640-2*margin)
	c.Open(headHigh + float64(len(sizes))*(panelHigh+panelGap) + float64(len(foot))*c.LineHeight(falsecolour.SmallFace) + margin/2)
	at := func(x, y float64) falsecolour.Place { return falsecolour.Place{X: x, Y: y} }
	c.Text(falsecolour.TitleFace, at(margin, 34), "What size costs", falsecolour.Ink, false)
	c.Text(falsecolour.SmallFace, at(margin, 54), "An invented office floor of 60 by 25 m; one size varied, the others small.", falsecolour.Quiet, false)
	c.Text(falsecolour.BoldFace, at(margin, headHigh-16), "CPU time, s", falsecolour.Ink, false)
	c.Text(falsecolour.BoldFace, at(margin+wide+panelGap, headHigh-16), "Memory at its largest, MiB", falsecolour.Ink, false)
	for i, s := range sizes {
		y := headHigh + float64(i)*(panelHigh+panelGap)
		for k, value := range [2]func(r row) float64{func(r row) float64 { return r.seconds }, func(r row) float64 { return r.mib }} {
			p := panel{c: c, left: margin + leftRoom + float64(k)*(wide+panelGap), top: y, wide: wide - leftRoom - rightRoom, log: s == "triangles"}
			p.draw(t.rows[s], value, words[s])
		}
	}
	y := headHigh + float64(len(sizes))*(panelHigh+panelGap)
	for _, l := range foot {
		c.Text(falsecolour.SmallFace, at(margin, y), l, falsecolour.Quiet, false)
		y += c.LineHeight(falsecolour.SmallFace)
	}
	return c, nil
}

// panel is one plot; log has the horizontal axis by logarithm.
type panel struct {
	c               *falsecolour.Canvas
	left, top, wide float64
	log             bool
	lo, hi, most    float64
}

func (p *panel) place(size, value float64) falsecolour.Place {
	share := (size - p.lo) / (p.hi - p.lo)
	if p.log {
		share = math.Log(size/p.lo) / math.Log(p.hi/p.lo)
	}
	return falsecolour.Place{X: p.left + share*p.wide, Y: p.top + panelHigh*(1-value/p.most)}
}

func (p *panel) draw(rows []row, value func(r row) float64, name string) {
	var x, y []float64
	for _, r := range rows {
		p.hi, p.most = math.Max(p.hi, r.size), math.Max(p.most, value(r))
		size := r.size
		if p.log {
			size = math.Log(size)
		}
		x, y = append(x, size), append(y, value(r))
	}
	p.hi, p.most = top(p.hi), top(p.most)
	across := steps(p.hi)
	if p.log {
		p.lo, p.hi = 20000, math.Max(p.hi, 500000)
		across = []float64{20000, 100000, 500000}
	}
	for _, v := range steps(p.most) {
		a, b := p.place(p.lo, v), p.place(p.hi, v)
		p.c.Lines(0.6, falsecolour.Hairline, []falsecolour.Place{a, b})
		text := falsecolour.Number(v)
		a.X -= p.c.TextWidth(falsecolour.SmallFace, text) + 6
		a.Y += p.c.Capital(falsecolour.SmallFace) / 2
		p.c.Text(falsecolour.SmallFace, a, text, falsecolour.Quiet, false)
	}
	for _, v := range across {
		a := p.place(v, 0)
		text := falsecolour.Number(v)
		a.X -= p.c.TextWidth(falsecolour.SmallFace, text) / 2
		a.Y += 16
		p.c.Text(falsecolour.SmallFace, a, text, falsecolour.Quiet, false)
	}
	below := p.place(p.lo, 0)
	below.Y += 32
	p.c.Text(falsecolour.SmallFace, below, name, falsecolour.Ink, false)
	a, b := law(x, y)
	first, last := rows[0].size, rows[len(rows)-1].size
	for _, r := range rows {
		first, last = math.Min(first, r.size), math.Max(last, r.size)
	}
	at := func(size float64) float64 {
		if p.log {
			return a + b*math.Log(size)
		}
		return a + b*size
	}
	p.c.Lines(1, falsecolour.Quiet, []falsecolour.Place{p.place(first, at(first)), p.place(last, at(last))})
	var dots []falsecolour.Place
	for _, r := range rows {
		dots = append(dots, p.place(r.size, value(r)))
	}
	p.c.Dots(dotRadius, falsecolour.LowSun, dots...)
}
