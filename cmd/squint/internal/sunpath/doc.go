// Package sunpath answers when the sun gets to a point: the year's suns as a
// point in the scene sees them, straight, through glass and cloth, and in
// mirrors, as numbers and as a picture with the sun's path over what the point
// sees.
//
// Directions are those of the model frame, angles radians. The sky is
// cloudless unless a number says that it is by the weather file.
package sunpath
