// Package outlook follows lines of sight and of the sun between indoors and
// outdoors: how much of the horizon a place indoors overlooks, how far and in
// which layers; what a system takes of that view; how long the sun reaches a
// point; which share of a pane it lights.
//
// It knows geometry and straight passage only: no mirrors, no scattering, no
// luminances. Everything is deterministic; each function states how finely it
// looks. Units and frame are those of package scene: metres, radians,
// steradians, model frame, z up.
package outlook
