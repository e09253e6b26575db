package film

import "math"

// Roll holds frames as they come, one byte a point on a logarithmic scale.
type Roll struct {
	Points, Frames int
	Least, Most    float64 // the range of values kept
	rest           []uint8 // [frame][point]
	lit            [][]litPoint
}

// litPoint is a point that the sun lights in a frame.
type litPoint struct {
	point uint16
	code  uint8
}

// litShare is the part of a value from which the sun on it is kept apart:
// less is lost in the steps of the scale. Own choice.
const litShare = 0.1

// MostPoints is the largest number of points of a frame.
const MostPoints = math.MaxUint16

// NewRoll holds frames of points between least and most, both above 0; what
// lies outside is moved to the ends.
func NewRoll(points, frames int, least, most float64) *Roll {
	return &Roll{Points: points, Frames: frames, Least: least, Most: most,
		rest: make([]uint8, points*frames), lit: make([][]litPoint, frames)}
}

// stepLn is one step of the scale, in natural logarithms.
func (r *Roll) stepLn() float64 { return math.Log(r.Most/r.Least) / 255 }

func (r *Roll) code(v float64) uint8 {
	if !(v > r.Least) {
		return 0
	}
	return uint8(math.Min(255, math.Round(math.Log(v/r.Least)/r.stepLn())))
}

// Keep stores one frame: all is the whole value by point, sun its part that
// falls straight from the sun. Different frames may be kept at the same time.
func (r *Roll) Keep(frame int, all, sun []float32) {
	row := r.rest[frame*r.Points:][:r.Points]
	for p := range row {
		a, s := float64(all[p]), float64(sun[p])
		if s > litShare*a {
			r.lit[frame] = append(r.lit[frame], litPoint{uint16(p), r.code(s)})
			a -= s
		}
		row[p] = r.code(a)
	}
}
