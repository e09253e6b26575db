package materials

import "math"

// fresnel returns the reflectance of one face of glass for the two
// polarisations, and the cosine inside the glass.
// Source: Duffie, Beckman, 2013, equations 5.1.1 to 5.1.4.
func fresnel(cos float64) (perpendicular, parallel, cosInside float64) {
	const n = GlassIndex
	cosInside = math.Sqrt(1 - (1-cos*cos)/(n*n))
	p := (cos - n*cosInside) / (cos + n*cosInside)
	q := (n*cos - cosInside) / (n*cos + cosInside)
	return p * p, q * q, cosInside
}

// pane returns one pane whose faces reflect r and whose body passes a, with
// all reflections between the faces, for one polarisation.
// Source: Duffie, Beckman, 2013, equations 5.3.1, 5.3.2 (numbers from memory).
func pane(r, a float64) throughAndMirror {
	if r >= 1 {
		return throughAndMirror{r: 1}
	}
	t := (1 - r) * (1 - r) * a / (1 - r*r*a*a)
	return throughAndMirror{t: t, r: r * (1 + a*t)}
}

// stack returns a unit of equal panes at incidence cos, kl the extinction
// coefficient times thickness of each, the mean of both polarisations; each
// polarisation goes through the whole unit by itself.
// Source: the series of reflections between two layers summed, T = T1 T2/(1-R1
// R2); Duffie, Beckman, 2013, section 5.3.
func stack(cos float64, panes int, kl float64) throughAndMirror {
	perpendicular, parallel, inside := fresnel(cos)
	a := math.Exp(-kl / inside)
	var mean throughAndMirror
	for _, r := range [2]float64{perpendicular, parallel} {
		one := pane(r, a)
		all := one
		for range panes - 1 {
			d := 1 - all.r*one.r
			if d <= 0 { // grazing: the first pane reflects all
				all = throughAndMirror{r: 1}
				break
			}
			all = throughAndMirror{
				t: all.t * one.t / d,
				r: all.r + all.t*all.t*one.r/d,
			}
		}
		mean.t += all.t / 2
		mean.r += all.r / 2
	}
	return mean
}

// solveExtinction finds the extinction of each pane at which the unit passes
// transmittance at normal incidence, by bisection: transmittance falls as
// extinction grows. Domain: above 0 to ClearTransmittance(panes).
func solveExtinction(transmittance float64, panes int) float64 {
	if transmittance == ClearTransmittance(panes) {
		return 0
	}
	// exp(-kl) alone passes less than transmittance at this upper end.
	lo, hi := 0.0, -math.Log(transmittance)
	for range 100 {
		mid := (lo + hi) / 2
		if mid == lo || mid == hi {
			break
		}
		if stack(1, panes, mid).t > transmittance {
			lo = mid
		} else {
			hi = mid
		}
	}
	return (lo + hi) / 2
}
