package export

import (
	"bufio"
	"fmt"
	"io"
	"math"

	"github.com/hschendel/stl"
	"gonum.org/v1/gonum/spatial/r3"
)

// stlComment is the comment at the head of the file. It must not begin with
// "solid", by which ASCII files are told.
const stlComment = "Written by squint. Unit: metre. Up: z."

// WriteSTL writes all pieces as one binary STL, which has neither names nor
// finishes. Triangles that are flat in single precision are left out; with
// nothing left the error is ErrEmpty.
//
// Source: 3D Systems, "StereoLithography Interface Specification", 1989 (from
// memory).
func (m *Model) WriteSTL(w io.Writer) error {
	n := m.Triangles() - m.Flat
	switch {
	case n == 0:
		return ErrEmpty
	case n > math.MaxUint32:
		return fmt.Errorf("export: got %d triangles, want at most %d in an STL file", n, uint32(math.MaxUint32))
	}
	solid := stl.Solid{BinaryHeader: []byte(stlComment), Triangles: make([]stl.Triangle, 0, n)}
	for i := range m.Pieces {
		for _, t := range m.Pieces[i].Triangles {
			v, ok := single(t.V)
			if !ok {
				continue
			}
			solid.Triangles = append(solid.Triangles, stl.Triangle{
				Normal:   normal(v),
				Vertices: [3]stl.Vec3{v[0], v[1], v[2]},
			})
		}
	}
	b := bufio.NewWriter(w)
	if err := solid.WriteAll(b); err != nil {
		return err
	}
	return b.Flush()
}

// normal is the unit normal of the corners as they are written.
func normal(v [3][3]float32) stl.Vec3 {
	at := func(i int) r3.Vec { return r3.Vec{X: float64(v[i][0]), Y: float64(v[i][1]), Z: float64(v[i][2])} }
	n := r3.Unit(r3.Cross(r3.Sub(at(1), at(0)), r3.Sub(at(2), at(0))))
	return stl.Vec3{float32(n.X) + 0, float32(n.Y) + 0, float32(n.Z) + 0}
}
