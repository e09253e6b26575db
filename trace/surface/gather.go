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

// settleGo adds |e-old| to change and e to total, entry by entry, and stores e
// in old.
func settleGo(e, old, change, total *Row) {
	for i := range e {
		d := e[i] - old[i]
		if d < 0 {
			d = -d
		}
		change[i] += d
		total[i] += e[i]
		old[i] = e[i]
	}
}
