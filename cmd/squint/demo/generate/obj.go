package main

import (
	"bytes"
	"fmt"
	"slices"
	"strconv"
)

// metres writes millimetres as metres.
func metres(mm int) string { return strconv.FormatFloat(float64(mm)/1000, 'f', -1, 64) }

// writeOBJ writes the solids, each an object with its own corners, so that
// bodies that touch stay apart.
func writeOBJ(solids []solid, library string) []byte {
	var b bytes.Buffer
	fmt.Fprintln(&b, "# An invented building. Metres, z up. Made by cmd/squint/demo/generate.")
	if library != "" {
		fmt.Fprintln(&b, "mtllib", library)
	}
	first := 1
	for _, s := range solids {
		fmt.Fprintln(&b, "o", s.name)
		index := map[point]int{}
		for _, f := range s.faces {
			for _, p := range f.corners {
				if _, ok := index[p]; !ok {
					index[p] = first + len(index)
					fmt.Fprintf(&b, "v %s %s %s\n", metres(p[0]), metres(p[1]), metres(p[2]))
				}
			}
		}
		first += len(index)
		// Faces by group and material, in the order of their first appearance.
		type look struct{ group, material string }
		var looks []look
		for _, f := range s.faces {
			if l := (look{f.group, f.material}); !slices.Contains(looks, l) {
				looks = append(looks, l)
			}
		}
		for _, l := range looks {
			fmt.Fprintln(&b, "g", l.group)
			fmt.Fprintln(&b, "usemtl", l.material)
			for _, f := range s.faces {
				if (look{f.group, f.material}) != l {
					continue
				}
				b.WriteByte('f')
				for _, p := range f.corners {
					fmt.Fprintf(&b, " %d", index[p])
				}
				b.WriteByte('\n')
			}
		}
	}
	return b.Bytes()
}

// writeMTL lists the materials by name with a grey for other programs that
// show the file; the project file gives the reflectances that count.
func writeMTL(solids []solid) []byte {
	var names []string
	for _, s := range solids {
		for _, f := range s.faces {
			if !slices.Contains(names, f.material) {
				names = append(names, f.material)
			}
		}
	}
	slices.Sort(names)
	var b bytes.Buffer
	fmt.Fprintln(&b, "# Names only: the finishes stand in the project file.")
	for _, n := range names {
		fmt.Fprintf(&b, "newmtl %s\nKd 0.5 0.5 0.5\n", n)
	}
	return b.Bytes()
}
