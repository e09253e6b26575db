package sunpath

import (
	"context"
	"image"
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/trace"
	"squint/trace/parallel"
)

// tones are the greys of the kinds as 0xRRGGBB: light where the sun may come
// from, darker what stands in its way, told apart in grey print.
var tones = [kinds]uint32{
	skyStraight:  0xFFFFFF,
	skyGlass:     0xF5F2EA,
	skyCloth:     0xE6E1D5,
	surroundings: 0xB0B1AE,
	ground:       0xDAD6CB,
	room:         0xC9C5BA,
	shading:      0x97958F,
}

// crease is the cosine between two surfaces from which on their edge is drawn.
// Own choice.
const crease = 0.9

// outlook is what the point sees, as lines of sight over the square about the
// disc, fine x fine for each pixel.
type outlook struct {
	x0, y0, n int // the square, in pixels
	seen      []sight
	ok        []bool // in the disc
	has       [kinds]bool
}

const fine = 2

// newOutlook looks around within a disc of some radius about (cx, cy), in
// pixels. What lies behind an opening is room, without edges.
func newOutlook(ctx context.Context, w *trace.World, p Point, f fisheye, cx, cy, radius float64, workers int) (*outlook, error) {
	n := int(math.Ceil(radius))*2 + 2
	o := &outlook{x0: int(cx) - n/2, y0: int(cy) - n/2, n: n, seen: make([]sight, n*n*fine*fine), ok: make([]bool, n*n*fine*fine)}
	if err := parallel.Try(ctx, workers, n*fine, func(row int) error {
		y := (float64(o.y0) + (float64(row)+.5)/fine - cy) / radius
		for col := range n * fine {
			x := (float64(o.x0) + (float64(col)+.5)/fine - cx) / radius
			dir, in := f.ray(x, y)
			if !in {
				continue
			}
			i := row*n*fine + col
			o.seen[i], o.ok[i] = sight{kind: room, part: -1}, true
			if p.sees(dir) {
				o.seen[i] = look(w, p.Position, dir)
			}
		}
		return nil
	}); err != nil {
		return nil, err
	}
	for i, s := range o.seen {
		o.has[s.kind] = o.has[s.kind] || o.ok[i]
	}
	return o, nil
}

// paint lays greys by kind, and the edges between parts, on the sheet.
func (o *outlook) paint(im *image.RGBA) {
	wide := o.n * fine
	for row := range o.n {
		for col := range o.n {
			var sum [3]float64
			covered := 0.0
			for k := range fine * fine {
				i := (row*fine+k/fine)*wide + col*fine + k%fine
				if !o.ok[i] {
					continue
				}
				covered++
				tone := tones[o.seen[i].kind]
				for _, j := range [2]int{i + 1, i + wide} {
					if j < len(o.ok) && o.ok[j] && edge(&o.seen[i], &o.seen[j]) {
						tone = edgeTone
					}
				}
				for c := range sum {
					sum[c] += float64(tone >> (16 - 8*c) & 255)
				}
			}
			if covered == 0 {
				continue
			}
			share := covered / (fine * fine)
			at := im.PixOffset(o.x0+col, o.y0+row)
			for c := range sum {
				under := float64(im.Pix[at+c])
				im.Pix[at+c] = uint8(under + share*(sum[c]/covered-under) + .5)
			}
		}
	}
}

// edgeTone is the colour of edges, quieter than any line of the sun's.
const edgeTone = 0x7F7D77

// edge reports that a line is drawn between two sights.
func edge(a, b *sight) bool {
	if a.kind != b.kind || a.part != b.part {
		return true
	}
	return !a.kind.free() && a.part >= 0 && r3.Dot(a.normal, b.normal) < crease
}
