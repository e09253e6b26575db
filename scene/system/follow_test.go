package system

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

// passes is the share of the sun that passes flat slats straight: 1 - width
// |sin(profile - tilt)| / (pitch cos profile), not below 0 (ISO 15099:2003, from
// memory; tilt there with the other sign).
func passes(profile, tilt, width, pitch float64) float64 {
	return max(0, 1-width/pitch*math.Abs(math.Sin(profile-tilt))/math.Cos(profile))
}

// TestCutOffFollows: of any sun before the glass nothing passes, and the next
// state would let some pass or does not exist.
func TestCutOffFollows(t *testing.T) {
	rng := rand.New(rand.NewPCG(10, 1))
	const width, pitch = 0.08, 0.072
	s := Slats{WidthM: width, PitchM: pitch, ThicknessM: 0.0004}
	low, high := s.TiltLimits()
	f := Follower{Law: CutOff, WidthM: width, PitchM: pitch, Steps: 9, LowRad: low, HighRad: high}
	states := f.States()
	if len(states) != 9 || states[8].TiltRad != 0 || states[8].Name != "tilt 0.0" || states[0].Name != "tilt -64.2" {
		// asin(0.072/0.08) = 64.158 degrees by hand calculator, rounded away from level
		t.Fatalf("states: %+v", states)
	}
	used := map[int]bool{}
	tight := 0
	for range 3000 {
		facade, lean := rng.Float64()*2*math.Pi, (rng.Float64()-0.5)*20*rad
		r := facing(facade, lean, 0, 2, 1)
		sun := sunAt(rng.Float64()*89*rad, facade+(rng.Float64()-0.5)*360*rad)
		i := f.Choose(sun, r)
		profile, ok := ProfileAngle(sun, r)
		if !ok {
			if i != 8 {
				t.Fatalf("the sun is behind the glass: got state %d, want the most open one", i)
			}
			continue
		}
		used[i] = true
		if profile < 0 {
			continue // below the normal of glass that leans back
		}
		if got := passes(profile, states[i].TiltRad, width, pitch); got > 1e-12 {
			t.Fatalf("profile %g degrees, state %+v: %g passes", deg(profile), states[i], got)
		}
		if i < 8 {
			if passes(profile, states[i+1].TiltRad, width, pitch) <= 0 {
				t.Fatalf("profile %g degrees: state %+v would do, chosen was %+v", deg(profile), states[i+1], states[i])
			}
			tight++
		}
	}
	if len(used) != 9 || tight < 100 {
		t.Errorf("states used: %v; %d times the next one passed sun", used, tight)
	}
	// A sun below the horizon is no sun.
	if i := f.Choose(sunAt(-0.1, 0), facing(0, 0, 0, 2, 1)); i != 8 {
		t.Errorf("below the horizon: got state %d", i)
	}
}

// TestRedirectFollows: the mirrored sun falls on the ceiling and would pass
// its far end with the next state.
func TestRedirectFollows(t *testing.T) {
	const rise, depth = 0.5, 6.0
	f := Follower{Law: Redirect, WidthM: 0.1, PitchM: 0.1, RiseM: rise, DepthM: depth, Steps: 12, LowRad: -math.Pi / 2, HighRad: math.Pi / 2}
	states := f.States()
	rng := rand.New(rand.NewPCG(11, 1))
	least := math.Inf(1)
	for range 2000 {
		facade, lean := rng.Float64()*2*math.Pi, (rng.Float64()-0.5)*20*rad
		r := facing(facade, lean, 0, 2, 1)
		sun := sunAt((15+74*rng.Float64())*rad, facade+(rng.Float64()-0.5)*120*rad)
		i := f.Choose(sun, r)
		slope := func(tilt float64) float64 {
			normal := r3.Sub(r3.Scale(math.Cos(tilt), r.Up), r3.Scale(math.Sin(tilt), r.Outward))
			away := r3.Sub(r3.Scale(2*r3.Dot(sun, normal), normal), sun)
			level := r3.Unit(r3.Vec{X: -r.Outward.X, Y: -r.Outward.Y})
			return math.Atan2(away.Z, r3.Dot(away, level))
		}
		profile, ok := ProfileAngle(sun, r)
		want := math.Atan2(rise, depth)
		if !ok || redirect(profile, want+lean) < states[0].TiltRad {
			continue // no state is low enough
		}
		got := slope(states[i].TiltRad)
		if got < want-1e-9 {
			t.Fatalf("state %+v throws the sun at %g degrees, below the far end at %g", states[i], deg(got), deg(want))
		}
		if i < len(states)-1 && slope(states[i+1].TiltRad) >= want {
			t.Fatalf("state %+v would do too", states[i+1])
		}
		least = min(least, got-want)
	}
	if least > 1*rad {
		t.Errorf("the far end is missed by %g degrees at best", deg(least))
	}
}

// TestStatesOfNarrowRange: no state twice, none beyond the limits.
func TestStatesOfNarrowRange(t *testing.T) {
	f := Follower{Law: CutOff, WidthM: 0.08, PitchM: 0.072, Steps: 40, LowRad: -0.55 * rad, HighRad: 1}
	states := f.States()
	if len(states) > 6 || states[0].TiltRad < f.LowRad {
		t.Errorf("got %+v, want at most 6 in tenths from -0.5 degrees", states)
	}
	wide := Follower{Law: CutOff, WidthM: 0.05, PitchM: 0.08, Steps: 1, LowRad: -math.Pi / 2, HighRad: math.Pi / 2}
	if states := wide.States(); len(states) != 2 || math.Abs(states[0].TiltRad+math.Pi/2) > 1e-3 {
		t.Errorf("slats too far apart: got %+v, want closed and open", states)
	}
	if i := wide.Choose(sunAt(0.2, 0), facing(0, 0, 0, 2, 1)); i != 0 {
		t.Errorf("slats too far apart to cut off: got state %d, want the closed one", i)
	}
}
