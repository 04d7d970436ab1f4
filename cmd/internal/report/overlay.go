package report

import (
	"fmt"
	"math"
	"math/cmplx"

	"gonum.org/v1/plot/vg"

	"turnwise/cmd/internal/chart"
	"turnwise/objectives/tolerance"
)

// worstShown is the highest VSWR that an overlay's axis goes to.
const worstShown = 10.0

// SVG is the overlay: VSWR over frequency and a Smith chart, with the tolerance
// band on both.
func (c *Comparison) SVG() []byte {
	verdict := "inside the tolerance band"
	if c.Left() > 0 {
		verdict = "outside the tolerance band"
	}
	title := "measured on predicted: " + verdict
	return chart.SVG(chart.Titled{Title: title, Figure: beside{c.lines(), c.smith()}}, title)
}

// lines is VSWR over frequency.
func (c *Comparison) lines() chart.Figure {
	n := len(c.Hz)
	mhz := make([]float64, n)
	curves := [4][]float64{}
	for k := range curves {
		curves[k] = make([]float64, n)
	}
	highest := 1.5
	for i := range c.Hz {
		mhz[i] = c.Hz[i] / 1e6
		low, high := c.bandVSWR(i)
		for k, x := range [4]float64{tolerance.VSWR(c.Predicted[i]), tolerance.VSWR(c.Measured[i]), low, high} {
			curves[k][i] = x
			highest = math.Max(highest, x)
		}
	}
	from, to := mhz[0], mhz[n-1]
	if from == to { // one frequency: a short level line shows it
		from, to = from*0.999, to*1.001
		mhz = []float64{from, to}
		for k := range curves {
			curves[k] = append(curves[k], curves[k][0])
		}
	}
	l := &chart.Lines{
		X: chart.Axis{Label: "frequency, MHz", Min: from, Max: to},
		Y: chart.Axis{Label: "VSWR", Min: 1, Max: math.Min(math.Ceil(2*highest+0.2)/2, worstShown)},
	}
	for k, name := range []string{"predicted", "measured", "band, lowest", "band, highest"} {
		l.Series = append(l.Series, chart.Series{Name: name, X: mhz, Y: curves[k]})
	}
	return l
}

// ringPoints is the number of corners of the circle that stands for the
// band's reach.
const ringPoints = 73

// smith is both reflections, and the band's reach at mid-band.
func (c *Comparison) smith() chart.Figure {
	n := len(c.Hz)
	mid := n / 2
	z0 := c.Study.Design.Feed.Impedance
	ring := make([]complex128, ringPoints)
	for i := range ring {
		ring[i] = c.Predicted[mid] + cmplx.Rect(c.Reach[mid], 2*math.Pi*float64(i)/(ringPoints-1))
	}
	in := [2]int{0, n - 1}
	mhz := func(i int) string { return fmt.Sprintf("%.6g MHz", c.Hz[i]/1e6) }
	marks := [3]string{mhz(0), mhz(mid), mhz(n - 1)}
	if n == 1 {
		marks = [3]string{"", mhz(0), ""}
	}
	return &chart.Smith{Reference: z0, Traces: []chart.Trace{
		{Name: "predicted", Z: impedances(c.Predicted, z0), In: in, Marks: marks},
		{Name: "measured", Z: impedances(c.Measured, z0), In: in},
		{Name: "band at " + mhz(mid), Z: impedances(ring, z0)},
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
	c.Push()
	c.Translate(vg.Point{Y: vg.Length(h - h1)})
	p.left.Draw(c)
	c.Pop()
	c.Push()
	c.Translate(vg.Point{X: vg.Length(w1), Y: vg.Length(h - h2)})
	p.right.Draw(c)
	c.Pop()
}
