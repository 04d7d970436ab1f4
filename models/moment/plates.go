package moment

import (
	"container/list"
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
