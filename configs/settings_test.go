package configs

import (
	"os"
	"runtime"
	"strconv"
	"strings"
	"testing"
	"time"

	"github.com/spf13/pflag"
)

// options are the flags of a search, as a command defines them.
func options() *pflag.FlagSet {
	f := pflag.NewFlagSet("search", pflag.ContinueOnError)
	for _, key := range settingKeys {
		f.String(key, "", "")
	}
	return f
}

// bareEnvironment takes every variable of the program away for a test.
func bareEnvironment(t *testing.T) {
	t.Helper()
	for _, e := range os.Environ() {
		if name, _, _ := strings.Cut(e, "="); strings.HasPrefix(name, environmentPrefix) {
			t.Setenv(name, "") // to be put back afterwards
			if err := os.Unsetenv(name); err != nil {
				t.Fatal(err)
			}
		}
	}
}

// settingLevels are, for each setting, what each level may say and how it
// comes out: default, file, environment, option, the later before the
// earlier. An empty text is a level that has no say.
var settingLevels = []struct {
	key             string
	file, env, flag string
	fromDefault     string
	inFile          [2]string // the edit that says it in the brief, if any is needed
	unsaid          [2]string // the edit that makes the brief say nothing
	get             func(Settings) string
}{
	{
		key: "run", env: "from-env", flag: "from-flag", fromDefault: "",
		get: func(s Settings) string { return s.Run },
	},
	{
		key: "evaluations", file: "4000", env: "4100", flag: "4200", fromDefault: "0", unsaid: [2]string{"  evaluations: 4000\n", ""},
		get: func(s Settings) string { return strconv.Itoa(s.Evaluations) },
	},
	{
		key: "for", env: "1h30m0s", flag: "8h0m0s", fromDefault: "0s",
		get: func(s Settings) string { return s.For.String() },
	},
	{
		key: "workers", env: "3", flag: "5", fromDefault: strconv.Itoa(runtime.NumCPU()),
		get: func(s Settings) string { return strconv.Itoa(s.Workers) },
	},
	{
		key: "seed", file: "7", env: "8", flag: "9223372036854775807", fromDefault: "1", unsaid: [2]string{"seed: 7\n", ""},
		get: func(s Settings) string { return strconv.FormatUint(s.Seed, 10) },
	},
	{
		key: "fidelity", file: "fine", env: "draft", flag: "standard", fromDefault: "standard", inFile: [2]string{"fidelity: standard", "fidelity: fine"}, unsaid: [2]string{"fidelity: standard\n", ""},
		get: func(s Settings) string { return s.Fidelity },
	},
}

// Each setting under every choice of levels that say something: options come
// before the environment, that before the file, the file before the default.
func TestPrecedence(t *testing.T) {
	for _, c := range settingLevels {
		for said := range 8 {
			file, env, flag := said&1 != 0, said&2 != 0, said&4 != 0
			if file && c.file == "" {
				continue
			}
			t.Run(c.key+"/"+strconv.Itoa(said), func(t *testing.T) {
				bareEnvironment(t)
				want, change := c.fromDefault, c.unsaid
				if file {
					want, change = c.file, c.inFile
				}
				text := soundBrief
				if change[0] != "" {
					text = edit(t, text, change[0], change[1])
				}
				br := readBrief(t, text, YAML)
				flags := options()
				if env {
					want = c.env
					t.Setenv(variable(c.key), c.env)
				}
				if flag {
					want = c.flag
					if err := flags.Set(c.key, c.flag); err != nil {
						t.Fatal(err)
					}
				}
				s, err := Resolve(flags, &br)
				if err != nil {
					t.Fatal(err)
				}
				if got := c.get(s); got != want {
					t.Errorf("%s is %s, want %s", c.key, got, want)
				}
				others := Settings{Workers: runtime.NumCPU(), Seed: 7, Evaluations: 4000, Fidelity: "standard"}
				for _, o := range settingLevels {
					if o.key != c.key && o.get(s) != o.get(others) {
						t.Errorf("%s is %s, but only %s was said", o.key, o.get(s), c.key)
					}
				}
			})
		}
	}
}

// Values that no door takes, with what is said of them.
func TestBadSettings(t *testing.T) {
	for _, c := range []struct{ key, value, what, remedy string }{
		{"evaluations", "0", "0 is out of range", "from 1 to 1000000000"},
		{"evaluations", "-3", "-3 is out of range", "from 1 to 1000000000"},
		{"evaluations", "2.5", "2.5 is a fraction", "whole number"},
		{"evaluations", "1e30", "1e30 is out of range", "whole number"},
		{"evaluations", "1e99", "out of all range", "whole number"},
		{"evaluations", "many", `"many" is not a number`, "whole number"},
		{"evaluations", "1,000", "decimal comma", "whole number"},
		{"evaluations", "NaN", "not a finite number", "whole number"},
		{"workers", "0", "0 is out of range", "from 1 to 4096"},
		{"workers", "4097", "4097 is out of range", "from 1 to 4096"},
		{"workers", "08", "starts with a zero", "whole number"},
		{"seed", "-1", "-1 is out of range", "from 0 to 9223372036854775807"},
		{"seed", "9223372036854775808", "is out of range", "from 0 to 9223372036854775807"},
		{"for", "8", `"8" has no unit`, "10 min"},
		{"for", "0 s", `"0 s" is out of range`, "from 1 s to three years"},
		{"for", "4000 d", `"4000 d" is out of range`, "from 1 s to three years"},
		{"for", "8 hurs", `"hurs" is no unit`, "did you mean hours?"},
		{"fidelity", "best", `"best" is not known here`, "draft, standard or fine"},
		{"fidelity", "Fine", `"Fine" is not known here`, "did you mean fine?"},
		{"run", " ", "is empty", "leave it away"},
		{"seed", " ", "is empty", "leave it away"},
	} {
		t.Run(c.key+"="+c.value, func(t *testing.T) {
			bareEnvironment(t)
			br := readBrief(t, soundBrief, YAML)
			flags := options()
			if err := flags.Set(c.key, c.value); err != nil {
				t.Fatal(err)
			}
			_, err := Resolve(flags, &br)
			checkFaults(t, err, "", expected{0, "--" + c.key, c.what, c.remedy})
			t.Setenv(variable(c.key), c.value)
			_, err = Resolve(options(), &br)
			checkFaults(t, err, "", expected{0, variable(c.key), c.what, c.remedy})
		})
	}
}

