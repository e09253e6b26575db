package export

import (
	"bufio"
	"fmt"
	"io"
	"strconv"

	"gonum.org/v1/gonum/spatial/r3"
)

// WriteOBJ writes all pieces as groups, each finish by its name. library is the
// name of the MTL file that lies beside it, "" for none. Coordinates are
// written with all their digits: reading them gives the same numbers.
//
// Source: Wavefront Technologies, "Advanced Visualizer Manual", appendix B1,
// Object Files (from memory).
func (m *Model) WriteOBJ(w io.Writer, library string) error {
	b := bufio.NewWriter(w)
	fmt.Fprintf(b, "# Written by squint.\n")
	if m.Title != "" {
		fmt.Fprintf(b, "# Project: %s\n", m.Title)
	}
	fmt.Fprintf(b, "# Unit: metre. Up: z. The azimuth of +y is %s degrees, clockwise from north.\n", number(m.NorthDeg))
	fmt.Fprintf(b, "# Groups are parts, materials are finishes; faces run counter-clockwise seen from their front.\n")
	if library != "" {
		fmt.Fprintf(b, "mtllib %s\n", library)
	}
	pieces, shades := m.objPieces(), m.objShades()
	vertices := map[r3.Vec]int{}
	var digits []byte
	for i := range m.Pieces {
		p := &m.Pieces[i]
		for _, t := range p.Triangles {
			for _, v := range t.V {
				v = plain(v)
				if _, ok := vertices[v]; ok {
					continue
				}
				vertices[v] = len(vertices) + 1 // OBJ counts from 1
				digits = append(digits[:0], 'v')
				for _, x := range [3]float64{v.X, v.Y, v.Z} {
					digits = append(digits, ' ')
					digits = strconv.AppendFloat(digits, x, 'f', -1, 64)
				}
				b.Write(append(digits, '\n'))
			}
		}
		fmt.Fprintf(b, "g %s\n", pieces[i])
		shade := -1
		for _, t := range p.Triangles {
			if t.Shade != shade {
				shade = t.Shade
				fmt.Fprintf(b, "usemtl %s\n", shades[shade])
			}
			digits = append(digits[:0], 'f')
			for _, v := range t.V {
				digits = append(digits, ' ')
				digits = strconv.AppendInt(digits, int64(vertices[plain(v)]), 10)
			}
			b.Write(append(digits, '\n'))
		}
	}
	return b.Flush() // which returns the first error of all writes
}

// plain turns minus zero into zero.
func plain(v r3.Vec) r3.Vec { return r3.Vec{X: v.X + 0, Y: v.Y + 0, Z: v.Z + 0} }

func number(x float64) string { return strconv.FormatFloat(x+0, 'g', 6, 64) }
