package report

import (
	"fmt"
	"io"
	"math"
	"strings"

	"charm.land/lipgloss/v2"

	"squint/glare"
	"squint/glare/verdict"
)

// mostListed is how many sources are listed on the terminal; files hold all.
const mostListed = 8

// ImagesText prints the evaluation of images, at most 80 columns wide: one in
// full, several as a table. outDir is where files were written, "" for
// nowhere.
func ImagesText(w io.Writer, images []*Image, outDir string, files []string) error {
	var p page
	if len(images) == 1 {
		imageInFull(&p, images[0])
	} else {
		imageTable(&p, images)
	}
	p.gap()
	for _, im := range images {
		for _, t := range im.Warnings {
			if len(images) > 1 {
				t = im.File + ": " + t
			}
			p.item(0, "Warning", warm(), 9, sentence(t))
		}
	}
	p.item(0, "", lipgloss.NewStyle(), 0, "Thresholds and classes are published ones; local codes and licensed practice decide.")
	if outDir != "" {
		p.gap()
		p.head("Results")
		p.path(2, outDir)
		p.para(2, strings.Join(files, "; ")+".")
	}
	return p.print(w)
}

func imageInFull(p *page, im *Image) {
	word, text := im.finding()
	p.item(0, word, classStyle(im), len(word)+2, im.File+": "+text)
	if im.Indices {
		sourceSection(p, im)
		indexSection(p, im)
	}
	luminanceSection(p, im)
	pictureSection(p, im)
}

// glares is whether a class of DGP is disturbing or worse.
func glares(dgp float64) bool {
	c := glare.Class(dgp)
	return c == glare.Class(0.45) || c == glare.Class(1)
}

// classStyle colours the finding: intolerable and disturbing as what is not
// met, the others keep the terminal's ink.
func classStyle(im *Image) lipgloss.Style {
	if im.Indices && glares(im.Result.DGP) {
		return verdictStyle(verdict.NotMet)
	}
	return bold()
}

func sourceSection(p *page, im *Image) {
	p.gap()
	p.head("Sources of glare")
	p.para(2, im.rule()+".")
	r := &im.Result
	if len(r.Sources) == 0 {
		p.para(2, "There are none.")
		return
	}
	p.line("  no.   right      up       mean       peak       size  position      part of")
	p.line("          deg     deg      cd/m2      cd/m2         sr     index      the sum")
	for i, s := range r.Sources {
		if i == mostListed {
			p.para(2, fmt.Sprintf("and %d more, together %s of the sum.", len(r.Sources)-i, part(rest(r, i))))
			break
		}
		az, el := sourceAngles(s.Dir)
		note := ""
		if s.Disc {
			note = " *"
		}
		p.line(fmt.Sprintf("  %3d %7.1f %7.1f %10s %10s %10s %9s %12s%s", i+1, az, el,
			number3(s.MeanLuminance), number3(s.PeakLuminance), size(s.OmegaSr), number3(s.PositionIndex), part(s.Contribution/r.SourceSum), note))
	}
	for _, s := range r.Sources {
		if s.Disc {
			p.para(2, "* the sun's disc or its mirror image, kept apart from the pixels.")
			break
		}
	}
}

// rest is the part of the sum from source i on.
func rest(r *glare.Result, i int) float64 {
	sum := 0.0
	for _, s := range r.Sources[i:] {
		sum += s.Contribution
	}
	return sum / r.SourceSum
}

// size writes a solid angle with three digits.
func size(sr float64) string {
	if sr < 0.001 {
		return fmt.Sprintf("%.2e", sr)
	}
	return fmt.Sprintf("%.3g", sr)
}

func indexSection(p *page, im *Image) {
	r := &im.Result
	p.gap()
	p.head("Indices")
	row := func(name, value, text string) {
		p.item(2, left(name, 6)+right(value, 8), lipgloss.NewStyle(), 18, text)
	}
	validity := "within the range of its data, 0.2 to 0.8 and 380 lx or more"
	if !im.dgpValid() {
		validity = "outside the range of its data, 0.2 to 0.8 and 380 lx or more: the formula, not the sensation"
	}
	if im.Options.LowLight {
		validity += "; times " + fixed(glare.LowLight(r.Ev), 3) + " for little light at the eye (Wienold 2010)"
	}
	row("DGP", fixed(r.DGP, 3), "daylight glare probability, Wienold and Christoffersen 2006; "+validity)
	simple := "from the illuminance at the eye alone, Wienold 2009"
	if !im.dgpsValid() {
		simple += "; not valid here: the sun or its mirror image is in view"
	}
	row("DGPs", fixed(r.DGPs, 3), simple)
	row("DGI", limit(r.DGI, 1), "daylight glare index, Hopkinson 1972; 16 just perceptible, 20 just acceptable, 24 just uncomfortable, 28 just intolerable")
	ugr := "unified glare rating, CIE 117; made for lamps, not for windows"
	if !r.UGRInRange {
		ugr += "; a source is outside of its 0.0003 to 0.1 sr"
	}
	row("UGR", limit(r.UGR, 1), ugr)
	row("CGI", limit(r.CGI, 1), "CIE glare index, Einhorn 1979; made for lamps, not for windows")
	row("VCP", limit(r.VCP, 0)+" %", "visual comfort probability, IES; made for lamps, not for windows")
	row("Ev", whole(r.Ev), fmt.Sprintf("lx at the eye, %s of it from the sources", whole(r.EDirect)))
	veil := fmt.Sprintf("cd/m2 of veil by the sources, CIE 146:2002, for an age of %s years", decimals(im.AgeYears, 0))
	if im.Veil.LeftOutLux > 0 {
		veil += fmt.Sprintf("; %s lx from within 1° of the line of sight left out", number3(im.Veil.LeftOutLux))
	}
	row("veil", number3(im.Veil.Luminance), veil)
}

