// Package falsecolour draws luminances, illuminances and other quantities of
// an image or a plane as false colours, with a legend, contours, numbers and
// outlined glare sources.
//
// A figure is a sheet of paper: title, picture, legend below it, caption.
// Pixel coordinates of the figure's data are continuous and count from the
// top left corner, so that pixel (x, y) covers x..x+1 to the right and y..y+1
// downwards. Sizes of text and lines are in pixels of a picture some 640
// pixels wide and grow with wider ones.
//
// The same figure gives the same bytes, on the same architecture and Go
// version. The faces (Go regular and bold, in golang.org/x/image) have Latin,
// Greek and Cyrillic letters; others are drawn as boxes.
package falsecolour
