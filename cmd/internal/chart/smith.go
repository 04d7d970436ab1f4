package chart

import (
	"math"
	"math/cmplx"

	"gonum.org/v1/plot/vg"
)

// Smith is impedances over frequency on a Smith chart.
type Smith struct {
	Reference float64 // Ω, at the middle
	// Traces are drawn thin outside the band and strong inside it.
	Traces []Trace
	// VSWR is that of a dashed circle, with its label; 0 for none.
	VSWR  float64
	Label string
}

// Trace is the course of one impedance, Ω.
type Trace struct {
	Name string
	Z    []complex128
	// In is the first and the last index inside the band; both ends and the
	// middle are marked.
	In [2]int
	// Marks are the labels of the band's lower end, middle and upper end,
	// empty where there is none.
	Marks [3]string
}

// Reflection is Γ = (Z − R)/(Z + R) of an impedance on a line of R.
func Reflection(z complex128, reference float64) complex128 {
	r := complex(reference, 0)
	if cmplx.IsInf(z) || z == -r {
		return 1
	}
	return (z - r) / (z + r)
}

// Circle is a circle of the plane of Γ.
type Circle struct{ X, Y, Radius float64 }

// ResistanceCircle is where the resistance is r times the reference.
func ResistanceCircle(r float64) Circle { return Circle{r / (1 + r), 0, 1 / (1 + r)} }

// ReactanceCircle is where the reactance is x ≠ 0 times the reference; only
// its part inside the unit circle belongs to positive resistances.
func ReactanceCircle(x float64) Circle { return Circle{1, 1 / x, math.Abs(1 / x)} }

// VSWRRadius is |Γ| of a VSWR.
func VSWRRadius(vswr float64) float64 { return (vswr - 1) / (vswr + 1) }

// Room around the unit circle, for the reactances.
const (
	smithBeside = 28.0
	smithAbove  = 17.0
)

const smithRadius = Small/2 - edge - smithBeside

// arcPoints is the number of straight pieces of an arc of equal reactance.
const arcPoints = 48

// parts of the reference that are ruled.
var smithParts = []float64{0.2, 0.5, 1, 2, 5}

// Size implements Figure.
func (s *Smith) Size() (w, h float64) {
	return Small, 2*edge + 2*(smithAbove+smithRadius) + rowHeight*float64(1+s.legend().rows())
}

func (s *Smith) legend() *legend {
	g := &legend{room: Small - 2*edge}
	for i, t := range s.Traces {
		p := pens[i%len(pens)]
		if len(s.Traces) > 1 {
			g.add(t.Name, p)
		}
	}
	for k, name := range s.Traces[0].Marks {
		if name != "" {
			g.mark(name, pen{tone: ink, marker: bandMarks[k]}, k == 1)
		}
	}
	return g
}

// bandMarks are the markers of the band's lower end, middle and upper end.
var bandMarks = [3]Marker{Triangle, Disc, Square}

// Draw implements Figure.
func (s *Smith) Draw(c vg.Canvas) {
	b := brush{c}
	w, h := s.Size()
	g := s.legend()
	o := at{w / 2, edge + rowHeight + smithAbove + smithRadius}
	place := func(gamma complex128) at { return at{o.x + smithRadius*real(gamma), o.y + smithRadius*imag(gamma)} }
	s.rule(b, o, smithRadius, place)
	if s.VSWR > 1 {
		r := smithRadius * VSWRRadius(s.VSWR)
		b.stroke(1.4, alarm, []vg.Length{4, 3})
		b.arc(o, r, 0, 2*math.Pi)
		b.haloed(s.Label, at{o.x, o.y + r + 3}, tickSize, centre, alarm)
	}
	for i := range s.Traces {
		s.Traces[i].draw(b, pens[i%len(pens)], s.Reference, place)
	}
	b.text("resistance and reactance, Ω; middle "+tickText(s.Reference, 0)+" Ω", at{w / 2, edge}, textSize, centre, ink)
	g.draw(b, at{edge, h - edge - textSize*0.75})
}

// rule draws the circles of equal resistance and reactance with their ohms.
func (s *Smith) rule(b brush, o at, radius float64, place func(complex128) at) {
	for _, r := range smithParts {
		c := ResistanceCircle(r)
		b.stroke(hairline, grid, nil)
		b.arc(at{o.x + radius*c.X, o.y}, radius*c.Radius, 0, 2*math.Pi)
	}
	for _, part := range smithParts {
		for _, x := range []float64{part, -part} {
			b.stroke(hairline, grid, nil)
			points := make([]at, arcPoints+1)
			for i := range arcPoints {
				r := math.Tan(float64(i) / arcPoints * math.Pi / 2)
				points[i] = place(Reflection(complex(r, x), 1))
			}
			points[arcPoints] = place(1)
			b.line(points...)
		}
	}
	b.line(at{o.x - radius, o.y}, at{o.x + radius, o.y})
	b.stroke(thin, rule, nil)
	b.arc(o, radius, 0, 2*math.Pi)
	for _, r := range smithParts {
		p := place(Reflection(complex(r, 0), 1))
		b.haloed(tickText(r*s.Reference, 0), at{p.x, o.y - tickSize*0.35}, 9, centre, quiet)
	}
	for _, part := range smithParts {
		for _, x := range []float64{part, -part} {
			s.reactance(b, place(Reflection(complex(0, x), 1)), o, x)
		}
	}
}

// reactance writes the ohms of a reactance outside the unit circle.
func (s *Smith) reactance(b brush, p, o at, x float64) {
	sign := "+j"
	if x < 0 {
		sign = "−j"
	}
	dx, dy := p.x-o.x, p.y-o.y
	away := math.Hypot(dx, dy)
	a := align(0.5 - 0.5*dx/away)
	b.text(sign+tickText(math.Abs(x)*s.Reference, 0), at{p.x + 5*dx/away, p.y + 7*dy/away - tickSize*0.35}, 9, a, quiet)
}

// draw strokes a trace: thin over the whole sweep, strong inside the band.
func (t *Trace) draw(b brush, p pen, reference float64, place func(complex128) at) {
	points := make([]at, len(t.Z))
	for i, z := range t.Z {
		points[i] = place(Reflection(z, reference))
	}
	b.stroke(hairline, p.tone, p.dash)
	b.line(points...)
	inside := points[t.In[0] : t.In[1]+1]
	b.stroke(2.4, p.tone, p.dash)
	b.line(inside...)
	for k, at := range []at{inside[0], inside[len(inside)/2], inside[len(inside)-1]} {
		if k == 1 || len(inside) > 1 {
			b.mark(bandMarks[k], at, 3.4, p.tone, k == 1)
		}
	}
}
