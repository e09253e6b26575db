package view

import "math"

// SolidAngle returns the solid angle (sr) of the part of pixel (ix, iy) that
// lies inside the image; 0 for pixels outside of it. It is a closed form for
// every projection except the equidistant fisheye, which is integrated along
// the pixel's sides to about 1e-13 sr. The sum over an image of field of view
// 2*a is that of the cone, 2*pi*(1-cos a), within 1e-9 relative (rounding),
// tested up to 512 pixels.
//
// Method: for a fisheye the solid angle is the integral of (1-cos theta) dphi
// around the pixel (Stokes' theorem; phi is the polar angle in the image).
// Beyond the image circle 1-cos theta is frozen at its value on the circle,
// which makes the outside part count nothing.
func (v View) SolidAngle(ix, iy int) float64 { return v.measure(ix, iy, false) }

// ProjectedSolidAngle returns the integral of cos theta (sr) over the part of
// pixel (ix, iy) that is inside the image and in front of the plane of the
// eye, theta being the angle from the line of sight. Multiplied by the
// pixel's luminance it is the pixel's illuminance on that plane. Closed forms
// and accuracy as for SolidAngle; the sum over a hemisphere is pi.
func (v View) ProjectedSolidAngle(ix, iy int) float64 { return v.measure(ix, iy, true) }

func (v View) measure(ix, iy int, cosine bool) float64 {
	if ix < 0 || iy < 0 || ix >= v.Width || iy >= v.Height {
		return 0
	}
	// Sides of the pixel, right and up positive, in the projection's units.
	s := v.perPixel()
	cx, cy, _ := v.Circle()
	x0, x1 := (float64(ix)-cx)*s, (float64(ix)+1-cx)*s
	y0, y1 := (cy-float64(iy)-1)*s, (cy-float64(iy))*s
	var a float64
	switch v.Projection {
	case Perspective:
		if cosine {
			a = cornerCosine(x1, y1) - cornerCosine(x0, y1) - cornerCosine(x1, y0) + cornerCosine(x0, y0)
		} else {
			a = corner(x1, y1) - corner(x0, y1) - corner(x1, y0) + corner(x0, y0)
		}
	case Cylindrical:
		a = band(x0, x1, math.Atan(y0), math.Atan(y1), cosine)
	case Equirectangular:
		a = band(x0, x1, y0, y1, cosine)
	default:
		a = v.cut(x0, x1, y0, y1, cosine)
	}
	return math.Max(a, 0)
}

// corner is the solid angle of the rectangle 0..a x 0..b at distance 1,
// facing the eye. Source: closed form atan(ab/(D sqrt(D^2+a^2+b^2))), e.g.
// A. Khadjavi, J. Opt. Soc. Am. 58 (1968) 1417 (from memory).
func corner(a, b float64) float64 {
	return math.Atan(a * b / math.Sqrt(1+a*a+b*b))
}

// cornerCosine is the same with the weight cos theta: pi times the view
// factor from an element to a parallel rectangle above its corner. Source:
// J. R. Howell, A catalog of radiation heat transfer configuration factors,
// B-3 (from memory).
func cornerCosine(a, b float64) float64 {
	p, q := math.Sqrt(1+a*a), math.Sqrt(1+b*b)
	return 0.5 * (a/p*math.Atan(b/p) + b/q*math.Atan(a/q))
}

// band is the part of the sphere between two azimuths and two elevations.
func band(az0, az1, el0, el1 float64, cosine bool) float64 {
	const quarter = math.Pi / 2
	el0, el1 = nearest(el0, -quarter, quarter), nearest(el1, -quarter, quarter)
	if !cosine {
		return (az1 - az0) * (math.Sin(el1) - math.Sin(el0))
	}
	// cos theta = cos az cos el, and the area element is cos el del daz.
	az0, az1 = nearest(az0, -quarter, quarter), nearest(az1, -quarter, quarter)
	upTo := func(el float64) float64 { return el/2 + math.Sin(2*el)/4 }
	return (math.Sin(az1) - math.Sin(az0)) * (upTo(el1) - upTo(el0))
}

