package system

import (
	"errors"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

// skyCeiling is an anidolic ceiling behind an upright mouth 3 m by 0.52 m whose
// collector takes in light between 20 degrees and the zenith.
func skyCeiling() AnidolicCeiling {
	return AnidolicCeiling{AxisTiltRad: 55 * rad, UpperRad: 35 * rad, LowerRad: 35 * rad, DuctLengthM: 3.6, GapM: 0.01,
		Reflector: "aluminium", Casing: "white", EntranceGlazing: "double"}
}

func mouth() Rect { return facing(0, 0, 0, 3, 0.52) }

func TestAnidolicRefused(t *testing.T) {
	r := mouth()
	for _, c := range []struct {
		name   string
		change func(*AnidolicCeiling, *Rect)
		dim    string
		want   string
	}{
		{"beyond the wall", func(c *AnidolicCeiling, _ *Rect) { c.AxisTiltRad = 60 * rad }, "axis tilt", "ends 95 degrees above"},
		{"below the wall", func(c *AnidolicCeiling, _ *Rect) { c.AxisTiltRad = -60 * rad }, "axis tilt", "ends 95 degrees below"},
		{"narrow", func(c *AnidolicCeiling, _ *Rect) { c.UpperRad, c.LowerRad = 5*rad, 4*rad }, "acceptance", "got 9 degrees in all, want at least 10"},
		{"no number", func(c *AnidolicCeiling, _ *Rect) { c.UpperRad = math.NaN() }, "acceptance", "half-angle"},
		{"share", func(c *AnidolicCeiling, _ *Rect) { c.KeepShare = 1.2 }, "collector share", "want 0.05 to 1"},
		// reach 0.5 cos 20 (1 + sin 90)/(1 - cos 70) = 1.428 m, of which 1.1/1.428 = 0.77 fits
		{"no space", func(c *AnidolicCeiling, _ *Rect) { c.SpaceM = 1.1 }, "collector space", "reaches 1.428 m before the facade, want at most 1.1 m: keep 0.77 of its reach"},
		{"far out", func(c *AnidolicCeiling, _ *Rect) { c.AxisTiltRad, c.UpperRad, c.LowerRad = 0, 5*rad, 5*rad }, "acceptance", "would reach 35."},
		{"high duct", func(c *AnidolicCeiling, _ *Rect) { c.DuctHeightM = 0.51 }, "duct height", "want 0.05 m to 0.5 m, the opening's height less"},
		{"flat duct", func(c *AnidolicCeiling, _ *Rect) { c.DuctHeightM = 0.01 }, "duct height", "got 0.01 m"},
		{"long outlet", func(c *AnidolicCeiling, _ *Rect) { c.OutletLengthM = 3.7 }, "outlet length", "the outlet is 3.7 m long and the duct 3.6 m in all"},
		{"long by default", func(c *AnidolicCeiling, _ *Rect) { c.DuctLengthM = 0.9 }, "outlet length", "the outlet is 1 m long and the duct 0.9 m"},
		// h/(1+cos 0) = 0.25 m
		{"short outlet", func(c *AnidolicCeiling, _ *Rect) { c.OutletLengthM = 0.2 }, "outlet length", "want above 0.255 m"},
		{"cut-off", func(c *AnidolicCeiling, _ *Rect) { c.OutletCutOffRad = 70 * rad }, "outlet cut-off", "got 70 degrees, want 0 to 60"},
		{"no length", func(c *AnidolicCeiling, _ *Rect) { c.DuctLengthM = 0 }, "duct length", "got 0 m"},
		{"gap", func(c *AnidolicCeiling, _ *Rect) { c.GapM = 0 }, "gap", "want 0.0005 to 0.5 m"},
		{"wide gap", func(c *AnidolicCeiling, r *Rect) { c.GapM, r.WidthM = 0.2, 0.3 }, "gap", "on either side"},
		{"low opening", func(c *AnidolicCeiling, r *Rect) { r.HeightM = 0.06 }, "opening", "is 0.06 m high"},
		{"roof light", func(_ *AnidolicCeiling, r *Rect) { *r = facing(0, 80*rad, 0, 3, .52) }, "opening", "leans 80.0 degrees"},
		{"rolled", func(_ *AnidolicCeiling, r *Rect) { *r = facing(0, 0, 5*rad, 3, .52) }, "opening", "lower edge slopes by 5 degrees"},
		{"facets", func(c *AnidolicCeiling, _ *Rect) { c.FacetErrorRad = 1e-9 }, "facet error", ""},
		{"facets", func(c *AnidolicCeiling, _ *Rect) { c.SpaceM = -1 }, "collector space", ""},
	} {
		t.Run(c.name, func(t *testing.T) {
			a, r := skyCeiling(), r
			c.change(&a, &r)
			faces, err := a.Build(r)
			var d *DimensionError
			if !errors.As(err, &d) || d.Dimension != c.dim || !strings.Contains(d.Message, c.want) || faces != nil {
				t.Errorf("got %v, want %q about %q", err, c.want, c.dim)
			}
		})
	}
}

// TestAnidolicByHand: collector, duct and outlet of a mouth 0.5 m high under
// the zenith. The collector's edge lies r = h (1+sin 90)/(1-cos 70) from the
// mouth's upper edge at 20 degrees; the outlet's parabola has its focus at the
// lip and the focal length 0.5 m: z = h - x^2/(4h), which ends at x = 2h.
func TestAnidolicByHand(t *testing.T) {
	r := mouth()
	c := skyCeiling()
	s, err := c.section(r)
	if err != nil {
		t.Fatal(err)
	}
	edge := 0.5 * 2 / (1 - math.Cos(70*rad))
	low := s.below[len(s.below)-1]
	if want := (plane{edge * math.Cos(20*rad), 0.5 + edge*math.Sin(20*rad)}); low.minus(want).length() > near {
		t.Errorf("collector's edge: got %v, want %v", low, want)
	}
	if len(s.above) != 1 {
		t.Errorf("under the zenith the mirror above has %d facets, want none", len(s.above)-1)
	}
	for _, p := range s.reflector {
		x := -p[0] - 2.6 // in from the lip: 3.6 m less 2 x 0.5 m
		if math.Abs(p[1]-(0.5-x*x/2)) > near || x < -near || x > 1+near {
			t.Fatalf("reflector: %v is not on z = 0.5 - x^2/2, x from 0 to 1", p)
		}
	}
	o, err := c.Outlet(r)
	if err != nil {
		t.Fatal(err)
	}
	// Seen from below: 2.6 to 3.6 m behind the glass, level, duct above.
	if l := r.Local(o.Point(0, 0, 0)); apart(l, r3.Vec{X: 0.01, Y: 0.01, Z: -2.6}) > near {
		t.Errorf("outlet's first corner: %v", l)
	}
	if l := r.Local(o.Point(o.WidthM, o.HeightM, 0)); apart(l, r3.Vec{X: 2.99, Y: 0.01, Z: -3.6}) > near {
		t.Errorf("outlet's last corner: %v", l)
	}
	if apart(o.Outward, r3.Vec{Z: 1}) > near || apart(r3.Cross(o.Across, o.Up), r3.Vec{Z: -1}) > near {
		t.Errorf("outlet's outward side is %v, want up", o.Outward)
	}
	m, err := c.Mouth(r)
	if err != nil || apart(r.Local(m.Origin), r3.Vec{X: .01, Y: .01}) > near || math.Abs(m.WidthM-2.98) > near || math.Abs(m.HeightM-.5) > near {
		t.Errorf("mouth: %+v, %v", m, err)
	}
}

// TestOutletOfAnyLength: the reflector joins the roof to the end asked for,
// and a cut-off has its end below the lip by that angle.
func TestOutletOfAnyLength(t *testing.T) {
	for _, c := range []struct{ length, cutDeg float64 }{{0.3, 0}, {0.6, 0}, {1, 0}, {2, 0}, {1, 20}, {0, 20}, {0, 45}, {0.5, 45}} {
		a := skyCeiling()
		a.OutletLengthM, a.OutletCutOffRad = c.length, c.cutDeg*rad
		s, err := a.section(mouth())
		if err != nil {
			t.Fatal(err)
		}
		length := c.length
		if length == 0 { // the closed form for an axis straight down
			length = 0.5 * 2 / (1 - math.Sin(c.cutDeg*rad)) * math.Cos(c.cutDeg*rad)
		}
		end := s.reflector[len(s.reflector)-1]
		want := plane{-3.6, -length * math.Tan(c.cutDeg*rad)}
		if end.minus(want).length() > 1e-6 || s.reflector[0] != (plane{s.ductFloor[0], 0.5}) {
			t.Errorf("%+v: reflector from %v to %v, want %v to %v", c, s.reflector[0], end, plane{s.ductFloor[0], .5}, want)
		}
		if math.Abs(s.ductFloor[0]+3.6-length) > near {
			t.Errorf("%+v: lip at %v, want %g m before the end", c, s.ductFloor, length)
		}
	}
}

// TestAnidolicClosed: no edge is open but those of entrance, outlet and, in
// the plane of the glass, the opening; every face of the walls has its front
// inside and its casing behind.
func TestAnidolicClosed(t *testing.T) {
	rng := rand.New(rand.NewPCG(4, 2))
	for _, lean := range []float64{0, 20 * rad, -20 * rad} {
		for _, c := range []AnidolicCeiling{
			skyCeiling(),
			{AxisTiltRad: 40 * rad, UpperRad: 25 * rad, LowerRad: 20 * rad, KeepShare: 0.5, DuctLengthM: 4, DuctHeightM: .3, OutletLengthM: 1.5, OutletCutOffRad: 15 * rad, GapM: .002, Reflector: "m", Casing: "c"},
			{UpperRad: 36 * rad, LowerRad: 36 * rad, DuctLengthM: 2, OutletLengthM: .4, GapM: .02, Reflector: "m", Casing: "c"},
		} {
			r := facing(rng.Float64()*2*math.Pi, lean, 0, 3, 0.52)
			c.EntranceGlazing = ""
			c.AxisTiltRad += min(0, lean)
			faces, err := c.Build(r)
			if err != nil {
				t.Fatal(err)
			}
			k, err := c.Collector(r)
			if err != nil {
				t.Fatal(err)
			}
			o, err := c.Outlet(r)
			if err != nil {
				t.Fatal(err)
			}
			below, above := k.Entrance()
			width := 3 - 2*c.GapM
			// Walls and frame meet along the mouth's edges, where three faces do:
			// the walls run through and the frame's edge is over.
			want := 2*(width+plane(above).minus(below).length()) + 2*(width+o.HeightM) + 2*(3+0.52) + 2*(width+k.ExitHeightM)
			if got := rims(faces); math.Abs(got-want) > 1e-6 {
				t.Errorf("lean %g, %+v: open edges: got %g m, want %g m", lean/rad, c, got, want)
			}
			for _, f := range faces {
				if f.Part != "anidolic/frame" && (f.Finish != c.Reflector || f.Back != c.Casing) {
					t.Fatalf("%+v: want %s with %s behind", f, c.Reflector, c.Casing)
				}
			}
			if enclosed(faces) <= 0 {
				t.Errorf("lean %g: volume %g, want the fronts inside", lean/rad, enclosed(faces))
			}
		}
	}
}

// enclosed is the volume of what the fronts of the walls enclose, but for the open sides:
// positive where the fronts are inside. The origin is in the mouth, in whose
// plane the frame lies.
func enclosed(faces []Face) float64 {
	var origin r3.Vec
	for _, f := range faces {
		if f.Part == "anidolic/frame" {
			origin = f.V[0]
		}
	}
	sum := 0.0
	for _, f := range faces {
		a, b, c := r3.Sub(f.V[0], origin), r3.Sub(f.V[1], origin), r3.Sub(f.V[2], origin)
		sum -= r3.Dot(a, r3.Cross(b, c)) / 6
	}
	return sum
}

// TestAnidolicTurns: turning the opening turns all faces with it.
func TestAnidolicTurns(t *testing.T) {
	c := skyCeiling()
	c.OutletGlazing, c.MouthGlazing, c.Roller, c.Drawn = "opal", "clear", "screen", true
	south := mouth()
	want, err := c.Build(south)
	if err != nil {
		t.Fatal(err)
	}
	for _, az := range []float64{0.4, 2, 5} {
		r := facing(az, 0, 0, 3, 0.52)
		got, err := c.Build(r)
		if err != nil || len(got) != len(want) {
			t.Fatalf("%d faces, want %d: %v", len(got), len(want), err)
		}
		for i := range got {
			for k := range 3 {
				if apart(r.Local(got[i].V[k]), south.Local(want[i].V[k])) > near {
					t.Fatalf("face %d: corner %v, want %v", i, r.Local(got[i].V[k]), south.Local(want[i].V[k]))
				}
			}
		}
	}
}

// TestAnidolicPanes: panes and cloth have their fronts to outdoors, the cloth
// lies clear of the entrance and before the facade.
func TestAnidolicPanes(t *testing.T) {
	c := skyCeiling()
	c.OutletGlazing, c.MouthGlazing, c.Roller = "opal", "clear", "screen"
	r := mouth()
	raised, err := c.Build(r)
	if err != nil {
		t.Fatal(err)
	}
	c.Drawn = true
	drawn, err := c.Build(r)
	if err != nil || len(drawn) != len(raised)+2 {
		t.Fatalf("%d faces drawn and %d raised, want 2 more: %v", len(drawn), len(raised), err)
	}
	low := r3.Vec{}
	for _, f := range drawn {
		n := r3.Vec{X: r3.Dot(f.Normal(), r.Across), Y: r3.Dot(f.Normal(), r.Up), Z: r3.Dot(f.Normal(), r.Outward)}
		switch f.Part {
		case "anidolic/entrance", "anidolic/roller":
			// From the mouth's upper edge outwards and up by 20 degrees: its
			// normal is 20 degrees behind the vertical.
			if apart(n, r3.Vec{Y: math.Cos(20 * rad), Z: -math.Sin(20 * rad)}) > near {
				t.Errorf("%s faces %v", f.Part, n)
			}
			for _, v := range f.V {
				l := r.Local(v)
				if f.Part == "anidolic/roller" && l.Z < 0.0099 {
					t.Errorf("cloth at %v, behind the facade", l)
				}
				if f.Part == "anidolic/entrance" {
					low = l
				} else if d := (l.Y-low.Y)*n.Y + (l.Z-low.Z)*n.Z; math.Abs(d-rollerGapM) > near {
					t.Errorf("cloth %g m off the entrance", d)
				}
			}
		case "pane":
			if apart(n, r3.Vec{Z: 1}) > near {
				t.Errorf("%s faces %v", f.Part, n)
			}
		case "anidolic/outlet pane":
			if apart(n, r3.Vec{Y: 1}) > near {
				t.Errorf("%s faces %v", f.Part, n)
			}
		}
	}
}

// TestInAcceptance: the direction within the section decides, whatever the
// azimuth; behind the facade never.
func TestInAcceptance(t *testing.T) {
	for _, az := range []float64{0, 2.5} {
		r := facing(az, 0, 0, 3, 0.52)
		c := skyCeiling() // 20 to 90 degrees
		c.AxisTiltRad = 50 * rad
		for _, v := range []struct {
			profileDeg, asideM float64
			keep               float64
			want               bool
		}{
			{14.9, 0, 1, false}, {15.1, 0, 1, true}, {15.1, 3, 1, true}, {14.9, -3, 1, false},
			{84.9, 0, 1, true}, {85.1, 0, 1, false}, {100, 0, 1, false}, {200, 0, 1, false},
			{86, 0, .3, true}, // shortened
		} {
			c.KeepShare = v.keep
			sin, cos := math.Sincos(v.profileDeg * rad)
			sun := r3.Unit(r3.Add(r3.Scale(v.asideM, r.Across), r3.Add(r3.Scale(cos, r.Outward), r3.Scale(sin, r.Up))))
			got, err := c.InAcceptance(sun, r)
			if err != nil || got != v.want {
				t.Errorf("azimuth %g, profile %g, aside %g, share %g: got %v, %v, want %v", az/rad, v.profileDeg, v.asideM, v.keep, got, err, v.want)
			}
		}
	}
	c := skyCeiling()
	c.GapM = -1
	if _, err := c.InAcceptance(r3.Vec{Y: 1}, mouth()); err == nil {
		t.Error("a ceiling that cannot be built accepts")
	}
}
