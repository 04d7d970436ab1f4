package configs

import (
	"embed"
	"path"
	"strings"
)

//go:embed briefs/*.yaml
var briefFiles embed.FS

// DefaultScenario is the built-in brief that runs where none is named.
const DefaultScenario = "balloon-downlink"

// Scenario is a built-in brief.
type Scenario struct{ Name, Summary string }

// Scenarios lists the built-in briefs, the default first.
func Scenarios() []Scenario {
	files, err := briefFiles.ReadDir("briefs")
	if err != nil {
		panic("configs: the built-in briefs are missing: " + err.Error())
	}
	var out []Scenario
	for _, f := range files {
		name := strings.TrimSuffix(f.Name(), ".yaml")
		text, err := ScenarioText(name)
		if err != nil {
			panic(err)
		}
		first, _, _ := strings.Cut(string(text), "\n")
		s := Scenario{name, strings.TrimSpace(strings.TrimPrefix(first, "#"))}
		if name == DefaultScenario {
			out = append([]Scenario{s}, out...)
		} else {
			out = append(out, s)
		}
	}
	return out
}

// ScenarioText is a built-in brief as it stands, comments and all.
func ScenarioText(name string) ([]byte, error) {
	text, err := briefFiles.ReadFile(path.Join("briefs", name+".yaml"))
	if err != nil {
		var names []string
		files, _ := briefFiles.ReadDir("briefs")
		for _, f := range files {
			names = append(names, strings.TrimSuffix(f.Name(), ".yaml"))
		}
		return nil, &Error{[]Fault{{Key: "scenario", What: quoted(name) + " is no built-in brief", Remedy: didYouMean(name, names)}}}
	}
	return text, nil
}

// ReadScenario reads a built-in brief.
func ReadScenario(name string) (Brief, error) {
	text, err := ScenarioText(name)
	if err != nil {
		return Brief{}, err
	}
	return ParseBrief(name+".yaml", text, YAML)
}

// ParseFrequency reads a frequency such as 1.66GHz, in Hz.
func ParseFrequency(text string) (float64, error) {
	x, err := Parse(text, Frequency)
	if err == nil && !(x >= frequencies.low && x <= frequencies.high) {
		return 0, &Error{[]Fault{{What: quoted(text) + " is out of range", Remedy: "it should be from " + show(frequencies.low, Frequency) + " to " + show(frequencies.high, Frequency)}}}
	}
	return x, err
}
