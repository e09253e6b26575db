package sunpath

import (
	"encoding/csv"
	"encoding/json"
	"io"
	"math"
	"strconv"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
)

// row is a sample as files have it; angles in degrees, azimuth clockwise from
// true north.
type row struct {
	Moment        string   `json:"moment"`
	AltitudeDeg   float64  `json:"sun_altitude_deg"`
	AzimuthDeg    float64  `json:"sun_azimuth_deg"`
	Free          float64  `json:"free_share"`
	Cloth         float64  `json:"share_through_cloth"`
	Tau           float64  `json:"luminance_share_left"`
	Mirrored      float64  `json:"mirrored_share"`
	ImageAltitude *float64 `json:"image_altitude_deg,omitempty"`
	ImageAzimuth  *float64 `json:"image_azimuth_deg,omitempty"`
	Mirror        string   `json:"mirror,omitempty"`
}

func (y *Year) row(s *Sample, northRad float64) row {
	r := row{Moment: s.Time.Format(time.RFC3339), AltitudeDeg: rounded(scene.AltitudeDeg(s.Sun), 3), AzimuthDeg: rounded(scene.AzimuthDeg(s.Sun, northRad*180/math.Pi), 3),
		Free: rounded(s.Free, 5), Cloth: rounded(s.Cloth, 5), Tau: rounded(s.Tau, 4), Mirrored: rounded(s.Mirrored, 4)}
	if s.Mirrored > 0 {
		alt, az := rounded(scene.AltitudeDeg(s.Image), 3), rounded(scene.AzimuthDeg(s.Image, northRad*180/math.Pi), 3)
		r.ImageAltitude, r.ImageAzimuth = &alt, &az
		r.Mirror = s.Mirror
	}
	return r
}

func rounded(x float64, digits int) float64 {
	p := math.Pow10(digits)
	return math.Round(x*p) / p
}

// WriteCSV writes every sample. Each stands for ten minutes of five days.
func (y *Year) WriteCSV(w io.Writer, northRad float64) error {
	c := csv.NewWriter(w)
	number := func(x float64) string { return strconv.FormatFloat(x, 'f', -1, 64) }
	perhaps := func(x *float64) string {
		if x == nil {
			return ""
		}
		return number(*x)
	}
	all := [][]string{{"moment", "sun_altitude_deg", "sun_azimuth_deg", "free_share", "share_through_cloth", "luminance_share_left", "mirrored_share", "image_altitude_deg", "image_azimuth_deg", "mirror"}}
	for i := range y.Samples {
		r := y.row(&y.Samples[i], northRad)
		all = append(all, []string{r.Moment, number(r.AltitudeDeg), number(r.AzimuthDeg), number(r.Free), number(r.Cloth), number(r.Tau), number(r.Mirrored),
			perhaps(r.ImageAltitude), perhaps(r.ImageAzimuth), r.Mirror})
	}
	return c.WriteAll(all)
}

// WriteJSON writes the sums and every sample.
func (y *Year) WriteJSON(w io.Writer, northRad float64, invented bool) error {
	type sums struct {
		All     float64         `json:"hours"`
		InUse   float64         `json:"hours_in_use"`
		Bright  *float64        `json:"hours_by_weather,omitempty"`
		InView  *float64        `json:"hours_before_line_of_sight,omitempty"`
		Minutes [24][12]float64 `json:"minutes_a_day"` // by clock hour and month
	}
	toSums := func(h *Hours) sums {
		s := sums{All: rounded(h.All, 2), InUse: rounded(h.InUse, 2), Minutes: h.Minutes}
		for c := range s.Minutes {
			for m := range s.Minutes[c] {
				s.Minutes[c][m] = rounded(s.Minutes[c][m], 2)
			}
		}
		bright, view := rounded(h.Bright, 2), rounded(h.InView, 2)
		if y.Input.Bright != nil {
			s.Bright = &bright
		}
		if !y.Input.Point.Opening {
			s.InView = &view
		}
		return s
	}
	p := y.Input.Point
	out := struct {
		Point     string     `json:"point"`
		Invented  bool       `json:"invented"`
		PositionM [3]float64 `json:"position_m"`
		Facing    float64    `json:"facing_azimuth_deg"`
		DayStep   int        `json:"every_days"`
		StepMin   int        `json:"every_minutes"`
		Direct    sums       `json:"direct"`
		Mirrored  sums       `json:"mirrored"`
		Samples   []row      `json:"samples"`
	}{Point: p.Name, Invented: invented, PositionM: vector(p.Position), Facing: rounded(scene.AzimuthDeg(level(p.Ahead), northRad*180/math.Pi), 2),
		DayStep: dayStep, StepMin: stepMin, Direct: toSums(&y.Direct), Mirrored: toSums(&y.Mirrored), Samples: []row{}}
	for i := range y.Samples {
		out.Samples = append(out.Samples, y.row(&y.Samples[i], northRad))
	}
	return json.NewEncoder(w).Encode(out)
}

func vector(v r3.Vec) [3]float64 { return [3]float64{v.X, v.Y, v.Z} }
