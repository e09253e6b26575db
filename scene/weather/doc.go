// Package weather reads typical-year weather files (EPW and TMY3) and says at
// which moment the irradiances of each hour are to be taken.
//
// # Conventions
//
// Irradiances are in W/m², pressures in Pa, temperatures in °C, illuminances
// in lx, luminances in cd/m². Latitude and longitude are in degrees, north and
// east positive. All clock times are the standard time of the site (no daylight
// saving), at the fixed offset from UTC that the file states.
//
// A year has exactly 8,760 records, January to December, without 29 February.
// The months of a typical year come from different years; all records are
// placed in one common year (Year.ReferenceYear) so that the sun moves on
// continuously.
//
// # The moment of a record
//
// Hour h of both formats ends at h o'clock, and both formats say that its
// irradiances are means over that hour, so that the sun is to be taken half an
// hour before the label. Files do not keep to that: some hold instantaneous
// values, some label the hour's start, some state an offset that is wrong by an
// hour. FitMoment therefore finds the offset from the label at which the file's
// own columns agree best:
//
//	global horizontal = diffuse horizontal + direct normal * cos(zenith angle)
//
// (Duffie, Beckman, Solar Engineering of Thermal Processes, 4th ed. 2013, the
// components of horizontal radiation, section 2.10; equation from memory), and
// compares it with what the file claims.
//
// # Part-hours
//
// When the fitted moment is the middle of an hour, the record is a mean over
// that hour. In the hours of sunrise and sunset the sun may be down at
// mid-hour although the record holds light; SunlitMoment then gives the middle
// of the sunlit part. Other fitted moments mean instantaneous values, taken at
// that instant as they are.
//
// # Sources
//
// EPW: Crawley, Hand, Lawrie 1999, Improving the weather information available
// to simulation programs, Proc. Building Simulation 1999; column order and
// missing codes: EPW weather data dictionary.
//
// TMY3: Wilcox, Marion 2008, Users Manual for TMY3 Data Sets,
// NREL/TP-581-43156, tables 1-1 and 1-2 (table numbers from memory).
package weather
