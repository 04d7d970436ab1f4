package chart

import (
	"math"

	"gonum.org/v1/plot/vg"
)

// Bars compares shares of two wholes, group by group: what was spent and
// what came of it. A whole without a name is left out.
type Bars struct {
	Names  [2]string
	Groups []Group
}

// Group is one line of the comparison.
type Group struct {
	Name   string
	Shares [2]float64 // 0 to 1
	Texts  [2]string  // written at the end of the bars
}

const (
	groupHeight = 44.0
	soleHeight  = 26.0 // of a group where there is one whole
	barHeight   = 12.0
)

// sole reports whether there is one whole only.
func (g *Bars) sole() bool { return g.Names[0] == "" || g.Names[1] == "" }

func (g *Bars) height() float64 {
	if g.sole() {
		return soleHeight
	}
	return groupHeight
}

// barAt is the foot of a whole's bar in a group around y.
func (g *Bars) barAt(k int, y float64) float64 {
	if g.sole() {
		return y - barHeight/2
	}
	return y + float64(1-k)*(barHeight+2) - barHeight - 1
}

// Size implements Figure.
func (g *Bars) Size() (w, h float64) {
	return Small, 2*edge + rowHeight*2 + 24 + g.height()*float64(len(g.Groups))
}

// Draw implements Figure.
func (g *Bars) Draw(c vg.Canvas) {
	b := brush{c}
	w, h := g.Size()
	names, texts := 0.0, 0.0
	for _, r := range g.Groups {
		names = math.Max(names, textWidth(r.Name, textSize))
		texts = math.Max(texts, math.Max(textWidth(r.Texts[0], tickSize), textWidth(r.Texts[1], tickSize)))
	}
	x0, bottom := edge+names+8, edge+2*rowHeight
	top := bottom + g.height()*float64(len(g.Groups))
	most := 0.0
	for _, r := range g.Groups {
		most = math.Max(most, math.Max(r.Shares[0], r.Shares[1]))
	}
	axis := Around("", 0, math.Max(100*most, 10))
	x := func(share float64) float64 { return x0 + (w-edge-4-texts-6-x0)*100*share/axis.Max }
	ticks, decimals := Ticks(0, axis.Max, 5)
	for _, t := range ticks {
		b.stroke(hairline, grid, nil)
		b.line(at{x(t / 100), bottom}, at{x(t / 100), top})
		b.text(tickText(t, decimals), at{x(t / 100), bottom - tickRoom - tickSize*0.75}, tickSize, centre, quiet)
	}
	for i, r := range g.Groups {
		y := top - g.height()*(float64(i)+0.5)
		b.text(r.Name, at{edge, y - textSize*0.35}, textSize, left, ink)
		for k := range r.Shares {
			if g.Names[k] == "" {
				continue
			}
			foot := g.barAt(k, y)
			g.bar(b, k, x0, x(r.Shares[k]), foot)
			b.text(r.Texts[k], at{x(r.Shares[k]) + 5, foot + barHeight/2 - tickSize*0.35}, tickSize, left, quiet)
		}
	}
	b.stroke(hairline, rule, nil)
	b.line(at{x0, bottom}, at{x0, top})
	b.text("share, %", at{(x0 + x(axis.Max/100)) / 2, edge}, textSize, centre, ink)
	g.key(b, at{edge, h - edge - textSize*0.75})
}

// bar is hollow for the first whole and solid for the second.
func (g *Bars) bar(b brush, k int, from, to, y float64) {
	corners := []at{{from, y}, {to, y}, {to, y + barHeight}, {from, y + barHeight}}
	tone := pens[0].tone
	if k == 0 {
		b.fill(wash, corners...)
		b.stroke(thin, tone, nil)
		b.line(append(corners, corners[0])...)
		return
	}
	b.fill(tone, corners...)
}

func (g *Bars) key(b brush, p at) {
	x := p.x
	for k, name := range g.Names {
		if name == "" {
			continue
		}
		g.bar(b, k, x, x+14, p.y-2)
		b.text(name, at{x + 19, p.y}, tickSize, left, ink)
		x += 19 + textWidth(name, tickSize) + entryRoom
	}
}
