package main

import "fmt"

// The drawing office of Skerrow Boatyard, an invented place: 12 m along the
// windows, 9 m deep, 3.2 m high. x runs along the window wall, y away from it,
// z up from the floor; the inner face of the window wall is y = 0. All in mm.
const (
	officeX, officeY, officeZ = 12000, 9000, 3200
	wallMM                    = 300

	// Six bays of 2 m, each with a hole in the wall that holds one frame with
	// two panes: a window below and a clerestory above the shelf line.
	bays, bayMM    = 6, 2000
	holeFrom       = 200 // within the bay
	holeTo         = 1800
	holeSill       = 850
	holeHead       = 2950
	glassFrom      = 250
	glassTo        = 1750
	windowSill     = 900
	windowHead     = 2000
	clerestorySill = 2100
	clerestoryHead = 2900
	// Of the anidolic ceiling the clerestory is lower, for the duct's mouth.
	lowHead        = 2450
	mouthSill      = 2530
	glassY         = -150 // the plane of the glass, in the middle of the wall
	frameHalf      = 30   // the frame's depth either side of the glass
	frameIntoWall  = 10   // bodies overlap, so that no two faces share a plane
	glassIntoFrame = 5
)

// officeSolids is the building with its furniture, without frames.
func officeSolids() []solid {
	all := []solid{officeShell()}
	for _, d := range desks() {
		all = append(all, d.solids()...)
	}
	for i, x := range []int{1000, 5000, 9000} {
		all = append(all, box(fmt.Sprintf("plan_chest_%d", i+1),
			point{x, 8250, -5}, point{x + 2000, 8950, 780}, "plan_chests", "oak"))
	}
	return all
}

// frameSolids are the frames of all bays, around panes of the heights given.
func frameSolids(panes ...[2]int) (all []solid) {
	for bay := range bays {
		all = append(all, frame(fmt.Sprintf("frame_%d", bay+1), bay*bayMM+glassFrom, bay*bayMM+glassTo, panes,
			point{bay*bayMM + holeFrom, glassY, holeSill}, point{bay*bayMM + holeTo, glassY, holeHead}))
	}
	return all
}

// plainFrames hold a window and a clerestory, mouthFrames a lower clerestory
// and the mouth of a duct above it.
func plainFrames() []solid {
	return frameSolids([2]int{windowSill, windowHead}, [2]int{clerestorySill, clerestoryHead})
}

func mouthFrames() []solid {
	return frameSolids([2]int{windowSill, windowHead}, [2]int{clerestorySill, lowHead}, [2]int{mouthSill, clerestoryHead})
}

// officeShell is floor, walls and roof as one closed body.
func officeShell() solid {
	holes := make([][4]int, bays) // x from, x to, z from, z to
	for bay := range holes {
		holes[bay] = [4]int{bay*bayMM + holeFrom, bay*bayMM + holeTo, holeSill, holeHead}
	}
	return shell(officeX, officeY, officeZ, []int{3000, 6000}, holes)
}

// shell is a room with walls of wallMM all round and holes through the wall at
// y = 0; moreY are further cuts that keep its faces from being long and thin.
func shell(x, y, z int, moreY []int, holes [][4]int) solid {
	cut := [3][]int{
		{-wallMM, 0, x, x + wallMM},
		append([]int{-wallMM, 0, y, y + wallMM}, moreY...),
		{-wallMM, 0, z, z + wallMM},
	}
	for _, h := range holes {
		cut[0] = append(cut[0], h[0], h[1])
		cut[2] = append(cut[2], h[2], h[3])
	}
	inRoom := func(p point) bool {
		return p[0] > 0 && p[0] < x && p[1] > 0 && p[1] < y && p[2] > 0 && p[2] < z
	}
	inHole := func(p point) bool {
		for _, h := range holes {
			if p[0] > h[0] && p[0] < h[1] && p[2] > h[2] && p[2] < h[3] && p[1] > -wallMM && p[1] < 0 {
				return true
			}
		}
		return false
	}
	return cells("building", cut,
		func(p point) bool { return !inRoom(p) && !inHole(p) },
		func(axis, sign int, open, on point) (string, string) {
			switch {
			case inHole(open):
				return "reveals", "paint"
			case !inRoom(open):
				return "outside", "render"
			case axis == 2 && sign > 0:
				return "floor", "floor"
			case axis == 2:
				return "ceiling", "ceiling"
			case axis == 1 && sign > 0:
				return "window_wall", "wall"
			case axis == 1:
				return "back_wall", "wall"
			case sign > 0:
				return "left_wall", "wall"
			}
			return "right_wall", "wall"
		})
}

// frame fills the hole between two of its corners with a frame around panes
// from x0 to x1 and the heights given, as one closed body.
func frame(name string, x0, x1 int, panes [][2]int, from, to point) solid {
	x0, x1 = x0+glassIntoFrame, x1-glassIntoFrame
	cut := [3][]int{
		{from[0] - frameIntoWall, x0, x1, to[0] + frameIntoWall},
		{glassY - frameHalf, glassY + frameHalf},
		{from[2] - frameIntoWall, to[2] + frameIntoWall},
	}
	for _, p := range panes {
		cut[2] = append(cut[2], p[0]+glassIntoFrame, p[1]-glassIntoFrame)
	}
	return cells(name, cut, func(c point) bool {
		for _, p := range panes {
			if c[0] > x0 && c[0] < x1 && c[2] > p[0] && c[2] < p[1] {
				return false
			}
		}
		return true
	}, plain("frames", "paint"))
}
