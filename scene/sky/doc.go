// Package sky says where the sun stands and how bright the sky is.
//
// It holds the sun's position (SunAt), sky luminance distributions (Sky: the
// all-weather model of Perez, the CIE general skies and the traditional CIE
// skies), the division of the sky into patches (Patches) and the skyline
// around a site (Horizon).
//
// # Conventions
//
// Directions are unit vectors in the world frame: x east, y north, z up.
// Zenith angles and altitudes are radians, azimuths radians clockwise from
// north in 0 to 2 pi. Only Site carries degrees, as sites are written down.
// Luminance is cd/m2, illuminance lx.
//
// A Sky is the diffuse sky alone: the sun's disc is not in it, and below the
// horizon it is zero.
//
// # Refraction
//
// SunAt returns the airless (true) position, the one that irradiance models
// and closure of global, diffuse and direct irradiance are written for. Where
// the sun's disc is looked at, close to the horizon, ask Sun.Refracted: the
// air lifts the sun by 0.48 degrees at the horizon, 0.16 at 5 degrees and
// 0.04 at 20.
package sky
