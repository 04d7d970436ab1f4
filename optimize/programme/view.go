package programme

import (
	"turnwise/optimize"
	"turnwise/optimize/genetic"
	"turnwise/optimize/space"
)

// view runs the genetic searcher in a view of the space and asks what it asks
// as points of the whole space.
type view struct {
	search *genetic.Search
	lift   func(space.Point) space.Point // to the next view
	whole  func(space.Point) space.Point
	asked  []space.Point         // of the view
	told   []optimize.Evaluation // with points of the view
}

var _ optimize.Searcher = (*view)(nil)
var _ optimize.Explainer = (*view)(nil)

// newView starts from what the view before has found.
func newView(d optimize.Domain, at int, before *view, c genetic.Config) *view {
	v := &view{lift: d.Views[at].Lift}
	v.whole = func(p space.Point) space.Point {
		for _, finer := range d.Views[at:] {
			p = finer.Lift(p)
		}
		return d.Space.Canonical(p)
	}
	small := d
	small.Space, small.Views = d.Views[at].Space, nil
	if d.Screen != nil {
		small.Screen = func(p space.Point) (float64, string) { return d.Screen(v.whole(p)) }
	}
	var start []optimize.Evaluation
	if before != nil {
		for _, e := range before.told {
			e.Point = small.Space.Canonical(before.lift(e.Point))
			start = append(start, e)
		}
	}
	c.Seed += uint64(at) << 32
	v.search = genetic.New(small, c, start)
	return v
}

// Ask gives the next generation, lifted.
func (v *view) Ask() []optimize.Candidate {
	batch := v.search.Ask()
	v.asked = v.asked[:0]
	for i := range batch {
		v.asked = append(v.asked, batch[i].Point)
		batch[i].Point = v.whole(batch[i].Point)
	}
	return batch
}

// Tell hands the answers on under the view's own points.
func (v *view) Tell(batch []optimize.Evaluation) {
	own := make([]optimize.Evaluation, len(batch))
	for i := range batch {
		own[i] = batch[i]
		own[i].Point = v.asked[i]
	}
	v.told = append(v.told, own...)
	v.search.Tell(own)
}

// Explain says why the searcher of the view is done.
func (v *view) Explain() string { return v.search.Explain() }
