package system

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"
)

// The laws by which slats follow the sun.
const (
	CutOff   = "cut-off"
	Redirect = "redirect"
)

// State is a position in which slats stand.
type State struct {
	Name    string
	TiltRad float64 // positive with the outer edge up, 0 square to the glass
}

// Follower groups the tilts of slats that follow the sun into a few states.
type Follower struct {
	// Law is CutOff, which opens the slats as far as no sun passes straight
	// between flat ones, and not beyond square to the glass; or Redirect, by
	// which mirrored slats throw the sun onto a ceiling, as far back as its
	// far end.
	Law            string
	WidthM, PitchM float64 // of the slats
	// RiseM is the height of the ceiling above the slats and DepthM the
	// distance of its far end from the glass, for Redirect.
	RiseM, DepthM float64
	Steps         int // most tilts, at least 2
	// LowRad and HighRad are the tilts at which the slats touch, see Slats.
	LowRad, HighRad float64
}

// States are the tilts the slats take, in rising order, evenly spaced over
// those that the law asks for at upright glass, from suns at the horizon to
// overhead ones.
func (f Follower) States() []State {
	low, high := f.reach()
	n := max(f.Steps, 2)
	states := make([]State, n)
	for i := range states {
		t := low + (high-low)*float64(i)/float64(n-1)
		// Tenths of a degree can be read, and set. Rounded down, the sun
		// stays cut off.
		const tenth = math.Pi / 1800
		tenths := math.Floor(t/tenth + 1e-6)
		if tenths*tenth < f.LowRad {
			tenths++
		}
		states[i] = State{fmt.Sprintf("tilt %.1f", tenths/10+0), tenths * tenth}
	}
	return slices.Compact(states) // a narrow range holds fewer
}

// reach is the range of tilts.
func (f Follower) reach() (low, high float64) {
	if f.Law == Redirect {
		rise := math.Atan2(f.RiseM, f.DepthM)
		low, high = redirect(0, rise), redirect(math.Pi/2, rise)
	} else {
		low = f.LowRad
		if t, ok := CutOffTilt(0, f.WidthM, f.PitchM); ok {
			low = t
		}
	}
	clamp := func(t float64) float64 { return min(max(t, f.LowRad), f.HighRad) }
	return clamp(low), clamp(high)
}

// Choose returns the index of the state, among States, that suits the sun:
// the largest tilt that the law allows, the lowest where it allows none, and
// the one nearest to square to the glass while the sun is not before it.
func (f Follower) Choose(sun r3.Vec, r Rect) int {
	states := f.States()
	profile, ok := ProfileAngle(sun, r)
	if !ok || sun.Z <= 0 {
		nearest := 0
		for i, s := range states {
			if math.Abs(s.TiltRad) < math.Abs(states[nearest].TiltRad) {
				nearest = i
			}
		}
		return nearest
	}
	// In the frame of glass that leans back, level points up.
	limit := redirect(profile, math.Atan2(f.RiseM, f.DepthM)+r.LeanRad())
	if f.Law != Redirect {
		if limit, ok = CutOffTilt(profile, f.WidthM, f.PitchM); !ok {
			limit = math.Inf(-1)
		}
	}
	best := 0
	for i, s := range states {
		if s.TiltRad <= limit+1e-9 {
			best = i
		}
	}
	return best
}
