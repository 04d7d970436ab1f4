package moment

import "math"

// shore is a work's plate: the echoes of its frequencies and what the wires
// send to it. Without a plate it does nothing.
type shore struct {
	coupling
	store *plates // shared by workers; nil: its own
	set   settings
	plate Plate
	k     []float64
	step  float64
	short bool      // of modes
	echo  *echo     // of this frequency
	nodes []float64 // wave numbers between which echoes are interpolated; none: each is solved
	blend echo

	sum, amplitude []complex128
	carried        []complex128 // I ds on the spots
	circle         []sample
	wide           means
	open, closed   vista
	seen           [2]bool // the views that hold the current
}

// prepare does what does not depend on frequency.
func (s *shore) prepare(m *mesh, p Plate, set settings, hz []float64) error {
	s.plate = p
	if !p.Finite() {
		return nil
	}
	if s.store == nil {
		s.store = new(plates)
	}
	s.set = set
	s.k = s.k[:0]
	for _, f := range hz {
		s.k = append(s.k, wave(f))
	}
	s.step = evenly(s.k)
	highest := s.k[len(s.k)-1]
	if err := p.fits(highest); err != nil {
		return err
	}
	mer := s.store.meridian(&s.set, p, highest)
	s.short = s.survey(m, mer, highest)
	s.coupling.prepare(&s.set, s.k[0], highest, s.step)
	s.nodes = s.nodes[:0]
	if n := s.wanted(); n < len(s.k) {
		s.nodes = chebyshev(s.nodes, s.k[0], highest, n)
	}
	return nil
}

// wanted is how many wave numbers the sweep's echoes are interpolated from to
// about 1e-6: their phases run with the way across the plate and back.
func (s *shore) wanted() int {
	lo, hi := s.k[0], s.k[len(s.k)-1]
	way := 2*s.plate.Radius + 4*s.plate.Rim + 2*math.Pi/hi
	return 7 + int(math.Ceil(2*(hi-lo)/2*way))
}

// complete adds the plate to the wires' matrix at the frequency of index i.
func (s *shore) complete(m *mesh, i int, k float64, z []complex128, both bool) (err error) {
	if !s.plate.Finite() {
		return nil
	}
	if i > 0 {
		s.advance(k, s.step != 0)
	}
	s.send(m, k)
	key := plateKey{plate: s.plate, k: k, finest: s.k[len(s.k)-1], modes: s.modes}
	if len(s.nodes) > 0 {
		s.echo, err = &s.blend, s.store.between(&s.set, key, s.nodes, k, &s.blend)
	} else {
		s.echo, err = s.store.echo(&s.set, key)
	}
	if err == nil {
		s.apply(m, s.echo, z, both)
	}
	return err
}

// view is what a direction's field is read from, the current being the wires'.
func (s *shore) view(w *work, closed bool) *vista {
	at := 0
	if closed {
		at = 1
	}
	if s.seen == [2]bool{} {
		s.amplitudes(w.current)
	}
	if !s.seen[at] {
		s.seen[at] = true
		if closed {
			s.closedView(&w.mesh, w.current, w.wave)
		} else {
			s.openView()
		}
	}
	if closed {
		return &s.closed
	}
	return &s.open
}
