package moment

// bunchKaufman is the diagonal pivoting of Bunch and Kaufman (Math. Comp. 31,
// 163, 1977) for complex symmetric matrices: P·A·Pᵀ = L·D·Lᵀ with blocks of
// one and two on D's diagonal. It is the slow way for matrices that the fast
// elimination cannot be trusted with.
type bunchKaufman struct {
	n    int
	a    []complex128 // lower triangle, row-major
	swap []int        // the row that step k's row was swapped with
	two  []bool       // step k starts a block of two
}

// growthShare is (1 + √17)/8, which bounds the growth of both kinds of step
// alike.
const growthShare = 0.6403882032022076

// keep copies a lower triangle, in case it is needed.
func (b *bunchKaufman) keep(a []complex128, n int) {
	b.n = n
	if cap(b.a) < n*n {
		b.a = make([]complex128, n*n)
	}
	b.a = b.a[:n*n]
	for m := range n {
		copy(b.a[m*n:m*n+m+1], a[m*n:m*n+m+1])
	}
}

// at is the element (i, j), i ≥ j.
func (b *bunchKaufman) at(i, j int) *complex128 { return &b.a[i*b.n+j] }

// factor overwrites the copy with its factors.
func (b *bunchKaufman) factor() error {
	b.swap = cleared(b.swap, b.n)
	if cap(b.two) < b.n {
		b.two = make([]bool, b.n)
	}
	b.two = b.two[:b.n]
	clear(b.two)
	for k := 0; k < b.n; {
		with, two, ok := b.choose(k)
		if !ok {
			return errSingular
		}
		if two {
			b.exchange(k+1, with)
			b.swap[k], b.swap[k+1], b.two[k] = k, with, true
			b.stepTwo(k)
			k += 2
			continue
		}
		b.exchange(k, with)
		b.swap[k] = with
		b.stepOne(k)
		k++
	}
	return nil
}

// choose picks the pivot of step k: its row, and whether it is a block of
// two with row k.
func (b *bunchKaufman) choose(k int) (with int, two, ok bool) {
	diagonal := size(*b.at(k, k))
	r, lambda := k, 0.0
	for i := k + 1; i < b.n; i++ {
		if s := size(*b.at(i, k)); s > lambda {
			r, lambda = i, s
		}
	}
	if !(max(diagonal, lambda) > 0) {
		return k, false, false
	}
	if diagonal >= growthShare*lambda {
		return k, false, true
	}
	sigma := 0.0 // largest beside the diagonal in row r
	for j := k; j < b.n; j++ {
		switch {
		case j < r:
			sigma = max(sigma, size(*b.at(r, j)))
		case j > r:
			sigma = max(sigma, size(*b.at(j, r)))
		}
	}
	switch {
	case diagonal*sigma >= growthShare*lambda*lambda:
		return k, false, true
	case size(*b.at(r, r)) >= growthShare*sigma:
		return r, false, true
	}
	return r, true, true
}

// exchange swaps rows and columns k and r > k of what remains, and of the
// rows of L already made.
func (b *bunchKaufman) exchange(k, r int) {
	if r == k {
		return
	}
	for j := 0; j < k; j++ {
		x, y := b.at(k, j), b.at(r, j)
		*x, *y = *y, *x
	}
	x, y := b.at(k, k), b.at(r, r)
	*x, *y = *y, *x
	for j := k + 1; j < r; j++ {
		x, y := b.at(j, k), b.at(r, j)
		*x, *y = *y, *x
	}
	for j := r + 1; j < b.n; j++ {
		x, y := b.at(j, k), b.at(j, r)
		*x, *y = *y, *x
	}
}

func (b *bunchKaufman) stepOne(k int) {
	d := *b.at(k, k)
	for i := k + 1; i < b.n; i++ {
		l := *b.at(i, k) / d
		if l == 0 {
			continue
		}
		for j := k + 1; j <= i; j++ {
			*b.at(i, j) -= l * *b.at(j, k)
		}
	}
	for i := k + 1; i < b.n; i++ {
		*b.at(i, k) /= d
	}
}

func (b *bunchKaufman) stepTwo(k int) {
	for i := k + 2; i < b.n; i++ {
		l, m := b.divide(k, *b.at(i, k), *b.at(i, k+1))
		for j := k + 2; j <= i; j++ {
			*b.at(i, j) -= l**b.at(j, k) + m**b.at(j, k+1)
		}
	}
	for i := k + 2; i < b.n; i++ {
		*b.at(i, k), *b.at(i, k+1) = b.divide(k, *b.at(i, k), *b.at(i, k+1))
	}
}

// divide solves the block of two at k for the pair (x, y).
func (b *bunchKaufman) divide(k int, x, y complex128) (u, v complex128) {
	// Scaled by the element beside the diagonal, which is the block's
	// largest.
	c := *b.at(k+1, k)
	p, q := *b.at(k, k)/c, *b.at(k+1, k+1)/c
	x, y = x/c, y/c
	det := p*q - 1
	return (q*x - y) / det, (p*y - x) / det
}

// solve puts the solution for the right-hand side x into x.
func (b *bunchKaufman) solve(x []complex128) {
	for k, r := range b.swap {
		x[k], x[r] = x[r], x[k]
	}
	for k := 0; k < b.n; k++ {
		if b.two[k] {
			for i := k + 2; i < b.n; i++ {
				x[i] -= *b.at(i, k)*x[k] + *b.at(i, k+1)*x[k+1]
			}
			x[k], x[k+1] = b.divide(k, x[k], x[k+1])
			k++
			continue
		}
		for i := k + 1; i < b.n; i++ {
			x[i] -= *b.at(i, k) * x[k]
		}
		x[k] /= *b.at(k, k)
	}
	for k := b.n - 1; k >= 0; k-- {
		first := k
		if k > 0 && b.two[k-1] {
			first = k - 1
		}
		for j := first; j <= k; j++ {
			for i := k + 1; i < b.n; i++ {
				x[j] -= *b.at(i, j) * x[i]
			}
		}
		k = first
	}
	for k := b.n - 1; k >= 0; k-- {
		r := b.swap[k]
		x[k], x[r] = x[r], x[k]
	}
}
