package weather

import (
	"math"
	"strconv"
	"strings"
	"time"
	"unicode"
)

// HoursPerYear is the number of records of a Year: 365 days of 24 hours.
const HoursPerYear = 8760

// DefaultReferenceYear is the year into which the records of a file are placed
// when its months come from different years. It is the middle one of three
// years between leap years, so that the date of the equinoxes is close to its
// average over the leap cycle.
const DefaultReferenceYear = 2022

// IntervalOffsetH is the offset in hours, from the labelled end of the hour,
// of the middle of that hour: the moment that both formats prescribe for their
// irradiances (EPW data dictionary: "during the number of minutes preceding
// the time indicated"; Wilcox, Marion 2008, NREL/TP-581-43156: "during the
// 60-minute period ending at the timestamp").
const IntervalOffsetH = -0.5

// Record is one hour of a weather file.
type Record struct {
	Line       int     // in the file; 0 when the record was not read from one
	Month, Day int     // 1 to 12, 1 to 31
	EndH       float64 // hour as labelled, 1 to 24; hour 1 is 00:00 to 01:00

	GHI, DNI, DHI float64 // global horizontal, direct normal, diffuse horizontal, W/m², >= 0

	DewPointC  float64
	DryBulbC   float64 // NaN when missing
	PressurePa float64 // standard atmosphere at the site's elevation when missing (Year.Notes says so)

	// The illuminance columns as read, NaN when missing. Their unit is not
	// always the one that the file states: see Year.Efficacy.
	GlobalLx, DirectLx, DiffuseLx, ZenithCdM2 float64
}

// Site is the place that the file describes.
type Site struct {
	Name         string
	LatitudeDeg  float64 // north positive, -90 to 90
	LongitudeDeg float64 // east positive, -180 to 180
	UTCOffsetH   float64 // standard time minus UTC, east positive, -12 to 14
	ElevationM   float64 // above sea level
}

// Year is a typical year.
type Year struct {
	File   string
	Format string // "EPW" or "TMY3"
	Site   Site
	// Records has exactly HoursPerYear entries in order, without 29 February.
	Records []Record
	// ReferenceYear is the non-leap year in which Moment places all records:
	// the file's own where it is one and the same, else DefaultReferenceYear.
	// Zero means DefaultReferenceYear.
	ReferenceYear int
	// Invented tells that a comment of the file contains the word "invented":
	// results must not be taken for those of a real site.
	Invented bool
	// Comments are the texts of the COMMENTS lines of an EPW.
	Comments []string
	// Notes are sentences for the user: what was odd and what was done about it.
	Notes []string
	// Claim is what the file says about the moments of its irradiances.
	Claim string
}

// Moment returns the instant for which record i stands if the irradiances are
// taken offsetH hours after the end of the labelled hour (negative: before
// it), in the file's fixed zone and in ReferenceYear. The first and last
// records may fall into the neighbouring year. It panics if i is not a record
// index.
func (y *Year) Moment(i int, offsetH float64) time.Time {
	r := y.Records[i]
	// Adding to midnight keeps 24:00, which the formats use, a valid hour.
	midnight := time.Date(y.referenceYear(), time.Month(r.Month), r.Day, 0, 0, 0, 0, y.Site.zone())
	return midnight.Add(hours(r.EndH + offsetH))
}

// ClaimedOffsetH returns the moment that the file claims for its irradiances,
// in hours from the labelled end of the hour: the number in a comment such as
// "Irradiance Time Offset (h):-0.8239", else IntervalOffsetH, which is the
// rule of both formats.
func (y *Year) ClaimedOffsetH() float64 {
	if h, ok := y.commentOffsetH(); ok {
		return h
	}
	return IntervalOffsetH
}

func (y *Year) commentOffsetH() (float64, bool) {
	const words = "irradiance time offset (h):"
	for _, c := range y.Comments {
		_, rest, ok := strings.Cut(strings.ToLower(c), words)
		if !ok {
			continue
		}
		number, _, _ := strings.Cut(strings.TrimSpace(rest), " ")
		h, err := strconv.ParseFloat(strings.TrimRight(number, ",;"), 64)
		// Beyond a day the comment does not speak of the hour's label.
		if err == nil && math.Abs(h) <= 24 {
			return h, true
		}
	}
	return 0, false
}

func (y *Year) referenceYear() int {
	if y.ReferenceYear == 0 {
		return DefaultReferenceYear
	}
	return y.ReferenceYear
}

func (s Site) zone() *time.Location {
	return time.FixedZone("", int(math.Round(s.UTCOffsetH*3600)))
}

func hours(h float64) time.Duration {
	return time.Duration(math.Round(h * float64(time.Hour)))
}

// saysInvented tells whether a comment contains the word "invented".
func saysInvented(comments []string) bool {
	for _, c := range comments {
		for _, word := range strings.FieldsFunc(c, func(r rune) bool { return !unicode.IsLetter(r) }) {
			if strings.EqualFold(word, "invented") {
				return true
			}
		}
	}
	return false
}
