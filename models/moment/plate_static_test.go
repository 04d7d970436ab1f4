package moment

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// alone is the mesh of a disc without the plane beyond its edge, 1 m in
// radius. The function of T from the disc into the plane is then one of
// the disc's: the first of those beyond.
func alone(t *testing.T, f Fidelity) *meridian {
	t.Helper()
	set, _ := f.settings()
	m := set.meridian(Plate{Radius: 1}, 2*math.Pi)
	m.patches = m.patches[:m.parts[disc]]
	return m
}

// energy is bᵀA⁻¹b of the symmetric matrix that read gives, over the functions
// with the given numbers.
func energy(t *testing.T, functions []int, read func(i, j int) float64, b func(i int) float64) float64 {
	t.Helper()
	n := len(functions)
	a, rhs := mat.NewDense(n, n, nil), mat.NewVecDense(n, nil)
	for i, p := range functions {
		rhs.SetVec(i, b(p))
		for j, q := range functions {
			a.Set(i, j, read(p, q))
		}
	}
	var x mat.VecDense
	if err := x.SolveVec(a, rhs); err != nil {
		t.Fatal(err)
	}
	return mat.Dot(rhs, &x)
}

// The capacitance of a disc, any electrostatics text: 8ε₀R. The charge of T is
// T', all of it 2πT at the edge; of the functions with T = 1 there the one of
// least energy has Q²/2C. In the matrix of mode 0 with a small k charges have
// −jη/2k, so that their quadratic form e gives C = 8π²ε₀/e.
func TestCapacitanceOfADisc(t *testing.T) {
	const k = 1e-4
	for f, within := range map[Fidelity]float64{Draft: 1e-5, Standard: 1e-5, Fine: 1e-6} {
		set, _ := f.settings()
		m := alone(t, f)
		c := m.fill(&set, k, 0).c[0]
		read := func(i, j int) float64 { return imag(c[i*m.count+j]) * -2 * k / eta }
		var inner []int
		for i := range m.unknown {
			if !m.around[i] {
				inner = append(inner, i)
			}
		}
		edge := m.unknown
		e := read(edge, edge) - energy(t, inner, read, func(i int) float64 { return read(i, edge) })
		got := math.Pi * math.Pi / e // of 8ε₀R
		t.Logf("%s: %.9f of 8ε₀R, %d functions", f, got, len(inner)+1)
		if math.Abs(got-1) > within {
			t.Errorf("%s: the capacitance is %.8f of 8ε₀R; within %g is due", f, got, within)
		}
	}
}

// moments gives, for each function, the integral over the disc of its T by σ
// and its F by a power of ρ, in du.
func (m *meridian) moments(power float64) []float64 {
	out := make([]float64, m.count)
	g := &legendre[8]
	for i := range m.patches {
		p := &m.patches[i]
		if p.part != disc {
			continue
		}
		for j, x := range g.x {
			at := m.place(disc, float64(p.at)+(x+1)/2)
			for _, e := range p.t {
				out[e.fn] += g.w[j] / 2 * real(at.sigma) * p.value[e.local].at(x, m.degree+1)
			}
			for _, e := range p.f {
				out[e.fn] += g.w[j] / 2 * math.Pow(real(at.rho), power) * p.flow[e.local].at(x, m.degree+1)
			}
		}
	}
	return out
}

// A small disc's dipole moments, Bethe, Phys. Rev. 66, 163, 1944 (his holes,
// by Babinet; from memory): (16/3)ε₀a³E for a field E along it, −(8/3)a³H for
// a field H across it. Under πE the mode 1 has the moment 2bᵀC⁻¹b/jωE, under
// −jωμρH/2 mode 0's F has jπg·C⁻¹b with b = −πωμH g, g the integral of ρ²F. What
// the finite k adds is of the order of its square.
func TestPolarisabilitiesOfADisc(t *testing.T) {
	const k = 1e-3
	for _, f := range []Fidelity{Draft, Standard, Fine} {
		set, _ := f.settings()
		m := set.meridian(Plate{Radius: 1}, 2*math.Pi)
		c := m.fill(&set, k, 1).c
		var own, around []int
		for i := range m.unknown {
			own = append(own, i)
			if m.around[i] && i != m.axial {
				around = append(around, i)
			}
		}
		b, g := m.moments(1), m.moments(2)
		along := energy(t, own, func(i, j int) float64 { return -imag(c[1][i*m.count+j]) }, func(i int) float64 { return math.Pi * b[i] })
		across := energy(t, around, func(i, j int) float64 { return imag(c[0][i*m.count+j]) }, func(i int) float64 { return g[i] })
		electric, magnetic := along*2*eta/k, across*math.Pi*math.Pi*k*eta
		t.Logf("%s: %.8f and %.8f of Bethe's", f, electric*3/16, magnetic*3/8)
		if math.Abs(electric*3/16-1) > 1e-4 {
			t.Errorf("%s: along the disc %.6f ε₀a³E; 16/3 is due", f, electric)
		}
		if math.Abs(magnetic*3/8-1) > 1e-4 {
			t.Errorf("%s: across the disc −%.6f a³H; −8/3 is due", f, magnetic)
		}
	}
}
