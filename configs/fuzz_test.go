package configs

import (
	"strings"
	"testing"
)

// fuzzFormats are what the second argument of the fuzz targets chooses among.
var fuzzFormats = []Format{YAML, TOML, JSON}

// checkRefusal wants an error to name its file in every fault.
func checkRefusal(t *testing.T, err error, file string, others bool) {
	for _, f := range allFaults(t, err) {
		checkMessage(t, &f)
		if f.File != file && !(others && f.File != "") {
			t.Errorf("%v names the file %q, want %q", &f, f.File, file)
		}
		if !strings.HasPrefix(f.Error(), plain(f.File)) {
			t.Errorf("%v does not begin with its file", &f)
		}
	}
}

// Reading any bytes as a brief never panics, is refused in so many words, or
// gives a brief that reads back as itself.
func FuzzBrief(f *testing.F) {
	f.Fuzz(func(t *testing.T, data []byte, format uint8) {
		const file = "fuzz.yaml"
		b, err := ParseBrief(file, data, fuzzFormats[int(format)%len(fuzzFormats)])
		if err != nil {
			checkRefusal(t, err, file, strings.Contains(string(data), "start_from"))
			return
		}
		rereadBrief(t, b, file)
	})
}

// Reading any bytes as a design never panics, is refused in so many words, or
// gives a design that is written and read without change from then on.
func FuzzDesign(f *testing.F) {
	f.Fuzz(func(t *testing.T, data []byte, format uint8) {
		const file = "fuzz.yaml"
		d, err := ParseDesign(file, data, fuzzFormats[int(format)%len(fuzzFormats)])
		if err != nil {
			checkRefusal(t, err, file, false)
			return
		}
		reread(t, d)
	})
}
