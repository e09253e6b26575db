package main

// shedSolids is the boat shed across the slip: 17 m along, 9 m deep, gabled,
// in front of the eastern half of the windows. It stands 0.3 m into the ground.
func shedSolids() []solid {
	const near, far, base, eaves, ridge = -15000, -24000, -450, 4000, 6000
	// y and z, counter-clockwise seen from +x (y to the right).
	outline := [][2]int{{far, base}, {near, base}, {near, eaves}, {(near + far) / 2, ridge}, {far, eaves}}
	return []solid{prism("shed", outline, 5000, 22000,
		func(int) (string, string) { return "shed_gable", "boards" },
		func(i int) (string, string) {
			switch i {
			case 0:
				return "shed_floor", "boards"
			case 2, 3:
				return "shed_roof", "slate"
			}
			return "shed_wall", "boards"
		})}
}
