package configs

import (
	"errors"
	"math"
	"math/big"
	"regexp"
	"strings"
	"time"
	"unicode"
)

// Dimension is what a quantity measures; it decides the units it may have.
type Dimension int

// The dimensions, with the unit that their values have inside the program.
const (
	Length          Dimension = iota // m
	Frequency                        // Hz
	Angle                            // degrees
	Revolution                       // turns
	Decibel                          // dB
	CircularDecibel                  // dBic
	Impedance                        // Ω
	Power                            // W
	Time                             // s
	Percent                          // per cent
	Conductivity                     // S/m
	Density                          // kg/m³
	Mass                             // kg
	Plain                            // a number without unit
	dimensionCount  int       = iota // for the tests
)

// unit is one way to write a dimension. The scale takes a number of them to
// the program's own unit, exactly where the unit is defined exactly.
type unit struct {
	name  string
	scale *big.Rat
	// cased marks a unit that another case would make a different one, a
	// thousand or a million times away: it is taken in this case only.
	cased bool
}

func u(name, scale string) unit {
	r, ok := new(big.Rat).SetString(scale)
	if !ok {
		panic("configs: bad scale " + scale)
	}
	return unit{name: name, scale: r}
}

func cased(name, scale string) unit {
	one := u(name, scale)
	one.cased = true
	return one
}

// dimensions holds, for each dimension, its name with its article, an example that is right,
// its units with the usual one first, and the spellings that are refused
// because they read as another unit than the one that was surely meant.
var dimensions = [dimensionCount]struct {
	name    string
	example string
	units   []unit
	unclear map[string]string
	bare    bool // a number alone is right
}{
	Length: {name: "a length", example: "58 mm", units: []unit{
		u("mm", "1e-3"), u("m", "1"), u("cm", "1e-2"), u("um", "1e-6"), u("µm", "1e-6"), u("μm", "1e-6"), u("km", "1e3"),
		u("in", "0.0254"), u("inch", "0.0254"), u("inches", "0.0254"), u("ft", "0.3048"),
	}, unclear: map[string]string{"Mm": "mm", "M": "m", "Km": "km"}},
	Frequency: {name: "a frequency", example: "1.68 GHz", units: []unit{
		u("GHz", "1e9"), u("MHz", "1e6"), u("kHz", "1e3"), u("Hz", "1"),
	}, unclear: map[string]string{"mHz": "MHz"}},
	Angle: {name: "an angle", example: "13 deg", units: []unit{
		u("deg", "1"), u("degree", "1"), u("degrees", "1"), u("°", "1"), {name: "rad", scale: new(big.Rat).SetFloat64(180 / math.Pi)},
	}},
	Revolution:      {name: "a number of turns", example: "0.25 turn", units: []unit{u("turn", "1"), u("turns", "1")}, bare: true},
	Decibel:         {name: "a level", example: "1.5 dB", units: []unit{u("dB", "1")}},
	CircularDecibel: {name: "a gain", example: "11.5 dBic", units: []unit{u("dBic", "1")}},
	Impedance: {name: "an impedance", example: "50 ohm", units: []unit{
		u("ohm", "1"), u("ohms", "1"), u("Ω", "1"), u("Ω", "1"), cased("kohm", "1e3"), cased("kΩ", "1e3"),
	}},
	Power: {name: "a power", example: "2 W", units: []unit{u("W", "1"), cased("mW", "1e-3"), u("kW", "1e3")}, unclear: map[string]string{"MW": "mW"}},
	Time: {name: "a time", example: "10 min", units: []unit{
		u("min", "60"), u("h", "3600"), u("s", "1"), u("ms", "1e-3"), u("d", "86400"), u("m", "60"),
		u("hour", "3600"), u("hours", "3600"), u("minute", "60"), u("minutes", "60"), u("second", "1"), u("seconds", "1"), u("day", "86400"), u("days", "86400"),
	}, unclear: map[string]string{"M": "min", "Ms": "ms", "MS": "ms"}},
	Percent:      {name: "a share", example: "10 %", units: []unit{u("%", "1"), u("percent", "1")}},
	Conductivity: {name: "a conductivity", example: "58 MS/m", units: []unit{cased("MS/m", "1e6"), cased("S/m", "1")}},
	Density: {name: "a density", example: "8.9 g/cm3", units: []unit{
		u("g/cm3", "1e3"), u("g/cm³", "1e3"), u("kg/m3", "1"), u("kg/m³", "1"),
	}},
	Mass: {name: "a mass", example: "350 g", units: []unit{
		u("g", "1e-3"), u("kg", "1"), cased("mg", "1e-6"), u("oz", "0.028349523125"), u("lb", "0.45359237"),
	}, unclear: map[string]string{"Mg": "mg", "MG": "mg"}},
	Plain: {name: "a number", example: "2", bare: true},
}

