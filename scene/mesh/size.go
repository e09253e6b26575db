package mesh

import (
	"fmt"
	"math"
	"strconv"

	"gonum.org/v1/gonum/spatial/r3"
)

// What a room model measures, to notice a wrong unit. Common practice, no
// published source.
const (
	MaxRoomSizeM   = 500.0 // in any direction
	MaxRoomHeightM = 100.0 // a small room read in cm instead of m stays under MaxRoomSizeM, but is 280 m high
	MinRoomSizeM   = 0.1   // the largest of the three directions

	usualRoomSizeM   = 8.0 // largest direction of a usual room, to choose among units
	usualRoomHeightM = 3.0
)

// SizeError says that a mesh has a size that no room has. Size is in metres as
// read; Suggest is the unit that makes it plausible, NoUnit if none does.
type SizeError struct {
	File    string
	Size    r3.Vec
	Unit    Unit
	Want    string
	Suggest Unit
}

func (e *SizeError) Error() string {
	s := fmt.Sprintf("%s: size: got %s with unit = %q, want %s; ", e.File, sizeText(e.Size), e.Unit, e.Want)
	switch {
	case e.Suggest == NoUnit && largest(e.Size) < 1:
		return s + "no other unit makes it plausible either: the file may hold only a part of the room"
	case e.Suggest == NoUnit:
		return s + "no other unit makes it plausible either: look for stray faces far from the room"
	}
	scaled := r3.Scale(e.Suggest.Metres()/e.Unit.Metres(), e.Size)
	return s + fmt.Sprintf("it looks like the wrong unit: unit = %q would make it %s", e.Suggest, sizeText(scaled))
}

// SizeProblem returns a *SizeError if the bounding box is one that no room
// has: wider than MaxRoomSizeM, higher than MaxRoomHeightM, or smaller than
// MinRoomSizeM in its largest direction. Otherwise, and for a mesh without
// triangles, it returns nil. For surroundings use SizeProblemWithin.
func (m *Mesh) SizeProblem() error {
	return m.SizeProblemWithin(MinRoomSizeM, MaxRoomSizeM, MaxRoomHeightM)
}

// SizeProblemWithin is SizeProblem with other bounds, in metres.
func (m *Mesh) SizeProblemWithin(minM, maxM, maxHeightM float64) error {
	if len(m.Triangles) == 0 {
		return nil
	}
	box := m.Bounds()
	size := r3.Sub(box.Max, box.Min)
	fits := func(scale float64) bool {
		w := scale * largest(size)
		return w >= minM && w <= maxM && scale*size.Z <= maxHeightM
	}
	if fits(1) {
		return nil
	}
	e := &SizeError{File: m.File, Size: size, Unit: m.Unit}
	switch {
	case largest(size) < minM:
		e.Want = fmt.Sprintf("at least %s m in its largest direction", lengthText(minM))
	case largest(size) > maxM:
		e.Want = fmt.Sprintf("at most %s m in any direction", lengthText(maxM))
	default:
		e.Want = fmt.Sprintf("at most %s m in height", lengthText(maxHeightM))
	}
	if !m.Unit.known() {
		return e
	}
	best := math.Inf(1)
	for u := Metre; u <= Inch; u++ {
		scale := u.Metres() / m.Unit.Metres()
		if u == m.Unit || !fits(scale) {
			continue
		}
		off := math.Abs(math.Log(scale * largest(size) / usualRoomSizeM))
		if size.Z > 0 {
			off += math.Abs(math.Log(scale * size.Z / usualRoomHeightM))
		}
		if off < best {
			best, e.Suggest = off, u
		}
	}
	return e
}

func largest(v r3.Vec) float64 { return math.Max(v.X, math.Max(v.Y, v.Z)) }

func sizeText(v r3.Vec) string {
	return lengthText(v.X) + " x " + lengthText(v.Y) + " x " + lengthText(v.Z) + " m"
}

// lengthText writes about three digits, never an exponent within 1e-9 to 1e12.
func lengthText(m float64) string {
	digits := 0
	if a := math.Abs(m); a > 0 && a < 100 {
		digits = min(max(2-int(math.Floor(math.Log10(a))), 0), 12)
	}
	f, err := strconv.ParseFloat(strconv.FormatFloat(m, 'f', digits, 64), 64)
	if err != nil {
		return strconv.FormatFloat(m, 'g', 3, 64)
	}
	return strconv.FormatFloat(f, 'f', -1, 64)
}
