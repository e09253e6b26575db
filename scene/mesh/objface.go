package mesh

import "gonum.org/v1/gonum/spatial/r3"

// maxCorners bounds what ear clipping may cost, which grows with the square.
const maxCorners = 10000

// planarToleranceM is how far a corner may be off its polygon's plane without
// a note: exporters that write three decimals of a metre are off by half of
// that. Common practice, no published source.
const planarToleranceM = 0.001

// readFace reads the corners of a polygon and cuts it into triangles.
func (r *objReader) readFace(rest []byte) error {
	r.corners = r.corners[:0]
	for {
		var word []byte
		if word, rest = field(rest); len(word) == 0 || word[0] == '#' {
			break
		}
		v, err := r.corner(word)
		if err != nil {
			return err
		}
		r.corners = append(r.corners, v)
	}
	n := len(r.corners)
	if p := period(r.corners); p < n {
		r.repeated.hit(r.lines.line, "", 0)
		n = p
	}
	if n > maxCorners {
		return r.fail("f", "got %d corners, want at most %d; split the polygon or export triangles", n, maxCorners)
	}
	if n < 3 {
		r.short.hit(r.lines.line, "", 0)
		r.mesh.Degenerate++
		return nil
	}
	group, material := r.inGroup(), r.inMaterial()
	r.face = r.face[:0]
	for _, v := range r.corners[:n] {
		r.face = append(r.face, r.vertices[v])
	}
	if n == 3 {
		r.add([3]r3.Vec(r.face), group, material)
		return nil
	}
	r.clip.split(r.face)
	if len(r.clip.tris) == 0 {
		r.mesh.Degenerate++
		return nil
	}
	if r.clip.offPlaneM > planarToleranceM {
		r.notPlanar.hit(r.lines.line, "", r.clip.offPlaneM)
	}
	if r.clip.crossing {
		r.crossing.hit(r.lines.line, "", 0)
	}
	for _, t := range r.clip.tris {
		r.add([3]r3.Vec{r.face[t[0]], r.face[t[1]], r.face[t[2]]}, group, material)
	}
	return nil
}

// corner reads v, v/vt, v//vn or v/vt/vn and returns the index of the vertex,
// from 0.
func (r *objReader) corner(word []byte) (int, error) {
	v, rest, ok := index(word)
	if !ok {
		return 0, r.badCorner(word)
	}
	vertex, inRange := resolve(v, len(r.vertices))
	if !inRange {
		if v == 0 {
			return 0, r.fail("f", "got vertex 0, want 1 to %d, or -%d to -1 counted back; indices start at 1", len(r.vertices), len(r.vertices))
		}
		return 0, r.fail("f", "got vertex %d, want 1 to %d, or -%d to -1 counted back: there are %d vertices so far; the file is damaged, export it again",
			v, len(r.vertices), len(r.vertices), len(r.vertices))
	}
	for _, count := range [...]int{r.vts, r.vns} {
		if len(rest) == 0 {
			break
		}
		if rest[0] != '/' {
			return 0, r.badCorner(word)
		}
		rest = rest[1:]
		if len(rest) == 0 || rest[0] == '/' {
			continue // left out, as in v//vn; some exporters write v/ and v//
		}
		var i int
		if i, rest, ok = index(rest); !ok {
			return 0, r.badCorner(word)
		}
		if _, inRange := resolve(i, count); !inRange {
			r.loose.hit(r.lines.line, "", 0)
		}
	}
	if len(rest) > 0 {
		return 0, r.badCorner(word)
	}
	return vertex, nil
}

func (r *objReader) badCorner(word []byte) error {
	return r.fail("f", "got %q, want whole numbers v, v/vt, v//vn or v/vt/vn", quoted(word))
}

// resolve turns an index of the file, from 1 or counted back from -1, into one
// from 0, given the count so far.
func resolve(i, count int) (int, bool) {
	if i < 0 {
		i += count
	} else {
		i--
	}
	return i, i >= 0 && i < count
}

// index reads a whole number at the start of word.
func index(word []byte) (n int, rest []byte, ok bool) {
	i, negative := 0, false
	if len(word) > 0 && (word[0] == '-' || word[0] == '+') {
		i, negative = 1, word[0] == '-'
	}
	start := i
	for ; i < len(word) && '0' <= word[i] && word[i] <= '9'; i++ {
		if n = 10*n + int(word[i]-'0'); n > 1<<40 {
			return 0, nil, false
		}
	}
	if negative {
		n = -n
	}
	return n, word[i:], i > start
}

// period returns the length after which the corners repeat, if they do so a
// whole number of times, and otherwise their count.
func period(corners []int) int {
	n := len(corners)
next:
	for p := 3; p <= n/2; p++ {
		if n%p != 0 {
			continue
		}
		for i := p; i < n; i++ {
			if corners[i] != corners[i-p] {
				continue next
			}
		}
		return p
	}
	return n
}
