package moment

// The current is a spline in arc length on every piece of wire: uniform
// knots, full multiplicity at the piece's ends, so that one function alone
// is not zero at each end. On an element, a function is a polynomial in the
// local coordinate x from −1 to 1.

// maxOrder is the most functions that live on one element: degree 5.
const maxOrder = 6

// poly is a polynomial in x, lowest power first.
type poly [maxOrder]float64

// at evaluates p at x; n is its number of coefficients.
func (p *poly) at(x float64, n int) float64 {
	v := p[n-1]
	for k := n - 2; k >= 0; k-- {
		v = v*x + p[k]
	}
	return v
}

// slope is dp/dx.
func (p *poly) slope() (d poly) {
	for k := 1; k < maxOrder; k++ {
		d[k-1] = float64(k) * p[k]
	}
	return d
}

// splines gives the degree+1 B-splines that live on element e of n, by the
// recursion of Cox and de Boor carried out on polynomials. Knots are the
// whole numbers 0 to n, the first and last repeated degree+1 times.
func splines(n, e, degree int) (b [maxOrder]poly) {
	knot := func(j int) float64 { return float64(min(max(j-degree, 0), n)) }
	// b[i] is the function with index e + i counted from the degree's start.
	b[degree][0] = 1
	for d := 1; d <= degree; d++ {
		for i := degree - d; i <= degree; i++ {
			j := e + i // index of the function, whose knots are j … j+d+1
			var next poly
			if i > degree-d {
				lo, hi := knot(j), knot(j+d)
				next.addRamp(&b[i], float64(e), lo, 1/(hi-lo), -1)
			}
			if i < degree {
				lo, hi := knot(j+1), knot(j+d+1)
				next.addRamp(&b[i+1], float64(e), hi, 1/(hi-lo), 1)
			}
			b[i] = next
		}
	}
	return b
}

// addRamp adds to p the product of q with the straight line
// sign·(knot − t)·scale, t = e + (x + 1)/2.
func (p *poly) addRamp(q *poly, e, knot, scale, sign float64) {
	c0 := sign * scale * (knot - e - 0.5)
	c1 := -sign * scale * 0.5
	for k := 0; k < maxOrder; k++ {
		p[k] += c0 * q[k]
		if k+1 < maxOrder {
			p[k+1] += c1 * q[k]
		}
	}
}
