package surface

// dropDark forgets the sides that no daylight reaches: those from which no
// chain of links leads to sky or ground in any batch, such as the insides of
// walls. They would be solved for zero.
func (t *Transport) dropDark() {
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
