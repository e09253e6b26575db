package film

import "math"

// Roll holds frames as they come, one byte a point on a logarithmic scale.
type Roll struct {
	Points, Frames int
	Least, Most    float64 // the range of values kept
	frames         []Frame
	dark           []uint8 // stands for the rest of a frame that was not kept
}

// Frame is one frame as it is kept.
type Frame struct {
	Rest []uint8 // code by point of all but the sun's part; nil: not kept
	Lit  []LitPoint
}

// LitPoint is a point that the sun lights in a frame.
type LitPoint struct {
	Point uint16
	Code  uint8
}

// MostPoints is the largest number of points of a frame.
const MostPoints = math.MaxUint16

// NewRoll holds frames of points between least and most, both above 0; what
// lies outside is moved to the ends.
func NewRoll(points, frames int, least, most float64) *Roll {
	return &Roll{Points: points, Frames: frames, Least: least, Most: most,
		frames: make([]Frame, frames), dark: make([]uint8, points)}
}

// Frame is a frame as it was kept, which is not to be changed.
func (r *Roll) Frame(frame int) Frame { return r.frames[frame] }

// Put keeps a frame of another roll of as many points and the same range; what
// does not fit is refused.
func (r *Roll) Put(frame int, f Frame) bool {
	for _, l := range f.Lit {
		if int(l.Point) >= r.Points {
			return false
		}
	}
	if len(f.Rest) != r.Points {
		return false
	}
	r.frames[frame] = f
	return true
}

// rest are the codes of a frame by point.
func (r *Roll) rest(frame int) []uint8 {
	if f := r.frames[frame].Rest; f != nil {
		return f
	}
	return r.dark
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
// falls straight from the sun, which is kept apart where it is more than from. It
// takes the place of what was kept before. Different frames may be kept at the
// same time. Where from goes with the sun's strength, points are lit by where
// the sun stands, and masks pack well.
func (r *Roll) Keep(frame int, all, sun []float32, from float64) {
	f := Frame{Rest: make([]uint8, r.Points)}
	for p := range f.Rest {
		a, s := float64(all[p]), float64(sun[p])
		if s > from {
			f.Lit = append(f.Lit, LitPoint{uint16(p), r.code(s)})
			a -= s
		}
		f.Rest[p] = r.code(a)
	}
	r.frames[frame] = f
}

// Merged is a roll of some of the frames and of fewer points, each the mean of a
// group of this one's. A group is lit where half of it is.
func (r *Roll) Merged(frames []int, groups [][]uint16) *Roll {
	out := NewRoll(len(groups), len(frames), r.Least, r.Most)
	value := func(code uint8) float64 { return r.Least * math.Exp(r.stepLn()*float64(code)) }
	sun := make([]float64, r.Points)
	for i, from := range frames {
		f := r.frames[from]
		if f.Rest == nil {
			continue
		}
		clear(sun)
		for _, l := range f.Lit {
			sun[l.Point] = value(l.Code)
		}
		to := Frame{Rest: make([]uint8, len(groups))}
		for g, group := range groups {
			rest, lit, n := 0.0, 0.0, 0
			for _, p := range group {
				rest += value(f.Rest[p]) / float64(len(group))
				lit += sun[p] / float64(len(group))
				if sun[p] > 0 {
					n++
				}
			}
			if 2*n >= len(group) && n > 0 {
				to.Lit = append(to.Lit, LitPoint{uint16(g), r.code(lit)})
			} else {
				rest += lit
			}
			to.Rest[g] = r.code(rest)
		}
		out.frames[i] = to
	}
	return out
}
