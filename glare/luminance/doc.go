// Package luminance is a luminance image with what has to be known about it,
// and its files: OpenEXR (scan lines) and PFM.
//
// Luminance is in cd/m2, row by row from the top left corner. Inside, lengths
// are metres; an image's attributes hold angles in degrees, because they are
// what stands in files.
//
// An OpenEXR file is written with one channel Y of 32 bit floats and
// whiteLuminance 1, so that its values are cd/m2 for every program that
// follows the standard. Half floats are not used: they end at 65504, and the
// disc of the sun has more than 1e9 cd/m2. Files are read with Y or with R, G
// and B in any of the lossless compressions (none, RLE, ZIPS, ZIP, PIZ).
// Tiled, multi-part and deep files and lossy compressions are refused.
//
// Sources: "OpenEXR File Layout", "Technical Introduction to OpenEXR" and
// "Standard Attributes", Academy Software Foundation, openexr.com (from
// memory); files written by the Foundation's own library version 3.1.5 are in
// testdata and check the reader.
package luminance
