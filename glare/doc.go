// Package glare judges the luminances seen from a viewpoint: it finds the
// glare sources and computes DGP and the other glare indices, and the veiling
// luminance of disability glare.
//
// Directions are unit vectors in the view frame: x forward (line of sight),
// y left, z up. Luminance is cd/m2, illuminance (at the eye, on the plane
// perpendicular to the line of sight) lx, solid angle sr, angles rad.
//
// An image is a slice of luminances, row by row from the top left corner, of
// length Width*Height of its Field. Values outside of the image circle are
// never read; the others must be finite and not negative. A NaN inside the
// image makes Ev NaN.
//
// A glare source is a group of pixels brighter than a threshold. By published
// practice (J. Wienold, J. Christoffersen, Energy and Buildings 38 (2006)
// 743-757, from memory) it counts with its mean luminance over solid angle, and with the
// position index at its centroid. The sun's disc and its mirror images are
// sources of their own (see Disc).
package glare
