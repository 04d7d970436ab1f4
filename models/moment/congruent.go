package moment

import "math"

// A uniform winding carries each of its elements onto the next by one screw
// motion, so a pair of elements looks like the pair before it: its moments
// are taken over instead of integrated again.

// congruence is a pair's shape and its moments, the grid's part taken off.
type congruence struct {
	shape shape
	mom   moments
}

// shape is what congruent pairs have alike: the distances of ends and middles
// among themselves, the sizes, the grid.
type shape struct {
	dist   [11]float64 // squared; the last two along the elements themselves
	size   [6]float64  // lengths, radii and coats
	points [2]int
	even   bool
}

// alike is the relative difference of congruent squared distances.
const alike = 1e-10

func (p *pair) shape() (s shape) {
	for a := range p.e.tips {
		for b := range p.f.tips {
			s.dist[3*a+b] = p.apart2(&p.e.tips[a], &p.f.tips[b])
		}
	}
	s.dist[9] = p.apart2(&p.e.tips[0], &p.e.tips[2])
	s.dist[10] = p.apart2(&p.f.tips[0], &p.f.tips[2])
	s.size = [6]float64{p.e.length, p.f.length, p.e.radius, p.f.radius, p.e.coat, p.f.coat}
	s.points = [2]int{p.e.end - p.e.first, p.f.end - p.f.first}
	s.even = p.e.even && p.f.even
	return s
}

func (s *shape) like(o *shape) bool {
	if s.points != o.points || !s.even || !o.even {
		return false
	}
	slack := alike * s.size[0] * s.size[0]
	for i := range s.dist {
		if !(math.Abs(s.dist[i]-o.dist[i]) <= slack) {
			return false
		}
	}
	for i := range s.size {
		if !(math.Abs(s.size[i]-o.size[i]) <= alike*s.size[i]) {
			return false
		}
	}
	return true
}

// forget makes room for pairs of n elements.
func (s *static) forget(n int) {
	if cap(s.kept) < n {
		s.kept = make([]congruence, n)
	}
	s.kept = s.kept[:n]
	for i := range s.kept {
		s.kept[i].shape.even = false
	}
}

// recall takes over the moments of the last pair that lay as far apart along
// the mesh, if it is congruent.
func (s *static) recall(p *pair, offset int) bool {
	if offset < 0 || !s.kept[offset].shape.even {
		return false
	}
	now := p.shape()
	if !now.like(&s.kept[offset].shape) {
		return false
	}
	s.mom = s.kept[offset].mom
	return true
}

// keep remembers a pair's moments.
func (s *static) keep(p *pair, offset int) {
	if offset >= 0 {
		s.kept[offset] = congruence{p.shape(), s.mom}
	}
}
