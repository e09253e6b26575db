// Package daylight judges work planes by hourly series: daylight autonomy,
// useful daylight illuminance, spatial daylight autonomy, annual sunlight
// exposure, and the daylight provision and daylight factors of EN 17037.
//
// A series E[sensor][hour] holds illuminance in lx, one value for each of the
// 8,760 records of a year without 29 February, in the order of the weather
// file, zero at night. Direct[sensor][hour] is the sun's direct illuminance
// without any bounce. SE[sensor][hour] is the standard error of E. Sensors
// stand for equal areas.
//
// Hours are chosen by Hours, a list of record indices; which list each metric
// takes stands in one table, [HourRules]. Record i covers the clock interval
// from i%24 to i%24+1 of day i/24 in the weather file's standard time and
// counts when the middle of that interval does.
//
// An illuminance reaches a threshold when it is at least as large; NaN never
// reaches one. A share over no hours or no sensors is NaN: there is nothing to
// say. Functions panic only where the series is shorter than an hour asked for
// (the caller's error, an index out of range).
package daylight
