package surface

import (
	"math"
	"testing"

	"squint/materials/sampling"
)

// TestGatherTwins holds the assembly against the portable loop on random
// links. A fused multiply-add rounds once where the loop rounds twice: over n
// terms the two differ by at most n float32 roundings of the summed
// magnitudes (Higham 2002, Accuracy and Stability of Numerical Algorithms,
// section 3.1).
func TestGatherTwins(t *testing.T) {
	s := sampling.NewStream(1, 7)
	rows := make([]Row, 50)
	for i := range rows {
		for h := range rows[i] {
			rows[i][h] = float32(s.Float64())
		}
	}
	for n := range 40 {
		links := make([]Link, n)
		for k := range links {
			links[k] = Link{int32(s.Intn(len(rows))), float32(s.Float64())}
		}
		var a, b Row
		for h := range a {
			a[h] = float32(h)
			b[h] = a[h]
		}
		gather(&a, rows, links, 0.5)
		gatherGo(&b, rows, links, 0.5)
		for h := range a {
			bound := float64(n+2) * 6e-8 * (float64(h) + 0.5*float64(n))
			if d := math.Abs(float64(a[h] - b[h])); d > bound+1e-7 {
				t.Fatalf("n %d, entry %d: got %g, loop %g", n, h, a[h], b[h])
			}
		}
	}
	e, old := rows[0], rows[1]
	old2 := old
	change, total := rows[2], rows[3]
	change2, total2 := change, total
	settle(&e, &old, &change, &total)
	settleGo(&e, &old2, &change2, &total2)
	if change != change2 || total != total2 || old != e || old2 != e {
		t.Fatalf("settle: got %v, loop %v", change, change2)
	}
}

func BenchmarkGather(b *testing.B) {
	rows := make([]Row, 10000)
	links := make([]Link, 43)
	s := sampling.NewStream(1, 8)
	for k := range links {
		links[k] = Link{int32(s.Intn(len(rows))), 0.01}
	}
	var acc Row
	b.SetBytes(int64(len(links)) * Width * 4)
	for b.Loop() {
		gather(&acc, rows, links, 1)
	}
}
