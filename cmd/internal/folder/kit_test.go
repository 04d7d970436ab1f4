package folder

import (
	"context"
	"math"
	"testing"

	"turnwise/models"
	"turnwise/objectives"
	"turnwise/optimize"
	"turnwise/optimize/space"
)

// mute is a model that is named and never asked.
type mute struct{}

func (mute) Identity() string { return "mute 1" }

func (mute) Simulate(context.Context, models.Design, models.Question) (models.Response, error) {
	panic("asked")
}

// problem varies turns, a law and the stock, and aims at gain before length.
func problem(t testing.TB) *objectives.Problem {
	t.Helper()
	copper := models.Material{Name: "copper", Conductivity: 58e6, Density: 8890}
	p, err := objectives.NewProblem(objectives.Spec{
		Title: "test",
		Band:  models.Band{From: 0.98e9, To: 1.02e9, Samples: 5},
		Base: models.Design{
			Handedness: models.Right, Spacing: models.Law{0.066},
			Feed: models.Feed{Impedance: 50, Height: 6e-3},
		},
		Vary: []objectives.Vary{
			{Quantity: objectives.Turns, From: 3, To: 12, Step: 0.25, Knots: 1},
			{Quantity: objectives.Diameter, From: 0.06, To: 0.13, Knots: 2},
			{Quantity: objectives.Conductor, Knots: 1},
		},
		Stock: []objectives.Stock{
			{Name: "2 mm copper", Diameter: 2e-3, Material: copper},
			{Name: `rod, 1/8"`, Diameter: 3.175e-3, Material: copper},
		},
		Aims: []objectives.Aim{{Figure: objectives.Gain, Most: true}, {Figure: objectives.Length}},
		Cone: 0.2,
	}, objectives.Rung{Simulator: mute{}, Model: "full-wave", Fidelity: "standard"})
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// answer is an evaluation of the problem with these aims, in minimise form.
func answer(turns, diameter, stock, gain, length float64) optimize.Evaluation {
	e := optimize.Evaluation{Status: optimize.OK}
	e.Point = space.Point{turns, diameter, diameter, stock}
	e.Figures = make([]float64, objectives.FigureCount)
	for f := range e.Figures {
		e.Figures[f] = math.NaN()
	}
	e.Figures[objectives.Gain], e.Figures[objectives.Length] = gain, length
	e.Aims = []float64{-gain, length}
	return e
}

// members makes a front of evaluations.
func members(es ...optimize.Evaluation) []optimize.Member {
	ms := make([]optimize.Member, len(es))
	for i, e := range es {
		ms[i] = optimize.Member{Evaluation: e, Checked: true}
	}
	return ms
}
