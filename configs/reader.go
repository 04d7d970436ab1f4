package configs

import (
	"bytes"
	"cmp"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"sort"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"
)

// Format is how a file is written.
type Format string

// The formats.
const (
	YAML Format = "yaml"
	TOML Format = "toml"
	JSON Format = "json"
)

// FormatOf is the format of a file by its name: .toml and .json are what they
// say, anything else is YAML.
func FormatOf(path string) Format {
	switch strings.ToLower(filepath.Ext(path)) {
	case ".toml":
		return TOML
	case ".json":
		return JSON
	}
	return YAML
}

// largestFile is the size above which a file cannot be a brief or a design.
const largestFile = 1 << 20

// reader reads one file and collects what is wrong with it.
type reader struct {
	file   string
	faults []Fault
	// wavelengths says that a file may use them, and wavelength is the length
	// of one at mid-band, m; 0 where the band is wrong, which was said.
	wavelengths bool
	wavelength  float64
	// rounds makes lengths and resistances multiples of what a design file
	// is written in.
	rounds bool
}

func (r *reader) add(line int, key, what, remedy string) {
	r.faults = append(r.faults, Fault{r.file, line, key, what, remedy})
}

// err is everything that was wrong, file by file and by line; nil without
// any.
func (r *reader) err() error {
	if len(r.faults) == 0 {
		return nil
	}
	files := map[string]int{r.file: 0}
	for i := range r.faults {
		if _, ok := files[r.faults[i].File]; !ok {
			files[r.faults[i].File] = len(files)
		}
	}
	sort.SliceStable(r.faults, func(i, j int) bool {
		a, b := &r.faults[i], &r.faults[j]
		return cmp.Or(cmp.Compare(files[a.File], files[b.File]), cmp.Compare(a.Line, b.Line)) < 0
	})
	return &Error{r.faults}
}

// readFile reads a file of a size that a person may have written.
func readFile(path string) ([]byte, error) {
	refuse := func(what, remedy string) ([]byte, error) {
		return nil, &Error{[]Fault{{File: path, What: what, Remedy: remedy}}}
	}
	info, err := os.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return refuse("does not exist", "check the name")
	case err != nil:
		return refuse("cannot be looked at: "+cause(err), "check its name and who may read it")
	case info.IsDir():
		return refuse("is a folder", "name a file in it")
	}
	f, err := os.Open(path)
	if err != nil {
		return refuse("cannot be opened: "+cause(err), "check who may read it")
	}
	defer f.Close()
	data, err := io.ReadAll(io.LimitReader(f, largestFile+1))
	if err != nil {
		return refuse("cannot be read: "+cause(err), "check who may read it")
	}
	return data, nil
}

// cause is the reason inside a path error, whose path was said already.
func cause(err error) string {
	var pe *fs.PathError
	if errors.As(err, &pe) {
		return pe.Err.Error()
	}
	return err.Error()
}

// parse makes a tree of a file's bytes; nil when there is none to read, which
// has then been said.
func (r *reader) parse(data []byte, format Format, what string) *node {
	data = bytes.TrimPrefix(data, []byte("\xef\xbb\xbf"))
	switch {
	case len(data) > largestFile:
		r.add(0, "", "is larger than 1 MiB", "a "+what+" is a page of text; name the right file")
		return nil
	case bytes.HasPrefix(data, []byte{0xff, 0xfe}) || bytes.HasPrefix(data, []byte{0xfe, 0xff}):
		r.add(0, "", "is written in UTF-16", "save it as UTF-8")
		return nil
	case bytes.IndexByte(data, 0) >= 0 || !utf8.Valid(data):
		r.add(0, "", "is not a text file", "a "+what+" is YAML, TOML or JSON in UTF-8; name the right file")
		return nil
	}
	before := len(r.faults)
	var root *node
	switch format {
	case TOML:
		root = r.parseTOML(data)
	case JSON:
		root = r.parseJSON(data)
	default:
		root = r.parseYAML(data)
	}
	if len(r.faults) > before && root == nil {
		return nil
	}
	if root == nil || root.kind == null {
		r.add(0, "", "is empty", "write a "+what+" into it; 'turnwise start' gives a brief to begin from")
		return nil
	}
	if root.kind != table {
		if root.kind != broken {
			r.add(root.line, "", "is "+kindNames[root.kind]+", not a block of keys", "a "+what+" is lines of key: value")
		}
		return nil
	}
	return root
}

