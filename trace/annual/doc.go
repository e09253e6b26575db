// Package annual runs a year: it solves the surfaces for block after block of
// moments, reads every receiver against the solution, and hands each fisheye
// image to a sink as it is made, so that memory does not grow with the number
// of moments.
//
// Blocks are independent and are worked on concurrently; every random stream
// is a hash of (seed, receiver or texel, moment, batch) and every sum runs in
// index order, so the results do not depend on the number of workers.
package annual
