package jsontree

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"
	"unicode/utf8"
)

// most is the number of faults that are spelt out.
const most = 12

// Faults collects what is wrong with a document.
type Faults struct {
	list []error
	more int
}

// Add notes a fault.
func (f *Faults) Add(format string, args ...any) {
	if len(f.list) == most {
		f.more++
		return
	}
	f.list = append(f.list, fmt.Errorf(format, args...))
}

// Err joins the faults; nil without any.
func (f *Faults) Err() error {
	if f.more > 0 {
		return errors.Join(append(f.list[:len(f.list):len(f.list)], fmt.Errorf("and %d more faults", f.more))...)
	}
	return errors.Join(f.list...)
}

// Fields reads an object field by field. Every method notes a fault where
// the field is not what it should be and then gives a zero; Done notes the
// fields that nobody asked for.
type Fields struct {
	faults *Faults
	where  string
	v      Value
	asked  []string
}

// Read starts reading an object that stands at where ("" for the root).
func Read(v Value, where string, faults *Faults) *Fields {
	if v.Kind != Object {
		faults.Add("%s is %s; it should be an object", named(where), v.describe())
	}
	return &Fields{faults: faults, where: where, v: v}
}

// Where is the path of a key of the object.
func (f *Fields) Where(key string) string { return join(f.where, key) }

// Has reports whether the key is there and not null.
func (f *Fields) Has(key string) bool {
	v, ok := f.find(key)
	return ok && v.Kind != Null
}

// find marks a key as known and finds it.
func (f *Fields) find(key string) (*Value, bool) {
	f.asked = append(f.asked, key)
	return f.v.Find(key)
}

// need finds a key that must be there.
func (f *Fields) need(key, want string) (*Value, bool) {
	v, ok := f.find(key)
	if !ok && f.v.Kind == Object {
		f.faults.Add("%s is missing; it should be %s", f.Where(key), want)
	}
	return v, ok
}

func (f *Fields) wrong(where string, v *Value, want string) {
	f.faults.Add("%s is %s; it should be %s", where, v.describe(), want)
}

// Range is what a number should be: Low ≤ number ≤ High, where the largest
// float stands for no bound. Unit is for the message.
type Range struct {
	Low, High float64
	Unit      string
}

func (r Range) String() string {
	s := "a number"
	switch {
	case r.High < math.MaxFloat64:
		s += fmt.Sprintf(" from %g to %g", r.Low, r.High)
	case r.Low > -math.MaxFloat64:
		s += fmt.Sprintf(" from %g", r.Low)
	}
	if r.Unit != "" {
		s += " in " + r.Unit
	}
	return s
}

// holds is false for NaN.
func (r Range) holds(x float64) bool { return x >= r.Low && x <= r.High }

// Number reads a number that must be there.
func (f *Fields) Number(key string, r Range) float64 {
	v, ok := f.need(key, r.String())
	if !ok {
		return 0
	}
	return f.number(f.Where(key), v, r)
}

// NumberOr reads a number that may be absent or null.
func (f *Fields) NumberOr(key string, r Range, absent float64) float64 {
	if !f.Has(key) {
		return absent
	}
	return f.Number(key, r)
}

func (f *Fields) number(where string, v *Value, r Range) float64 {
	if v.Kind != Number || !r.holds(v.Number) {
		f.wrong(where, v, r.String())
		return 0
	}
	return v.Number
}

// Whole reads a whole number that must be there.
func (f *Fields) Whole(key string, low, high int) int {
	want := fmt.Sprintf("a whole number from %d to %d", low, high)
	v, ok := f.need(key, want)
	if !ok {
		return 0
	}
	if v.Kind != Number || v.Number < float64(low) || v.Number > float64(high) || v.Number != float64(int(v.Number)) {
		f.wrong(f.Where(key), v, want)
		return 0
	}
	return int(v.Number)
}

// Numbers reads a list of at least one number.
func (f *Fields) Numbers(key string, r Range) []float64 {
	items := f.List(key, 1, "a list, each item "+r.String())
	numbers := make([]float64, len(items))
	for i := range items {
		numbers[i] = f.number(fmt.Sprintf("%s[%d]", f.Where(key), i), &items[i], r)
	}
	return numbers
}

// List reads a list of at least the given number of items.
func (f *Fields) List(key string, least int, want string) []Value {
	v, ok := f.need(key, want)
	if !ok {
		return nil
	}
	if v.Kind != List || len(v.Items) < least {
		f.wrong(f.Where(key), v, want)
		return nil
	}
	return v.Items
}

