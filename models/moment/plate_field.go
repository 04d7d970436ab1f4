package moment

import "math"

// The plate's far field. Of the modes on a ring, e^{jk r·r̂} makes the Bessel
// functions B_m = jᵐJ_m(kρ sin θ):
//
//	N_θ = 2π Σ_m e^{jmφ} Σ e^{jkz cos θ} [T (cos θ sin B⁺ − sin θ cos B_m) − jF cos θ B⁻]
//	N_φ = 2π Σ_m e^{jmφ} Σ e^{jkz cos θ} [T sin B⁻ + jF B⁺]
//
// with B⁺ = (B_{m+1} + B_{m−1})/2 and B⁻ = (B_{m+1} − B_{m−1})/2j.
//
// There are two ways to see it. The open view is the infinite plane's field,
// which is none below, and what the plate's currents and those taken off
// beyond the edge add; it costs next to nothing but fails towards the horizon,
// where the latter die away too slowly. The closed view has the wires without
// images and all the current of the plate itself, for which the plane's
// current must be found all over the plate.

// openTo is how far from the axis, above or below, the open view serves.
const openTo = 35 * math.Pi / 180

var openCos = math.Cos(openTo)

// vista is a view's currents and what directions have seen of them.
type vista struct {
	nodes  []fieldNode
	at     []complex128 // T and F of the nodes: [node][signed mode][2], weights included
	modes  int
	seen   map[float64]int
	toward []complex128 // [look][signed mode][2]: N_θ, N_φ
	bessel []complex128
}

// fieldNode is a ring of current.
type fieldNode struct {
	rho      complex128
	z        float64
	sin, cos float64
}

func (v *vista) reset(modes int) {
	v.modes = modes
	v.nodes, v.at, v.toward = v.nodes[:0], v.at[:0], v.toward[:0]
	if v.seen == nil {
		v.seen = map[float64]int{}
	}
	clear(v.seen)
	v.bessel = cleared(v.bessel, modes+2)
}

// add makes room for one more ring and returns its currents.
func (v *vista) add(n fieldNode) []complex128 {
	v.nodes = append(v.nodes, n)
	from := len(v.at)
	for range 2 * (2*v.modes + 1) {
		v.at = append(v.at, 0)
	}
	return v.at[from:]
}

// field is N_θ and N_φ in a direction.
func (v *vista) field(k float64, d direction) (theta, phi complex128) {
	sign := 1.0
	if d.st < 0 {
		d = direction{-d.st, d.ct, -d.sp, -d.cp}
		sign = -1
	}
	look := v.look(k, d.st, d.ct)
	turn, step := complex(1, 0), complex(d.cp, d.sp)
	m := v.modes
	theta, phi = look[2*m], look[2*m+1]
	for i := 1; i <= m; i++ {
		turn *= step
		back := complex(real(turn), -imag(turn))
		theta += turn*look[2*(m+i)] + back*look[2*(m-i)]
		phi += turn*look[2*(m+i)+1] + back*look[2*(m-i)+1]
	}
	return theta * complex(sign, 0), phi * complex(sign, 0)
}

// look is the modes towards an angle from the axis.
func (v *vista) look(k, st, ct float64) []complex128 {
	size := 2 * (2*v.modes + 1)
	if i, ok := v.seen[ct]; ok {
		return v.toward[i*size : (i+1)*size]
	}
	i := len(v.toward) / size
	v.seen[ct] = i
	for range size {
		v.toward = append(v.toward, 0)
	}
	out := v.toward[i*size:]
	for j := range v.nodes {
		v.radiate(k, st, ct, &v.nodes[j], v.at[j*size:(j+1)*size], out)
	}
	return out
}

// radiate adds a ring to the modes towards an angle.
func (v *vista) radiate(k, st, ct float64, n *fieldNode, at, out []complex128) {
	besselModes(complex(k*st, 0)*n.rho, v.bessel)
	c, s := unit(k * n.z * ct)
	phase := complex(2*math.Pi*c, 2*math.Pi*s)
	for m := -v.modes; m <= v.modes; m++ {
		b := v.bessel
		above, below := b[abs(m+1)], b[abs(m-1)]
		plus, minus := (above+below)/2, (above-below)*complex(0, -0.5)
		i := 2 * (v.modes + m)
		t, f := at[i]*phase, at[i+1]*phase
		out[i] += t*(complex(ct*n.sin, 0)*plus-complex(st*n.cos, 0)*b[abs(m)]) - complex(0, ct)*f*minus
		out[i+1] += t*complex(n.sin, 0)*minus + complex(0, 1)*f*plus
	}
}

func abs(m int) int {
	if m < 0 {
		return -m
	}
	return m
}
