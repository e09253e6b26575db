package system

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

const rad = math.Pi / 180

// near is the bound on rounding in metres: a dozen operations on coordinates
// of some 10 m, each off by 2^-53 relative, stay far below it.
const near = 1e-9

func apart(a, b r3.Vec) float64 { return r3.Norm(r3.Sub(a, b)) }

// facing is a wall opening whose outward side has that azimuth, leaning back,
// rolled in its own plane, made from rotations alone.
func facing(azimuthRad, leanRad, rollRad, width, height float64) Rect {
	turn := func(v r3.Vec) r3.Vec {
		v = r3.NewRotation(rollRad, r3.Vec{Y: 1}).Rotate(v)
		v = r3.NewRotation(leanRad, r3.Vec{X: 1}).Rotate(v)
		return r3.NewRotation(-azimuthRad, r3.Vec{Z: 1}).Rotate(v)
	}
	return Rect{Origin: r3.Vec{X: 1, Y: 2, Z: 3}, Across: turn(r3.Vec{X: 1}), Up: turn(r3.Vec{Z: 1}), Outward: turn(r3.Vec{Y: 1}), WidthM: width, HeightM: height}
}

func sameRect(t *testing.T, what string, got, want Rect) {
	t.Helper()
	off := max(apart(got.Origin, want.Origin), apart(got.Across, want.Across), apart(got.Up, want.Up), apart(got.Outward, want.Outward),
		math.Abs(got.WidthM-want.WidthM), math.Abs(got.HeightM-want.HeightM))
	if !(off < near) {
		t.Errorf("%s:\n got %+v\nwant %+v", what, got, want)
	}
}

// TestRectByHand: a wall in the plane y = 0 that faces south (-y), seen from
// indoors looking south: right is west, -x.
func TestRectByHand(t *testing.T) {
	south := [4]r3.Vec{{X: 0, Z: 1}, {X: 2, Z: 1}, {X: 2, Z: 2.5}, {X: 0, Z: 2.5}} // counter-clockwise seen from the south
	r, err := RectFromCorners(south, r3.Vec{})
	if err != nil {
		t.Fatal(err)
	}
	sameRect(t, "south", r, Rect{Origin: r3.Vec{X: 2, Z: 1}, Across: r3.Vec{X: -1}, Up: r3.Vec{Z: 1}, Outward: r3.Vec{Y: -1}, WidthM: 2, HeightM: 1.5})
	if c := r.Corners(); c != south {
		t.Errorf("corners: got %v, want %v", c, south)
	}
	// a roof light: the first two corners make the lower edge
	roof := [4]r3.Vec{{X: 0, Y: 0, Z: 3}, {X: 2, Y: 0, Z: 3}, {X: 2, Y: 1, Z: 3}, {X: 0, Y: 1, Z: 3}}
	want := Rect{Origin: r3.Vec{X: 2, Z: 3}, Across: r3.Vec{X: -1}, Up: r3.Vec{Y: 1}, Outward: r3.Vec{Z: 1}, WidthM: 2, HeightM: 1}
	for _, hint := range []r3.Vec{{}, {Z: 1}, {X: 1}, {Y: -1}} {
		r, err := RectFromCorners(roof, hint)
		if err != nil {
			t.Fatal(err)
		}
		sameRect(t, "roof", r, want)
	}
}

