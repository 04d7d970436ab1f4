package tolerance

import (
	"context"
	"testing"

	"turnwise/models"
	"turnwise/models/moment"
	"turnwise/objectives"
)

// bench is a small winding that every test can answer quickly.
func bench() models.Design {
	return models.Design{
		Title: "bench piece", Turns: 4, Diameter: models.Law{0.056}, Spacing: models.Law{0.040}, Handedness: models.Right,
		Conductor:  models.Conductor{Diameter: 0.002, Material: models.Material{Name: "copper", Conductivity: 58e6, Density: 8890, Permeability: 1}},
		Insulation: models.Insulation{Thickness: 0.0002, Permittivity: 2.3},
		Feed: models.Feed{Height: 0.005, Impedance: 50, Lead: models.Lead{Turns: 0.5, Spacing: 0.01, Shape: models.Ramp},
			Transformer: models.Transformer{Impedance: 85, Length: 0.044}},
	}
}

func band() models.Band { return models.Band{From: 1.66e9, To: 1.70e9, Samples: 3} }

// study is one of the bench piece under limits.
func study(sim models.Simulator, limits ...objectives.Limit) Study {
	return Study{
		Design: bench(), Rung: objectives.Rung{Simulator: sim, Model: "test"}, Spec: objectives.Spec{Band: band(), Limits: limits, Cone: 0.2},
		Spreads: Defaults(), Distribution: Uniform, Samples: 40, Seed: 1, Workers: 2,
	}
}

func fullWave(t testing.TB) models.Simulator {
	t.Helper()
	s, err := moment.New(moment.Draft)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func run(t testing.TB, s Study) *Result {
	t.Helper()
	res, err := s.Run(context.Background())
	if err != nil {
		t.Fatal(err)
	}
	return res
}

// toy answers with whatever reflection, or refusal, a function gives.
type toy func(d *models.Design, hz float64) (complex128, error)

func (f toy) Identity() string { return "toy" }

func (f toy) Simulate(_ context.Context, d models.Design, q models.Question) (models.Response, error) {
	r := models.Response{Answered: models.Axis}
	for _, hz := range q.Hz {
		g, err := f(&d, hz)
		if err != nil {
			return models.Response{}, err
		}
		z := complex(d.Feed.Impedance, 0) * (1 + g) / (1 - g)
		r.Samples = append(r.Samples, models.Sample{Hz: hz, Port: z, Input: z, Gain: models.Circular{Right: 10}, AxialRatio: 1, Sense: models.Right, Efficiency: 1})
	}
	return r, nil
}

// still answers the same whatever the design.
var still = toy(func(*models.Design, float64) (complex128, error) { return 0.2, nil })
