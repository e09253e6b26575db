package main

import _ "embed"

// starterProject is written by hand: its comments are what a new user reads.
//
//go:embed starter.toml
var starterProject string

// starterSolids is an office of 4 by 6 m, 2.8 m high, with one window.
func starterSolids() []solid {
	const sill, head, from, to = 900, 2400, 600, 3400
	all := []solid{
		shell(4000, 6000, 2800, []int{3000}, [][4]int{{from, to, sill, head}}),
		frame("frame_1", from+50, to-50, [][2]int{{sill + 50, head - 50}},
			point{from, glassY, sill}, point{to, glassY, head}),
	}
	for _, d := range []desk{
		{number: 1, centre: [2]int{1200, 1800}, facing: [2]int{1, 0}},
		{number: 2, centre: [2]int{2000, 4200}, facing: [2]int{0, -1}},
	} {
		all = append(all, d.solids()...)
	}
	return all
}
