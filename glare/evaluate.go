package glare

import (
	"math"
)

// Result of an evaluation. Indices are by the formulas named in this package.
type Result struct {
	Ev        float64 // illuminance at the eye, lx
	EDirect   float64 // its part from the sources
	EIndirect float64 // the rest

	MeanLuminance       float64 // of the field, sources and discs included, cd/m2
	BackgroundLuminance float64 // mean outside of the pixel sources, cd/m2; 0 if there is nothing else
	ThresholdCdM2       float64 // luminance sources had to exceed
	SourceSum           float64 // sum of L^2 omega/P^2, cd2/m4 sr

	DGP     float64 // not clipped; with the low light factor if Options.LowLight
	InRange bool    // DGP (without that factor) 0.2 to 0.8 and Ev >= 380 lx

	DGPs      float64
	DGPsValid bool // no disc is seen

	// Where there is no source, and where the formula gives less than 0,
	// DGI, UGR and CGI are 0. UGR and DGI are +Inf where a source has no
	// background at all and the formula divides by it.
	DGI        float64 // with BackgroundLuminance
	UGR        float64 // with EIndirect/pi
	UGRInRange bool    // every source has 3e-4 to 0.1 sr
	CGI        float64
	VCP        float64 // percent; 100 without sources

	Sources []Source // largest contribution first
}

// Evaluate finds the sources of an image and computes all indices. Arguments
// are those of Detect; scratch may be nil, and the result does not share
// memory with it. Where only DGP is wanted, DGPOnly is faster.
func Evaluate(f *Field, lum []float32, discs []Disc, o Options, scratch *Scratch) Result {
	if scratch == nil {
		scratch = new(Scratch)
	}
	scratch.gather(f, lum, o)
	scratch.group(f, lum, o)
	r := Result{
		Ev: scratch.ev, ThresholdCdM2: scratch.threshold,
		DGPsValid: true, UGRInRange: true,
		Sources: scratch.sources(f, lum, discs, o),
	}
	flux := f.mean(lum) * f.TotalOmega
	restFlux, restOmega := flux, f.TotalOmega
	for _, b := range scratch.bright {
		l := float64(lum[b.pixel])
		r.EDirect += l * float64(f.weight[b.pixel])
		restFlux -= l * f.Omega[b.pixel]
		restOmega -= f.Omega[b.pixel]
	}
	for _, d := range discs {
		if !d.counts() {
			continue
		}
		e := d.illuminance()
		r.Ev += e
		r.EDirect += e
		flux += d.Luminance * d.OmegaSr
		r.DGPsValid = false
	}
	// All pixels bright: what is left is rounding.
	if len(scratch.bright) < f.Count {
		r.BackgroundLuminance = math.Max(restFlux/restOmega, 0)
		r.EIndirect = math.Max(r.Ev-r.EDirect, 0)
	}
	r.MeanLuminance = flux / f.TotalOmega
	for _, s := range r.Sources {
		r.SourceSum += s.Contribution
		if s.OmegaSr < MinUGROmegaSr || s.OmegaSr > MaxUGROmegaSr {
			r.UGRInRange = false
		}
	}

	r.DGP = DGP(r.Ev, r.SourceSum)
	r.InRange = InRange(r.DGP, r.Ev)
	if o.LowLight {
		r.DGP *= LowLight(r.Ev)
	}
	r.DGPs = DGPs(r.Ev)
	r.VCP = 100
	if len(r.Sources) > 0 {
		r.DGI = math.Max(0, DGI(r.Sources, r.BackgroundLuminance))
		r.UGR = math.Max(0, UGR(r.SourceSum, r.EIndirect/math.Pi))
		r.CGI = math.Max(0, CGI(r.SourceSum, r.EDirect, r.EIndirect))
		r.VCP = VCP(DGR(r.Sources, r.MeanLuminance))
	}
	return r
}

// DGPOnly returns DGP and Ev as Evaluate does (to rounding: sums run in
// another order), without listing the sources. It does not allocate once
// scratch, which must not be nil, has grown to the field.
func DGPOnly(f *Field, lum []float32, discs []Disc, o Options, scratch *Scratch) (dgp, ev float64) {
	scratch.gather(f, lum, o)
	scratch.group(f, lum, o)
	sum, discEv := sumDiscs(discs)
	for i := range scratch.groups {
		sum += scratch.groups[i].contribution(o.Position)
	}
	ev = scratch.ev + discEv
	dgp = DGP(ev, sum)
	if o.LowLight {
		dgp *= LowLight(ev)
	}
	return dgp, ev
}

// sumDiscs adds up what discs contribute, cd2/m4 sr, and their illuminance at the
// eye, lx.
func sumDiscs(discs []Disc) (sum, ev float64) {
	for _, d := range discs {
		if !d.counts() {
			continue
		}
		ev += d.illuminance()
		p := PositionIndex(d.Dir)
		sum += d.Luminance * d.Luminance * d.OmegaSr / (p * p)
	}
	return sum, ev
}