// TestRectFromAnyCorners wants the same rectangle from either winding and any
// first corner, in any orientation.
func TestRectFromAnyCorners(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 1))
	for range 500 {
		want := facing(rng.Float64()*2*math.Pi, (rng.Float64()-0.5)*170*rad, (rng.Float64()-0.5)*80*rad, 0.2+rng.Float64()*4, 0.2+rng.Float64()*3)
		c := want.Corners()
		first := rng.IntN(4)
		var given [4]r3.Vec
		for i := range given {
			given[i] = c[(first+i)%4]
		}
		got, err := RectFromCorners(given, r3.Vec{})
		if err != nil {
			t.Fatal(err)
		}
		sameRect(t, "counter-clockwise", got, want)
		given[1], given[3] = given[3], given[1]
		level := r3.Vec{X: want.Outward.X, Y: want.Outward.Y}
		if r3.Norm(level) < 0.1 {
			continue
		}
		got, err = RectFromCorners(given, level)
		if err != nil {
			t.Fatal(err)
		}
		sameRect(t, "clockwise with a hint", got, want)
		tris := [][3]r3.Vec{{c[0], c[1], c[2]}, {c[3], c[0], c[2]}, {c[2], c[1], c[0]}}
		got, err = RectFromTriangles(tris, level)
		if err != nil {
			t.Fatal(err)
		}
		sameRect(t, "triangles", got, want)
	}
}

// TestRectRounded rounds corners to a centimetre and wants a rectangle that is
// as near: each corner moves by 0.87 cm at most (half the diagonal of the
// cube), and so does each mean of corners.
func TestRectRounded(t *testing.T) {
	rng := rand.New(rand.NewPCG(2, 1))
	for range 500 {
		want := facing(rng.Float64()*2*math.Pi, (rng.Float64()-0.5)*60*rad, 0, 2+rng.Float64()*4, 2+rng.Float64()*3)
		c := want.Corners()
		for i, v := range c {
			c[i] = r3.Vec{X: math.Round(v.X*100) / 100, Y: math.Round(v.Y*100) / 100, Z: math.Round(v.Z*100) / 100}
		}
		got, err := RectFromCorners(c, want.Outward)
		if err != nil {
			t.Fatal(err)
		}
		axes := []float64{r3.Norm(got.Across) - 1, r3.Norm(got.Up) - 1, r3.Norm(got.Outward) - 1, r3.Dot(got.Across, got.Up),
			apart(r3.Cross(got.Across, got.Up), r3.Scale(-1, got.Outward))}
		for _, a := range axes {
			if math.Abs(a) > near {
				t.Fatalf("axes are not at right angles: %v of %+v", axes, got)
			}
		}
		for i, v := range got.Corners() {
			// The corner is the middle, off by one mean, plus half of either
			// mean side, whose ends are off by one mean each.
			if d := apart(v, c[i]); d > 3*0.0087 {
				t.Errorf("corner %d moved by %.4f m", i+1, d)
			}
		}
	}
}

func TestRectRefused(t *testing.T) {
	nan := math.NaN()
	for _, c := range []struct {
		name    string
		corners [4]r3.Vec
		hint    r3.Vec
		want    string
	}{
		{"not a number", [4]r3.Vec{{}, {X: 1}, {X: 1, Z: nan}, {Z: 1}}, r3.Vec{}, "corner 3: got [1, 0, NaN]"},
		{"far away", [4]r3.Vec{{}, {X: 1e6}, {X: 1e6, Z: 1}, {Z: 1}}, r3.Vec{}, "corner 2: "},
		{"the same corner", [4]r3.Vec{{}, {X: 1}, {X: 1}, {Z: 1}}, r3.Vec{}, "corner 3: lies 0 m from corner 2"},
		{"one line", [4]r3.Vec{{}, {X: 1}, {X: 2}, {X: 3}}, r3.Vec{}, "corners: lie on one line or"},
		{"twisted", [4]r3.Vec{{}, {X: 1}, {X: 1, Y: 0.3, Z: 1}, {Z: 1}}, r3.Vec{}, "off the plane"},
		{"a skewed corner", [4]r3.Vec{{}, {X: 1}, {X: 1.1, Z: 1}, {Z: 1}}, r3.Vec{}, "corner 2: the angle is 95.71 degrees"}, // 90 + atan 0.1
		{"crossed order", [4]r3.Vec{{}, {X: 1, Z: 1}, {X: 1}, {Z: 1}}, r3.Vec{}, "are not in order"},
		{"hint along the glass", [4]r3.Vec{{}, {X: 1}, {X: 1, Z: 1}, {Z: 1}}, r3.Vec{X: 1}, "outward: cannot tell"},
		{"hint is not a number", [4]r3.Vec{{}, {X: 1}, {X: 1, Z: 1}, {Z: 1}}, r3.Vec{X: nan}, "outward: not a direction"},
	} {
		t.Run(c.name, func(t *testing.T) {
			if _, err := RectFromCorners(c.corners, c.hint); err == nil || !strings.Contains(err.Error(), c.want) {
				t.Errorf("got %v, want an error with %q", err, c.want)
			}
		})
	}
}

