// Package photograph turns the picture of a camera with a fisheye lens into
// luminances whose pixels have directions: where the image circle lies, how the
// camera was rolled, what the lens lost toward its edge, what is hidden, and
// how many cd/m2 the picture's unit is.
//
// Nothing is resampled. The view that results has the picture's own pixels, so
// that every one keeps its exact direction and solid angle (see
// view.Placement). Pixel coordinates are those of scene/view: continuous, from
// the top left corner, x to the right and y downwards.
package photograph
