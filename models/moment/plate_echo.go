package moment

import (
	"fmt"

	"gonum.org/v1/gonum/mat"
)

// echo is a plate's answer at one wave number to what wires send to its
// rings: for each mode y = (K_ρ on the rings beyond, K_φ/j there, b on the
// rim's functions), where b_i is minus the tested field of the wires and their
// images.
type echo struct {
	*meridian
	k     float64
	modes []echoMode // from 0 up
}

// echoMode is one mode's.
type echoMode struct {
	// s takes y to what comes back: the wires' matrix gains ỹᵀ s y.
	s []complex128
	// current takes y to the amplitudes of all functions, those beyond with
	// their sign turned, as the plane's current there is taken off: functions × len(y).
	current []complex128
}

// entries is how long y is.
func (m *meridian) entries() int { return 2*len(m.ring) + m.rimCount() }

// rimCount is how many functions live on the rim; the first is T's into the
// disc, and they are the last of the unknown ones.
func (m *meridian) rimCount() int {
	if m.parts[rim] == 0 {
		return 0
	}
	n := m.parts[rim] + m.degree
	return 2*n - 2
}

// echo solves the plate at wave number k for the modes 0 to modes.
func (m *meridian) echo(set *settings, k float64, modes int) (*echo, error) {
	s := m.fill(set, k, modes)
	e := &echo{meridian: m, k: k}
	through := m.interpolation()
	for i := range s.c {
		mode, err := m.answer(s.c[i], through, i)
		if err != nil {
			return nil, fmt.Errorf("the plate's mode %d: %w", i, err)
		}
		e.modes = append(e.modes, mode)
	}
	return e, nil
}

// answer eliminates the plate's unknowns from one mode's matrix. With κ = X y
// the amplitudes beyond and b on the rim, the unknown ones are
//
//	c = C_uu⁻¹ (C_ub κ − b),  s = κᵀ C_bb κ − (C_ub κ − b)ᵀ c.
func (m *meridian) answer(c []complex128, through [][]complex128, mode int) (echoMode, error) {
	n, u, q := m.count, m.unknown, m.entries()
	if mode != 1 {
		for j := range n {
			c[m.axial*n+j], c[j*n+m.axial] = 0, 0
		}
		c[m.axial*n+m.axial] = 1
	}
	own := make([]complex128, u*u)
	for i := range u {
		copy(own[i*u:i*u+i+1], c[i*n:i*n+i+1])
	}
	var f factored
	if err := f.factor(own, u); err != nil {
		return echoMode{}, err
	}
	// sent is C_ub κ − b, entry by entry of y.
	sent, solved := make([]complex128, q*u), make([]complex128, q*u)
	out := echoMode{s: make([]complex128, q*q), current: make([]complex128, n*q)}
	for j := range q {
		col := sent[j*u : (j+1)*u]
		if rings := 2 * len(m.ring); j < rings {
			for b, x := range through[j] {
				for i := range u {
					col[i] += c[i*n+u+b] * x
				}
				out.current[(u+b)*q+j] = -x
			}
		} else {
			col[u-m.rimCount()+j-rings] = -1
		}
		copy(solved[j*u:], col)
		f.solve(solved[j*u : (j+1)*u])
		for i := range u {
			out.current[i*q+j] = solved[j*u+i]
		}
	}
	for i := range q {
		for j := range q {
			var sum complex128
			for l := range u {
				sum -= sent[i*u+l] * solved[j*u+l]
			}
			if i < len(through) && j < len(through) {
				for a, x := range through[i] {
					for b, y := range through[j] {
						sum += x * c[(u+a)*n+u+b] * y
					}
				}
			}
			out.s[i*q+j] = sum
		}
	}
	return out, nil
}

// interpolation gives, for each entry of y beyond the edge, the amplitudes of
// the functions there: T = ρK_ρ and F = σK_φ/j take their values on the rings.
func (m *meridian) interpolation() [][]complex128 {
	n := len(m.ring)
	values := mat.NewDense(n, n, nil)
	first := len(m.patches) - m.parts[beyond]
	for i, u := range m.ring {
		e := min(int(u), m.parts[beyond]-1)
		p := &m.patches[first+e]
		x := 2*(u-float64(e)) - 1
		for l := range m.degree + 1 {
			values.Set(i, e+l, p.value[l].at(x, m.degree+1))
		}
	}
	var inverse mat.Dense
	if err := inverse.Inverse(values); err != nil {
		panic("moment: splines that their own nodes do not determine")
	}
	out := make([][]complex128, 2*n)
	for i, u := range m.ring {
		p := m.place(beyond, u)
		// The last T is none: the current there has died away.
		t, f := make([]complex128, 2*n-1), make([]complex128, 2*n-1)
		for j := range n {
			if j < n-1 {
				t[j] = p.rho * complex(inverse.At(j, i), 0)
			}
			f[n-1+j] = p.sigma * complex(inverse.At(j, i), 0)
		}
		out[i], out[n+i] = t, f
	}
	return out
}
