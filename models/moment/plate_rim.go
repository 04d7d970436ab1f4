package moment

import "math"

// rimNode is a node of the rim's quadrature, its place among the rings.
type rimNode struct {
	splineValues
	patch  *patch
	weight float64
}

// rimMeans are the modes of e^{−jkR}/R, integrated over the ring: the sums
// and the differences of wire and image.
func (c *coupling) rimMeans(samples []sample, r *ringRule) {
	sum, dif := c.mean, c.pair
	clear(sum)
	clear(dif)
	for i := range r.sin2 {
		a, b := &samples[2*i], &samples[2*i+1]
		u, v := 1/real(a.r), 1/real(b.r)
		dr, di, ir, ii := u*real(a.phasor), u*imag(a.phasor), v*real(b.phasor), v*imag(b.phasor)
		sr, si, er, ei := dr+ir, di+ii, dr-ir, di-ii
		cosine := r.cosine[i*azimuthModes:]
		cosine = cosine[:len(sum)]
		for m, cos := range cosine {
			sum[m] += complex(cos*sr, cos*si)
			dif[m] += complex(cos*er, cos*ei)
		}
	}
	scale := complex(2*math.Pi/float64(len(r.sin2)), 0)
	for m := range sum {
		sum[m] *= scale
		dif[m] *= scale
	}
}

// rimRow puts the modes of the potentials on a node of the rim into the row.
func (c *coupling) rimRow(s *wireSpot, j int) {
	wide, nodes := c.rawEntries(), len(c.rims)
	first := 2*len(c.ring) + j
	for m := range c.modes + 1 {
		plus, minus, charge := adjacent(c.pair, m)
		upright := complex(s.uz*real(c.mean[m]), s.uz*imag(c.mean[m]))
		turn, straight := complex(s.ur*real(minus), s.ur*imag(minus)), complex(-s.uphi*imag(plus), s.uphi*real(plus))
		up, down := c.row[(c.modes+m)*wide+first:], c.row[(c.modes-m)*wide+first:]
		up[0], up[nodes], up[2*nodes] = upright, turn-straight, charge
		down[0], down[nodes], down[2*nodes] = upright, -turn-straight, charge
	}
}

// project makes y of the raw entries: those beyond as they are, those of the
// rim tested.
func (c *coupling) project(m *mesh, k float64) {
	if len(c.rims) == 0 {
		c.raw, c.y = c.y, c.raw
		return
	}
	signed, wide, narrow := 2*c.modes+1, c.rawEntries(), c.entries()
	plane, nodes := 2*len(c.ring), len(c.rims)
	c.y = cleared(c.y, m.functions*signed*narrow)
	first := c.unknown - c.rimCount()
	a, b := k*eta/(4*math.Pi), eta/(4*math.Pi*k)
	for i := range m.functions * signed {
		raw, y := c.raw[i*wide:(i+1)*wide], c.y[i*narrow:(i+1)*narrow]
		copy(y[:plane], raw)
		mode := float64(i%signed - c.modes)
		for j := range c.rims {
			n, at := &c.rims[j], &c.rings[len(c.ring)+j]
			upright, around, charge := raw[plane+j], raw[plane+nodes+j], raw[plane+2*nodes+j]
			upright *= complex(0, a*n.weight*real(at.sigma))
			around *= complex(0, a*n.weight*real(at.rho))
			charge *= complex(0, -b*n.weight)
			for _, t := range n.patch.t {
				y[plane+t.fn-first] += upright*complex(n.value[t.local], 0) + charge*complex(n.slope[t.local], 0)
			}
			for _, f := range n.patch.f {
				y[plane+f.fn-first] += (around - charge*complex(mode, 0)) * complex(n.flow[f.local], 0)
			}
		}
	}
}
