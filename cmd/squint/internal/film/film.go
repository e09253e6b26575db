package film

import (
	"math"
	"slices"
)

// Film is a developed roll: what a page needs to show any frame.
type Film struct {
	Points, Frames, Rank int
	Least, StepLn        float64 // value = Least exp(StepLn code)

	Grain  Grain
	Mean   []int16 // by point, code times 2 Grain
	Basis  []int8  // [rank][point], 127 is the pattern's largest size
	Weight []int16 // [rank][frame], what 127 stands for in codes times Grain

	Lit      []uint8 // bits, [frame][point], each frame from a whole byte
	LitPoint []int16 // by point, code times 2 Grain
	LitFrame []int16 // by frame, code times 2 Grain

	// Steps says how exact the first patterns alone are; the last step is all.
	Steps []Step
}

// Step is a number of patterns and what they leave: the median and the 95th
// percentile of the relative difference between a point's value as kept on the
// roll, itself good to half a code, and as shown.
type Step struct {
	Rank         int
	Median, Wide float64
}

// Exact is the last step.
func (f *Film) Exact() Step { return f.Steps[len(f.Steps)-1] }

// stepEvery is the number of patterns in a step. Own choice.
const stepEvery = 2

// Grain says how finely codes are kept. A code is some per cent of a value. A
// weight is off by half a code by Grain at most, where its pattern is strongest,
// and a mean by half of that.
type Grain int

// The grains. Own choice.
const (
	Fine   Grain = 4
	Coarse Grain = 1
)

func (g Grain) weight() float64 { return float64(g) }
func (g Grain) mean() float64   { return 2 * float64(g) }

// rowBytes is the length of a frame's mask.
func (f *Film) rowBytes() int { return (f.Points + 7) / 8 }

func (f *Film) lit(frame, point int) bool {
	return f.Lit[frame*f.rowBytes()+point>>3]>>(point&7)&1 != 0
}

func (f *Film) value(code float64) float64 { return f.Least * math.Exp(f.StepLn*code) }

// At fills out, a value for each point, with a frame as it is shown.
func (f *Film) At(frame int, out []float64) { f.atStep(frame, f.Rank, out) }

// atStep is At with the first patterns alone.
func (f *Film) atStep(frame, rank int, out []float64) {
	for p := range out {
		code := float64(f.Mean[p]) / f.Grain.mean()
		for k := range rank {
			code += float64(f.Weight[k*f.Frames+frame]) / f.Grain.weight() * float64(f.Basis[k*f.Points+p]) / 127
		}
		out[p] = f.value(code)
		if f.lit(frame, p) {
			out[p] += f.value((float64(f.LitPoint[p]) + float64(f.LitFrame[frame])) / f.Grain.mean())
		}
	}
}

// Develop reduces the roll to patterns, at most rank of them.
func (r *Roll) Develop(rank int, grain Grain) *Film {
	f := &Film{Grain: grain, Points: r.Points, Frames: r.Frames, Least: r.Least, StepLn: r.stepLn()}
	r.developSun(f)
	rest := r.centred(f)
	basis, weights := patterns(rest, min(rank, r.Points, r.Frames))
	f.Rank = len(basis)
	f.Basis, f.Weight = make([]int8, f.Rank*f.Points), make([]int16, f.Rank*f.Frames)
	for k := range basis {
		most := 0.0
		for _, b := range basis[k] {
			most = math.Max(most, math.Abs(float64(b)))
		}
		for p, b := range basis[k] {
			f.Basis[k*f.Points+p] = int8(math.Round(float64(b) / most * 127))
		}
		for i, w := range weights[k] {
			f.Weight[k*f.Frames+i] = int16(math.Max(-32768, math.Min(32767, math.Round(float64(w)*most*f.Grain.weight()))))
		}
	}
	r.measure(f)
	return f
}

// centred are the codes of the rest less their mean by point.
func (r *Roll) centred(f *Film) matrix {
	sum := make([]float64, r.Points)
	for i := range r.Frames {
		for p, c := range r.rest(i) {
			sum[p] += float64(c)
		}
	}
	f.Mean = make([]int16, r.Points)
	for p := range sum {
		f.Mean[p] = int16(math.Round(sum[p] / float64(max(r.Frames, 1)) * f.Grain.mean()))
	}
	m := newMatrix(r.Frames, r.Points)
	for i := range r.Frames {
		row := m.row(i)
		for p, c := range r.rest(i) {
			row[p] = float32(c) - float32(f.Mean[p])/float32(f.Grain.mean())
		}
	}
	return m
}

// sunRounds is how often hours and points are fitted in turn: two settle what
// a sum of two has. Own choice.
const sunRounds = 3

// developSun fits a number to each hour and each point whose sum is the code
// of the sun on it.
func (r *Roll) developSun(f *Film) {
	f.Lit = make([]uint8, r.Frames*f.rowBytes())
	byFrame, byPoint := make([]float64, r.Frames), make([]float64, r.Points)
	sum, n := make([]float64, r.Points), make([]float64, r.Points)
	for range sunRounds {
		for i := range r.frames {
			lit, mean := r.frames[i].Lit, 0.0
			for _, l := range lit {
				mean += (float64(l.Code) - byPoint[l.Point]) / float64(len(lit))
			}
			byFrame[i] = mean
		}
		clear(sum)
		clear(n)
		for i := range r.frames {
			for _, l := range r.frames[i].Lit {
				sum[l.Point] += float64(l.Code) - byFrame[i]
				n[l.Point]++
			}
		}
		for p := range sum {
			byPoint[p] = sum[p] / math.Max(n[p], 1)
		}
	}
	for i := range r.frames {
		for _, l := range r.frames[i].Lit {
			f.Lit[i*f.rowBytes()+int(l.Point)>>3] |= 1 << (l.Point & 7)
		}
	}
	f.LitFrame, f.LitPoint = f.Grain.fixed(byFrame), f.Grain.fixed(byPoint)
}

func (g Grain) fixed(v []float64) []int16 {
	out := make([]int16, len(v))
	for i, x := range v {
		out[i] = int16(math.Max(-32768, math.Min(32767, math.Round(x*g.mean()))))
	}
	return out
}

// measureEvery is the distance of the frames that are measured: a prime, so
// that they fall on all hours of the day. Own choice.
const measureEvery = 19

// measure compares every few frames as shown, step by step, with the roll.
func (r *Roll) measure(f *Film) {
	off := make([]float64, 0, (r.Frames/measureEvery+1)*r.Points)
	shown, kept := make([]float64, r.Points), make([]float64, r.Points)
	for rank := min(stepEvery, f.Rank); ; rank = min(rank+stepEvery, f.Rank) {
		off = off[:0]
		for i := 0; i < r.Frames; i += measureEvery {
			f.atStep(i, rank, shown)
			for p, c := range r.rest(i) {
				kept[p] = f.value(float64(c))
			}
			for _, l := range r.frames[i].Lit {
				kept[l.Point] += f.value(float64(l.Code))
			}
			for p := range kept {
				off = append(off, math.Abs(shown[p]-kept[p])/kept[p])
			}
		}
		s := Step{Rank: rank}
		if len(off) > 0 {
			slices.Sort(off)
			s.Median, s.Wide = off[len(off)/2], off[len(off)*19/20]
		}
		if f.Steps = append(f.Steps, s); rank == f.Rank {
			return
		}
	}
}
