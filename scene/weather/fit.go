package weather

import (
	"fmt"
	"math"
	"time"
)

// CosZenith returns the cosine of the sun's zenith angle at the site and at
// time t, negative when the sun is down.
type CosZenith func(t time.Time) float64

const (
	// fitGHI in W/m² leaves out the hours around sunrise and sunset, in which
	// neither a mean nor a rounded value closes.
	fitGHI = 50
	// fitRangeH is the range of offsets that are tried, to both sides.
	fitRangeH = 2
	// coarseStepH is the step of the first pass, small against the hours over
	// which the closure has its one minimum.
	coarseStepH = 0.25
	// fitToleranceH is the width to which golden section narrows the offset.
	fitToleranceH = 0.001
	// contradictionH: a tenth of an hour moves the sun by 1.5 degrees, three
	// times its diameter. Own choice, no published source.
	contradictionH = 0.1
	// flatWM2: if no offset is worse than the best by more than this, as with a
	// year without direct light, the closure tells nothing. Own choice.
	flatWM2 = 1
)

// Fit says when the irradiances of a file were taken. Offsets are in hours
// from the end of the labelled hour, closures (root mean square of GHI - DHI -
// DNI cos Z) in W/m².
type Fit struct {
	// OffsetH is the offset to use: the one of best closure, or the claimed one
	// where the closure cannot tell (Decided false).
	OffsetH        float64
	RMSWm2         float64 // closure at OffsetH
	ClaimedOffsetH float64
	ClaimedRMSWm2  float64 // closure at ClaimedOffsetH
	Hours          int     // hours with GHI > 50 W/m², over which the closure runs
	Decided        bool    // the closure tells the offsets apart
	// Contradicts warns that the fitted moment is more than 0.1 h from the
	// claimed one and closes clearly better.
	Contradicts bool
	Text        string // one sentence for the user
}

// FitMoment returns the offset, within two hours of the labelled end of the
// hour, at which GHI = DHI + DNI cos Z closes best over the hours with GHI > 50
// W/m²: by steps of a quarter hour, then golden section to 0.001 h. It asks cz
// some 20,000 times at most.
func (y *Year) FitMoment(cz CosZenith) Fit {
	c := newClosure(y, cz)
	f := Fit{ClaimedOffsetH: y.ClaimedOffsetH(), Hours: len(c.hours)}
	if f.Hours == 0 {
		f.OffsetH = f.ClaimedOffsetH
		f.Text = fmt.Sprintf("%s has no hour of more than %d W/m2, so that the moment of its irradiances cannot be checked; the sun is taken %s, as the file says.", y.File, fitGHI, offsetWords(f.OffsetH))
		return f
	}
	f.ClaimedRMSWm2 = c.rms(f.ClaimedOffsetH)
	offset, spread := c.search()
	if !(spread >= flatWM2) { // NaN, from a cz that fails, tells nothing either
		f.OffsetH, f.RMSWm2 = f.ClaimedOffsetH, f.ClaimedRMSWm2
		f.Text = fmt.Sprintf("The irradiances of %s close alike at every moment (too little direct sun), so that it cannot be checked; the sun is taken %s, as the file says.", y.File, offsetWords(f.OffsetH))
		return f
	}
	f.Decided = true
	f.OffsetH, f.RMSWm2 = offset, c.rms(offset)
	// A better closure by a quarter and by 1 W/m2 is more than the rounding of
	// the columns can make: own choice, no published source.
	f.Contradicts = math.Abs(f.OffsetH-f.ClaimedOffsetH) > contradictionH && f.ClaimedRMSWm2 > 1.25*f.RMSWm2+1
	f.Text = y.fitText(f)
	return f
}

func (y *Year) fitText(f Fit) string {
	s := fmt.Sprintf("The irradiances of %s fit together best with the sun taken %s (to %.1f W/m2 over %d hours)",
		y.File, offsetWords(f.OffsetH), f.RMSWm2, f.Hours)
	claimed := fmt.Sprintf("%s (%.1f W/m2)", offsetWords(f.ClaimedOffsetH), f.ClaimedRMSWm2)
	edge := ""
	if fitRangeH-math.Abs(f.OffsetH) < 0.01 {
		edge = ", at the end of the range that was searched: check the longitude and the time zone"
	}
	if f.Contradicts {
		return s + ", against the file's claim of " + claimed + edge + "; the fitted moment is used."
	}
	return s + ", in keeping with the file's claim of " + claimed + edge + "."
}

// offsetWords says an offset from the labelled end of the hour.
func offsetWords(h float64) string {
	switch {
	case math.Abs(h) < 0.0005:
		return "at the labelled hour"
	case h < 0:
		return fmt.Sprintf("%.3f h before the labelled hour", -h)
	}
	return fmt.Sprintf("%.3f h after the labelled hour", h)
}

