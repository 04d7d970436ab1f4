package chart

import (
	"math"
	"math/cmplx"
	"slices"
)

// enlarged is the grid of a part of a Smith chart.
type enlarged struct {
	frame
	reference float64
	middle    complex128 // of the part, in the plane of Γ
	half      float64    // of its side
}

// gridLines is about how many values of each kind are ruled.
const gridLines = 10

// draw rules resistances, reactances and the rim, with their ohms outside.
func (e enlarged) draw(b brush, taken *labels) {
	low, high := e.extent()
	rs, xs, digits := e.values(low, high)
	for _, r := range rs {
		points := sampled(imag(low), imag(high), func(x float64) at { return e.at(complex(r, x)) })
		ends := e.rule(b, points)
		if own := e.at(complex(r, 0)); e.nearOpen() {
			ends = append([]at{own}, ends...)
		} else {
			ends = append(ends, own)
		}
		e.name(b, taken, tickText(r*e.reference, digits[0]), ends)
	}
	for _, x := range xs {
		sign := "+j"
		switch {
		case x < 0:
			sign = "−j"
		case x == 0:
			sign = "j"
		}
		ends := e.rule(b, sampled(real(low), real(high), func(r float64) at { return e.at(complex(r, x)) }))
		slices.Reverse(ends)
		e.name(b, taken, sign+tickText(math.Abs(x)*e.reference, digits[1]), ends)
	}
	b.stroke(thin, rule, nil)
	rim := make([]at, 721)
	for i := range rim {
		g := cmplx.Rect(1, 2*math.Pi*float64(i)/720)
		rim[i] = e.place(real(g), imag(g))
	}
	for _, run := range e.runs(rim) {
		b.line(run...)
	}
	b.stroke(hairline, rule, nil)
	b.line(at{e.left, e.bottom}, at{e.right, e.bottom}, at{e.right, e.top}, at{e.left, e.top}, at{e.left, e.bottom}, at{e.right, e.bottom})
}

// at is the place of an impedance relative to the reference.
func (e enlarged) at(z complex128) at {
	g := Reflection(z, 1)
	return e.place(real(g), imag(g))
}

// extent is the least and the greatest resistance and reactance that are
// seen, a little more for the lines to reach the edge.
func (e enlarged) extent() (low, high complex128) {
	const n = 40
	r, x := [2]float64{math.Inf(1), 0}, [2]float64{math.Inf(1), math.Inf(-1)}
	for i := range n + 1 {
		for k := range n + 1 {
			g := e.middle + complex(e.half*(2*float64(i)/n-1), e.half*(2*float64(k)/n-1))
			if cmplx.Abs(g) >= 1 {
				continue
			}
			z := (1 + g) / (1 - g)
			r = [2]float64{math.Min(r[0], real(z)), math.Max(r[1], real(z))}
			x = [2]float64{math.Min(x[0], imag(z)), math.Max(x[1], imag(z))}
		}
	}
	dr, dx := 0.1*(r[1]-r[0]), 0.1*(x[1]-x[0])
	return complex(math.Max(0, r[0]-dr), x[0]-dx), complex(r[1]+dr, x[1]+dx)
}

// nearOpen says whether the open circuit is near enough to crowd the lines.
func (e enlarged) nearOpen() bool { return cmplx.Abs(1-e.middle) < 2*e.half }

// values are what is ruled, relative to the reference, and the decimals of
// their ohms: evenly spaced where the part is far from the open circuit, else
// the usual ones of a whole chart.
func (e enlarged) values(low, high complex128) (rs, xs []float64, decimals [2]int) {
	if e.nearOpen() {
		for _, p := range smithParts {
			xs = append(xs, p, -p)
		}
		return smithParts, append(xs, 0), decimals
	}
	relative := func(low, high float64) (values []float64, decimals int) {
		values, decimals = Ticks(low*e.reference, high*e.reference, gridLines)
		for i := range values {
			values[i] /= e.reference
		}
		return values, decimals
	}
	rs, decimals[0] = relative(real(low), real(high))
	xs, decimals[1] = relative(imag(low), imag(high))
	return rs, xs, decimals
}

// sampled is a curve from one value to another, densely about 0 and 1.
func sampled(from, to float64, curve func(float64) at) []at {
	const n = 240
	a, z := math.Atan(from), math.Atan(to)
	points := make([]at, n+1)
	for i := range points {
		points[i] = curve(math.Tan(a + (z-a)*float64(i)/n))
	}
	return points
}

// rule strokes what is seen of a curve and returns the ends of that.
func (e enlarged) rule(b brush, points []at) (ends []at) {
	b.stroke(hairline, grid, nil)
	for _, run := range e.runs(points) {
		b.line(run...)
		ends = append(ends, run[0], run[len(run)-1])
	}
	return ends
}

// name writes a curve's ohms at the first place that is free.
func (e enlarged) name(b brush, taken *labels, text string, places []at) {
	for _, p := range places {
		at, a, ok := e.beyond(p)
		if ok && taken.free(written(text, at, 9, a)) {
			b.haloed(text, at, 9, a, quiet)
			return
		}
	}
}

// beyond is where the ohms of a curve stand that ends at a place: outside the
// frame, or at the place where that is inside.
func (e enlarged) beyond(p at) (at, align, bool) {
	const near, down = 0.01, 3.1 // 3.1: from the middle of a line of text to its baseline
	switch {
	case !e.holds(p):
		return at{}, left, false
	case p.x < e.left+near:
		return at{e.left - 3, p.y - down}, right, true
	case p.x > e.right-near:
		return at{e.right + 3, p.y - down}, left, true
	case p.y < e.bottom+near:
		return at{p.x, e.bottom - 10}, centre, true
	case p.y > e.top-near:
		return at{p.x, e.top + 4}, centre, true
	}
	return at{p.x, p.y - down}, centre, true
}
