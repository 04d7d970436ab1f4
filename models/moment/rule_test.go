package moment

import (
	"math"
	"testing"
)

// A Gauss–Legendre rule of n nodes is exact for powers below 2n.
func TestRulesAreExact(t *testing.T) {
	for n := 1; n <= mostNodes; n++ {
		g := &legendre[n]
		for k := range 2 * n {
			sum, want := 0.0, 0.0
			for i, x := range g.x {
				sum += g.w[i] * math.Pow(x, float64(k))
			}
			if k%2 == 0 {
				want = 2 / float64(k+1)
			}
			if math.Abs(sum-want) > 1e-14 {
				t.Errorf("%d nodes: ∫ x^%d = %.16g; %.16g is due", n, k, sum, want)
			}
		}
	}
}

// Every fidelity's rules are among those kept.
func TestFidelitiesHaveTheirRules(t *testing.T) {
	for _, f := range []Fidelity{Draft, Standard, Fine} {
		s, ok := f.settings()
		if !ok {
			t.Fatalf("no fidelity %q", f)
		}
		for what, n := range map[string]int{
			"points": s.points, "edge": s.edge, "graded and frill": s.graded + 4,
			"smooth and aside": s.smooth + 1, "apart": s.apart, "gram": s.degree + 2,
		} {
			if n < 1 || n > mostNodes {
				t.Errorf("%s, %s: %d nodes; 1 to %d are kept", f, what, n, mostNodes)
			}
		}
		if s.degree+1 > maxOrder {
			t.Errorf("%s: degree %d; at most %d is due", f, s.degree, maxOrder-1)
		}
	}
}
