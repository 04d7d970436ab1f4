package chart

import "math"

// labels are the rectangles that writing and markers have taken.
type labels struct{ taken []rectangle }

type rectangle struct{ left, bottom, right, top float64 }

// around is a square about a place.
func around(p at, reach float64) rectangle {
	return rectangle{p.x - reach, p.y - reach, p.x + reach, p.y + reach}
}

// written is the room of a line of text with its baseline at p.
func written(text string, p at, size float64, a align) rectangle {
	w := textWidth(text, size)
	x := p.x - float64(a)*w
	return rectangle{x - 2, p.y - 0.25*size, x + w + 2, p.y + 0.8*size}
}

// along takes a line between reflections.
func (l *labels) along(place func(complex128) at, gs ...complex128) {
	const every, reach = 6.0, 5.0
	for i := 1; i < len(gs); i++ {
		p, q := place(gs[i-1]), place(gs[i])
		n := math.Min(math.Ceil(math.Hypot(q.x-p.x, q.y-p.y)/every), trimSide)
		for k := 0.0; k <= n; k++ {
			u := k / math.Max(n, 1)
			l.take(around(at{p.x + u*(q.x-p.x), p.y + u*(q.y-p.y)}, reach))
		}
	}
}

func (l *labels) take(r rectangle) { l.taken = append(l.taken, r) }

// free takes the rectangle where nothing else has.
func (l *labels) free(r rectangle) bool {
	for _, o := range l.taken {
		if r.left < o.right && o.left < r.right && r.bottom < o.top && o.bottom < r.top {
			return false
		}
	}
	l.take(r)
	return true
}

// Labels stand from nearest to farthest units off what they name, in turnTries
// directions.
const (
	nearest   = 9.0
	farthest  = 80.0
	turnTries = 16
)

// beside finds the place of a line of text near p inside the frame, in the
// direction given or as near to it as is free.
func (l *labels) beside(f frame, p at, direction float64, text string) (at, bool) {
	w := textWidth(text, tickSize)
	for off := nearest; off <= farthest; off += 6 {
		for k := range turnTries {
			turn := 2 * math.Pi / turnTries * float64((k+1)/2)
			if k%2 == 1 {
				turn = -turn
			}
			sin, cos := math.Sincos(direction + turn)
			start := at{p.x + off*cos - w*(0.5-0.5*cos), p.y + off*sin - tickSize*0.35}
			r := written(text, start, tickSize, left)
			if r.left > f.left && r.right < f.right && r.bottom > f.bottom && r.top < f.top && l.free(r) {
				return start, true
			}
		}
	}
	return at{}, false
}
