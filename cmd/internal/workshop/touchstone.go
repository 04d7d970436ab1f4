package workshop

import (
	"fmt"
	"math"
	"math/cmplx"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
)

// OnePort is a measured reflection over frequency.
type OnePort struct {
	Reference  float64 // Ω
	Hz         []float64
	Reflection []complex128
}

// Against is the reflection with another resistance as its reference, Ω.
func (p *OnePort) Against(reference float64) []complex128 {
	// Γ' = (Γ + k)/(1 + kΓ) needs no impedance, which may be infinite.
	k := complex((p.Reference-reference)/(p.Reference+reference), 0)
	out := make([]complex128, len(p.Reflection))
	for i, g := range p.Reflection {
		out[i] = (g + k) / (1 + k*g)
	}
	return out
}

// MalformedFile is a Touchstone file that is none: where, and what is wrong.
type MalformedFile struct {
	File   string
	Line   int // 0: the file as a whole
	Reason string
}

func (m *MalformedFile) Error() string {
	if m.Line == 0 {
		return fmt.Sprintf("%s: %s", m.File, m.Reason)
	}
	return fmt.Sprintf("%s:%d: %s", m.File, m.Line, m.Reason)
}

// ReadTouchstone reads a one-port file, Touchstone 1.1 (IBIS Open Forum,
// 2002): reflections as magnitude and angle, decibels and angle, or real and
// imaginary part, against any resistance. An error is a [MalformedFile].
func ReadTouchstone(name string, data []byte) (OnePort, error) {
	r := touchstone{file: name, options: options{hertz: 1e9, format: "MA", reference: 50}}
	if m := portsOf.FindStringSubmatch(strings.ToLower(filepath.Ext(name))); m != nil && m[1] != "1" {
		return OnePort{}, &MalformedFile{name, 0, "holds " + m[1] + " ports; a one-port file (.s1p) is due"}
	}
	text := strings.TrimPrefix(string(data), "\ufeff")
	for _, line := range strings.Split(lineEnds.Replace(text), "\n") {
		r.line++
		if err := r.take(line); err != nil {
			return OnePort{}, err
		}
	}
	if len(r.port.Hz) == 0 {
		return OnePort{}, &MalformedFile{name, 0, "holds no frequency; lines of frequency and two numbers are due"}
	}
	r.port.Reference = r.reference
	return r.port, nil
}

// portsOf finds the number of ports in a file's ending.
var portsOf = regexp.MustCompile(`^\.s([0-9]+)p$`)

// lineEnds makes every end of line one line feed.
var lineEnds = strings.NewReplacer("\r\n", "\n", "\r", "\n")

// options are what the option line says.
type options struct {
	hertz     float64 // a unit of frequency
	format    string  // MA, DB or RI
	reference float64 // Ω
}

// touchstone reads a file line by line.
type touchstone struct {
	options
	file   string
	line   int
	stated bool // an option line was met; further ones are ignored
	port   OnePort
}

func (r *touchstone) fault(format string, a ...any) error {
	return &MalformedFile{r.file, r.line, fmt.Sprintf(format, a...)}
}

// take reads one line.
func (r *touchstone) take(line string) error {
	line, _, _ = strings.Cut(line, "!")
	line = strings.TrimSpace(line)
	switch {
	case line == "":
		return nil
	case line[0] == '#':
		return r.option(strings.Fields(strings.ToUpper(line[1:])))
	case line[0] == '[':
		return r.fault("%s belongs to version 2; write the file as Touchstone 1.1", shown(line))
	}
	return r.datum(strings.Fields(line))
}

// option reads the option line, its parts in any order, each at most once.
func (r *touchstone) option(words []string) error {
	if r.stated {
		return nil
	}
	if len(r.port.Hz) > 0 {
		return r.fault("the option line comes after data; it must stand before")
	}
	r.stated = true
	seen := map[string]bool{}
	for i := 0; i < len(words); i++ {
		var part string
		switch word := words[i]; word {
		case "HZ", "KHZ", "MHZ", "GHZ":
			part, r.hertz = "frequency unit", map[string]float64{"HZ": 1, "KHZ": 1e3, "MHZ": 1e6, "GHZ": 1e9}[word]
		case "MA", "DB", "RI":
			part, r.format = "format", word
		case "S":
			part = "parameter"
		case "Y", "Z", "G", "H":
			return r.fault("%s-parameters; a file of reflections (S) is due", word)
		case "R":
			part = "reference"
			i++
			if i == len(words) {
				return r.fault("R without a resistance; write for example R 50")
			}
			ohms, err := decimal(words[i])
			if err != nil || !(ohms >= leastReference && ohms <= mostReference) {
				return r.fault("R %s is no reference; %g to %g Ω is due", shown(words[i]), leastReference, mostReference)
			}
			r.reference = ohms
		default:
			return r.fault("%s in the option line; write for example # MHZ S RI R 50", shown(word))
		}
		if seen[part] {
			return r.fault("the option line has two of a %s", part)
		}
		seen[part] = true
	}
	return nil
}

// Bounds of what a measurement may hold.
const (
	leastReference = 1e-3 // Ω
	mostReference  = 1e6
	mostHertz      = 1e15
	mostReflection = 10 // a passive antenna stays below 1, and its noise near
)

// datum reads a frequency and its reflection.
func (r *touchstone) datum(words []string) error {
	if len(words) != 3 {
		if len(words) > 3 {
			return r.fault("%d numbers; a frequency and 2 are due: this is no one-port file", len(words))
		}
		return r.fault("%d of 3 numbers; a frequency and 2 are due", len(words))
	}
	var x [3]float64
	for i, word := range words {
		var err error
		if x[i], err = decimal(word); err != nil {
			return r.fault("%s is not a number", shown(word))
		}
	}
	hz := x[0] * r.hertz
	if !(hz >= 0 && hz <= mostHertz) {
		return r.fault("a frequency of %s; 0 to %g Hz is due", shown(words[0]), mostHertz)
	}
	if n := len(r.port.Hz); n > 0 && hz <= r.port.Hz[n-1] {
		return r.fault("frequency %s does not rise; the line before has %g Hz", shown(words[0]), r.port.Hz[n-1])
	}
	if r.format == "MA" && x[1] < 0 {
		return r.fault("a magnitude of %s; zero or more is due", shown(words[1]))
	}
	g := r.reflection(x[1], x[2])
	if size := cmplx.Abs(g); !(size <= mostReflection) {
		return r.fault("a reflection of that size is none of an antenna; at most %d is due", mostReflection)
	}
	r.port.Hz, r.port.Reflection = append(r.port.Hz, hz), append(r.port.Reflection, g)
	return nil
}

// reflection is what two numbers stand for in the file's format.
func (r *touchstone) reflection(a, b float64) complex128 {
	switch r.format {
	case "RI":
		return complex(a, b)
	case "DB":
		a = math.Pow(10, a/20)
	}
	return cmplx.Rect(a, b*math.Pi/180)
}

// plainDecimal is a number as a file writes it; none that is not finite.
var plainDecimal = regexp.MustCompile(`^[-+]?([0-9]+\.?[0-9]*|\.[0-9]+)([eE][-+]?[0-9]+)?$`)

func decimal(word string) (float64, error) {
	if !plainDecimal.MatchString(word) {
		return 0, strconv.ErrSyntax
	}
	return strconv.ParseFloat(word, 64)
}

// shown is a piece of a file, quoted and short.
func shown(text string) string {
	if runes := []rune(text); len(runes) > 24 {
		text = string(runes[:23]) + "…"
	}
	return strconv.Quote(text)
}
