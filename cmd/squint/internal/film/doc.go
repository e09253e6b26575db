// Package film keeps the hours of a year as small pictures, for display only.
//
// A picture is a row of points: the pixels of a view or the sensors of a work
// plane. Each value has two parts, which are kept apart: the rest, which
// changes smoothly from hour to hour, and what falls straight from the sun,
// which has edges. The logarithm of the rest becomes a mean and a few patterns
// with a weight each hour; of the sun, a mask of lit points each hour and one
// number each for the hour and the point. How exact that is, is measured when
// it is made. Verdicts never come from it.
package film
