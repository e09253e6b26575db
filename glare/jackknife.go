package glare

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// Pooled returns the DGP and the Ev (lx) of a pooled image, as DGPOnly, with
// their standard errors from its batches, images whose mean it is: each is left
// out in turn. Discs count as exact. Errors are NaN for fewer than two batches.
//
// Where DGP with farErrors standard errors and farBias stays below near, the
// batches are not searched for sources: those of the pooled image stay, with
// each batch's luminance, and what pixels do that cross the threshold is left
// out of the error. near 0 has them searched always.
//
// Source: Quenouille 1956, Notes on bias in estimation, Biometrika 43; Tukey
// 1958 (abstract), Annals of Mathematical Statistics 29. The shortcut is our own.
func Pooled(f *Field, mean []float32, batch [][]float32, discs []Disc, o Options, near float64, scratch *Scratch) (dgp, ev, dgpErr, evErr float64) {
	dgp, ev = DGPOnly(f, mean, discs, o, scratch)
	n := len(batch)
	if n < 2 {
		return dgp, ev, math.NaN(), math.NaN()
	}
	if dgp+farBias < near {
		if dgpErr, evErr = scratch.kept(f, batch, discs, o); dgp+farErrors*dgpErr+farBias < near {
			return dgp, ev, dgpErr, evErr
		}
	}
	if len(scratch.rest) != len(mean) {
		scratch.rest = make([]float32, len(mean))
	}
	all, without := float32(n)/float32(n-1), 1/float32(n-1)
	var k knife
	for _, b := range batch {
		for y, row := range f.spans {
			for i := y*f.Width + row.from; i < y*f.Width+row.to; i++ {
				scratch.rest[i] = max(0, mean[i]*all-b[i]*without)
			}
		}
		k.add(DGPOnly(f, scratch.rest, discs, o, scratch))
	}
	dgpErr, evErr = k.stdErr()
	return dgp, ev, dgpErr, evErr
}

// How far below a limit a DGP is far: so many standard errors, which leaves out
// no bracket of any number of views (verdict.T with 7 degrees of freedom is 10 at
// a chance of 1e-5), and so much for bias. Own choice.
const (
	farErrors = 10
	farBias   = 0.03
)

// kept is the jackknife with the sources that scratch found last, in the pooled
// image.
func (s *Scratch) kept(f *Field, batch [][]float32, discs []Disc, o Options) (dgp, ev float64) {
	n := float64(len(batch))
	discSum, discEv := sumDiscs(discs)
	var k knife
	for len(s.partFlux) < len(s.groups) {
		s.partFlux = append(s.partFlux, 0)
	}
	for _, b := range batch {
		e := (n*s.ev - f.illuminance(b)) / (n - 1)
		part := s.partFlux[:len(s.groups)]
		clear(part)
		for i, p := range s.bright {
			part[s.groupOf[i]] += float64(b[p.pixel]) * f.Omega[p.pixel]
		}
		sum := discSum
		for i := range s.groups {
			g := s.groups[i]
			whole := g.flux
			g.flux = math.Max(0, (n*g.flux-part[i])/(n-1))
			if whole > 0 {
				g.moment = r3.Scale(g.flux/whole, g.moment)
			}
			sum += g.contribution(o.Position)
		}
		d := DGP(math.Max(0, e)+discEv, sum)
		if o.LowLight {
			d *= LowLight(e + discEv)
		}
		k.add(d, e+discEv)
	}
	return k.stdErr()
}

// illuminance of an image at the eye, lx, without discs.
func (f *Field) illuminance(lum []float32) float64 {
	total := 0.0
	for y, row := range f.spans {
		from := y*f.Width + row.from
		l := lum[from : y*f.Width+row.to]
		w := f.weight[from:]
		w = w[:len(l)]
		// Four sums, as one would wait for each addition to finish.
		var e [4]float64
		i := 0
		for ; i+4 <= len(l); i += 4 {
			l4, w4 := l[i:i+4:i+4], w[i:i+4:i+4]
			e[0] += float64(l4[0]) * float64(w4[0])
			e[1] += float64(l4[1]) * float64(w4[1])
			e[2] += float64(l4[2]) * float64(w4[2])
			e[3] += float64(l4[3]) * float64(w4[3])
		}
		for ; i < len(l); i++ {
			e[0] += float64(l[i]) * float64(w[i])
		}
		total += (e[0] + e[1]) + (e[2] + e[3])
	}
	return total
}

// knife sums what is left when each batch is left out in turn.
type knife struct {
	n           int
	sum, square [2]float64
}

func (k *knife) add(dgp, ev float64) {
	k.n++
	for i, x := range [2]float64{dgp, ev} {
		k.sum[i] += x
		k.square[i] += x * x
	}
}

func (k *knife) stdErr() (dgp, ev float64) {
	var out [2]float64
	n := float64(k.n)
	for i := range out {
		m := k.sum[i] / n
		out[i] = math.Sqrt(math.Max(0, (k.square[i]/n-m*m)*(n-1)))
	}
	return out[0], out[1]
}