// block is a table being read: which keys it may have, and where it stands.
type block struct {
	r     *reader
	path  string
	n     *node // never nil
	there bool  // false: the file does not have it
}

// block opens a table whose keys are known, and notes those that are not
// known or come twice.
func (r *reader) block(n *node, path string, known ...string) block {
	if n == nil || n.kind == broken {
		return block{r, path, &node{}, false}
	}
	if n.kind != table {
		r.add(n.line, path, "is "+kindNames[n.kind], "it should be a block of keys: "+strings.Join(known, ", "))
		return block{r, path, &node{line: n.line}, false}
	}
	seen := map[string]int{}
	for i := range n.keys {
		k := &n.keys[i]
		if first, twice := seen[k.name]; twice {
			r.add(k.line, join(path, k.name), fmt.Sprintf("stands here a second time, first on line %d", first), "keep one of the two")
			continue
		}
		seen[k.name] = k.line
		if contains(known, k.name) {
			continue
		}
		if i > 0 && k.value.kind == null && k.name != "" && k.name[0] >= '0' && k.name[0] <= '9' && n.keys[i-1].value.kind == number {
			before := &n.keys[i-1]
			r.add(k.line, join(path, before.name), quoted(before.value.text+","+k.name)+" has a decimal comma", "write "+clip(before.value.text+"."+k.name)+", with a point")
			before.value = &node{kind: broken, line: k.line}
			continue
		}
		r.add(k.line, join(path, k.name), "is no key here", didYouMean(k.name, known))
	}
	return block{r, path, n, true}
}

func contains(words []string, word string) bool {
	for _, w := range words {
		if w == word {
			return true
		}
	}
	return false
}

// has reports whether the key is there with a value, right or wrong.
func (b *block) has(key string) bool { return b.get(key) != nil }

// get is the value of a key; an empty one counts as not there.
func (b *block) get(key string) *node {
	n := b.n.find(key)
	if n == nil || n.kind == null {
		return nil
	}
	return n
}

// line is where a key stands, or else the block.
func (b *block) line(key string) int {
	for i := range b.n.keys {
		if b.n.keys[i].name == key {
			return b.n.keys[i].line
		}
	}
	return b.n.line
}

// fault notes something wrong with a key.
func (b *block) fault(key, what, remedy string) {
	path := b.path
	if key != "" {
		path = join(path, key)
	}
	b.r.add(b.line(key), path, what, remedy)
}

// missing notes a key that must be there.
func (b *block) missing(key, remedy string) {
	if b.there {
		b.fault(key, "is missing", remedy)
	}
}

// words is the text of a key; empty when it is not there or no text.
func (b *block) words(key string) (string, bool) {
	n := b.get(key)
	if n == nil || n.kind == broken {
		return "", false
	}
	if n.kind == list || n.kind == table {
		b.fault(key, "is "+kindNames[n.kind], "it should be text")
		return "", false
	}
	return n.text, true
}

// mostLetters bounds titles and names.
const mostLetters = 200

// name is a text for people, on one line.
func (b *block) name(key string) (string, bool) {
	s, ok := b.words(key)
	if !ok {
		return "", false
	}
	s = strings.TrimSpace(s)
	if utf8.RuneCountInString(s) > mostLetters || strings.ContainsFunc(s, breaksLine) {
		b.fault(key, "is too long, or more than a line", fmt.Sprintf("write at most %d letters on one line", mostLetters))
		return "", false
	}
	return s, true
}

// breaksLine reports letters that are no part of a line of text.
func breaksLine(c rune) bool { return unicode.In(c, unicode.Cc, unicode.Zl, unicode.Zp) }

// choice is one of some words.
func (b *block) choice(key string, words ...string) (string, bool) {
	s, ok := b.words(key)
	if !ok {
		return "", false
	}
	if !contains(words, s) {
		b.fault(key, quoted(s)+" is not known here", didYouMean(s, words))
		return "", false
	}
	return s, true
}