func TestRectFromTrianglesRefused(t *testing.T) {
	p := func(x, z float64) r3.Vec { return r3.Vec{X: x, Z: z} }
	square := [][3]r3.Vec{{p(0, 0), p(2, 0), p(2, 2)}, {p(0, 0), p(2, 2), p(0, 2)}}
	moved := func(y float64) [][3]r3.Vec {
		var list [][3]r3.Vec
		for _, t := range square {
			for i := range t {
				t[i].Y = y
			}
			list = append(list, t)
		}
		return list
	}
	for _, c := range []struct {
		name string
		tris [][3]r3.Vec
		hint r3.Vec
		want string
	}{
		{"nothing", nil, r3.Vec{Y: 1}, "no area"},
		{"no area", [][3]r3.Vec{{p(0, 0), p(1, 1), p(2, 2)}}, r3.Vec{Y: 1}, "no area"},
		{"half", square[:1], r3.Vec{Y: 1}, "not rectangular: its 2 m2 are 50.0 %"},
		{"L", [][3]r3.Vec{{p(0, 0), p(2, 0), p(2, 1)}, {p(0, 0), p(2, 1), p(0, 1)}, {p(0, 1), p(1, 1), p(1, 2)}, {p(0, 1), p(1, 2), p(0, 2)}}, r3.Vec{Y: 1}, "its 3 m2 are 75.0 %"},
		{"both sides of a pane", append(moved(0), moved(0.006)...), r3.Vec{Y: 1}, "overlapping: its 8 m2 are 200.0 %"},
		{"two walls", append(moved(0), moved(1)...), r3.Vec{Y: 1}, "not plane: a corner lies 0.5 m off"},
		{"side unknown", square, r3.Vec{}, "outward: cannot tell"},
		{"not a number", [][3]r3.Vec{{p(0, 0), p(math.NaN(), 1), p(2, 2)}}, r3.Vec{Y: 1}, "triangle 1: got [NaN, 0, 1]"},
		{"narrow", [][3]r3.Vec{{p(0, 0), p(2, 0), p(2, .005)}, {p(0, 0), p(2, .005), p(0, .005)}}, r3.Vec{Y: 1}, "too narrow"},
	} {
		t.Run(c.name, func(t *testing.T) {
			if _, err := RectFromTriangles(c.tris, c.hint); err == nil || !strings.Contains(err.Error(), c.want) {
				t.Errorf("got %v, want an error with %q", err, c.want)
			}
		})
	}
}

// TestRectFromManyTriangles cuts a pane into a fan around an inner point with
// points along its edges, wound at random.
func TestRectFromManyTriangles(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 1))
	for _, lean := range []float64{0, 30, 89, -20} {
		want := facing(1, lean*rad, 0, 3, 1.2)
		var ring []r3.Vec
		c := want.Corners()
		for i := range c {
			for k := range 5 {
				ring = append(ring, r3.Add(r3.Scale(1-float64(k)/5, c[i]), r3.Scale(float64(k)/5, c[(i+1)%4])))
			}
		}
		inner := want.Point(0.7, 0.9, 0)
		var tris [][3]r3.Vec
		for i := range ring {
			tri := [3]r3.Vec{inner, ring[i], ring[(i+1)%len(ring)]}
			if rng.IntN(2) == 0 {
				tri[1], tri[2] = tri[2], tri[1]
			}
			tris = append(tris, tri)
		}
		got, err := RectFromTriangles(tris, want.Outward)
		if err != nil {
			t.Fatal(err)
		}
		sameRect(t, "fan", got, want)
	}
}
