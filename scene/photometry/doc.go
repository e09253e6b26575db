// Package photometry turns irradiance into what the eye sees: illuminance and
// luminance of sky and sun.
//
// Radiance (W/(m2 sr)) is not luminance (cd/m2) and irradiance (W/m2) is not
// illuminance (lx): daylight has no fixed ratio between them. Perez1990 is the
// one place where the step is taken.
//
// # Conventions
//
// Irradiance W/m2, illuminance lx, luminance cd/m2, angles radians, dew point
// degrees Celsius. "Horizontal" is on a level plane, "normal" on a plane facing
// the sun. No function fails: input outside its domain is limited as its
// comment says.
package photometry
