package moment

import (
	"container/list"
	"math"
	"sync"
	"sync/atomic"
)

// plates keeps the echoes of plates for all workers, the latest used.
type plates struct {
	mu    sync.Mutex
	kept  map[plateKey]*list.Element
	order list.List // of *keptEcho, the latest first
	bytes int
	mesh  *meridian // the last one asked for
	of    plateKey
}

// meridian is the mesh of a plate for frequencies up to the wave number k.
func (p *plates) meridian(set *settings, plate Plate, k float64) *meridian {
	p.mu.Lock()
	defer p.mu.Unlock()
	if key := (plateKey{plate: plate, finest: k}); p.mesh == nil || p.of != key {
		p.mesh, p.of = set.meridian(plate, k), key
	}
	return p.mesh
}

// plateKey names an echo: the plate, the wave number, that which the mesh is
// for, and the modes.
type plateKey struct {
	plate     Plate
	k, finest float64
	modes     int
}

type keptEcho struct {
	key  plateKey
	once sync.Once
	done atomic.Bool
	echo *echo
	err  error
	size int
}

// mostKept bounds the room that kept echoes take, bytes.
const mostKept = 256 << 20

// echo is that of the key, from the store or solved now. Workers that want
// the same one wait for the first.
func (p *plates) echo(set *settings, key plateKey) (*echo, error) {
	k := p.find(key)
	if !k.done.Load() {
		p.solve(set, k)
	}
	return k.echo, k.err
}

// between fills out with the echo at wave number k, by the polynomial through
// those at nodes, whose barycentric weights are alternating halves of sines: the
// Chebyshev points of the first kind.
func (p *plates) between(set *settings, key plateKey, nodes []float64, k float64, out *echo) error {
	total := 0.0
	for i, at := range nodes {
		if k == at {
			return p.between(set, key, nodes[i:i+1], math.Nextafter(k, 0), out)
		}
		total += barycentric(i, len(nodes)) / (k - at)
	}
	for i, at := range nodes {
		key.k = at
		e, err := p.echo(set, key)
		if err != nil {
			return err
		}
		if i == 0 {
			out.like(e, k)
		}
		out.add(e, barycentric(i, len(nodes))/(k-at)/total)
	}
	return nil
}

func barycentric(i, n int) float64 {
	w := math.Sin(math.Pi * (float64(i) + 0.5) / float64(n))
	if i%2 == 1 {
		return -w
	}
	return w
}

// chebyshev lays n points from lo to hi.
func chebyshev(points []float64, lo, hi float64, n int) []float64 {
	points = points[:0]
	for i := range n {
		points = append(points, (lo+hi)/2-(hi-lo)/2*math.Cos(math.Pi*(float64(i)+0.5)/float64(n)))
	}
	return points
}

// like makes room in e for an echo like another, of nothing.
func (e *echo) like(o *echo, k float64) {
	e.meridian, e.k = o.meridian, k
	for len(e.modes) < len(o.modes) {
		e.modes = append(e.modes, echoMode{})
	}
	e.modes = e.modes[:len(o.modes)]
	for i := range e.modes {
		e.modes[i].s = cleared(e.modes[i].s, len(o.modes[i].s))
		e.modes[i].current = cleared(e.modes[i].current, len(o.modes[i].current))
	}
}

// add adds w times another echo.
func (e *echo) add(o *echo, w float64) {
	for i := range e.modes {
		axpy(e.modes[i].s, o.modes[i].s, w)
		axpy(e.modes[i].current, o.modes[i].current, w)
	}
}

// solve solves a place's plate unless another worker has.
func (p *plates) solve(set *settings, k *keptEcho) {
	k.once.Do(func() {
		defer k.done.Store(true)
		k.echo, k.err = p.meridian(set, k.key.plate, k.key.finest).echo(set, k.key.k, k.key.modes)
		if k.err == nil {
			p.weigh(k)
		}
	})
}

// find gets the place of a key and makes it the latest.
func (p *plates) find(key plateKey) *keptEcho {
	p.mu.Lock()
	defer p.mu.Unlock()
	if e, ok := p.kept[key]; ok {
		p.order.MoveToFront(e)
		return e.Value.(*keptEcho)
	}
	if p.kept == nil {
		p.kept = map[plateKey]*list.Element{}
	}
	k := &keptEcho{key: key}
	p.kept[key] = p.order.PushFront(k)
	return k
}

// weigh counts an echo's room and forgets the longest unused ones.
func (p *plates) weigh(k *keptEcho) {
	p.mu.Lock()
	defer p.mu.Unlock()
	if e, ok := p.kept[k.key]; !ok || e.Value != k {
		return // forgotten while it was solved
	}
	k.size = k.echo.bytes()
	p.bytes += k.size
	for p.bytes > mostKept && p.order.Len() > 1 {
		last := p.order.Back()
		old := last.Value.(*keptEcho)
		p.order.Remove(last)
		delete(p.kept, old.key)
		p.bytes -= old.size
	}
}

func (e *echo) bytes() int {
	n := 0
	for i := range e.modes {
		n += 16 * (len(e.modes[i].s) + len(e.modes[i].current))
	}
	return n
}
