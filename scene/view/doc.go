// Package view maps the pixels of an image to directions and back, and
// measures the pixels.
//
// The world is right-handed with z up. A view has its own frame: x forward,
// y left, z up, so that forward x left = up. Pixel coordinates are continuous
// and count from the top left corner of the image: pixel (ix, iy) covers
// ix..ix+1 to the right and iy..iy+1 downwards, and its centre is at
// (ix+0.5, iy+0.5).
//
// Angles are radians, solid angles steradians, lengths metres.
//
// Fisheye projections (equidistant, equisolid, orthographic, stereographic)
// fill the circle inscribed in the image, or that of the view's Placement; the
// field of view is the full angle across its diameter. Outside of that circle
// there is no direction. The other projections fill the image; their field of
// view is the full horizontal angle across its width and pixels are square: the
// vertical scale at the middle of the image equals the horizontal one.
package view
