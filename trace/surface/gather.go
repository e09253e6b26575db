package surface

// gatherGo is the portable twin of the assembly and what it is tested
// against.
func gatherGo(acc *Row, rows []Row, links []Link, scale float32) {
	for _, l := range links {
		w := l.W * scale
		x := &rows[l.Side]
		for i := 0; i < Width; i += 8 {
			acc[i] += w * x[i]
			acc[i+1] += w * x[i+1]
			acc[i+2] += w * x[i+2]
			acc[i+3] += w * x[i+3]
			acc[i+4] += w * x[i+4]
			acc[i+5] += w * x[i+5]
			acc[i+6] += w * x[i+6]
			acc[i+7] += w * x[i+7]
		}
	}
}

// settleGo sums |e-old| and e over a row and stores e in old. The order of the
// sum differs from the assembly's by rounding.
func settleGo(e, old *Row) (change, total float64) {
	var c, s float32
	for i := range e {
		d := e[i] - old[i]
		if d < 0 {
			d = -d
		}
		c += d
		s += e[i]
		old[i] = e[i]
	}
	return float64(c), float64(s)
}
