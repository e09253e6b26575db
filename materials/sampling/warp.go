package sampling

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// Disc maps the unit square to the unit disc, equal areas to equal areas and
// neighbours to neighbours. The density is DiscPDF everywhere on the disc.
// Source: Shirley, Chiu, 1997, "A low distortion map between disk and square",
// J. Graphics Tools 2(3).
func Disc(u, v float64) (x, y float64) {
	a, b := 2*u-1, 2*v-1
	if a == 0 && b == 0 {
		return 0, 0
	}
	var r, phi float64
	if a*a > b*b {
		r, phi = a, math.Pi/4*(b/a)
	} else {
		r, phi = b, math.Pi/2-math.Pi/4*(a/b)
	}
	s, c := math.Sincos(phi)
	return r * c, r * s
}

// DiscPDF is the density of Disc per unit area, on the disc: one over its area.
const DiscPDF = 1 / math.Pi

// CosineHemisphere maps the unit square to directions about +z with density
// cos(theta)/pi: a uniform point of the disc lifted to the sphere.
// Source: Malley, 1988, "A shading method for computer generated images",
// master's thesis, University of Utah (from memory).
func CosineHemisphere(u, v float64) r3.Vec {
	x, y := Disc(u, v)
	return r3.Vec{X: x, Y: y, Z: math.Sqrt(max(0, 1-x*x-y*y))}
}

// CosineHemispherePDF is the density of CosineHemisphere per steradian; 0
// below the horizon.
func CosineHemispherePDF(cosTheta float64) float64 { return max(0, cosTheta) / math.Pi }

// UniformHemisphere maps the unit square to directions about +z of equal
// density. The height of a point of the sphere is uniform (Archimedes).
// Source: Shirley, Chiu, 1997, as for Disc, section on the hemisphere.
func UniformHemisphere(u, v float64) r3.Vec {
	x, y := Disc(u, v)
	r2 := x*x + y*y
	// sin(theta)/r with cos(theta) = 1-r^2.
	s := math.Sqrt(max(0, 2-r2))
	return r3.Vec{X: x * s, Y: y * s, Z: max(0, 1-r2)}
}

// UniformHemispherePDF is the density of UniformHemisphere per steradian; 0
// below the horizon.
func UniformHemispherePDF(cosTheta float64) float64 {
	if cosTheta < 0 {
		return 0
	}
	return 1 / (2 * math.Pi)
}

// UniformSphere maps the unit square to all directions, of equal density
// 1/(4 pi) per steradian.
func UniformSphere(u, v float64) r3.Vec {
	z := 1 - 2*u
	r := math.Sqrt(max(0, 1-z*z))
	s, c := math.Sincos(2 * math.Pi * v)
	return r3.Vec{X: r * c, Y: r * s, Z: z}
}

// Cone maps the unit square to the directions within halfAngleRad of +z, of
// equal density. It keeps its precision for the sun's disc, where
// 1-cos(halfAngleRad) is about 1e-5. Domain: 0 to pi.
// Source: Archimedes, as UniformHemisphere, with the height cut off.
func Cone(u, v, halfAngleRad float64) r3.Vec {
	x, y := Disc(u, v)
	h := 2 * sinHalfSquared(halfAngleRad) // 1-cos
	d := (x*x + y*y) * h
	s := math.Sqrt(h * max(0, 2-d))
	return r3.Vec{X: x * s, Y: y * s, Z: 1 - d}
}

// ConePDF is the density of Cone per steradian within the cone, one over its
// solid angle 2 pi (1-cos(halfAngleRad)); +Inf for an angle of 0.
func ConePDF(halfAngleRad float64) float64 {
	return 1 / (4 * math.Pi * sinHalfSquared(halfAngleRad))
}

func sinHalfSquared(angleRad float64) float64 {
	s := math.Sin(angleRad / 2)
	return s * s
}

// Barycentric maps the unit square to the weights of a triangle's corners,
// uniform over its area; the weights sum to 1.
// Source: Turk, 1990, "Generating random points in triangles", Graphics Gems.
func Barycentric(u, v float64) (b0, b1, b2 float64) {
	s := math.Sqrt(u)
	b1 = v * s
	return 1 - s, s - b1, b1
}

// Triangle maps the unit square to a point of the triangle a, b, c, uniform
// over its area.
func Triangle(u, v float64, a, b, c r3.Vec) r3.Vec {
	b0, b1, b2 := Barycentric(u, v)
	return r3.Vec{
		X: b0*a.X + b1*b.X + b2*c.X,
		Y: b0*a.Y + b1*b.Y + b2*c.Y,
		Z: b0*a.Z + b1*b.Z + b2*c.Z,
	}
}

// TrianglePDF is the density of Triangle per square metre: one over the area;
// +Inf for a triangle without area.
func TrianglePDF(a, b, c r3.Vec) float64 {
	return 2 / r3.Norm(r3.Cross(r3.Sub(b, a), r3.Sub(c, a)))
}
