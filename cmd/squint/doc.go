// Command squint checks daylighting designs: for every workstation and every
// hour of a year, whether a light shelf or blind brings enough daylight without
// glare.
//
// This package is the only one that knows the clock, the environment, signals
// and the folders of the machine; everything below it takes file systems,
// writers and values.
package main
