package moment

import (
	"errors"
	"math"
)

// growthBound is the growth of the elements beyond which an elimination
// without pivots is not trusted. Matrices of the kernel stay at 1 to 3.
const growthBound = 1e4

// errSingular is a matrix that no pivoting helps.
var errSingular = errors.New("the system of the current is singular")

// factored is a complex symmetric matrix as U·D·Uᵀ, U unit upper triangular,
// eliminated from the last row up so that the rows of a lower triangle stay
// contiguous. Where its growth asks for it, it is the pivoted factorisation
// instead.
type factored struct {
	n       int
	a       []complex128 // row m, columns 0 … m−1: U's column m; diagonal: 1/D
	growth  float64      // largest element met over the largest given
	pivoted bool
	kaufman bunchKaufman
}

// factor takes the lower triangle of a, row-major n × n, which it keeps and
// overwrites.
func (f *factored) factor(a []complex128, n int) error {
	f.n, f.a, f.pivoted = n, a, false
	f.kaufman.keep(a, n)
	if f.eliminate() && f.growth <= growthBound {
		return nil
	}
	f.pivoted = true
	return f.kaufman.factor()
}

// size is the 1-norm of a complex number, as pivoting uses it.
func size(z complex128) float64 { return math.Abs(real(z)) + math.Abs(imag(z)) }

// eliminate runs without pivots, two rows at a time, and reports whether
// every pivot could be divided by.
func (f *factored) eliminate() bool {
	n, a := f.n, f.a
	given := 0.0
	for m := range n {
		given = max(given, largest(a[m*n:m*n+m+1]))
	}
	most := given
	m := n - 1
	for ; m >= 1; m -= 2 {
		p, q := a[m*n:m*n+m+1], a[(m-1)*n:(m-1)*n+m]
		most = max(most, largest(p))
		if !sound(p[m], given) {
			return false
		}
		invp := 1 / p[m]
		lp := invp * p[m-1]
		subtract(q, p[:m], lp)
		most = max(most, largest(q))
		if !sound(q[m-1], given) {
			return false
		}
		invq := 1 / q[m-1]
		for i := m - 2; i >= 0; i-- {
			subtractTwo(a[i*n:i*n+i+1], p, q, invp*p[i], invq*q[i])
		}
		scale(p[:m], invp)
		scale(q[:m-1], invq)
		p[m], q[m-1] = invp, invq
	}
	if m == 0 {
		most = max(most, size(a[0]))
		if !sound(a[0], given) {
			return false
		}
		a[0] = 1 / a[0]
	}
	f.growth = most / given
	return f.growth < math.Inf(1)
}

// sound tells whether a pivot can be divided by.
func sound(p complex128, given float64) bool { return size(p) > 1e-14*given }

func largest(v []complex128) float64 {
	most := 0.0
	for _, z := range v {
		most = max(most, size(z))
	}
	return most
}

func scale(v []complex128, by complex128) {
	for i, z := range v {
		v[i] = z * by
	}
}

// subtract takes l·src off dst.
func subtract(dst, src []complex128, l complex128) {
	src = src[:len(dst)]
	lr, li := real(l), imag(l)
	for i, z := range src {
		d := dst[i]
		dst[i] = complex(real(d)-(lr*real(z)-li*imag(z)), imag(d)-(lr*imag(z)+li*real(z)))
	}
}

// subtractTwo takes l·p + h·q off dst.
func subtractTwo(dst, p, q []complex128, l, h complex128) {
	p, q = p[:len(dst)], q[:len(dst)]
	lr, li, hr, hi := real(l), imag(l), real(h), imag(h)
	for i := range dst {
		u, v, d := p[i], q[i], dst[i]
		dst[i] = complex(
			real(d)-(lr*real(u)-li*imag(u))-(hr*real(v)-hi*imag(v)),
			imag(d)-(lr*imag(u)+li*real(u))-(hr*imag(v)+hi*real(v)))
	}
}

// solve puts the solution of the system for the right-hand side b into b.
func (f *factored) solve(b []complex128) {
	if f.pivoted {
		f.kaufman.solve(b)
		return
	}
	n, a := f.n, f.a
	for m := n - 1; m > 0; m-- {
		subtract(b[:m], a[m*n:m*n+m], b[m])
	}
	for m := range n {
		row := a[m*n : m*n+m+1]
		var re, im float64
		for i, u := range row[:m] {
			x := b[i]
			re += real(u)*real(x) - imag(u)*imag(x)
			im += real(u)*imag(x) + imag(u)*real(x)
		}
		b[m] = b[m]*row[m] - complex(re, im)
	}
}
