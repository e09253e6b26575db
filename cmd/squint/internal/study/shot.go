package study

import (
	"math"
	"time"

	"squint/glare"
	"squint/scene"
	"squint/scene/project"
	"squint/scene/view"
	"squint/trace/annual"
	"squint/trace/picture"
)

// Shot is one picture to make.
type Shot struct {
	Project *project.Project
	Climate *scene.Climate
	Scene   *scene.Scene
	Moment  *scene.Moment
	Clock   time.Time // of the moment, as the clocks show it
	Sky     string    // in words
	Stands  string    // how followers stand, in words; "" where none does
	Name    string    // of the viewpoint, or "plan"
	Design  string    // what tells it from other designs, in words; "" for one alone
	Order   int       // place among all pictures as they were asked for
	View    view.View
	Plan    *view.Plan // nil for views
	Seen    picture.Quantity

	Picture *picture.Picture
	Discs   []annual.Disc
	// Glare is nil but for a fisheye of a hemisphere; DGPError is its DGP's
	// standard error.
	Glare    *glare.Result
	DGPError float64

	set *lookSet
}

// Camera is that of the shot.
func (s *Shot) Camera() picture.Camera {
	if s.Plan != nil {
		return *s.Plan
	}
	return s.View
}

// hemisphere is how far a field of view may be from 180 degrees for glare, rad.
const hemisphere = 1e-9

// judge evaluates glare where the picture has all that an eye sees.
func (s *Shot) judge() {
	if !s.View.Projection.Fisheye() || math.Abs(s.View.FOVRad-math.Pi) > hemisphere {
		return
	}
	field := glare.NewField(s.View)
	opt := sourceOptions(s.Project.Criteria)
	var scratch glare.Scratch
	discs := toView(nil, s.View, s.Discs)
	r := glare.Evaluate(field, s.Picture.Mean, discs, opt, &scratch)
	s.Glare = &r
	_, _, s.DGPError, _ = glare.Pooled(field, s.Picture.Mean, s.Picture.Batch, discs, opt, 0, &scratch)
}
