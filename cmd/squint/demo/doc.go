// Package demo holds two projects that come with the program: the demo, a
// drawing office of an invented boatyard with light shelves and some roller
// blinds, and a small commented starting project.
//
// Place, building and weather are invented and marked so in the project files
// and in the weather file. All files are written by the command in generate,
// from dimensions and published formulas; edit that, then run go generate.
package demo

//go:generate go run ./generate .