// wavelength is the unit of lengths that a brief's band gives a size.
const wavelength = "wl"

// numberShape is a decimal number and whatever follows it.
var numberShape = regexp.MustCompile(`^([+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+-]?[0-9]+)?)\s*(.*)$`)

// commaShape is a number written with a decimal comma.
var commaShape = regexp.MustCompile(`^([+-]?[0-9]+),([0-9]+)(.*)$`)

// complaint is what is wrong with a value and what would be right.
type complaint struct{ what, remedy string }

// Parse reads a quantity, a number with its unit, in the dimension's own unit
// (see the constants). A number alone is right only for turns and plain
// numbers.
func Parse(text string, d Dimension) (float64, error) {
	x, _, bad := parseQuantity(text, d, false)
	if bad != nil {
		return 0, errors.New(bad.what + "; " + bad.remedy)
	}
	return x, nil
}

// duration is a time in seconds, to the millisecond.
func duration(seconds float64) time.Duration {
	return time.Duration(math.Round(seconds*1e3)) * time.Millisecond
}

// parseQuantity is Parse with the complaint in two parts; inWavelengths
// reports a length that still wants multiplying by one.
func parseQuantity(text string, d Dimension, wavelengths bool) (x float64, inWavelengths bool, bad *complaint) {
	text = strings.TrimSpace(text)
	if len(text) > mostText {
		return 0, false, &complaint{quoted(text) + " is not " + dimensions[d].name, "write " + dimensions[d].name + ", for example " + dimensions[d].example}
	}
	if d == Time {
		x, bad = parseTime(text)
		return x, false, bad
	}
	number, name, bad := splitQuantity(text, d)
	if bad != nil {
		return 0, false, bad
	}
	if name == "" {
		if !dimensions[d].bare {
			return 0, false, &complaint{quoted(text) + " has no unit", "write " + dimensions[d].name + " with its unit, for example " + dimensions[d].example}
		}
		x, bad = scaled(number, big.NewRat(1, 1))
		return x, false, bad
	}
	if d == Length && strings.EqualFold(name, wavelength) {
		if !wavelengths {
			return 0, false, &complaint{"wavelengths have no size here", "write a length in mm, for example " + dimensions[Length].example}
		}
		x, bad = scaled(number, big.NewRat(1, 1))
		return x, true, bad
	}
	unit, bad := findUnit(name, d, wavelengths)
	if bad != nil {
		return 0, false, bad
	}
	x, bad = scaled(number, unit.scale)
	return x, false, bad
}

// splitQuantity parts a number from its unit.
func splitQuantity(text string, d Dimension) (number, name string, bad *complaint) {
	example := "write " + dimensions[d].name + ", for example " + dimensions[d].example
	if c := commaShape.FindStringSubmatch(text); c != nil {
		return "", "", &complaint{quoted(text) + " has a decimal comma", "write " + clip(c[1]+"."+c[2]+c[3]) + ", with a point"}
	}
	m := numberShape.FindStringSubmatch(text)
	switch lower := strings.ToLower(strings.TrimLeft(text, "+-.")); {
	case m == nil && (strings.HasPrefix(lower, "nan") || strings.HasPrefix(lower, "inf")):
		return "", "", &complaint{quoted(text) + " is not a finite number", example}
	case m == nil:
		return "", "", &complaint{quoted(text) + " is not a number with a unit", example}
	}
	return m[1], strings.TrimSpace(m[2]), nil
}

