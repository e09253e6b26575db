package surface

import "slices"

// negligible is the share of all light on its way to the receivers that sides
// passed over may carry together.
const negligible = 1e-5

// dropDark forgets the sides that do not matter: those that no daylight
// reaches (no chain of links leads to sky or ground in any batch, as inside
// walls), and those that together carry less than a share of negligible of
// what reaches the receivers. direct sides, which receivers see themselves,
// are kept wherever there is any light.
func (t *Transport) dropDark(direct int) {
	lit := t.reached()
	t.dropFaint(lit, direct)
	t.keep(lit)
}

// reached finds the sides from which daylight can be seen, over any chain.
func (t *Transport) reached() []bool {
	lit := make([]bool, len(t.sides))
	for i := range t.sides {
		for b := range t.rows {
			r := &t.rows[b]
			if r.patchStart[i+1] > r.patchStart[i] || r.below[i] > 0 {
				lit[i] = true
			}
		}
	}
	for changed := true; changed; {
		changed = false
		for i := range t.sides {
			if lit[i] {
				continue
			}
			for b := range t.rows {
				r := &t.rows[b]
				if anyLit(lit, r.links[r.linkStart[i]:r.linkStart[i+1]]) ||
					anyLit(lit, r.groundLink[r.groundFrom[i]:r.groundFrom[i+1]]) {
					lit[i], changed = true, true
					break
				}
			}
		}
	}
	return lit
}

// dropFaint clears lit for the sides that carry least. What a side carries is
// its illuminance under a sky and ground of luminance 1 times its importance,
// the light that a unit of it adds at the receivers, which flows along the
// links the other way (Smits, Arvo & Salesin 1992, An importance-driven
// radiosity algorithm, SIGGRAPH).
func (t *Transport) dropFaint(lit []bool, direct int) {
	n := len(t.sides)
	source, importance := make([]float64, n), make([]float64, n)
	scale := 1 / float64(len(t.rows))
	for b := range t.rows {
		r := &t.rows[b]
		for i := range n {
			source[i] += float64(r.below[i]) * scale
			for _, p := range r.patches[r.patchStart[i]:r.patchStart[i+1]] {
				source[i] += float64(p.W) * scale
			}
		}
	}
	for i := range min(direct, n) {
		importance[i] = 1
	}
	light := t.propagate(source, scale, false)
	weight := t.propagate(importance, scale, true)
	order := make([]int, 0, n)
	var total float64
	for i := range n {
		total += light[i] * weight[i]
		if i >= direct && lit[i] {
			order = append(order, i)
		}
	}
	slices.SortFunc(order, func(a, b int) int {
		x, y := light[a]*weight[a], light[b]*weight[b]
		switch {
		case x < y:
			return -1
		case x > y:
			return 1
		}
		return a - b
	})
	var dropped float64
	for _, i := range order {
		dropped += light[i] * weight[i]
		if dropped > negligible*total {
			return
		}
		lit[i] = false
	}
}

// faintSweeps carry light as far as its importance is asked to 1e-4 or so.
const faintSweeps = 12

// propagate solves x = source + G x, or with the transposed links, by Jacobi's
// iteration; the ground counts as half reflecting.
func (t *Transport) propagate(source []float64, scale float64, transposed bool) []float64 {
	x := slices.Clone(source)
	for range faintSweeps {
		next := slices.Clone(source)
		for b := range t.rows {
			r := &t.rows[b]
			for i := range source {
				for _, l := range r.links[r.linkStart[i]:r.linkStart[i+1]] {
					flow(next, x, i, int(l.Side), float64(l.W)*scale, transposed)
				}
				for _, l := range r.groundLink[r.groundFrom[i]:r.groundFrom[i+1]] {
					flow(next, x, i, int(l.Side), float64(l.W)*scale/2, transposed)
				}
			}
		}
		x = next
	}
	return x
}

func flow(next, x []float64, receiver, sender int, w float64, transposed bool) {
	if transposed {
		next[sender] += w * x[receiver]
	} else {
		next[receiver] += w * x[sender]
	}
}

// keep renumbers the sides so that only lit ones remain.
func (t *Transport) keep(lit []bool) {
	place := make([]int32, len(t.sides)) // new dense index, -1 where dark
	var kept []int32
	for i, side := range t.sides {
		place[i] = -1
		t.active[side] = 0
		if lit[i] {
			place[i] = int32(len(kept))
			kept = append(kept, side)
			t.active[side] = int32(len(kept))
		}
	}
	for b := range t.rows {
		old := t.rows[b]
		r := NewRows()
		for i := range t.sides {
			if place[i] < 0 {
				continue
			}
			r.links = appendPlaced(r.links, old.links[old.linkStart[i]:old.linkStart[i+1]], place)
			r.linkStart = append(r.linkStart, int32(len(r.links)))
			r.groundLink = appendPlaced(r.groundLink, old.groundLink[old.groundFrom[i]:old.groundFrom[i+1]], place)
			r.groundFrom = append(r.groundFrom, int32(len(r.groundLink)))
			r.patches = append(r.patches, old.patches[old.patchStart[i]:old.patchStart[i+1]]...)
			r.patchStart = append(r.patchStart, int32(len(r.patches)))
			r.below = append(r.below, old.below[i])
		}
		t.rows[b] = r
	}
	t.sides, t.done = kept, len(kept)
}

func anyLit(lit []bool, links []Link) bool {
	for _, l := range links {
		if lit[l.Side] {
			return true
		}
	}
	return false
}

func appendPlaced(out, links []Link, place []int32) []Link {
	for _, l := range links {
		if p := place[l.Side]; p >= 0 {
			out = append(out, Link{p, l.W})
		}
	}
	return out
}
