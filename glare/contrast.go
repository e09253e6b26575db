package glare

import (
	"cmp"
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"
)

// Cones of Contrast, half angles: the part of the field in which the eye moves
// without effort, and that which it still takes in. Source: J.-J. Meyer, D.
// Francioli, H. Kerkhoven, A new model for the assessment of visual comfort at
// VDT workstations (1996): cones of 60 and 120 degrees (from memory).
const (
	SurroundRad   = 30 * math.Pi / 180
	BackgroundRad = 60 * math.Pi / 180
)

// Contrast holds mean luminances over solid angle, cd/m2; NaN where no pixel's
// centre lies.
type Contrast struct {
	Task       float64 // the cone of Options.TaskCentre and TaskRadiusRad
	Surround   float64 // to SurroundRad from the line of sight, without the task
	Background float64 // from there to BackgroundRad, without the task
}

// ContrastOf returns the luminances of task, surround and background. Discs
// do not count.
func ContrastOf(f *Field, lum []float32, o Options) Contrast {
	centre, radius := o.zone()
	cosTask := math.Cos(math.Min(radius, math.Pi))
	cosSurround, cosBackground := math.Cos(SurroundRad), math.Cos(BackgroundRad)
	var flux, omega [3]float64
	for i, d := range f.Dir {
		if !f.Inside[i] {
			continue
		}
		zone := 0
		switch {
		case r3.Dot(d, centre) >= cosTask:
		case d.X >= cosSurround:
			zone = 1
		case d.X >= cosBackground:
			zone = 2
		default:
			continue
		}
		flux[zone] += float64(lum[i]) * f.Omega[i]
		omega[zone] += f.Omega[i]
	}
	return Contrast{flux[0] / omega[0], flux[1] / omega[1], flux[2] / omega[2]}
}

// Median returns the luminance (cd/m2) that half of the field, by solid angle,
// does not exceed; NaN where no pixel's centre lies in it. Discs do not count.
func Median(f *Field, lum []float32) float64 {
	var inside []int32
	for i, in := range f.Inside {
		if in {
			inside = append(inside, int32(i))
		}
	}
	slices.SortFunc(inside, func(a, b int32) int { return cmp.Compare(lum[a], lum[b]) })
	sum := 0.0
	for _, i := range inside {
		if sum += f.Omega[i]; sum >= f.TotalOmega/2 {
			return float64(lum[i])
		}
	}
	return math.NaN()
}
