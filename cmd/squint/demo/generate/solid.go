package main

import "slices"

// point is a corner in millimetres: whole numbers, so that corners that meet
// are equal and the files are the same everywhere.
type point [3]int

// face is a flat polygon, counter-clockwise seen from the side it faces.
type face struct {
	corners         []point
	group, material string
}

// solid is a closed body; its faces look outward, away from the matter.
type solid struct {
	name  string
	faces []face
}

// paint names the group and material of a face of a cell complex: axis is 0
// for x to 2 for z, sign the direction it faces, open the centre of the empty
// cell in front of it and on the centre of the face itself.
type paint func(axis, sign int, open, on point) (group, material string)

// plain paints every face alike.
func plain(group, material string) paint {
	return func(int, int, point, point) (string, string) { return group, material }
}

// cells cuts space by the planes x = cut[0][i], y = cut[1][j], z = cut[2][k],
// takes the cells whose centre is full as matter and makes faces where matter
// meets emptiness. Neighbouring faces share their edges whole, so the body is
// watertight by construction, wherever full cells do not meet along an edge
// only.
func cells(name string, cut [3][]int, full func(centre point) bool, p paint) solid {
	s := solid{name: name}
	for axis := range cut {
		cut[axis] = slices.Clone(cut[axis])
		slices.Sort(cut[axis])
		cut[axis] = slices.Compact(cut[axis])
	}
	isFull := func(at [3]int) bool {
		for axis, i := range at {
			if i < 0 || i >= len(cut[axis])-1 {
				return false
			}
		}
		return full(centre(cut, at))
	}
	for k := range len(cut[2]) - 1 {
		for j := range len(cut[1]) - 1 {
			for i := range len(cut[0]) - 1 {
				at := [3]int{i, j, k}
				if !isFull(at) {
					continue
				}
				for axis := range 3 {
					for _, sign := range []int{-1, 1} {
						next := at
						next[axis] += sign
						if isFull(next) {
							continue
						}
						corners := cellFace(cut, at, axis, sign)
						group, material := p(axis, sign, centre(cut, next), middle(corners))
						s.faces = append(s.faces, face{corners, group, material})
					}
				}
			}
		}
	}
	return s
}

// centre of a cell; cells beyond the cuts are taken to be 2 m deep.
func centre(cut [3][]int, at [3]int) point {
	var c point
	for axis, i := range at {
		last := len(cut[axis]) - 1
		switch {
		case i < 0:
			c[axis] = cut[axis][0] - 1000
		case i >= last:
			c[axis] = cut[axis][last] + 1000
		default:
			c[axis] = (cut[axis][i] + cut[axis][i+1]) / 2
		}
	}
	return c
}

func middle(corners []point) point {
	var c point
	for axis := range c {
		for _, p := range corners {
			c[axis] += p[axis]
		}
		c[axis] /= len(corners)
	}
	return c
}

// cellFace is the face of a cell that looks along sign*axis.
func cellFace(cut [3][]int, at [3]int, axis, sign int) []point {
	u, v := (axis+1)%3, (axis+2)%3
	corner := func(du, dv int) point {
		var p point
		p[axis] = cut[axis][at[axis]+(sign+1)/2]
		p[u], p[v] = cut[u][at[u]+du], cut[v][at[v]+dv]
		return p
	}
	corners := []point{corner(0, 0), corner(1, 0), corner(1, 1), corner(0, 1)}
	if sign < 0 {
		slices.Reverse(corners)
	}
	return corners
}

// box is a solid block.
func box(name string, from, to point, group, material string) solid {
	return cells(name,
		[3][]int{{from[0], to[0]}, {from[1], to[1]}, {from[2], to[2]}},
		func(point) bool { return true }, plain(group, material))
}

// prism is the outline, in y and z counter-clockwise seen from +x, drawn out
// from x0 to x1.
func prism(name string, outline [][2]int, x0, x1 int, end, side func(i int) (group, material string)) solid {
	s := solid{name: name}
	at := func(x, i int) point {
		o := outline[i%len(outline)]
		return point{x, o[0], o[1]}
	}
	var front, back []point
	for i := range outline {
		front = append(front, at(x1, i))
		back = append(back, at(x0, len(outline)-1-i))
		group, material := side(i)
		s.faces = append(s.faces, face{[]point{at(x0, i), at(x0, i+1), at(x1, i+1), at(x1, i)}, group, material})
	}
	for i, corners := range [][]point{front, back} {
		group, material := end(i)
		s.faces = append(s.faces, face{corners, group, material})
	}
	return s
}
