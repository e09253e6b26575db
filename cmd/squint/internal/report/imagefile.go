package report

import (
	"encoding/csv"
	"encoding/json"
	"io"
	"math"
	"strconv"
	"strings"

	"squint/glare"
)

// imageSource is a source of glare as JSON has it.
type imageSource struct {
	AzimuthDeg    number `json:"azimuth_deg"` // to the right of the line of sight
	ElevationDeg  number `json:"elevation_deg"`
	MeanCdM2      number `json:"mean_cd_m2"`
	PeakCdM2      number `json:"peak_cd_m2"`
	SolidAngleSr  number `json:"solid_angle_sr"`
	PositionIndex number `json:"position_index"`
	Contribution  number `json:"contribution_cd2_m4_sr"`
	Share         number `json:"share_of_sum"`
	Disc          bool   `json:"sun_disc"`
}

type imageMask struct {
	Name           string `json:"name"`
	SolidAngle     number `json:"share_of_solid_angle"`
	Illuminance    number `json:"share_of_even_illuminance"`
	CountsAs       string `json:"counts_as"`
	LeftOutOfMeans bool   `json:"left_out_of_means"`
}

// imageIndices are those of a fisheye.
type imageIndices struct {
	DGP             number        `json:"dgp"`
	Class           string        `json:"class"`
	InRange         bool          `json:"dgp_within_range_of_its_data"`
	LowLightFactor  *number       `json:"low_light_factor,omitempty"`
	EvLx            number        `json:"ev_lx"`
	EvSourcesLx     number        `json:"ev_from_sources_lx"`
	DGPs            number        `json:"dgps"`
	DGPsValid       bool          `json:"dgps_valid"`
	DGI             number        `json:"dgi"`
	UGR             number        `json:"ugr"`
	UGRInRange      bool          `json:"ugr_source_sizes_in_range"`
	CGI             number        `json:"cgi"`
	VCP             number        `json:"vcp_percent"`
	NotForWindows   []string      `json:"not_made_for_windows"`
	Veil            number        `json:"veil_cd_m2"`
	VeilAge         number        `json:"veil_age_years"`
	VeilPigment     number        `json:"veil_pigmentation"`
	VeilLeftOut     number        `json:"veil_left_out_lx"`
	SourceRule      string        `json:"source_rule"`
	SourceThreshold number        `json:"source_threshold_cd_m2"`
	Sources         []imageSource `json:"sources"`
}

type imageRecord struct {
	File       string        `json:"image"`
	Indices    *imageIndices `json:"glare"` // null for views other than fisheyes
	Mean       number        `json:"mean_cd_m2"`
	Median     number        `json:"median_cd_m2"`
	Largest    number        `json:"largest_cd_m2"`
	Task       number        `json:"task_cd_m2"`
	Surround   number        `json:"surround_cd_m2"`
	Background number        `json:"background_cd_m2"`
	Projection string        `json:"projection"`
	FOVDeg     number        `json:"field_of_view_deg"`
	Circle     *imageCircle  `json:"image_circle_px"`
	RollDeg    number        `json:"roll_deg"`
	Factor     number        `json:"luminance_factor"`
	Covered    number        `json:"share_of_half_space"`
	Masks      []imageMask   `json:"masks"`
	LuxReading *number       `json:"lux_reading,omitempty"`
	Warnings   []string      `json:"warnings"`
	Notes      []string      `json:"notes"`
}

type imageCircle struct {
	X      number `json:"x"`
	Y      number `json:"y"`
	Radius number `json:"radius"`
}

func (im *Image) record() imageRecord {
	const deg = 180 / math.Pi
	v := im.Photo.View
	out := imageRecord{
		File: im.File, Mean: number(im.Result.MeanLuminance), Median: number(im.Median), Largest: number(im.Largest),
		Task: number(im.Contrast.Task), Surround: number(im.Contrast.Surround), Background: number(im.Contrast.Background),
		Projection: v.Projection.String(), FOVDeg: number(v.FOVRad * deg), RollDeg: number(v.Placement.RollRad * deg),
		Factor: number(im.Photo.Factor), Covered: number(im.Covered), Masks: []imageMask{},
		Warnings: append([]string{}, im.Warnings...), Notes: append([]string{}, im.Notes...),
	}
	if v.Projection.Fisheye() {
		x, y, r := v.Circle()
		out.Circle = &imageCircle{number(x), number(y), number(r)}
	}
	for _, h := range im.Hidden {
		out.Masks = append(out.Masks, imageMask{h.Name, number(h.OmegaShare), number(h.LuxShare), "dark", true})
	}
	if im.Lux > 0 {
		lux := number(im.Lux)
		out.LuxReading = &lux
	}
	if im.Indices {
		out.Indices = im.indices()
	}
	return out
}

