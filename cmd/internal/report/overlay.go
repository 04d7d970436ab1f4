package report

import (
	"fmt"
	"math"
	"math/cmplx"
	"slices"

	"gonum.org/v1/plot/vg"

	"turnwise/cmd/internal/chart"
	"turnwise/objectives/tolerance"
)

// worstShown is the highest VSWR that an overlay's axis goes to.
const worstShown = 10.0

// Picture is the overlay: VSWR over frequency and a Smith chart, with the
// tolerance band on both, over the trim chart with what explains the
// difference.
func (c *Comparison) Picture() chart.Figure {
	return chart.Titled{Title: c.title(), Figure: above{beside{c.lines(), c.smith()}, c.trim()}}
}

// SVG is the picture as a document of its own.
func (c *Comparison) SVG() []byte { return chart.SVG(c.Picture(), c.title()) }

func (c *Comparison) title() string {
	verdict := "inside the tolerance band"
	if c.Left() > 0 {
		verdict = "outside the tolerance band"
	}
	return "measured on predicted: " + verdict
}

// lines is VSWR over frequency; both edges of the band are one series.
func (c *Comparison) lines() chart.Figure {
	mhz, low, high := make([]float64, len(c.Hz)), make([]float64, len(c.Hz)), make([]float64, len(c.Hz))
	for i := range c.Hz {
		mhz[i] = c.Hz[i] / 1e6
		low[i], high[i] = c.bandVSWR(i)
	}
	gap := []float64{math.NaN()}
	series := []chart.Series{
		{Name: "predicted", X: mhz, Y: vswrs(c.Predicted)},
		{Name: "measured", X: mhz, Y: vswrs(c.Measured)},
		{Name: "tolerance band", X: slices.Concat(mhz, gap, mhz), Y: slices.Concat(low, gap, high)},
	}
	if g := c.explained(); g != nil {
		some := make([]float64, len(c.At))
		for i, k := range c.At {
			some[i] = mhz[k]
		}
		series = append(series, chart.Series{Name: "explained", X: some, Y: vswrs(g)})
	}
	from, to := mhz[0], mhz[len(mhz)-1]
	if from == to { // one frequency: short level lines show it
		from, to = from*0.999, to*1.001
		for i := range series {
			series[i] = level(series[i], from, to)
		}
	}
	highest := 1.5
	for _, s := range series {
		for _, v := range s.Y {
			if v > highest {
				highest = v
			}
		}
	}
	return &chart.Lines{
		X:      chart.Axis{Label: "frequency, MHz", Min: from, Max: to},
		Y:      chart.Axis{Label: "VSWR", Min: 1, Max: math.Min(math.Ceil(2*highest+0.2)/2, worstShown)},
		Series: series,
	}
}

// level makes a line of every value of a series.
func level(s chart.Series, from, to float64) chart.Series {
	out := chart.Series{Name: s.Name}
	for _, v := range s.Y {
		out.X, out.Y = append(out.X, from, to), append(out.Y, v, v)
	}
	return out
}

func vswrs(gs []complex128) []float64 {
	out := make([]float64, len(gs))
	for i, g := range gs {
		out[i] = tolerance.VSWR(g)
	}
	return out
}

// ringPoints is the number of corners of the circle that stands for the
// band's reach.
const ringPoints = 73

// ring is the band's reach at mid-band.
func (c *Comparison) ring() []complex128 {
	ring := make([]complex128, ringPoints)
	for i := range ring {
		ring[i] = c.Predicted[c.mid()] + cmplx.Rect(c.Reach[c.mid()], 2*math.Pi*float64(i)/(ringPoints-1))
	}
	return ring
}

// mid is the frequency in the middle of the band.
func (c *Comparison) mid() int { return len(c.Hz) / 2 }

func (c *Comparison) mhz(i int) string { return fmt.Sprintf("%.6g MHz", c.Hz[i]/1e6) }

// smith is both reflections, and the band's reach at mid-band.
func (c *Comparison) smith() chart.Figure {
	n, z0 := len(c.Hz), c.Study.Design.Feed.Impedance
	in := [2]int{0, n - 1}
	marks := [3]string{c.mhz(0), c.mhz(c.mid()), c.mhz(n - 1)}
	if n == 1 {
		marks = [3]string{"", c.mhz(0), ""}
	}
	return &chart.Smith{Reference: z0, Traces: []chart.Trace{
		{Name: "predicted", Z: impedances(c.Predicted, z0), In: in, Marks: marks},
		{Name: "measured", Z: impedances(c.Measured, z0), In: in},
		{Name: "band at " + c.mhz(c.mid()), Z: impedances(c.ring(), z0)},
	}}
}

// impedances are what reflections stand for, Ω.
func impedances(gs []complex128, reference float64) []complex128 {
	out := make([]complex128, len(gs))
	for i, g := range gs {
		if out[i] = complex(reference, 0) * (1 + g) / (1 - g); g == 1 {
			out[i] = cmplx.Inf()
		}
	}
	return out
}

// beside is two figures next to each other, their upper edges level.
type beside struct{ left, right chart.Figure }

// Size implements chart.Figure.
func (p beside) Size() (w, h float64) {
	w1, h1 := p.left.Size()
	w2, h2 := p.right.Size()
	return w1 + w2, math.Max(h1, h2)
}

// Draw implements chart.Figure.
func (p beside) Draw(c vg.Canvas) {
	_, h := p.Size()
	w1, h1 := p.left.Size()
	_, h2 := p.right.Size()
	put(c, p.left, 0, h-h1)
	put(c, p.right, w1, h-h2)
}

// above is one figure over another.
type above struct{ upper, lower chart.Figure }

// Size implements chart.Figure.
func (p above) Size() (w, h float64) {
	w1, h1 := p.upper.Size()
	w2, h2 := p.lower.Size()
	return math.Max(w1, w2), h1 + h2
}

// Draw implements chart.Figure.
func (p above) Draw(c vg.Canvas) {
	_, h := p.lower.Size()
	put(c, p.lower, 0, 0)
	put(c, p.upper, 0, h)
}

// put draws a figure with its corner at a place.
func put(c vg.Canvas, f chart.Figure, x, y float64) {
	c.Push()
	c.Translate(vg.Point{X: vg.Length(x), Y: vg.Length(y)})
	f.Draw(c)
	c.Pop()
}