// Text reads a text that must be there: not empty and at most longest bytes.
func (f *Fields) Text(key string, longest int) string {
	want := fmt.Sprintf("a text of 1 to %d bytes", longest)
	v, ok := f.need(key, want)
	if !ok {
		return ""
	}
	if v.Kind != Text || v.Text == "" || len(v.Text) > longest {
		f.wrong(f.Where(key), v, want)
		return ""
	}
	return v.Text
}

// TextOr reads a text that may be absent, null or empty.
func (f *Fields) TextOr(key string, longest int) string {
	if v, ok := f.find(key); !ok || v.Kind == Null || v.Kind == Text && v.Text == "" {
		return ""
	}
	return f.Text(key, longest)
}

// Texts reads a list of texts that may be absent or null.
func (f *Fields) Texts(key string, longest int) []string {
	if !f.Has(key) {
		return nil
	}
	want := fmt.Sprintf("a text of at most %d bytes", longest)
	var texts []string
	for i, v := range f.List(key, 0, "a list of texts") {
		if v.Kind != Text || len(v.Text) > longest {
			f.wrong(fmt.Sprintf("%s[%d]", f.Where(key), i), &v, want)
			continue
		}
		texts = append(texts, v.Text)
	}
	return texts
}

// Choice reads one of the words; it must be there.
func (f *Fields) Choice(key string, words ...string) string {
	want := "one of " + strings.Join(words, ", ")
	v, ok := f.need(key, want)
	if !ok {
		return ""
	}
	if v.Kind == Text {
		for _, w := range words {
			if v.Text == w {
				return w
			}
		}
	}
	f.wrong(f.Where(key), v, want)
	return ""
}

// Flag reads a truth value that may be absent or null (false).
func (f *Fields) Flag(key string) bool {
	v, ok := f.find(key)
	if !ok || v.Kind == Null {
		return false
	}
	if v.Kind != Bool {
		f.wrong(f.Where(key), v, "true or false")
	}
	return v.Bool
}

// Object reads an object that must be there.
func (f *Fields) Object(key string) *Fields {
	v, ok := f.need(key, "an object")
	if !ok {
		// An absent object is one fault, not one for each field inside.
		return &Fields{faults: f.faults, where: f.Where(key)}
	}
	return Read(*v, f.Where(key), f.faults)
}

// Done notes every field that was not asked for.
func (f *Fields) Done() {
	for _, key := range f.v.Keys {
		if !contains(f.asked, key) {
			f.faults.Add("%s is no field of %s; %s", f.Where(clip(key, 40)), named(f.where), f.advice(key))
		}
	}
}

// advice names the nearest known field, or all of them.
func (f *Fields) advice(key string) string {
	best, distance := "", 4
	for _, k := range f.asked {
		if d := edits(clip(key, 40), k); d < distance && !contains(f.v.Keys, k) {
			best, distance = k, d
		}
	}
	if best != "" {
		return "did you mean " + best + "?"
	}
	return "known are " + strings.Join(unique(f.asked), ", ")
}

func unique(words []string) []string {
	var u []string
	for _, w := range words {
		if !contains(u, w) {
			u = append(u, w)
		}
	}
	return u
}

func contains(words []string, word string) bool {
	for _, w := range words {
		if w == word {
			return true
		}
	}
	return false
}

// edits is the Levenshtein distance in bytes.
func edits(a, b string) int {
	row := make([]int, len(b)+1)
	for j := range row {
		row[j] = j
	}
	for i := range len(a) {
		diagonal := row[0]
		row[0] = i + 1
		for j := range len(b) {
			cost := diagonal
			if a[i] != b[j] {
				cost++
			}
			diagonal = row[j+1]
			row[j+1] = min(cost, row[j]+1, diagonal+1)
		}
	}
	return row[len(b)]
}

// describe shows a value in a message.
func (v *Value) describe() string {
	switch v.Kind {
	case Null:
		return "null"
	case Bool:
		return strconv.FormatBool(v.Bool)
	case Number:
		return strconv.FormatFloat(v.Number, 'g', -1, 64)
	case Text:
		return strconv.Quote(clip(v.Text, 40))
	case List:
		return fmt.Sprintf("a list of %d", len(v.Items))
	case Object:
		return "an object"
	}
	return "broken"
}

// clip shortens a text for a message, never inside a character.
func clip(s string, longest int) string {
	if len(s) <= longest {
		return s
	}
	for longest > 0 && !utf8.RuneStart(s[longest]) {
		longest--
	}
	return s[:longest] + "…"
}
