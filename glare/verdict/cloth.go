package verdict

import (
	"fmt"
	"math"
)

// clothClasses are the classes of glare control of a cloth by its
// transmittance straight through (rows: above 0.10, up to 0.10, up to 0.05, 0)
// and scattered (columns: below 0.02, 0.04, 0.08, from there on), both at
// normal incidence. Source: EN 14501:2005, table for glare control, from
// memory; the edition of 2021 refines it.
var clothClasses = [4][4]int{
	{0, 0, 0, 0},
	{1, 1, 0, 0},
	{3, 2, 1, 1},
	{4, 3, 2, 2},
}

// ClothClass is the class of glare control of a cloth, 0 (very little effect)
// to 4 (very good effect).
func ClothClass(straight, scattered float64) int {
	row := 3
	switch {
	case straight > 0.10:
		row = 0
	case straight > 0.05:
		row = 1
	case straight > 0:
		row = 2
	}
	column := 3
	for i, below := range []float64{0.02, 0.04, 0.08} {
		if scattered < below {
			column = i
			break
		}
	}
	return clothClasses[row][column]
}

// ClothProtection is the simplified route to protection from glare: the class
// of an opening's cloth against the one that the standard's table asks for.
// Nothing is computed over the year. NaN is an opening without a cloth.
func ClothProtection(subject string, class float64, asked int) Verdict {
	v := Verdict{
		Criterion: fmt.Sprintf("glare protection, simplified route: a cloth of class %d or better that can be drawn over the opening", asked),
		Source:    "EN 17037:2018 with classes of EN 14501:2005",
		Subject:   subject,
		Unit:      "class",
		Text:      fmt.Sprintf("%s: cloth of class %.0f (at least %d asked)", subject, class, asked),
	}
	b := Bracket{Surely: class, Estimate: class, Possibly: class}
	o := AtLeast(b, float64(asked))
	if math.IsNaN(class) {
		v.Text = fmt.Sprintf("%s: no roller of cloth (class %d asked)", subject, asked)
		o = NotMet
	}
	return v.judged(b, float64(asked), o, "")
}
