package view

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

// sums adds up both measures over the image.
func sums(v View) (solid, projected float64) {
	for iy := range v.Height {
		for ix := range v.Width {
			solid += v.SolidAngle(ix, iy)
			projected += v.ProjectedSolidAngle(ix, iy)
		}
	}
	return solid, projected
}

// whole is the exact measure of the whole image.
func whole(v View) (solid, projected float64) {
	half := v.FOVRad / 2
	aspect := float64(v.Height) / float64(v.Width)
	switch v.Projection {
	case Perspective:
		// Exact: solid angle of a facing rectangle of half sides a, b at
		// distance 1, 4 asin(ab/sqrt((1+a^2)(1+b^2))); view factor of an
		// element to a parallel rectangle centred above it.
		a := math.Tan(half)
		b := a * aspect
		p, q := math.Sqrt(1+a*a), math.Sqrt(1+b*b)
		return 4 * math.Asin(a*b/(p*q)), 2 * (a/p*math.Atan(b/p) + b/q*math.Atan(a/q))
	case Cylindrical, Equirectangular:
		el := half * aspect
		if v.Projection == Cylindrical {
			el = math.Atan(el)
		}
		el = math.Min(el, math.Pi/2)
		az := math.Min(half, math.Pi/2)
		// Exact: integrals of cos el and cos^2 el cos az.
		return 2 * half * 2 * math.Sin(el), 2 * math.Sin(az) * (el + math.Sin(el)*math.Cos(el))
	}
	s := math.Sin(math.Min(half, math.Pi/2))
	return 2 * math.Pi * (1 - math.Cos(half)), math.Pi * s * s // exact: cone
}

// 1e-11: the measures are closed forms or good to 1e-13 per pixel, with
// errors of either sign over some thousand pixels.
const sumTolerance = 1e-11

func TestSums(t *testing.T) {
	for _, c := range cases {
		v := mustView(t, c.p, c.fovDeg, c.w, c.h)
		solid, projected := sums(v)
		wantSolid, wantProjected := whole(v)
		if math.Abs(solid/wantSolid-1) > sumTolerance {
			t.Errorf("%v: solid angle %.15g, want %.15g", c, solid, wantSolid)
		}
		if math.Abs(projected/wantProjected-1) > sumTolerance {
			t.Errorf("%v: projected solid angle %.15g, want %.15g", c, projected, wantProjected)
		}
	}
}

// Pixels cut by the circle: every size up to 12, where nearly all are.
func TestSumsOfSmallImages(t *testing.T) {
	for _, p := range []Projection{Equidistant, Equisolid, Orthographic, Stereographic} {
		for w := 1; w <= 12; w++ {
			for h := 1; h <= 12; h++ {
				v := mustView(t, p, 180, w, h)
				solid, projected := sums(v)
				if math.Abs(solid/(2*math.Pi)-1) > sumTolerance || math.Abs(projected/math.Pi-1) > sumTolerance {
					t.Errorf("%v %d x %d: got %.15g and %.15g, want 2 pi and pi", p, w, h, solid, projected)
				}
			}
		}
	}
}

func TestSumsOfLargeImages(t *testing.T) {
	if testing.Short() {
		t.Skip("512 x 512 pixels in four projections take most of a second")
	}
	for _, p := range []Projection{Equidistant, Equisolid, Orthographic, Stereographic} {
		solid, projected := sums(mustView(t, p, 180, 512, 512))
		if math.Abs(solid/(2*math.Pi)-1) > 1e-9 || math.Abs(projected/math.Pi-1) > 1e-9 {
			t.Errorf("%v: got %.15g and %.15g, want 2 pi and pi", p, solid, projected)
		}
	}
}

// The twin of TestSums: taking whole pixels by their centre, instead of their
// part inside the circle, must be rejected by its tolerance.
func TestSumsRejectUncutPixels(t *testing.T) {
	for _, p := range []Projection{Equidistant, Equisolid, Stereographic} {
		v := mustView(t, p, 180, 64, 64)
		wide := v // the same scale in an image whose circle cuts nothing there
		wide.Width, wide.Height = 96, 96
		wide.FOVRad = 2 * p.theta(p.radius(v.FOVRad/2)*1.5)
		if p == Equisolid {
			wide.FOVRad = 2 * p.theta(1)
			wide.Width, wide.Height = 90, 90 // sin 90 / sin 45 = 1.414
		}
		sum := 0.0
		for iy := range v.Height {
			for ix := range v.Width {
				if _, ok := v.LocalRay(float64(ix)+0.5, float64(iy)+0.5); ok {
					sum += wide.SolidAngle(ix+(wide.Width-64)/2, iy+(wide.Height-64)/2)
				}
			}
		}
		if math.Abs(sum/(2*math.Pi)-1) <= sumTolerance {
			t.Errorf("%v: uncut pixels passed: %.15g", p, sum)
		}
	}
}

