package glare

import "math"

// Jackknife holds the standard errors of the DGP and the Ev (lx) of a pooled
// image from its batches, images whose mean it is: each is left out in turn. Discs count as
// exact. NaN for fewer than two batches.
//
// Source: Quenouille 1956, Notes on bias in estimation, Biometrika 43; Tukey
// 1958 (abstract), Annals of Mathematical Statistics 29.
func Jackknife(f *Field, mean []float32, batch [][]float32, discs []Disc, o Options, scratch *Scratch) (dgp, ev float64) {
	n := len(batch)
	if n < 2 {
		return math.NaN(), math.NaN()
	}
	if len(scratch.rest) != len(mean) {
		scratch.rest = make([]float32, len(mean))
	}
	all, without := float32(n)/float32(n-1), 1/float32(n-1)
	var sum, square [2]float64
	for _, b := range batch {
		for y, row := range f.spans {
			for i := y*f.Width + row.from; i < y*f.Width+row.to; i++ {
				scratch.rest[i] = max(0, mean[i]*all-b[i]*without)
			}
		}
		d, e := DGPOnly(f, scratch.rest, discs, o, scratch)
		for k, x := range [2]float64{d, e} {
			sum[k] += x
			square[k] += x * x
		}
	}
	stdErr := func(k int) float64 {
		m := sum[k] / float64(n)
		return math.Sqrt(math.Max(0, (square[k]/float64(n)-m*m)*float64(n-1)))
	}
	return stdErr(0), stdErr(1)
}