func (im *Image) indices() *imageIndices {
	r := &im.Result
	out := &imageIndices{
		DGP: number(r.DGP), Class: glare.Class(r.DGP), InRange: im.dgpValid(),
		EvLx: number(r.Ev), EvSourcesLx: number(r.EDirect), DGPs: number(r.DGPs), DGPsValid: im.dgpsValid(),
		DGI: number(r.DGI), UGR: number(r.UGR), UGRInRange: r.UGRInRange, CGI: number(r.CGI), VCP: number(r.VCP),
		NotForWindows: []string{"ugr", "cgi", "vcp"},
		Veil:          number(im.Veil.Luminance), VeilAge: number(im.AgeYears), VeilPigment: number(im.Pigmentation),
		VeilLeftOut: number(im.Veil.LeftOutLux), SourceRule: im.rule(), SourceThreshold: number(r.ThresholdCdM2),
		Sources: []imageSource{},
	}
	if im.Options.LowLight {
		f := number(glare.LowLight(r.Ev))
		out.LowLightFactor = &f
	}
	for _, s := range r.Sources {
		az, el := sourceAngles(s.Dir)
		out.Sources = append(out.Sources, imageSource{number(az), number(el), number(s.MeanLuminance), number(s.PeakLuminance),
			number(s.OmegaSr), number(s.PositionIndex), number(s.Contribution), number(s.Contribution / r.SourceSum), s.Disc})
	}
	return out
}

// ImagesJSON writes all images as an array; infinite and unknown numbers are
// null.
func ImagesJSON(w io.Writer, images []*Image) error {
	all := make([]imageRecord, len(images))
	for i, im := range images {
		all[i] = im.record()
	}
	e := json.NewEncoder(w)
	e.SetEscapeHTML(false)
	e.SetIndent("", "  ")
	return e.Encode(all)
}

// ImagesCSV writes a row for each image; what an image has not is empty.
func ImagesCSV(w io.Writer, images []*Image) error {
	rows := [][]string{{"image", "dgp", "class", "dgp_in_range", "ev_lx", "dgps", "dgps_valid", "dgi", "ugr", "cgi", "vcp_percent",
		"veil_cd_m2", "mean_cd_m2", "median_cd_m2", "largest_cd_m2", "task_cd_m2", "surround_cd_m2", "background_cd_m2",
		"sources", "source_threshold_cd_m2", "share_of_half_space", "warnings"}}
	for _, im := range images {
		r := im.record()
		row := []string{r.File}
		if i := r.Indices; i != nil {
			row = append(row, i.DGP.text(), i.Class, strconv.FormatBool(i.InRange), i.EvLx.text(), i.DGPs.text(), strconv.FormatBool(i.DGPsValid),
				i.DGI.text(), i.UGR.text(), i.CGI.text(), i.VCP.text(), i.Veil.text())
		} else {
			row = append(row, make([]string, 11)...)
		}
		row = append(row, r.Mean.text(), r.Median.text(), r.Largest.text(), r.Task.text(), r.Surround.text(), r.Background.text())
		if i := r.Indices; i != nil {
			row = append(row, strconv.Itoa(len(i.Sources)), i.SourceThreshold.text())
		} else {
			row = append(row, "", "")
		}
		rows = append(rows, append(row, r.Covered.text(), strings.Join(r.Warnings, "; ")))
	}
	return csv.NewWriter(w).WriteAll(rows)
}

// SourcesCSV writes a row for each source of each image.
func SourcesCSV(w io.Writer, images []*Image) error {
	rows := [][]string{{"image", "rank", "azimuth_deg", "elevation_deg", "mean_cd_m2", "peak_cd_m2", "solid_angle_sr", "position_index", "contribution_cd2_m4_sr", "share_of_sum", "sun_disc"}}
	for _, im := range images {
		if !im.Indices {
			continue
		}
		for i, s := range im.indices().Sources {
			rows = append(rows, []string{im.File, strconv.Itoa(i + 1), s.AzimuthDeg.text(), s.ElevationDeg.text(), s.MeanCdM2.text(), s.PeakCdM2.text(),
				s.SolidAngleSr.text(), s.PositionIndex.text(), s.Contribution.text(), s.Share.text(), strconv.FormatBool(s.Disc)})
		}
	}
	return csv.NewWriter(w).WriteAll(rows)
}

// text is the number in a CSV file, six digits; empty where it is not finite.
func (n number) text() string {
	if b, err := n.MarshalJSON(); err != nil || string(b) == "null" {
		return ""
	}
	return strconv.FormatFloat(float64(n), 'g', 6, 64)
}