// An option given as nothing, as a script does with a variable that is not
// set, is no way to say zero. A variable of the environment that is set to
// nothing is as good as not there.
func TestEmptySettings(t *testing.T) {
	bareEnvironment(t)
	br := readBrief(t, soundBrief, YAML)
	flags := options()
	var want []expected
	for _, key := range settingKeys {
		if err := flags.Set(key, ""); err != nil {
			t.Fatal(err)
		}
		want = append(want, expected{0, "--" + key, "is empty", "leave it away"})
	}
	_, err := Resolve(flags, &br)
	checkFaults(t, err, "", want...)

	for _, key := range settingKeys {
		t.Setenv(variable(key), "")
	}
	s, err := Resolve(options(), &br)
	if err != nil {
		t.Fatal(err)
	}
	equal(t, "settings", s, Settings{Evaluations: 4000, Workers: runtime.NumCPU(), Seed: 7, Fidelity: "standard"})
}

func TestUnknownVariables(t *testing.T) {
	bareEnvironment(t)
	br := readBrief(t, soundBrief, YAML)
	t.Setenv("TURNWISE_EVALUATION", "4000")
	t.Setenv("TURNWISE_", "1")
	t.Setenv("TURNWISE_seed", "1")
	t.Setenv("TURNWISER_SEED", "1") // another program's
	t.Setenv("TURNWISE_WORKERS", "none")
	_, err := Resolve(options(), &br)
	checkFaults(t, err, "",
		expected{0, "TURNWISE_", "is no variable of this program", "TURNWISE_"},
		expected{0, "TURNWISE_EVALUATION", "is no variable of this program", "did you mean TURNWISE_EVALUATIONS?"},
		expected{0, "TURNWISE_seed", "is no variable of this program", "did you mean TURNWISE_SEED?"},
		expected{0, "TURNWISE_WORKERS", `"none" is not a number`, "whole number"},
	)
}

// Flags that a command does not have are not looked for.
func TestResolveWithoutFlags(t *testing.T) {
	bareEnvironment(t)
	br := readBrief(t, soundBrief, YAML)
	t.Setenv("TURNWISE_FOR", "90 s")
	s, err := Resolve(pflag.NewFlagSet("check", pflag.ContinueOnError), &br)
	if err != nil {
		t.Fatal(err)
	}
	equal(t, "settings", s, Settings{Evaluations: 4000, For: 90 * time.Second, Workers: runtime.NumCPU(), Seed: 7, Fidelity: "standard"})
}

// A ladder has fidelities of its own, until one is asked for; a model that
// has none never gets one.
func TestApply(t *testing.T) {
	ladder := [2]string{"model: full-wave", "model: {ladder: [closed-form, full-wave draft, full-wave standard]}"}
	for _, c := range []struct {
		name string
		edit [2]string
		flag string
		want []Rung
	}{
		{"plain", [2]string{"seed: 7", "seed: 8"}, "", []Rung{{FullWave, "standard"}}},
		{"plain, asked for", [2]string{"seed: 7", "seed: 8"}, "draft", []Rung{{FullWave, "draft"}}},
		{"ladder", ladder, "", []Rung{{Model: ClosedForm}, {FullWave, "draft"}, {FullWave, "standard"}}},
		{"ladder, asked for", ladder, "fine", []Rung{{Model: ClosedForm}, {FullWave, "fine"}, {FullWave, "fine"}}},
		{"ladder, its last asked for", ladder, "standard", []Rung{{Model: ClosedForm}, {FullWave, "standard"}, {FullWave, "standard"}}},
		{"closed form", [2]string{"model: full-wave", "model: closed-form"}, "fine", []Rung{{Model: ClosedForm}}},
		{"ladder of full waves", [2]string{"model: full-wave", "model: {ladder: [full-wave draft, full-wave fine]}"}, "", []Rung{{FullWave, "draft"}, {FullWave, "fine"}}},
	} {
		t.Run(c.name, func(t *testing.T) {
			bareEnvironment(t)
			br := readBrief(t, edit(t, soundBrief, c.edit[0], c.edit[1]), YAML)
			flags := options()
			if c.flag != "" {
				if err := flags.Set("fidelity", c.flag); err != nil {
					t.Fatal(err)
				}
			}
			for key, value := range map[string]string{"seed": "11", "evaluations": "12"} {
				if err := flags.Set(key, value); err != nil {
					t.Fatal(err)
				}
			}
			s, err := Resolve(flags, &br)
			if err != nil {
				t.Fatal(err)
			}
			s.Apply(&br)
			equal(t, "ladder", br.Ladder, c.want)
			if br.Seed != 11 || br.Budget.Evaluations != 12 {
				t.Errorf("seed %d, evaluations %d", br.Seed, br.Budget.Evaluations)
			}
			rereadBrief(t, br, "applied.yaml")
			Settings{Seed: 13}.Apply(&br)
			if br.Budget.Evaluations != 12 {
				t.Errorf("evaluations %d, though none were said", br.Budget.Evaluations)
			}
		})
	}
}
