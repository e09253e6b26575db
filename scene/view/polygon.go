package view

// InPolygon is whether (x, y) lies within a polygon, by the even-odd rule, on an
// image or a plan.
func InPolygon(corners [][2]float64, x, y float64) bool {
	in := false
	for i, a := range corners {
		b := corners[(i+1)%len(corners)]
		if (a[1] > y) != (b[1] > y) && x < (b[0]-a[0])*(y-a[1])/(b[1]-a[1])+a[0] {
			in = !in
		}
	}
	return in
}
