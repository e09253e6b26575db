package picture

import (
	"context"
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/trace/parallel"
)

// How gathered light is shared between pixels that see one flat surface: within
// a share of the mean distance of what the surface sees, since that is the
// scale on which its illuminance changes, but at least within narrowest and never
// farther than widest pixels. Both shrink with the samples, so that what the
// averaging blurs goes to nothing. Own choice of numbers.
//
// Source: Kontkanen, Rasanen & Keller 2004, Irradiance filtering for Monte Carlo
// ray tracing, Monte Carlo and Quasi-Monte Carlo Methods (from memory).
const (
	reach     = 0.15 // share of the harmonic mean distance, up to settled samples
	settled   = 32   // samples a pixel from which reach shrinks
	widest    = 8    // pixels
	narrowest = 2.5  // pixels, up to settled samples
	flat      = 0.99 // least cosine between normals, 8 degrees
	level     = 0.1  // offset from the plane, in radii
	around    = 2    // pixels over which the mean distance is taken
)

// develop makes the picture of what the film holds.
func (f *film) develop(workers int) *Picture {
	p := &Picture{Width: f.width, Height: f.height, Quantity: f.quantity, Samples: f.rounds * Batches,
		Mean: make([]float32, len(f.pixel)), StdErr: make([]float32, len(f.pixel)), Batch: make([][]float32, Batches)}
	for b := range p.Batch {
		p.Batch[b] = make([]float32, len(f.pixel))
	}
	share := reach * math.Min(1, math.Pow(settled/float64(p.Samples), 0.25))
	// The work is short: a stop is heard of between rounds.
	_ = parallel.Each(context.Background(), workers, f.height, func(y int) {
		for x := range f.width {
			f.pixelOf(p, x, y, share)
		}
	})
	p.MedianError = medianError(p)
	return p
}

// pixelOf develops one pixel.
func (f *film) pixelOf(p *Picture, x, y int, share float64) {
	i := y*f.width + x
	r := &f.pixel[i]
	if !r.inside {
		p.Mean[i], p.StdErr[i] = float32(math.NaN()), float32(math.NaN())
		for b := range p.Batch {
			p.Batch[b][i] = float32(math.NaN())
		}
		return
	}
	var e [Batches]float64
	if r.has {
		f.gatheredAt(x, y, share, &e)
	}
	sum := 0.0
	var l [Batches]float64
	for b := range l {
		c := &f.batch[b][i]
		l[b] = (float64(c.rest) + float64(c.share)*e[b]) / float64(c.samples)
		p.Batch[b][i] = float32(l[b])
		sum += l[b]
	}
	mean, square := sum/Batches, 0.0
	for b := range l {
		square += (l[b] - mean) * (l[b] - mean)
	}
	p.Mean[i], p.StdErr[i] = float32(mean), float32(math.Sqrt(square/(Batches*(Batches-1))))
}

// gatheredAt averages the gathered illuminance about a pixel, batch by batch
// with the same weights, 1-(d/r)^2 by the distance d on the surface or, where
// that is more, in the picture.
func (f *film) gatheredAt(x, y int, share float64, e *[Batches]float64) {
	r := &f.pixel[y*f.width+x]
	radius := share * f.meanDistance(x, y)
	square := radius * radius
	var sum, weight [Batches]float64
	least := narrowest * narrowest * share * share / (reach * reach)
	f.neighbours(x, y, widest, func(i, pixels2 int) {
		q := &f.pixel[i]
		d := r3.Sub(q.p, r.p)
		w := 1 - r3.Norm2(d)/square
		if math.Abs(r3.Dot(d, r.n)) > level*radius {
			w = 0
		}
		if w = math.Max(w, 1-float64(pixels2)/least); w <= 0 {
			return
		}
		for b := range Batches {
			c := &f.batch[b][i]
			sum[b] += w * float64(c.gathered)
			weight[b] += w * float64(c.count)
		}
	})
	for b := range e {
		if weight[b] > 0 {
			e[b] = sum[b] / weight[b]
		}
	}
}

// meanDistance is the harmonic mean distance of what is seen from the surface
// about a pixel; where nothing but sky is seen, it has no bound.
func (f *film) meanDistance(x, y int) float64 {
	var inverse, count float64
	f.neighbours(x, y, around, func(i, _ int) {
		for b := range Batches {
			inverse += float64(f.batch[b][i].inverse)
			count += float64(f.batch[b][i].count)
		}
	})
	if inverse <= 0 {
		return math.Inf(1)
	}
	return count / inverse
}

// neighbours calls visit for the pixels within n each way that see the same
// flat surface as (x, y), itself included, with their squared distance in
// pixels.
func (f *film) neighbours(x, y, n int, visit func(i, pixels2 int)) {
	r := &f.pixel[y*f.width+x]
	for j := max(0, y-n); j <= min(f.height-1, y+n); j++ {
		for i := max(0, x-n); i <= min(f.width-1, x+n); i++ {
			q := &f.pixel[j*f.width+i]
			if q.has && q.part == r.part && r3.Dot(q.n, r.n) > flat {
				visit(j*f.width+i, (i-x)*(i-x)+(j-y)*(j-y))
			}
		}
	}
}

// medianError is the median relative standard error over the pixels that show
// any light.
func medianError(p *Picture) float64 {
	var all []float32
	for i, m := range p.Mean {
		if m > 0 { // not NaN either
			all = append(all, p.StdErr[i]/m)
		}
	}
	if len(all) == 0 {
		return 0
	}
	slices.Sort(all)
	return float64(all[len(all)/2])
}
