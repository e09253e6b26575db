package main

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"

	"github.com/spf13/cobra"
	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare"
	"squint/glare/photograph"
	"squint/scene/view"
)

// cameraFlags say of an image what it does not say itself.
type cameraFlags struct {
	Projection      string
	FOVDeg          float64
	Circle          string
	RollDeg         float64
	Vignetting      string
	VignettingTable string
	Masks           []string
	MaskPolygons    []string
	Factor          float64
	Spots           []string

	circleGiven, factorGiven bool
}

func (c *cameraFlags) bind(cmd *cobra.Command) {
	f := cmd.Flags()
	f.StringVar(&c.Projection, "projection", "", "`name`: equidistant, equisolid,\northographic, stereographic; or perspective,\nfor luminances alone")
	f.Float64Var(&c.FOVDeg, "fov-deg", 0, "full `angle` across the image circle; of a\nperspective image, across its width")
	f.StringVar(&c.Circle, "circle", "", "image circle in pixels, `x,y,radius`; or\nfind, or inscribed. Not given, it is found,\nunless the image says its projection itself")
	f.Float64Var(&c.RollDeg, "roll-deg", 0, "`angle` by which the camera leaned to its\nright")
	f.StringVar(&c.Vignetting, "vignetting", "", "light that the lens passes, as a polynomial\nof the angle from its axis in degrees, by\nthe coefficients `c0,c1,...`")
	f.StringVar(&c.VignettingTable, "vignetting-table", "", "the same as a CSV `file`: angle_deg,factor")
	f.StringArrayVar(&c.Masks, "mask", nil, "PNG `file` of the image's size; where it is\nblack, the image is hidden")
	f.StringArrayVar(&c.MaskPolygons, "mask-polygon", nil, "part that is hidden, by its `corners` in\npixels: 'name=x,y x,y x,y'")
	f.Float64Var(&c.Factor, "luminance-factor", 0, "`cd/m2` that the image's value 1 stands for")
	f.StringArrayVar(&c.Spots, "spot", nil, "`place` in pixels whose luminance was\nmeasured: x,y=cd/m2")
}

func (c *cameraFlags) check(given func(string) bool, within func(string, float64, float64, float64) error) error {
	if c.Projection != "" {
		if _, err := view.ParseProjection(c.Projection); err != nil {
			return fmt.Errorf("--projection: %w", err)
		}
	}
	for _, f := range []struct {
		flag   string
		got    float64
		lo, hi float64
	}{{"fov-deg", c.FOVDeg, 1, 360}, {"roll-deg", c.RollDeg, -360, 360}, {"luminance-factor", c.Factor, 1e-12, 1e12}} {
		if given(f.flag) {
			if err := within(f.flag, f.got, f.lo, f.hi); err != nil {
				return err
			}
		}
	}
	if c.circleGiven {
		if _, _, err := c.circle(); err != nil {
			return err
		}
	}
	if given("vignetting") && given("vignetting-table") {
		return errors.New("--vignetting: got a table as well, want one of the two")
	}
	if c.Vignetting != "" {
		if _, err := numbers(c.Vignetting); err != nil {
			return fmt.Errorf("--vignetting: %w", err)
		}
	}
	for _, s := range c.Spots {
		if _, err := parseSpot(s); err != nil {
			return err
		}
	}
	for _, m := range c.MaskPolygons {
		if _, _, err := parsePolygon(m); err != nil {
			return err
		}
	}
	c.factorGiven = given("luminance-factor")
	return nil
}

// circle is --circle: nil and find where it is to be found, nil alone for the
// inscribed one.
func (c *cameraFlags) circle() (circle *photograph.Circle, find bool, err error) {
	switch c.Circle {
	case "find":
		return nil, true, nil
	case "inscribed":
		return nil, false, nil
	}
	n, err := numbers(c.Circle)
	if err != nil || len(n) != 3 || n[2] < 1 {
		return nil, false, fmt.Errorf("--circle: got %q, want find, inscribed, or x,y,radius in pixels", c.Circle)
	}
	return &photograph.Circle{X: n[0], Y: n[1], RadiusPx: n[2]}, false, nil
}

// numbers reads finite numbers with commas between.
func numbers(text string) ([]float64, error) {
	parts := strings.Split(text, ",")
	out := make([]float64, len(parts))
	for i, p := range parts {
		v, err := strconv.ParseFloat(strings.TrimSpace(p), 64)
		if err != nil || math.IsNaN(v) || math.IsInf(v, 0) {
			return nil, fmt.Errorf("got %q, want a number", p)
		}
		out[i] = v
	}
	return out, nil
}

func parseSpot(text string) (photograph.Spot, error) {
	place, value, _ := strings.Cut(text, "=")
	at, err := numbers(place)
	lum, errLum := numbers(value)
	if err != nil || errLum != nil || len(at) != 2 || len(lum) != 1 || lum[0] <= 0 {
		return photograph.Spot{}, fmt.Errorf("--spot: got %q, want x,y=cd/m2, such as 812,440=350", text)
	}
	return photograph.Spot{X: at[0], Y: at[1], CdM2: lum[0]}, nil
}

