package configs

import (
	"fmt"
	"math"
	"os"
	"runtime"
	"sort"
	"strconv"
	"strings"
	"time"

	"github.com/spf13/pflag"
	"github.com/spf13/viper"
)

// Settings are what a command line, the environment and a brief may all say
// of a run.
type Settings struct {
	Run         string // folder; empty: the default name
	Evaluations int    // 0: not said
	For         time.Duration
	Workers     int
	Seed        uint64
	Fidelity    string // empty: as the brief's ladder has it
}

// settingKeys are the settings, each also an option and a variable.
var settingKeys = []string{"run", "evaluations", "for", "workers", "seed", "fidelity"}

// environmentPrefix begins the name of every variable.
const environmentPrefix = "TURNWISE_"

func variable(key string) string { return environmentPrefix + strings.ToUpper(key) }

// mostWorkers bounds the workers of a search.
const mostWorkers = 4096

// Resolve settles the settings of a run: options come before variables of
// the environment, those before the brief, the brief before the defaults.
// Flags that are not defined are not looked for. What is wrong is an [Error].
func Resolve(flags *pflag.FlagSet, br *Brief) (Settings, error) {
	v := viper.New()
	v.SetDefault("workers", strconv.Itoa(runtime.NumCPU()))
	file := map[string]any{"seed": strconv.FormatUint(br.Seed, 10)}
	if br.Budget.Evaluations > 0 {
		file["evaluations"] = strconv.Itoa(br.Budget.Evaluations)
	}
	if len(br.Ladder) == 1 { // a longer one has fidelities of its own
		file["fidelity"] = br.Ladder[0].Fidelity
	}
	if err := v.MergeConfigMap(file); err != nil {
		return Settings{}, err
	}
	r := &reader{}
	r.environment(os.Environ())
	for _, key := range settingKeys {
		if err := v.BindEnv(key, variable(key)); err != nil {
			return Settings{}, err
		}
		if f := flags.Lookup(key); f != nil {
			if err := v.BindPFlag(key, f); err != nil {
				return Settings{}, err
			}
		}
	}
	s := r.settings(v, flags)
	if err := r.err(); err != nil {
		return Settings{}, err
	}
	return s, nil
}

// environment notes variables with the program's prefix that mean nothing.
func (r *reader) environment(environ []string) {
	known := make([]string, len(settingKeys))
	for i, key := range settingKeys {
		known[i] = variable(key)
	}
	sort.Strings(environ)
	for _, e := range environ {
		name, _, _ := strings.Cut(e, "=")
		if strings.HasPrefix(name, environmentPrefix) && !contains(known, name) {
			r.add(0, name, "is no variable of this program", didYouMean(name, known))
		}
	}
}

// settings reads the settled texts.
func (r *reader) settings(v *viper.Viper, flags *pflag.FlagSet) Settings {
	var s Settings
	source := func(key string) string {
		if f := flags.Lookup(key); f != nil && f.Changed {
			return "--" + key
		}
		if os.Getenv(variable(key)) != "" {
			return variable(key)
		}
		return key
	}
	for _, key := range settingKeys {
		if source(key) != key && strings.TrimSpace(v.GetString(key)) == "" {
			r.add(0, source(key), "is empty", "give it a value, or leave it away")
		}
	}
	whole := func(key string, low, high int64) int64 {
		text := strings.TrimSpace(v.GetString(key))
		if text == "" {
			return 0
		}
		k, bad := wholeNumber(text)
		remedy := fmt.Sprintf("it should be a whole number from %d to %d", low, high)
		if bad != nil {
			r.add(0, source(key), bad.what, remedy)
		} else if k < low || k > high {
			r.add(0, source(key), clip(text)+" is out of range", remedy)
		}
		return k
	}
	s.Run = v.GetString("run")
	s.Evaluations = int(whole("evaluations", 1, mostEvaluations))
	s.Workers = int(whole("workers", 1, mostWorkers))
	s.Seed = uint64(whole("seed", 0, math.MaxInt64))
	if text := v.GetString("for"); text != "" {
		seconds, _, bad := parseQuantity(text, Time, false)
		switch {
		case bad != nil:
			r.add(0, source("for"), bad.what, bad.remedy)
		case !(seconds >= 1 && seconds <= 1e8):
			r.add(0, source("for"), quoted(text)+" is out of range", "it should be from 1 s to three years, for example 8h")
		}
		s.For = duration(seconds)
	}
	if s.Fidelity = v.GetString("fidelity"); s.Fidelity != "" && !contains(Fidelities, s.Fidelity) {
		r.add(0, source("fidelity"), quoted(s.Fidelity)+" is not known here", didYouMean(s.Fidelity, Fidelities))
	}
	return s
}

// Apply puts the settings that belong to the brief into it.
func (s Settings) Apply(br *Brief) {
	br.Seed = s.Seed
	if s.Evaluations > 0 {
		br.Budget.Evaluations = s.Evaluations
	}
	for i := range br.Ladder {
		if br.Ladder[i].Fidelity != "" && s.Fidelity != "" {
			br.Ladder[i].Fidelity = s.Fidelity
		}
	}
}
