// Package moment is the internal full-wave evaluator: the method of moments
// for thin round wires, in free space, over an infinite perfectly conducting
// plane, or over a disc or cup about the axis, which [Plate] describes.
//
// The current along the exact centre line is a spline of degree 4 in arc
// length; the mixed-potential electric-field equation is tested with the
// same splines (Galerkin), the plane is an image:
//
//	Z_mn = (jkη/4π) ∬ f_m f_n (t·t') G ds ds' − (jη/4πk) ∬ f_m' f_n' G ds ds' + ∫ z f_m f_n ds,
//	G = e^{−jkR}/R
//
// with z the conductor's internal impedance. G is evaluated once between all
// pairs of a shared grid of points and projected on the functions; between
// near pairs its static part, 1/R − k²R/2, is integrated properly once an
// antenna and put in the place of the grid's. Sweeps step e^{−jkR} from
// frequency to frequency.
//
// [Solver] answers questions about helical antennas; [Antenna] and [Analyse]
// take any wires and ports, which is how published dipoles, loops and arrays
// come to test it.
package moment
