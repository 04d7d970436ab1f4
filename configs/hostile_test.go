package configs

import (
	"fmt"
	"strings"
	"testing"
)

// Files made to hurt are refused, with a message of a page at most.
func TestHostileFiles(t *testing.T) {
	var aliases strings.Builder
	aliases.WriteString("a0: &a0 [x, x, x, x, x, x, x, x, x, x]\n")
	for i := range 30 {
		fmt.Fprintf(&aliases, "a%d: &a%d [*a%d, *a%d, *a%d, *a%d]\n", i+1, i+1, i, i, i, i)
	}
	keys := func(equals string) string {
		var b strings.Builder
		for i := range 3000 {
			fmt.Fprintf(&b, "key%d%s 1\n", i, equals)
		}
		return b.String()
	}
	for _, c := range []struct {
		name   string
		format Format
		text   string
		key    string // of the fault that must be among those found
		what   string
	}{
		{"aliases of aliases", YAML, aliases.String(), "a0", "has an anchor, &a0"},
		{"an anchor", YAML, "title: &t x\n", "title", "has an anchor, &t"},
		{"an alias", YAML, "cone: &c 15 deg\ntitle: *c\n", "title", "refers to an anchor, *c"},
		{"an alias of itself", YAML, "title: &t [*t]\n", "title", "has an anchor"},
		{"an anchor on a key", YAML, "&k title: x\n", "", "a key here is not a plain word"},
		{"an alias for a key", YAML, "title: &k x\n*k : 3\n", "", "a key here is not a plain word"},
		{"a merge", YAML, "feed: &f {impedance: 50 ohm}\nband: {<<: *f}\n", "band.<<", "merge keys are not taken"},
		{"a tag", YAML, "title: !shell rm\n", "title", "has the tag !shell"},
		{"a tag of bytes", YAML, "title: !!binary aGVsaXg=\n", "title", "has the tag"},
		{"a tag on a list", YAML, "aims: !!set {gain}\n", "aims", "is a block of keys, not a list"},
		{"a list for a key", YAML, "[a, b]: 3\n", "", "a key here is not a plain word"},
		{"a block for a key", YAML, "? {a: b}\n: 3\n", "", "a key here is not a plain word"},
		{"a second document", YAML, soundBrief + "---\ntitle: another\n", "", "a second document starts here"},
		{"a second document, broken", YAML, soundBrief + "---\ntitle: [\n", "", "is no valid YAML"},
		{"brackets in YAML", YAML, "aims: " + strings.Repeat("[", 500_000), "", "is no valid YAML: exceeded max depth"},
		{"braces in YAML", YAML, strings.Repeat("{band: ", 100_000), "", "is no valid YAML: exceeded max depth"},
		{"lists in YAML", YAML, strings.Repeat("- ", 500_000), "", "is no valid YAML: exceeded max depth"},
		{"brackets in TOML", TOML, "aims = " + strings.Repeat("[", 500_000), "", "is no valid TOML: toml: arrays and inline tables are nested more"},
		{"dots in TOML", TOML, "aims" + strings.Repeat(".a", 10_000) + " = 1\n", "aims", "is a block of keys, not a list"},
		{"tables in TOML", TOML, strings.Repeat("[[aims]]\n", 10_000), "aims", "holds 10000"},
		{"a table in a table's list", TOML, "[[aims]]\n[aims.figure]\n[[aims.want]]\n", "aims[1].figure", "is a block of keys"},
		{"a date in TOML", TOML, "seed = 1979-05-27T07:32:00Z\n", "seed", `"1979-05-27T07:32:00Z" is not a number`},
		{"not a number in TOML", TOML, "cone = nan\n", "cone", "is not a finite number"},
		{"infinity in TOML", TOML, "cone = -inf\n", "cone", "is not a finite number"},
		{"hexadecimal in TOML", TOML, "seed = 0x10\n", "seed", `follows a plain number`},
		{"brackets in JSON", JSON, strings.Repeat("[", 1_000_000), "", "exceeded max depth"},
		{"braces in JSON", JSON, strings.Repeat(`{"band":`, 100_000), "", "exceeded max depth"},
		{"deep but sound JSON", JSON, `{"aims":` + strings.Repeat("[", 9000) + strings.Repeat("]", 9000) + "}", "aims[1]", "is a list"},
		{"a key twice in JSON", JSON, "{\"seed\": 1,\n\"seed\": 2}", "seed", "a second time, first on line 1"},
		{"a number beyond doubles in JSON", JSON, `{"seed": 1e400}`, "seed", "is out of all range"},
		{"digits without end", JSON, `{"seed": ` + strings.Repeat("9", 100_000) + "}", "seed", "is out of range"},
		{"zeros without end", YAML, "cone: 1" + strings.Repeat("0", 100_000) + " deg\n", "cone", "is not an angle"},
		{"an exponent without end", YAML, "cone: 1e" + strings.Repeat("9", 100) + " deg\n", "cone", "is out of all range"},
		{"times without end", YAML, "budget: {time: " + strings.Repeat("1s", 100_000) + "}\n", "budget.time", "is not a time"},
		{"a word without end", YAML, "sense: " + strings.Repeat("right", 10_000) + "\n", "sense", "is not known here"},
		{"a key without end", TOML, strings.Repeat("k", 100_000) + " = 1\n", strings.Repeat("k", 37) + "…", "is no key here"},
		{"keys without end in YAML", YAML, keys(":"), "key0", "is no key here"},
		{"keys without end in TOML", TOML, keys(" ="), "key2999", "is no key here"},
		{"letters that steer a terminal", JSON, `{"title": "\u001b[2J", "sense": "\u0007\u001b]0;x\u0007"}`, "sense", "is not known here"},
		{"letters that steer a terminal, in TOML", TOML, "\"\\u001b[2J\\n\" = 1\n\"\\u001b[2J\\n\" = 1\n", "", "is already defined"},
		{"letters that turn a line about", YAML, `title: "a\u2028b"` + "\n" + `sense: "\u202eright"`, "sense", "is not known here"},
		{"a NUL, escaped", YAML, `title: "a\0b"`, "title", "more than a line"},
		{"a path of its own", YAML, "start_from: [/dev/null/own.yaml]\n", "", "cannot be looked at"},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := ParseBrief("b", []byte(c.text), c.format)
			found := false
			for _, f := range allFaults(t, err) {
				checkMessage(t, &f)
				found = found || f.Key == c.key && strings.Contains(f.What, c.what)
			}
			message := err.Error()
			if !found {
				t.Errorf("nothing says %s: …%s…:\n%s", c.key, c.what, message)
			}
			if lines := strings.Count(message, "\n"); lines > mostFaults || len(message) > 500*mostFaults {
				t.Errorf("the message has %d lines and %d bytes", lines, len(message))
			}
		})
	}
}

