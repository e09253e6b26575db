package weather

import (
	"math"
	"time"
)

const (
	// intervalToleranceH: an offset this close to the middle of an hour means
	// that the file holds hourly means. Own choice, no published source; the
	// curvature of cos Z within an hour and rounded columns move the fitted
	// middle by a few hundredths.
	intervalToleranceH = 0.1
	// safelyUp: cos Z changes by at most pi/12 an hour, 0.131 in half an hour;
	// beyond this bound, refraction included, the sun neither rises nor sets
	// within the hour around the moment.
	safelyUp = 0.15
	// crossingH is the width to which sunrise and sunset are narrowed: 1 s.
	crossingH = 1.0 / 3600
)

// SunlitMoment returns the instant at which the sun is to be taken for record
// i, and the share of the record's time during which it is up, 0 to 1.
//
// offsetH is the fitted offset (Fit.OffsetH). If it is within 0.1 h of the
// middle of an hour (-0.5: the labelled hour; +0.5: the hour after the label,
// in files that label its start), the record is a mean over that hour. Where
// the sun is up, by cz > 0, for only part of the hour, the instant is the
// middle of the sunlit part, else the middle of the hour. The irradiances of
// the record remain means over the whole hour: while the sun is up they are
// 1/sunlitShare times as high on average.
//
// cz should be the apparent sun, lifted by refraction: it rises about 3 minutes
// before the geometric one (at 36 degrees of latitude), and the makers of the
// TMY3 file in the tests count these minutes.
//
// With any other offset the record is instantaneous: the instant is the label
// plus offsetH, the share 1 or 0.
//
// A share of 0 with light in the record means twilight or a horizon unlike that
// of cz: such an hour has no direct sun to place. Where the sun is up twice
// within the hour, at midnight near the polar circles, the instant lies in the
// longer part. It panics if i is not a record index.
func (y *Year) SunlitMoment(i int, offsetH float64, cz CosZenith) (t time.Time, sunlitShare float64) {
	mid, interval := intervalMiddleH(offsetH)
	if !interval {
		t = y.Moment(i, offsetH)
		if cz(t) > 0 {
			return t, 1
		}
		return t, 0
	}
	return y.sunlit(i, mid, 1, cz)
}

// sunlit is the middle of the sunlit part of a stretch of time of at most an
// hour, and its share; mid, from the label of record i, and width in hours.
func (y *Year) sunlit(i int, mid, width float64, cz CosZenith) (t time.Time, share float64) {
	t = y.Moment(i, mid)
	switch cosMid := cz(t); {
	case cosMid > safelyUp:
		return t, 1
	case cosMid < -safelyUp:
		return t, 0
	}
	cosAt := func(h float64) float64 { return cz(y.Moment(i, h)) }
	parts := sunlitParts(cosAt, mid, width)
	longest := span{}
	for _, p := range parts {
		share += p.to - p.from
		if p.to-p.from > longest.to-longest.from {
			longest = p
		}
	}
	if share == 0 {
		return t, 0
	}
	return y.Moment(i, (longest.from+longest.to)/2), math.Min(1, share/width)
}

// intervalMiddleH returns the middle of the hour that offsetH points at, if it
// points at one.
func intervalMiddleH(offsetH float64) (float64, bool) {
	mid := math.Floor(offsetH) + 0.5
	return mid, math.Abs(offsetH-mid) <= intervalToleranceH
}

// span is a stretch of time in hours from the label.
type span struct{ from, to float64 }

// sunlitParts returns the stretches of the time of that width around mid in
// which cosAt > 0, seen at its ends and its middle.
func sunlitParts(cosAt func(float64) float64, mid, width float64) []span {
	at := [3]float64{mid - width/2, mid, mid + width/2}
	var up [3]bool
	for k, h := range at {
		up[k] = cosAt(h) > 0
	}
	var parts []span
	add := func(from, to float64) {
		if n := len(parts); n > 0 && parts[n-1].to == from {
			parts[n-1].to = to
			return
		}
		parts = append(parts, span{from, to})
	}
	for k := 0; k < 2; k++ {
		switch {
		case up[k] && up[k+1]:
			add(at[k], at[k+1])
		case up[k]:
			add(at[k], crossing(cosAt, at[k], at[k+1]))
		case up[k+1]:
			add(crossing(cosAt, at[k+1], at[k]), at[k+1])
		}
	}
	return parts
}

// crossing halves the way from a moment with the sun up to one with the sun
// down until sunrise or sunset is known to a second.
func crossing(cosAt func(float64) float64, up, down float64) float64 {
	for math.Abs(up-down) > crossingH {
		if m := (up + down) / 2; cosAt(m) > 0 {
			up = m
		} else {
			down = m
		}
	}
	return up
}