// limit writes an index, and an infinite one as such.
func limit(x float64, n int) string {
	if math.IsInf(x, 1) {
		return "infinite"
	}
	return fixed(x, n)
}

func luminanceSection(p *page, im *Image) {
	p.gap()
	p.head("Luminances, cd/m2")
	p.para(2, fmt.Sprintf("mean %s, median %s, largest %s.", number3(im.Result.MeanLuminance), number3(im.Median), number3(im.Largest)))
	c := im.Contrast
	text := fmt.Sprintf("task %s, surround %s, background %s", number3(c.Task), number3(c.Surround), number3(c.Background))
	if c.Task > 0 {
		text += fmt.Sprintf(": 1 to %s to %s", decimals(c.Surround/c.Task, 1), decimals(c.Background/c.Task, 1))
	}
	p.para(2, text+". Task: "+taskWords(im.Options)+"; surround and background: the rest of the cones of 60° and 120° about the line of sight (Meyer, Francioli and Kerkhoven 1996).")
}

func taskWords(o glare.Options) string {
	radius := o.TaskRadiusRad
	if radius == 0 {
		radius = glare.DefaultTaskRadiusRad
	}
	text := "the cone of " + decimals(2*radius*180/math.Pi, 1) + "° about the line of sight (own choice)"
	if o.TaskCentre.Y != 0 || o.TaskCentre.Z != 0 {
		text = "the cone of " + decimals(2*radius*180/math.Pi, 1) + "° about " + where(o.TaskCentre)
	}
	return text
}

func pictureSection(p *page, im *Image) {
	v := im.Photo.View
	p.gap()
	p.head("Image")
	kind := v.Projection.String()
	if v.Projection.Fisheye() {
		kind += " fisheye"
	}
	text := fmt.Sprintf("%d x %d pixels, %s of %s°", v.Width, v.Height, kind, decimals(v.FOVRad*180/math.Pi, 1))
	if im.Circle != "" {
		text += "; " + im.Circle
	}
	if r := v.Placement.RollRad; r != 0 {
		text += "; roll of " + decimals(r*180/math.Pi, 1) + "° undone"
	}
	if f := im.Photo.Factor; f != 1 {
		text += fmt.Sprintf("; values times %.5g", f)
	}
	p.para(2, text+".")
	for _, h := range im.Hidden {
		p.para(2, fmt.Sprintf("%s hides %s of the field's solid angle, %s of its light were it even: dark for the illuminance at the eye, unknown (left out) for means.",
			h.Name, part(h.OmegaShare), part(h.LuxShare)))
	}
	for _, n := range im.Notes {
		p.para(2, sentence(n))
	}
}

// imageTable is a row for each image, with what comes first in a sentence.
func imageTable(p *page, images []*Image) {
	var worst *Image
	glaring, judged := 0, 0
	for _, im := range images {
		if !im.Indices {
			continue
		}
		judged++
		if glares(im.Result.DGP) {
			glaring++
		}
		if worst == nil || im.Result.DGP > worst.Result.DGP {
			worst = im
		}
	}
	switch {
	case worst == nil:
		p.item(0, "luminances", bold(), 12, "of "+count(len(images), "image", "images")+"; none is a fisheye, so there is no DGP.")
	default:
		word := glare.Class(worst.Result.DGP) + " glare"
		p.item(0, word, classStyle(worst), len(word)+2, fmt.Sprintf("at the worst of %s, %s: DGP %s, %s lx at the eye%s. Glare is disturbing or worse in %d of %d.",
			count(len(images), "image", "images"), worst.File, fixed(worst.Result.DGP, 2), whole(worst.Result.Ev), rangeWords(worst.dgpValid()), glaring, judged))
	}
	p.gap()
	p.line("  image                 DGP    Ev lx   DGPs    DGI    UGR   mean sources  warned")
	outside := false
	for _, im := range images {
		name := left(fitEnd(plain(im.File), 18), 18)
		r := &im.Result
		mark := " "
		if im.Indices && !im.dgpValid() {
			mark, outside = "*", true
		}
		values := [5]string{"-", "-", "-", "-", "-"}
		sources := "-"
		if im.Indices {
			values = [5]string{fixed(r.DGP, 3), whole(r.Ev), fixed(r.DGPs, 3), limit(r.DGI, 1), limit(r.UGR, 1)}
			sources = whole(float64(len(r.Sources)))
		}
		p.line(fmt.Sprintf("  %s %6s%s %7s %6s %6s %6s %6s %7s %7d", name, values[0], mark, values[1], values[2], values[3], values[4],
			number3(r.MeanLuminance), sources, len(im.Warnings)))
	}
	if outside {
		p.para(2, "* outside the range of the data behind DGP, 0.2 to 0.8 and 380 lx or more.")
	}
	p.para(2, "Mean: luminance of the field, cd/m2. DGI, and UGR, which was made for lamps and not for windows. Sources are "+ruleOfAll(images)+".")
}

// fitEnd shortens a path to width columns: its end tells files apart.
func fitEnd(s string, width int) string {
	r := []rune(s)
	for len(r) > 0 && lipgloss.Width(s) > width {
		r = r[1:]
		s = "…" + string(r)
	}
	return s
}

// ruleOfAll is the rule where it is the same for all images.
func ruleOfAll(images []*Image) string {
	for _, im := range images {
		if im.rule() != images[0].rule() {
			return "found in each image by its own threshold"
		}
	}
	return images[0].rule()
}
