// Package surface solves for the light that diffuse surfaces exchange.
//
// Every diffusely scattering surface is cut into texels. From each texel side
// a few hundred rays are walked once, through glass and mirrors, to what they
// meet: other texels (links), the sky (exits, by patch) or the endless ground.
// That is all the Monte Carlo there is; what follows is linear. For a block of
// hours at a time, the light that arrives straight from sky and sun is carried
// from texel to texel along the links until it no longer changes
// (Gauss-Seidel). The rows of different texels are independent samples, so
// a product of links along a path of distinct texels is an unbiased estimate
// of that path's transport.
// Source: the discretised radiance equation (Kajiya 1986, The rendering
// equation, SIGGRAPH) restricted to Lambertian vertices, with specular chains
// folded into the links.
//
// Rays are made in independent batches, each solved on its own, so that the
// spread over batches holds this noise too.
//
// Units: illuminance in lx per texel side, weights without unit.
package surface