// Each pixel against the sum of |ddir/dx x ddir/dy| over n x n points, with
// derivatives by central differences of LocalRay: a route that shares nothing
// with the closed forms but the projection itself.
func TestPixelsAgainstQuadrature(t *testing.T) {
	const n, e = 60, 1e-5
	for _, c := range cases {
		v := mustView(t, c.p, c.fovDeg, c.w, c.h)
		for _, at := range [][2]int{
			{c.w / 2, c.h / 2}, {c.w/2 - 1, c.h / 2}, {c.w / 4, c.h / 3}, {c.w * 4 / 5, c.h / 2},
			{c.w / 2, 0}, {0, c.h / 2}, {c.w / 6, c.h / 6}, {c.w - 1 - c.w/7, c.h / 7},
		} {
			solid, projected, missed := 0.0, 0.0, 0
			peak := 0.0
			for i := range n * n {
				px := float64(at[0]) + (float64(i%n)+0.5)/n
				py := float64(at[1]) + (float64(i/n)+0.5)/n
				d, ok := v.LocalRay(px, py)
				x0, ok0 := v.LocalRay(px-e, py)
				x1, ok1 := v.LocalRay(px+e, py)
				y0, ok2 := v.LocalRay(px, py-e)
				y1, ok3 := v.LocalRay(px, py+e)
				if !ok || !ok0 || !ok1 || !ok2 || !ok3 {
					missed++
					continue
				}
				a := r3.Norm(r3.Cross(r3.Sub(x1, x0), r3.Sub(y1, y0))) / (4 * e * e * n * n)
				solid += a
				projected += a * math.Max(d.X, 0)
				peak = math.Max(peak, a)
			}
			got, gotProjected := v.SolidAngle(at[0], at[1]), v.ProjectedSolidAngle(at[0], at[1])
			// Midpoint rule: relative error (1/n)^2/24 times a second
			// derivative of order 1 per pixel; differences: e^2. Where the
			// circle cuts, it crosses at most 2n cells, half of each on
			// average wrong one way or the other: 2n points of the largest
			// weight. The orthographic rim (weight 1/cos) is infinite:
			// there nothing can be said by this route.
			tol := 2e-4 * solid
			if missed > 0 || cut(v, at[0], at[1]) {
				tol += 2 * n * peak
				if c.p == Orthographic {
					continue
				}
			}
			if math.Abs(got-solid) > tol+1e-12 {
				t.Errorf("%v pixel %v: solid angle %.9g, by quadrature %.9g +- %.2g", c, at, got, solid, tol)
			}
			if math.Abs(gotProjected-projected) > tol+1e-12 {
				t.Errorf("%v pixel %v: projected %.9g, by quadrature %.9g +- %.2g", c, at, gotProjected, projected, tol)
			}
		}
	}
}

// cut tells whether a corner of the pixel lies outside of the image circle.
func cut(v View, ix, iy int) bool {
	cx, cy, radius := v.Circle()
	far := math.Hypot(math.Abs(float64(ix)+0.5-cx)+0.5, math.Abs(float64(iy)+0.5-cy)+0.5)
	return v.Projection.Fisheye() && far > radius
}

// Uncut pixels: the property each projection is named for.
func TestEqualPixels(t *testing.T) {
	es, or := mustView(t, Equisolid, 180, 64, 64), mustView(t, Orthographic, 180, 64, 64)
	wantSolid := 4 * 0.5 / (32 * 32) // exact: d(omega) = 4 s ds dphi, s = sin 45 r/R
	wantProjected := 1.0 / (32 * 32) // exact: Nusselt, the unit circle's area
	for _, at := range [][2]int{{32, 32}, {10, 20}, {40, 5}, {1, 30}} {
		if got := es.SolidAngle(at[0], at[1]); math.Abs(got/wantSolid-1) > 1e-12 {
			t.Errorf("equisolid %v: got %g, want %g", at, got, wantSolid)
		}
		if got := or.ProjectedSolidAngle(at[0], at[1]); math.Abs(got/wantProjected-1) > 1e-12 {
			t.Errorf("orthographic %v: got %g, want %g", at, got, wantProjected)
		}
	}
}

func BenchmarkSolidAngleEquidistant(b *testing.B) {
	v := mustView(b, Equidistant, 180, 64, 64)
	for i := range b.N {
		v.SolidAngle(i&63, i>>6&63)
	}
}

func BenchmarkRay(b *testing.B) {
	v := mustView(b, Equidistant, 180, 64, 64)
	for i := range b.N {
		v.Ray(float64(i&31)+16.5, float64(i>>6&31)+16.5)
	}
}
