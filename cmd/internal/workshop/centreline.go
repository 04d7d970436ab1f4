package workshop

import (
	"bytes"
	"encoding/csv"
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"turnwise/cmd/internal/workshop/drawing"
	"turnwise/models/helix"
)

// perTurnCSV is how many points of the centre line a turn has: every 5°.
const perTurnCSV = 72

// node is a point of the centre line.
type node struct {
	T, Arc float64
	At     r3.Vec
}

// centreLine is the wire's centre line from the foot of the riser to the
// open end.
func centreLine(c *helix.Curve) []node {
	top := c.At(0).Pos
	nodes := []node{{At: r3.Vec{X: top.X, Y: top.Y}}}
	n := int(math.Ceil(c.Turns()*perTurnCSV - 1e-9))
	for i := range n + 1 {
		t := math.Min(float64(i)/perTurnCSV, c.Turns())
		nodes = append(nodes, node{t, c.Arc(t), c.At(t).Pos})
	}
	return nodes
}

// centreLineCSV lists the points in metres.
func centreLineCSV(c *helix.Curve) []byte {
	var b bytes.Buffer
	w := csv.NewWriter(&b)
	w.Write([]string{"turns", "wire_length_m", "x_m", "y_m", "z_m"})
	const tenthOfMicrometre = 7
	for _, n := range centreLine(c) {
		w.Write([]string{
			fixed(n.T, 6), fixed(n.Arc, tenthOfMicrometre),
			signed(n.At.X, tenthOfMicrometre), signed(n.At.Y, tenthOfMicrometre), signed(n.At.Z, tenthOfMicrometre),
		})
	}
	w.Flush()
	return b.Bytes()
}

// signed is a fixed number of digits without a minus before zero.
func signed(x float64, digits int) string {
	if math.Abs(x) < 0.5*math.Pow(10, -float64(digits)) {
		x = 0
	}
	return fixed(x, digits)
}

// centreLineDXF is the same as a polyline in space, millimetres.
func centreLineDXF(c *helix.Curve, comment string) []byte {
	nodes := centreLine(c)
	points := make([][3]float64, len(nodes))
	for i, n := range nodes {
		points[i] = [3]float64{1e3 * n.At.X, 1e3 * n.At.Y, 1e3 * n.At.Z}
	}
	return drawing.Line3D(comment, points)
}