// A message spells out so many faults and counts the rest; all of them can
// be had one by one.
func TestManyFaults(t *testing.T) {
	_, err := ParseDesign("d.yaml", []byte(soundDesign+strings.Repeat("seed: 1\n", 30)), YAML)
	faults := allFaults(t, err)
	if len(faults) != 30 {
		t.Fatalf("%d faults, want 30", len(faults))
	}
	lines := strings.Split(err.Error(), "\n")
	if len(lines) != mostFaults+1 || lines[mostFaults] != "and 10 more" {
		t.Errorf("%d lines, the last %q", len(lines), lines[len(lines)-1])
	}
	all := err.(*Error).Unwrap()
	if len(all) != 30 || all[29].Error() != faults[29].Error() {
		t.Errorf("%d errors to unwrap, the last %v", len(all), all[29])
	}
}

func TestFaultsWithoutAFile(t *testing.T) {
	for _, c := range []struct {
		fault Fault
		want  string
	}{
		{Fault{What: "is wrong"}, "is wrong"},
		{Fault{Key: "--seed", What: "is wrong", Remedy: "mend it"}, "--seed: is wrong; mend it"},
		{Fault{File: "a.yaml", What: "is wrong"}, "a.yaml: is wrong"},
		{Fault{File: "a.yaml", Line: 3, Key: "seed", What: "is wrong", Remedy: "mend it"}, "a.yaml:3: seed: is wrong; mend it"},
	} {
		if got := c.fault.Error(); got != c.want {
			t.Errorf("%q, want %q", got, c.want)
		}
	}
}
