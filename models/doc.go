// Package models is the physics of an axial-mode helical antenna: what a
// fully dimensioned [Design] is, what a simulation answers ([Response]) and
// what answers it ([Simulator]). It knows nothing of searching.
//
// Everything inside is SI: metres, hertz, ohms, radians, linear power
// ratios. Axis and hand: +z points away from the ground plane at z = 0; a
// right-handed winding turns counter-clockwise seen from +z and radiates
// right-hand circular polarisation forward. Time factor e^{+jωt}.
package models