// cut measures the rectangle x0..x1 x y0..y1 of a fisheye image.
func (v View) cut(x0, x1, y0, y1 float64, cosine bool) float64 {
	p := v.Projection
	rimTheta := v.FOVRad / 2
	if math.Hypot(nearest(0, x0, x1), nearest(0, y0, y1)) >= p.radius(rimTheta) {
		return 0
	}
	frozen := 1 - math.Cos(rimTheta)
	if cosine {
		rimTheta = math.Min(rimTheta, math.Pi/2)
		frozen = math.Sin(rimTheta) * math.Sin(rimTheta) / 2
	}
	s := side{p: p, cosine: cosine, rim: p.radius(rimTheta), frozen: frozen}
	return s.along(x1, y0, y1) - s.along(x0, y0, y1) + s.along(y1, x0, x1) - s.along(y0, x0, x1)
}

// side integrates h(r) dphi along straight sides, h being 1-cos theta or,
// with the weight cos theta, sin^2(theta)/2. On a side at distance d from the
// middle, dphi = d dt/(d^2+t^2).
type side struct {
	p           Projection
	cosine      bool
	rim, frozen float64 // beyond r = rim, h = frozen
}

func (s side) along(d, t0, t1 float64) float64 {
	if d == 0 {
		return 0 // towards the middle: dphi = 0
	}
	if math.Abs(d) >= s.rim {
		return s.frozen * sweep(d, t0, t1)
	}
	reach := math.Sqrt(s.rim*s.rim - d*d)
	a, b := nearest(t0, -reach, reach), nearest(t1, -reach, reach)
	sum := 0.0
	if t0 < a {
		sum += s.frozen * sweep(d, t0, math.Min(a, t1))
	}
	if t1 > b {
		sum += s.frozen * sweep(d, math.Max(b, t0), t1)
	}
	if a < b {
		sum += s.inside(d, a, b)
	}
	return sum
}

// sweep is the angle under which the stretch t0..t1 is seen from the middle.
func sweep(d, t0, t1 float64) float64 { return math.Atan(t1/d) - math.Atan(t0/d) }

// inside integrates h(r)/r^2 * d dt from t0 to t1.
func (s side) inside(d, t0, t1 float64) float64 {
	if s.p == Equidistant {
		return d * s.quadrature(d, t0, t1)
	}
	return s.primitive(d, t1) - s.primitive(d, t0)
}

// primitive is the integral from 0 to t, in closed form.
func (s side) primitive(d, t float64) float64 {
	switch {
	case s.p == Equisolid && !s.cosine: // h = 2 r^2
		return 2 * d * t
	case s.p == Equisolid: // h = 2 r^2 (1-r^2)
		return 2 * d * ((1-d*d)*t - t*t*t/3)
	case s.p == Orthographic && !s.cosine: // h = 1-sqrt(1-r^2)
		m := math.Abs(d)
		reach := math.Sqrt(math.Max(1-m*m, 0))
		root := math.Sqrt(math.Max(1-m*m-t*t, 0))
		f := math.Atan(t/m) + m*math.Asin(nearest(t/reach, -1, 1)) - math.Atan2(t, m*root)
		return math.Copysign(1, d) * f
	case s.p == Orthographic: // h = r^2/2
		return d * t / 2
	case !s.cosine: // stereographic, h = 2 r^2/(1+r^2)
		c := math.Sqrt(1 + d*d)
		return 2 * d / c * math.Atan(t/c)
	}
	// Stereographic, h = 2 r^2/(1+r^2)^2.
	c := math.Sqrt(1 + d*d)
	return d * (t/(c*c+t*t) + math.Atan(t/c)/c) / (c * c)
}

// quadrature integrates h(r)/r^2 dt for r = theta by three-point Gauss rules
// on stretches of at most 0.1 rad: their error is stretch^7/2016000 times the
// sixth derivative, which is below 1, hence below 1e-13.
func (s side) quadrature(d, t0, t1 float64) float64 {
	const node = 0.7745966692414834 // sqrt(3/5)
	n := math.Max(1, math.Ceil((t1-t0)/0.1))
	half, sum := (t1-t0)/n/2, 0.0
	for i := 0.0; i < n; i++ {
		m := t0 + (2*i+1)*half
		sum += 8*s.density(math.Hypot(d, m)) +
			5*(s.density(math.Hypot(d, m-node*half))+s.density(math.Hypot(d, m+node*half)))
	}
	return sum * half / 9
}

func (s side) density(r float64) float64 {
	if r < 1e-8 {
		return 0.5
	}
	if s.cosine {
		x := math.Sin(r) / r
		return x * x / 2
	}
	x := math.Sin(r/2) / r
	return 2 * x * x
}
