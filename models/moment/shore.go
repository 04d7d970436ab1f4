package moment

// shore is a work's plate: the echoes of its frequencies and what the wires
// send to it. Without a plate it does nothing.
type shore struct {
	coupling
	store *plates // shared by workers; nil: its own
	set   settings
	plate Plate
	k     []float64
	step  float64
	modes int
	short bool  // of modes
	echo  *echo // of this frequency

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
	s.modes, s.short = s.survey(m, mer, highest)
	s.coupling.prepare(&s.set, s.modes, s.k[0], highest, s.step)
	return nil
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
	s.echo, err = s.store.echo(&s.set, plateKey{plate: s.plate, k: k, finest: s.k[len(s.k)-1], modes: s.modes})
	if err != nil {
		return err
	}
	s.apply(m, s.echo, z, both)
	return nil
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
