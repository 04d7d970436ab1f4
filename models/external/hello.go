package external

import (
	"fmt"
	"strings"

	"turnwise/models"
	"turnwise/models/internal/jsontree"
)

// protocol is the version of the protocol that doc.go describes.
const protocol = 1

// mostHello is the longest hello, bytes.
const mostHello = 64 << 10

// words are the outputs as the protocol writes them.
var words = []struct {
	word   string
	output models.Outputs
}{
	{"axis", models.Axis}, {"cone", models.Cone}, {"cuts", models.Cuts},
	{"balance", models.Balance}, {"spread", models.Spread}, {"pattern", models.Pattern},
}

// wordsOf lists a set of outputs.
func wordsOf(o models.Outputs) []string {
	var list []string
	for _, w := range words {
		if o&w.output != 0 {
			list = append(list, w.word)
		}
	}
	return list
}

// outputOf is the output of a word, 0 of any other.
func outputOf(word string) models.Outputs {
	for _, w := range words {
		if w.word == word {
			return w.output
		}
	}
	return 0
}

// hello is how a program presents itself.
type hello struct {
	name, version, statement string
	outputs                  models.Outputs
	indicative               bool
}

// readHello reads a program's first line.
func readHello(text []byte) (hello, error) {
	if len(text) > mostHello {
		return hello{}, fmt.Errorf("a hello of %d bytes is too long; at most %d are due", len(text), mostHello)
	}
	v, err := jsontree.Parse(text)
	if err != nil {
		return hello{}, fmt.Errorf("%w: %s", err, clip(text, 80))
	}
	var faults jsontree.Faults
	f := jsontree.Read(v, "", &faults)
	f.Whole("protocol", protocol, protocol)
	h := hello{
		name:       f.Text("name", 100),
		version:    f.Text("version", 100),
		outputs:    models.Axis,
		statement:  f.TextOr("statement", 1000),
		indicative: f.Flag("indicative"),
	}
	for _, w := range f.Texts("outputs", 20) {
		o := outputOf(w)
		if o == 0 {
			faults.Add("outputs holds %q; known are %s", w, strings.Join(wordsOf(^models.Outputs(0)), ", "))
		}
		h.outputs |= o
	}
	f.Done()
	if h.statement == "" {
		h.statement = fmt.Sprintf("%s %s, another program: what it is worth is for its author to say", h.name, h.version)
	}
	return h, faults.Err()
}

// clip shows the start of a line in a message.
func clip(text []byte, most int) string {
	s := string(text[:min(len(text), most)])
	if len(text) > most {
		return fmt.Sprintf("%q…", strings.ToValidUTF8(s, ""))
	}
	return fmt.Sprintf("%q", s)
}
