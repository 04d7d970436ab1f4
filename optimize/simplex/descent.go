package simplex

import (
	gonum "gonum.org/v1/gonum/optimize"
)

// descent is one Nelder–Mead simplex, asked for its next vertex and told that
// vertex's value. It runs gonum's method in a goroutine of its own that only
// ever waits for the other side, so that nothing depends on scheduling.
type descent struct {
	ask    chan gonum.Task
	answer chan gonum.Task
	task   gonum.Task
	open   bool
	owed   bool // the method waits for an answer
}

// descend starts a simplex of the given size at x.
func descend(x []float64, size float64) *descent {
	d := &descent{ask: make(chan gonum.Task), answer: make(chan gonum.Task), open: true}
	method := &gonum.NelderMead{SimplexSize: size}
	method.Init(len(x), 1)
	start := gonum.Task{ID: 0, Location: &gonum.Location{X: append([]float64(nil), x...)}}
	go method.Run(d.ask, d.answer, []gonum.Task{start})
	return d
}

// next is the vertex whose value is wanted, in the unbounded coordinates of
// the method; nil when the method has nothing more to ask.
func (d *descent) next() []float64 {
	for d.open {
		d.task, d.owed = <-d.ask, true
		switch d.task.Op {
		case gonum.FuncEvaluation:
			return d.task.X
		case gonum.MethodDone:
			d.end()
		default: // a major iteration: convergence is judged by the search
			d.reply()
		}
	}
	return nil
}

// tell gives the value of the vertex that next asked for.
func (d *descent) tell(value float64) {
	d.task.F = value
	d.reply()
}

func (d *descent) reply() {
	d.owed = false
	d.answer <- d.task
}

// end stops the simplex and its goroutine, wherever it stands.
func (d *descent) end() {
	if !d.open {
		return
	}
	d.open = false
	if !d.owed {
		d.task = <-d.ask
	}
	d.task.Op = gonum.PostIteration
	d.reply()
	close(d.answer)
	for range d.ask {
	}
}
