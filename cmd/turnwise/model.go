package main

import (
	"context"
	"errors"
	"fmt"
	"io"

	"turnwise/configs"
	"turnwise/models/closedform"
	"turnwise/models/external"
	"turnwise/models/moment"
	"turnwise/objectives"
)

// defaultModel answers simulate where no model is named.
const defaultModel = configs.FullWave

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
		return objectives.Rung{}, errors.New("an external model is named by a brief (model: {external: [program, argument]}); write full-wave or closed-form here")
	}
	return objectives.Rung{}, fmt.Errorf("--model %s: there is no such model; write full-wave or closed-form", model)
}

// newProblem binds a spec to the models that a brief names.
func newProblem(b configs.Brief, spec objectives.Spec) (*objectives.Problem, error) {
	if b.Ladder[0].Model == configs.ExternalModel {
		return externalProblem(b, spec)
	}
	var rungs []objectives.Rung
	for _, r := range b.Ladder {
		rung, err := newRung(r.Model, r.Fidelity)
		if err != nil {
			return nil, err
		}
		rungs = append(rungs, rung)
	}
	return objectives.NewProblem(spec, rungs...)
}

// mostPrograms bounds the processes of an external model; no more are started
// than there are questions at a time.
const mostPrograms = 4096

// externalProblem starts the program that a brief names.
func externalProblem(b configs.Brief, spec objectives.Spec) (*objectives.Problem, error) {
	program, err := external.Start(context.Background(), b.External.Command, external.Options{Workers: mostPrograms, Timeout: b.External.Timeout})
	if err != nil {
		return nil, fmt.Errorf("model.external: %w", err)
	}
	p, err := objectives.NewProblem(spec, objectives.Rung{Simulator: program, Model: configs.ExternalModel, Indicative: program.Indicative()})
	if err != nil {
		program.Close()
	}
	return p, err
}

// closeModels ends what the models of a problem have started.
func closeModels(p *objectives.Problem) {
	if p == nil {
		return
	}
	if c, ok := p.Finest().Simulator.(io.Closer); ok {
		c.Close()
	}
}

// unaskedProblem is a problem for ranking what was answered already.
func unaskedProblem(b configs.Brief, spec objectives.Spec) (*objectives.Problem, error) {
	r := b.Ladder[len(b.Ladder)-1]
	return objectives.NewProblem(spec, objectives.Rung{Model: r.Model, Fidelity: r.Fidelity, Indicative: r.Model == configs.ClosedForm})
}
