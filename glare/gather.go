package glare

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// gather sums the illuminance of the pixels and lists the bright ones.
func (s *Scratch) gather(f *Field, lum []float32, o Options) {
	if len(lum) != f.Width*f.Height {
		panic("glare: length of the image differs from that of its field")
	}
	s.threshold = s.limit(f, lum, o)
	s.bright = s.bright[:0]
	core := math.Inf(1)
	if o.CoreCdM2 > 0 {
		core = o.CoreCdM2
	}
	// Comparing in float32 is exact: the pixels are float32, and rounding the
	// threshold down to one cannot put a pixel on its other side.
	threshold := floor32(s.threshold)
	total := 0.0
	for y, row := range f.spans {
		from := y*f.Width + row.from
		l := lum[from : y*f.Width+row.to]
		w := f.weight[from:]
		w = w[:len(l)]
		// Four sums, as one would wait for each addition to finish.
		var e0, e1, e2, e3 float64
		i := 0
		for ; i+4 <= len(l); i += 4 {
			l4, w4 := l[i:i+4:i+4], w[i:i+4:i+4]
			e0 += float64(l4[0]) * float64(w4[0])
			e1 += float64(l4[1]) * float64(w4[1])
			e2 += float64(l4[2]) * float64(w4[2])
			e3 += float64(l4[3]) * float64(w4[3])
			if l4[0] > threshold || l4[1] > threshold || l4[2] > threshold || l4[3] > threshold {
				for j, v := range l4 {
					if v > threshold {
						s.take(f, y, row.from+i+j, float64(v) > core)
					}
				}
			}
		}
		for ; i < len(l); i++ {
			e0 += float64(l[i]) * float64(w[i])
			if l[i] > threshold {
				s.take(f, y, row.from+i, float64(l[i]) > core)
			}
		}
		total += (e0 + e1) + (e2 + e3)
	}
	s.ev = total
}

func (s *Scratch) take(f *Field, y, x int, core bool) {
	s.bright = append(s.bright, brightPixel{
		pixel: int32(y*f.Width + x),
		at:    int32((y+1)*(f.Width+2) + x + 1),
		core:  core,
	})
}

// floor32 is the largest float32 not above x.
func floor32(x float64) float32 {
	t := float32(x)
	if float64(t) > x {
		t = math.Nextafter32(t, float32(math.Inf(-1)))
	}
	return t
}

// limit is the luminance a source must exceed, cd/m2. Discs do not count in
// the means: they are sources in any case.
func (s *Scratch) limit(f *Field, lum []float32, o Options) float64 {
	switch o.Method {
	case MultipleOfMean:
		return o.multiple() * f.mean(lum)
	case MultipleOfTask:
		centre, radius := o.zone()
		s.findZone(f, centre, radius)
		flux, omega := 0.0, 0.0
		for _, i := range s.zone {
			flux += float64(lum[i]) * f.Omega[i]
			omega += f.Omega[i]
		}
		if omega > 0 {
			return o.multiple() * flux / omega
		}
		// No pixel's centre in the zone: nothing to compare with.
		return math.Inf(1)
	}
	return orDefault(o.ThresholdCdM2, DefaultThresholdCdM2)
}

func (s *Scratch) findZone(f *Field, centre r3.Vec, radius float64) {
	if s.zoneField == f && s.zoneCentre == centre && s.zoneRadius == radius {
		return
	}
	s.zoneField, s.zoneCentre, s.zoneRadius = f, centre, radius
	s.zone = s.zone[:0]
	limit := math.Cos(math.Min(radius, math.Pi))
	for i, d := range f.Dir {
		if f.Inside[i] && r3.Dot(d, centre) >= limit {
			s.zone = append(s.zone, int32(i))
		}
	}
}

// mean luminance of the image over solid angle, cd/m2.
func (f *Field) mean(lum []float32) float64 {
	flux := 0.0
	for y, row := range f.spans {
		for i := y*f.Width + row.from; i < y*f.Width+row.to; i++ {
			flux += float64(lum[i]) * f.Omega[i]
		}
	}
	return flux / f.TotalOmega
}
