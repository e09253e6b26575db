package project

import (
	"math"

	"squint/scene/system"
)

// Slats are what blinds and louvres have in common; system.Slats says what
// each dimension means.
type Slats struct {
	Name, Opening string
	Position      string // "inside", "outside" or, blinds only, "between"
	SlatWidthMM   float64
	PitchMM       float64
	ThicknessMM   float64
	SagittaMM     float64 // of a cambered slat; positive: the middle is up
	TiltDeg       float64 // from square to the glass, positive lifts the outer edge
	GapM          float64 // between glass and slats
	SideGapM      float64 // between the slats' ends and the opening's sides
	Upper, Lower  string  // finishes; Lower "" is Upper, with its own back
	// States are the positions that the slats take; the first one's tilt is
	// TiltDeg. None: TiltDeg for good, or Follow.
	States []SlatState
	// Follow is the law by which the slats follow the sun, in Steps tilts:
	// "cut-off", "redirect" or "" for none.
	Follow                        string
	RedirectDepthM, RedirectRiseM float64 // of the ceiling's far end, from the glass and above the slats
	Steps                         int
	Line                          int
}

// SlatState is a named position of slats.
type SlatState struct {
	Name    string
	TiltDeg float64
}

// Blind is a slatted blind that hangs from the top of an opening.
type Blind struct {
	Slats
	Drop   float64 // share of the opening's height that is covered, from the top
	Raised bool
}

// Louvres are slats fixed in a strip of an opening.
type Louvres struct {
	Slats
	BottomM float64  // lower end of the strip, above the opening's lower edge
	TopM    *float64 // upper end; nil: the opening's top
}

// slats is what blind and louvres have in common, for package system.
func (s Slats) slats(cavityM float64) system.Slats {
	const mm = 1e-3
	return system.Slats{
		Position: s.Position, CavityM: cavityM, GapM: s.GapM, SideM: s.SideGapM,
		WidthM: s.SlatWidthMM * mm, PitchM: s.PitchMM * mm, ThicknessM: s.ThicknessMM * mm, SagittaM: s.SagittaMM * mm,
		TiltRad: s.TiltDeg * math.Pi / 180, Upper: s.Upper, Lower: s.lower(),
	}
}

func (s Slats) lower() string {
	if s.Lower == "" {
		return s.Upper
	}
	return s.Lower
}

// System is the blind in the units of package system, at an opening of that
// height and with that distance between two panes, Opening.CavityM.
func (b Blind) System(heightM, cavityM float64) system.Slats {
	s := b.slats(cavityM)
	s.LowM, s.HighM = heightM*(1-b.Drop), heightM
	s.HeadRail, s.Raised = true, b.Raised
	return s
}

// System is like Blind.System.
func (l Louvres) System(heightM, cavityM float64) system.Slats {
	s := l.slats(cavityM)
	s.LowM, s.HighM = l.BottomM, heightM
	if l.TopM != nil {
		s.HighM = *l.TopM
	}
	return s
}

// Follower is the sun-following law of slats; false where they have none.
func (s Slats) Follower() (system.Follower, bool) {
	if s.Follow == "" {
		return system.Follower{}, false
	}
	x := s.slats(0)
	f := system.Follower{Law: s.Follow, WidthM: x.WidthM, PitchM: x.PitchM, RiseM: s.RedirectRiseM, DepthM: s.RedirectDepthM, Steps: s.Steps}
	f.LowRad, f.HighRad = x.TiltLimits()
	return f, true
}
