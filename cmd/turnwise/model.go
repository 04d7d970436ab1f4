package main

import (
	"errors"
	"fmt"

	"turnwise/configs"
	"turnwise/models/closedform"
	"turnwise/models/moment"
	"turnwise/objectives"
)

// defaultModel answers simulate where no model is named.
const defaultModel = configs.FullWave

// errNotYet names what a brief may ask for and this version cannot give.
var errNotYet = errors.New("is not in this version")

// newRung makes one step of a ladder of models.
func newRung(model, fidelity string) (objectives.Rung, error) {
	switch model {
	case configs.ClosedForm:
		if fidelity != "" {
			return objectives.Rung{}, fmt.Errorf("--fidelity %s: the closed-form model has no fidelity; leave it away", fidelity)
		}
		return objectives.Rung{Simulator: closedform.New(), Model: model, Indicative: true}, nil
	case configs.FullWave:
		if fidelity == "" {
			fidelity = string(moment.Standard)
		}
		solver, err := moment.New(moment.Fidelity(fidelity))
		return objectives.Rung{Simulator: solver, Model: model, Fidelity: fidelity}, err
	case configs.ExternalModel:
		return objectives.Rung{}, fmt.Errorf("model %s %w; write model: full-wave", model, errNotYet)
	}
	return objectives.Rung{}, fmt.Errorf("--model %s: there is no such model; write full-wave or closed-form", model)
}

// newProblem binds a spec to the models that a brief names.
func newProblem(b configs.Brief, spec objectives.Spec) (*objectives.Problem, error) {
	if len(b.Ladder) > 1 {
		return nil, fmt.Errorf("model: a ladder of models %w; name one model", errNotYet)
	}
	if spec.Margins.Percentile > 0 {
		return nil, fmt.Errorf("margins: a percentile %w; write at: worst", errNotYet)
	}
	rung, err := newRung(b.Ladder[0].Model, b.Ladder[0].Fidelity)
	if err != nil {
		return nil, err
	}
	return objectives.NewProblem(spec, rung)
}