// findUnit finds a unit by its name, whatever the case unless the case
// matters.
func findUnit(name string, d Dimension, wavelengths bool) (*unit, *complaint) {
	info := &dimensions[d]
	for i := range info.units {
		if info.units[i].name == name {
			return &info.units[i], nil
		}
	}
	if meant, ok := info.unclear[name]; ok {
		return nil, &complaint{"the unit " + name + " is not what was meant, surely", "write " + meant}
	}
	for i := range info.units {
		if !info.units[i].cased && strings.EqualFold(info.units[i].name, name) {
			return &info.units[i], nil
		}
	}
	if len(info.units) == 0 {
		return nil, &complaint{quoted(name) + " follows a plain number", "write the number alone, for example " + info.example}
	}
	names := make([]string, 0, len(info.units)+1)
	for i := range info.units {
		names = append(names, info.units[i].name)
	}
	if wavelengths && d == Length {
		names = append(names, wavelength)
	}
	remedy := "write for example " + info.example
	if n := nearest(name, names); n != "" {
		remedy = "did you mean " + n + "? Write for example " + info.example
	}
	return nil, &complaint{quoted(name) + " is no unit of " + info.name, remedy}
}

// Bounds on the text of a quantity and on its number, far outside anything
// that can be built.
const (
	mostText   = 200
	mostDigits = 60
	mostSize   = 1e40
)

// scaled is a decimal number times a unit, rounded once.
func scaled(number string, scale *big.Rat) (float64, *complaint) {
	if i := strings.IndexAny(number, "eE"); len(number) > mostDigits || i >= 0 && len(strings.TrimLeft(number[i+1:], "+-0")) > 2 {
		return 0, &complaint{clip(number) + " is out of all range", "write a number of a size that can be built"}
	}
	r, ok := new(big.Rat).SetString(number)
	if !ok {
		return 0, &complaint{quoted(number) + " is not a number", "write for example 2.5"}
	}
	x, _ := r.Mul(r, scale).Float64()
	if size := math.Abs(x); size > mostSize || size < 1/mostSize && r.Sign() != 0 {
		return 0, &complaint{clip(number) + " is out of all range", "write a number of a size that can be built"}
	}
	return x, nil
}

// parseTime reads one or more numbers with a unit of time, in seconds.
func parseTime(text string) (float64, *complaint) {
	rest, sum := text, 0.0
	for first := true; first || rest != ""; first = false {
		number, name, bad := splitQuantity(rest, Time)
		if bad != nil {
			return 0, bad
		}
		word := name
		if i := strings.IndexAny(name, "0123456789.+- "); i >= 0 {
			word = name[:i]
		}
		rest = strings.TrimSpace(name[len(word):])
		if word == "" {
			return 0, &complaint{quoted(text) + " has no unit", "write a time with its unit, for example " + dimensions[Time].example}
		}
		unit, bad := findUnit(word, Time, false)
		if bad != nil {
			return 0, bad
		}
		x, bad := scaled(number, unit.scale)
		if bad != nil {
			return 0, bad
		}
		sum += x
	}
	return sum, nil
}

// quoted shows a value as it stood, short.
func quoted(text string) string { return `"` + clip(text) + `"` }

// clip keeps a text that a person gave from filling the screen.
func clip(text string) string {
	runes := []rune(plain(text))
	if len(runes) > 40 {
		return string(runes[:37]) + "…"
	}
	return string(runes)
}

// plain is a text on one line, without letters that steer a terminal.
func plain(text string) string {
	return strings.Map(func(c rune) rune {
		if !unicode.IsPrint(c) {
			return ' '
		}
		return c
	}, strings.ToValidUTF8(text, "?"))
}