// closure holds what the search needs: the hours with light, and cos Z at the
// whole hours around them.
//
// A search with cz itself would ask it 4,000 times for every offset. Within
// two hours, cos Z is so smooth that six hourly values around the offset give
// it to 2e-6 (error of Lagrange interpolation in the middle of six nodes:
// (pi/12)^6/6! * (0.5*1.5*2.5)^2, the sun turning by pi/12 an hour).
type closure struct {
	year  *Year
	cz    CosZenith
	hours []int     // indices of the records
	nodes []float64 // nodes[j*nodesPerHour+k]: hour j, k-firstNode hours after its label
}

const (
	firstNode    = fitRangeH + 2
	nodesPerHour = 2*fitRangeH + 5
)

func newClosure(y *Year, cz CosZenith) *closure {
	c := &closure{year: y, cz: cz}
	for i, r := range y.Records {
		if r.GHI > fitGHI {
			c.hours = append(c.hours, i)
		}
	}
	c.nodes = make([]float64, len(c.hours)*nodesPerHour)
	asked := make(map[int64]float64, len(c.nodes))
	for j, i := range c.hours {
		for k := 0; k < nodesPerHour; k++ {
			t := y.Moment(i, float64(k-firstNode))
			v, ok := asked[t.Unix()]
			if !ok {
				v = cz(t)
				asked[t.Unix()] = v
			}
			c.nodes[j*nodesPerHour+k] = v
		}
	}
	return c
}

// rms is the closure at an offset, with cz itself.
func (c *closure) rms(offsetH float64) float64 {
	sum := 0.0
	for _, i := range c.hours {
		sum += sqr(c.residual(i, c.cz(c.year.Moment(i, offsetH))))
	}
	return math.Sqrt(sum / float64(len(c.hours)))
}

// quickRMS is the closure at an offset, with interpolated cosines.
func (c *closure) quickRMS(offsetH float64) float64 {
	base := min(int(math.Floor(offsetH)), fitRangeH-1)
	w := lagrange6(offsetH - float64(base))
	first := base - 2 + firstNode
	sum := 0.0
	for j, i := range c.hours {
		n := c.nodes[j*nodesPerHour+first : j*nodesPerHour+first+6]
		cos := w[0]*n[0] + w[1]*n[1] + w[2]*n[2] + w[3]*n[3] + w[4]*n[4] + w[5]*n[5]
		sum += sqr(c.residual(i, cos))
	}
	return math.Sqrt(sum / float64(len(c.hours)))
}

func (c *closure) residual(i int, cosZ float64) float64 {
	r := &c.year.Records[i]
	return r.GHI - r.DHI - r.DNI*math.Max(0, cosZ)
}

// lagrange6 returns the weights of the nodes -2 .. 3 at x in [0, 1].
func lagrange6(x float64) [6]float64 {
	var w [6]float64
	for i := range w {
		w[i] = 1
		for j := range w {
			if i != j {
				w[i] *= (x - float64(j-2)) / float64(i-j)
			}
		}
	}
	return w
}

// search returns the offset of best closure and how much worse the worst one
// is, in W/m².
func (c *closure) search() (offsetH, spread float64) {
	best, bestRMS, worstRMS := 0.0, math.Inf(1), 0.0
	for k := 0; k <= 2*fitRangeH/coarseStepH; k++ {
		h := -fitRangeH + float64(k)*coarseStepH
		rms := c.quickRMS(h)
		if rms < bestRMS {
			best, bestRMS = h, rms
		}
		worstRMS = math.Max(worstRMS, rms)
	}
	lo, hi := math.Max(-fitRangeH, best-coarseStepH), math.Min(fitRangeH, best+coarseStepH)
	return c.golden(lo, hi), worstRMS - bestRMS
}

// golden narrows a bracket of one minimum by golden section.
// Source: Kiefer 1953, Sequential minimax search for a maximum, Proc. American
// Mathematical Society 4.
func (c *closure) golden(lo, hi float64) float64 {
	g := (math.Sqrt(5) - 1) / 2
	a, b := hi-g*(hi-lo), lo+g*(hi-lo)
	fa, fb := c.quickRMS(a), c.quickRMS(b)
	for hi-lo > fitToleranceH {
		if fa < fb {
			hi, b, fb = b, a, fa
			a = hi - g*(hi-lo)
			fa = c.quickRMS(a)
		} else {
			lo, a, fa = a, b, fb
			b = lo + g*(hi-lo)
			fb = c.quickRMS(b)
		}
	}
	return (lo + hi) / 2
}

func sqr(x float64) float64 { return x * x }
