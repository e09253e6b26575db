package report

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare"
	"squint/glare/falsecolour"
	"squint/glare/photograph"
)

// Image is a luminance image evaluated for glare.
type Image struct {
	File  string // as the user typed it
	Photo *photograph.Photograph
	// Inside tells which pixels are seen: in the image circle and not hidden.
	// A glare.Field is ten times as large, too much to keep for many images.
	Inside []bool

	// Indices tells whether Result is more than mean luminances: it is not for
	// views other than fisheyes.
	Indices bool
	Result  glare.Result
	Options glare.Options

	Median, Largest float64 // cd/m2
	Contrast        glare.Contrast
	Veil            glare.Veil
	AgeYears        float64
	Pigmentation    float64 // of the eye, see glare.VeilGeneral

	// Covered is the share of the half space, weighted by the cosine to the
	// line of sight, that the image shows, hidden parts included; Hidden are
	// shares of what it shows.
	Covered float64
	Hidden  []HiddenShare

	Lux float64 // measured at the eye; 0 unknown

	Circle   string // where the image circle is and how that is known, in words
	Warnings []string
	Notes    []string
}

// HiddenShare is how much a mask takes, of the image's solid angle and of its
// illuminance if it were even.
type HiddenShare struct {
	Name                 string
	OmegaShare, LuxShare float64
}

// dgpValid tells whether the range of DGP's data holds the result.
func (im *Image) dgpValid() bool {
	return im.Indices && glare.InRange(glare.DGP(im.Result.Ev, im.Result.SourceSum), im.Result.Ev)
}

// sunCdM2 is the luminance from which a source is taken for the sun or its
// mirror image, for which DGPs was not made. Own choice: far above any cloud
// or lamp, far below the sun through thin haze.
const sunCdM2 = 1e6

func (im *Image) dgpsValid() bool {
	if !im.Result.DGPsValid {
		return false
	}
	for _, s := range im.Result.Sources {
		if s.PeakLuminance >= sunCdM2 {
			return false
		}
	}
	return true
}

// sourceAngles are degrees from the line of sight, to the right and up.
func sourceAngles(d r3.Vec) (azimuthDeg, elevationDeg float64) {
	const deg = 180 / math.Pi
	return math.Atan2(-d.Y, d.X) * deg, math.Atan2(d.Z, math.Hypot(d.X, d.Y)) * deg
}

// where is a direction in words: 35° right, 13° up.
func where(d r3.Vec) string {
	az, el := sourceAngles(d)
	side, height := "right", "up"
	if az < 0 {
		side = "left"
	}
	if el < 0 {
		height = "down"
	}
	if math.Hypot(az, el) < 0.5 {
		return "on the line of sight"
	}
	return fmt.Sprintf("%s° %s, %s° %s", fixed(math.Abs(az), 0), side, fixed(math.Abs(el), 0), height)
}

// rule says what counts as a source.
func (im *Image) rule() string {
	o := im.Options
	multiple := o.Multiple
	if multiple == 0 {
		multiple = glare.DefaultMultiple
	}
	text := "above " + whole(math.Round(im.Result.ThresholdCdM2)) + " cd/m2"
	switch o.Method {
	case glare.MultipleOfMean:
		text += ", " + decimals(multiple, 2) + " times the mean of the field"
	case glare.MultipleOfTask:
		text += ", " + decimals(multiple, 2) + " times the mean of the task zone"
	}
	switch g := o.GroupingRad; {
	case g < 0:
		text += "; pixels that touch make one source"
	case g == 0:
		g = glare.DefaultGroupingRad
		fallthrough
	default:
		text += "; pixels up to " + decimals(g*180/math.Pi, 1) + "° apart make one source"
	}
	if o.CoreCdM2 > 0 {
		text += "; pixels above " + whole(o.CoreCdM2) + " cd/m2 stand apart"
	}
	return text
}

// finding is the image's outcome in a word and a sentence.
func (im *Image) finding() (word, text string) {
	r := &im.Result
	if !im.Indices {
		return "luminances", fmt.Sprintf("mean %s, median %s, largest %s cd/m2. DGP and its like need a fisheye image of the half space.",
			number3(r.MeanLuminance), number3(im.Median), number3(im.Largest))
	}
	word = glare.Class(r.DGP) + " glare"
	text = fmt.Sprintf("DGP %s, %s lx at the eye%s", fixed(r.DGP, 2), whole(r.Ev), rangeWords(im.dgpValid()))
	if len(r.Sources) == 0 {
		return word, text + "; no part of the view stands out as a source."
	}
	s := r.Sources[0]
	return word, text + fmt.Sprintf("; of the sources most by no. 1, %s, %s cd/m2.", where(s.Dir), number3(s.MeanLuminance))
}

// number3 writes a luminance with three digits, thousands grouped.
func number3(x float64) string {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return "unknown"
	}
	if x == 0 {
		return "0"
	}
	places := 2 - int(math.Floor(math.Log10(math.Abs(x))))
	if places > 0 {
		return decimals(x, min(places, 4))
	}
	unit := math.Pow(10, float64(-places))
	if x = math.Round(x/unit) * unit; x >= 1e6 {
		return falsecolour.Number(x) // powers of ten
	}
	return whole(x)
}
