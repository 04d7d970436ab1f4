package moment

import (
	"math"

	"gonum.org/v1/gonum/integrate/quad"
)

// rule is a quadrature rule.
type rule struct{ x, w []float64 }

// mostNodes is the largest Gauss–Legendre rule kept; gonum 0.17's rule of 26
// nodes is wrong in the second digit.
const mostNodes = 24

// legendre holds the Gauss–Legendre rules on −1 to 1 by number of nodes,
// nodes rising.
var legendre = func() (g [mostNodes + 1]rule) {
	for n := 1; n <= mostNodes; n++ {
		g[n] = rule{x: make([]float64, n), w: make([]float64, n)}
		quad.Legendre{}.FixedLocations(g[n].x, g[n].w, -1, 1)
	}
	return g
}()

// samples is the number of points through which an element's centre line is
// laid: a polynomial of degree samples−1 on a fifth of a turn is good to
// 3e-9 of the radius.
const samples = 8

// sampling holds the Chebyshev nodes on −1 to 1 and the matrix that takes
// values on them to a polynomial's coefficients, lowest power first.
var sampling = func() (s struct {
	x     [samples]float64
	power [samples][samples]float64
}) {
	for j := range samples {
		s.x[j] = math.Cos(math.Pi * (float64(samples-1-j) + 0.5) / samples)
	}
	// Chebyshev polynomials T_k in powers of x.
	var t [samples][samples]float64
	t[0][0], t[1][1] = 1, 1
	for k := 2; k < samples; k++ {
		for i := range samples {
			t[k][i] = -t[k-2][i]
			if i > 0 {
				t[k][i] += 2 * t[k-1][i-1]
			}
		}
	}
	for j := range samples {
		theta := math.Acos(s.x[j])
		for k := range samples {
			c := 2 / float64(samples) * math.Cos(float64(k)*theta)
			if k == 0 {
				c /= 2
			}
			for i := range samples {
				s.power[i][j] += c * t[k][i]
			}
		}
	}
	return s
}()

// fitted turns values on the sampling nodes into coefficients.
func fitted(values *[samples]float64) (c [samples]float64) {
	for i := range c {
		row := &sampling.power[i]
		sum := 0.0
		for j, v := range values {
			sum += row[j] * v
		}
		c[i] = sum
	}
	return c
}

// horner evaluates a fitted polynomial and its derivative.
func horner(c *[samples]float64, x float64) (v, d float64) {
	v = c[samples-1]
	for k := samples - 2; k >= 0; k-- {
		d = d*x + v
		v = v*x + c[k]
	}
	return v, d
}
