package export

import (
	"bufio"
	"fmt"
	"io"
)

// WriteMTL writes the shades for WriteOBJ: the grey as Kd, and how much shows
// through, both as d, which is 1 for opaque, and as Tr = 1 - d, since programs
// read one or the other.
//
// Source: Wavefront Technologies, "Advanced Visualizer Manual", appendix B5,
// MTL Files; Tr is common practice, no published source (both from memory).
func (m *Model) WriteMTL(w io.Writer) error {
	b := bufio.NewWriter(w)
	fmt.Fprintf(b, "# Written by squint.\n")
	fmt.Fprintf(b, "# Kd is all that comes back of light straight on the front, mirrored or not: a grey\n# to look at. d is what does not pass, Tr what does. Comments tell the shares apart.\n")
	names := m.objShades()
	for i, s := range m.Shades {
		grey, through := number(s.Reflectance()), s.Transmittance()
		fmt.Fprintf(b, "\nnewmtl %s\n", names[i])
		fmt.Fprintf(b, "# reflected evenly %s, mirrored %s, let through evenly %s, straight %s\n",
			number(s.Diffuse), number(s.Mirrored), number(s.Scattered), number(s.Through))
		fmt.Fprintf(b, "Kd %s %s %s\nd %s\nTr %s\n", grey, grey, grey, number(1-through), number(through))
	}
	return b.Flush()
}
