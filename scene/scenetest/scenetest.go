// Package scenetest puts scenes together by hand, for tests.
package scenetest

import (
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/project"
	"squint/scene/system"
)

// New is a scene of nothing.
func New() *scene.Scene { return &scene.Scene{Project: &project.Project{File: "test"}} }

// Finish adds a finish as a constructor gives it, whose error ends the test.
func Finish(t testing.TB, s *scene.Scene, b materials.BSDF, err error) int32 {
	t.Helper()
	if err != nil {
		t.Fatal(err)
	}
	s.Finishes = append(s.Finishes, scene.Finish{BSDF: b})
	return int32(len(s.Finishes) - 1)
}

// Matte adds a matte finish.
func Matte(t testing.TB, s *scene.Scene, reflectance float64) int32 {
	t.Helper()
	b, err := materials.NewMatte(reflectance)
	return Finish(t, s, b, err)
}

// Part adds a part that belongs to no opening.
func Part(s *scene.Scene, name string, kind scene.Kind, texelM float64) int32 {
	s.Parts = append(s.Parts, scene.Part{Name: name, Kind: kind, Opening: -1, TexelM: texelM})
	return int32(len(s.Parts) - 1)
}

// Triangle adds a triangle, counter-clockwise seen from its front.
func Triangle(s *scene.Scene, part, finish int32, a, b, c r3.Vec) {
	s.Triangles = append(s.Triangles, scene.Triangle{V: [3]r3.Vec{a, b, c}, Finish: finish, Part: part})
}

// Quad adds a quadrilateral, counter-clockwise seen from its front.
func Quad(s *scene.Scene, part, finish int32, a, b, c, d r3.Vec) {
	Triangle(s, part, finish, a, b, c)
	Triangle(s, part, finish, a, c, d)
}

// Rect adds the rectangle from org along u and v, its front on the side of u x v.
func Rect(s *scene.Scene, part, finish int32, org, u, v r3.Vec) {
	a := r3.Add(org, u)
	Quad(s, part, finish, org, a, r3.Add(a, v), r3.Add(org, v))
}

// Opening adds the rectangle from org along across and up, as it is seen from
// indoors.
func Opening(s *scene.Scene, name string, org, across, up r3.Vec) system.Rect {
	r := system.Rect{
		Origin: org, Across: r3.Unit(across), Up: r3.Unit(up), Outward: r3.Scale(-1, r3.Unit(r3.Cross(across, up))),
		WidthM: r3.Norm(across), HeightM: r3.Norm(up),
	}
	s.Openings = append(s.Openings, scene.Opening{Name: name, Rect: r})
	return r
}