func parsePolygon(text string) (name string, corners [][2]float64, err error) {
	name, list, found := strings.Cut(text, "=")
	for _, c := range strings.Fields(list) {
		at, err := numbers(c)
		if err != nil || len(at) != 2 {
			found = false
			break
		}
		corners = append(corners, [2]float64{at[0], at[1]})
	}
	if !found || name == "" || len(corners) < 3 {
		return "", nil, fmt.Errorf("--mask-polygon: got %q, want 'name=x,y x,y x,y' with three corners or more", text)
	}
	return name, corners, nil
}

// sourceFlags say what is a source of glare. The words are those of the
// project file.
type sourceFlags struct {
	Rule          string
	Luminance     float64
	Multiple      float64
	Task          string
	GroupingDeg   float64
	CoreLuminance float64
	LowLight      bool
}

// defaultCore (cd/m2) sets a photographed sun apart from the bright sky around
// it, with which its luminance would be averaged away. Own choice, by
// TestGroupingSensitivity: above clouds and sunlit walls, below the sun's pixels.
const defaultCore = 50000.0

// sourceRules are those of the project file's source_rule, without blanks.
var sourceRules = []string{"luminance", "field-mean", "sight-mean"}

func (s *sourceFlags) bind(cmd *cobra.Command) {
	f := cmd.Flags()
	f.StringVar(&s.Rule, "source-rule", "luminance", "`what` is a source: brighter than a luminance,\na multiple of the field-mean, or of the\nsight-mean, the task's")
	f.Float64Var(&s.Luminance, "source-luminance", glare.DefaultThresholdCdM2, "`cd/m2` of the first rule")
	f.Float64Var(&s.Multiple, "source-multiple", glare.DefaultMultiple, "`factor` of the other two")
	f.StringVar(&s.Task, "task", "", "what the eye works on, in degrees:\n`right,up,across`; else 34° about the line of\nsight")
	f.Float64Var(&s.GroupingDeg, "grouping-deg", glare.DefaultGroupingRad*180/math.Pi, "`angle` up to which bright pixels are one\nsource; 0: only those that touch")
	f.Float64Var(&s.CoreLuminance, "core-luminance", defaultCore, "pixels above so many `cd/m2` are sources\napart from the bright ones about them;\n0: none")
	f.BoolVar(&s.LowLight, "low-light", false, "correct DGP for little light at the eye")
}

func (s *sourceFlags) check(given func(string) bool, within func(string, float64, float64, float64) error, oneOf func(string, string, []string) error) error {
	checks := []error{
		oneOf("source-rule", s.Rule, sourceRules),
		within("source-luminance", s.Luminance, 1, 1e9), within("source-multiple", s.Multiple, 1, 100),
		within("grouping-deg", s.GroupingDeg, 0, 90),
	}
	if given("core-luminance") && s.CoreLuminance != 0 {
		checks = append(checks, within("core-luminance", s.CoreLuminance, 1, 1e9))
	}
	if s.Task != "" {
		_, _, err := s.task()
		checks = append(checks, err)
	}
	for _, err := range checks {
		if err != nil {
			return err
		}
	}
	return nil
}

// task is --task in the view frame.
func (s *sourceFlags) task() (centre r3.Vec, radiusRad float64, err error) {
	const deg = math.Pi / 180
	n, err := numbers(s.Task)
	if err != nil || len(n) != 3 || math.Abs(n[0]) > 90 || math.Abs(n[1]) > 90 || n[2] < 1 || n[2] > 180 {
		return r3.Vec{}, 0, fmt.Errorf("--task: got %q, want right,up,angle in degrees, such as 0,-20,30", s.Task)
	}
	sinA, cosA := math.Sincos(n[0] * deg)
	sinE, cosE := math.Sincos(n[1] * deg)
	return r3.Vec{X: cosE * cosA, Y: -cosE * sinA, Z: sinE}, n[2] / 2 * deg, nil
}

// options are those of the evaluation; the flags have been checked.
func (s *sourceFlags) options() glare.Options {
	o := glare.Options{ThresholdCdM2: s.Luminance, Multiple: s.Multiple, CoreCdM2: s.CoreLuminance, LowLight: s.LowLight,
		GroupingRad: s.GroupingDeg * math.Pi / 180}
	if s.GroupingDeg == 0 {
		o.GroupingRad = -1
	}
	switch s.Rule {
	case "field-mean":
		o.Method = glare.MultipleOfMean
	case "sight-mean":
		o.Method = glare.MultipleOfTask
	}
	if s.Task != "" {
		if centre, radius, err := s.task(); err == nil {
			o.TaskCentre, o.TaskRadiusRad = centre, radius
		}
	}
	return o
}