// flag is true or false; not there is false.
func (b *block) flag(key string) bool {
	n := b.get(key)
	if n == nil || n.kind == broken {
		return false
	}
	if n.kind != truth {
		b.fault(key, "is "+kindNames[n.kind], "it should be true or false")
		return false
	}
	return strings.EqualFold(n.text, "true")
}

// count is a whole number from low to high.
func (b *block) count(key string, low, high int64) (int64, bool) {
	n := b.get(key)
	if n == nil || n.kind == broken {
		return 0, false
	}
	remedy := fmt.Sprintf("it should be a whole number from %d to %d", low, high)
	if n.kind != number {
		what := "is " + kindNames[n.kind]
		if n.kind == text {
			what = quoted(n.text) + " is not a number"
		}
		b.fault(key, what, remedy)
		return 0, false
	}
	k, bad := wholeNumber(n.text)
	switch {
	case bad != nil:
		b.fault(key, bad.what, remedy)
		return 0, false
	case k < low || k > high:
		b.fault(key, clip(n.text)+" is out of range", remedy)
		return 0, false
	}
	return k, true
}

// wholeNumber reads a count: 200, 4e3, not 010 and not 3.5.
func wholeNumber(s string) (int64, *complaint) {
	digits := strings.TrimLeft(s, "+-")
	if len(digits) > 1 && digits[0] == '0' && strings.Trim(digits, "0123456789") == "" {
		return 0, &complaint{what: quoted(s) + " starts with a zero"}
	}
	if k, err := strconv.ParseInt(strings.TrimPrefix(s, "+"), 10, 64); err == nil {
		return k, nil
	} else if errors.Is(err, strconv.ErrRange) {
		return 0, &complaint{what: clip(s) + " is out of range"}
	}
	x, _, bad := parseQuantity(s, Plain, false)
	switch {
	case bad != nil:
		return 0, bad
	case x != math.Trunc(x):
		return 0, &complaint{what: clip(s) + " is a fraction"}
	case math.Abs(x) > 1<<53:
		return 0, &complaint{what: clip(s) + " is out of range"}
	}
	return int64(x), nil
}

// span is a range of values that can be built, in the dimension's own unit.
type span struct{ low, high float64 }

// quantity is a number with its unit. A value outside the span is a fault.
func (b *block) quantity(key string, d Dimension, s span) (float64, bool) {
	x, ok := b.r.quantity(b.get(key), join(b.path, key), d)
	if ok && !b.r.within(b.get(key), join(b.path, key), x, d, s) {
		return 0, false
	}
	return x, ok
}

// quantity reads a node as a quantity, on the reader's grid.
func (r *reader) quantity(n *node, path string, d Dimension) (float64, bool) {
	x, ok := r.exact(n, path, d)
	if ok && r.rounds {
		x = onGrid(x, d)
	}
	return x, ok
}

// exact reads a node as a quantity as it stands.
func (r *reader) exact(n *node, path string, d Dimension) (float64, bool) {
	if n == nil || n.kind == broken {
		return 0, false
	}
	if n.kind != text && n.kind != number {
		r.add(n.line, path, "is "+kindNames[n.kind], "write "+dimensions[d].name+", for example "+dimensions[d].example)
		return 0, false
	}
	x, waves, bad := parseQuantity(n.text, d, r.wavelengths)
	if bad != nil {
		r.add(n.line, path, bad.what, bad.remedy)
		return 0, false
	}
	if waves {
		return x * r.wavelength, r.wavelength > 0
	}
	return x, true
}

// within notes a value outside its span.
func (r *reader) within(n *node, path string, x float64, d Dimension, s span) bool {
	if x >= s.low && x <= s.high {
		return true
	}
	r.add(n.line, path, clip(n.text)+" is out of range", "it should be from "+show(s.low, d)+" to "+show(s.high, d))
	return false
}

// Resolutions of a written design: 1 µm, 0.01 Ω, 0.001 of a degree and of a
// turn. They are given by their reciprocals, whole numbers, by which a
// division gives the double nearest to the decimal.
var gridsPerUnit = map[Dimension]float64{Length: 1e6, Impedance: 100, Angle: 1000, Revolution: 1000}

// onGrid is the nearest multiple of the resolution of a dimension.
func onGrid(x float64, d Dimension) float64 {
	if per := gridsPerUnit[d]; per > 0 {
		return math.Round(x*per) / per
	}
	return x
}
