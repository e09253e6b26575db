package page

import (
	"math"
	"testing"

	"squint/scene"
	"squint/scene/sky"
	"squint/scene/weather"
)

// The middle of the sun crosses the horizon six hours before and after solar
// noon at an equinox, wherever one is; solar noon is then 7.5 minutes late, the
// equation of time of 20 March. Source of the number: from memory, good to half a
// minute. Bound: that; a minute of rounding; and the 0.4 degrees by which the
// sun's declination may differ from 0 on that day, times tan 50 degrees, of 4
// minutes to the degree: 2 minutes.
func TestHorizonCrossings(t *testing.T) {
	const bound = 0.5 + 1 + 2 // minutes
	year := &weather.Year{}
	for _, md := range [][2]int{{3, 20}, {6, 21}} {
		for h := range 24 {
			year.Records = append(year.Records, weather.Record{Month: md[0], Day: md[1], EndH: float64(h + 1)})
		}
	}
	for _, latitude := range []float64{-50, 0, 50} {
		c := &scene.Climate{Year: year, Site: sky.Site{LatitudeDeg: latitude}}
		rise, set := horizonCrossings(c, 0)
		if math.Abs(float64(rise)-367.5) > bound || math.Abs(float64(set)-1087.5) > bound {
			t.Errorf("latitude %g at the equinox: got %d and %d minutes, want about 367.5 and 1087.5", latitude, rise, set)
		}
	}
	// Beyond the polar circle there is a day without.
	c := &scene.Climate{Year: year, Site: sky.Site{LatitudeDeg: 75}}
	if rise, set := horizonCrossings(c, 1); rise != noTime || set != noTime {
		t.Errorf("latitude 75 in June: got %d and %d, want no crossing", rise, set)
	}
}

// Coordinates come back within half of a 16-bit step. exact: the step.
func TestMeshKeepsPlaces(t *testing.T) {
	a := &Archive{blobs: map[string]blobData{}}
	var all []*scene.Triangle
	for i := range 40 {
		x := float64(i) * 0.37
		tr := &scene.Triangle{Part: int32(i)}
		for k := range 3 {
			tr.V[k].X, tr.V[k].Y, tr.V[k].Z = x+float64(k), -x*float64(k), 2*x
		}
		all = append(all, tr)
	}
	m := a.mesh(all)
	raw := a.blobs[m.Numbers.ID].raw
	for i, tr := range all {
		for k, v := range tr.V {
			for j, want := range vec(v) {
				at := 9*i + 3*k + j
				code := int(raw[at]) | int(raw[9*len(all)+at])<<8
				got := m.Min[j] + float64(code)/65535*(m.Max[j]-m.Min[j])
				if step := (m.Max[j] - m.Min[j]) / 65535; math.Abs(got-want) > step/2*1.0001 {
					t.Fatalf("corner %d of triangle %d: got %v, want %v", k, i, got, want)
				}
			}
		}
	}
	if kept := largest(all, 7); len(kept) != 7 {
		t.Errorf("largest: got %d triangles, want 7", len(kept))
	}
}
