package main

import "fmt"

// desk is a table with a screen; whoever sits at it looks along facing.
type desk struct {
	number int
	centre [2]int // of the table top
	facing [2]int // one step in x or y
	note   string // what the eye looks at, for the project file
	screen bool   // the view is given by the screen, not by an azimuth
}

const (
	eyeMM       = 1200 // seated eye height; common practice, no published source
	eyeBackMM   = 650  // from the middle of the table
	screenOnMM  = 200  // beyond the middle of the table
	screenMidMM = 1075
)

// desks are three rows of four: beside the windows, in the middle, at the back.
func desks() []desk {
	const left, right = -1, 1
	rows := []int{1350, 4200, 7000}
	columns := []int{1600, 4600, 7600, 10400}
	plan := []struct {
		row, column int
		facing      [2]int
		note        string
		screen      bool
	}{
		{0, 0, [2]int{right, 0}, "along the windows", false},
		{0, 1, [2]int{0, left}, "to the windows, over the screen", false},
		{0, 2, [2]int{left, 0}, "along the windows", false},
		{0, 3, [2]int{0, left}, "to the windows, over the screen", false},
		{1, 0, [2]int{0, left}, "to the windows", false},
		{1, 1, [2]int{right, 0}, "at the screen", true},
		{1, 2, [2]int{0, left}, "to the windows", false},
		{1, 3, [2]int{left, 0}, "at the screen", true},
		{2, 0, [2]int{right, 0}, "along the back wall", false},
		{2, 1, [2]int{0, left}, "across the room to the windows", false},
		{2, 2, [2]int{0, right}, "at the screen, windows behind", true},
		{2, 3, [2]int{0, left}, "across the room to the windows", false},
	}
	var all []desk
	for i, p := range plan {
		all = append(all, desk{i + 1, [2]int{columns[p.column], rows[p.row]}, p.facing, p.note, p.screen})
	}
	return all
}

// at is the point so far ahead of the middle of the table, to the side of it,
// at a height.
func (d desk) at(ahead, side, z int) point {
	return point{
		d.centre[0] + ahead*d.facing[0] - side*d.facing[1],
		d.centre[1] + ahead*d.facing[1] + side*d.facing[0],
		z,
	}
}

func (d desk) eye() point      { return d.at(-eyeBackMM, 0, eyeMM) }
func (d desk) screenAt() point { return d.at(screenOnMM, 0, screenMidMM) }

// block is a box between two points of the desk.
func (d desk) block(part string, a0, a1, s0, s1, z0, z1 int, material string) solid {
	a, b := d.at(a0, s0, z0), d.at(a1, s1, z1)
	for axis := range a {
		a[axis], b[axis] = min(a[axis], b[axis]), max(a[axis], b[axis])
	}
	return box(fmt.Sprintf("desk_%d_%s", d.number, part), a, b, fmt.Sprintf("desk_%d", d.number), material)
}

// solids are the table of 1.6 by 0.8 m, 0.74 m high, and the screen on its
// foot. Legs stand 5 mm into floor and top.
func (d desk) solids() []solid {
	all := []solid{d.block("top", -400, 400, -800, 800, 710, 740, "oak")}
	for i, leg := range [][2]int{{-350, -750}, {-350, 700}, {300, -750}, {300, 700}} {
		all = append(all, d.block(fmt.Sprintf("leg_%d", i+1), leg[0], leg[0]+50, leg[1], leg[1]+50, -5, 715, "steel"))
	}
	return append(all,
		d.block("foot", screenOnMM+5, screenOnMM+35, -30, 30, 735, 905, "screen"),
		d.block("screen", screenOnMM, screenOnMM+40, -300, 300, 900, 1250, "screen"))
}
