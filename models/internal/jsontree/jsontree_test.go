package jsontree

import (
	"encoding/json"
	"fmt"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func TestParseFaults(t *testing.T) {
	for text, want := range map[string]string{
		``:                          "the text ends inside the value",
		`{"a":{"b":[1,2`:            "the text ends inside a.b",
		`{"a":{"b":[1,NaN]}}`:       "a.b[1] is NaN; it should be a finite number",
		`{"a":-Infinity}`:           "a is -Infinity; it should be a finite number",
		`{"a": inf}`:                "a is inf; it should be a finite number",
		`{"a":1e999}`:               "a is 1e999; it should be a number that fits 64 bits",
		`{"a":1,"b":{"a":1,"a":2}}`: "b.a stands twice",
		`{"a":1} {"b":2}`:           "more text after the end",
		`{"a":1},`:                  "more text after the end",
		`{"a":01}`:                  "is not JSON at byte",
		`{"a" 1}`:                   "is not JSON at byte",
		`solved in 3 s`:             "the value is not JSON at byte 0",
		`{1:2}`:                     "is not JSON at byte",
		`[1,]`:                      "is not JSON at byte",
		`{"a":1,}`:                  "is not JSON at byte",
		strings.Repeat("[", 40):     "nests deeper than 32 levels",
		manyKeys(257):               "the value has more than 256 keys",
	} {
		v, err := Parse([]byte(text))
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("Parse(%q) = %+v, %v; want %q in the error", text, v, err, want)
		}
	}
}

// manyKeys is an object of n keys.
func manyKeys(n int) string {
	var b strings.Builder
	for i := range n {
		fmt.Fprintf(&b, `,"%d":1`, i)
	}
	return "{" + b.String()[1:] + "}"
}

func TestWideObject(t *testing.T) {
	if _, err := Parse([]byte(manyKeys(256))); err != nil {
		t.Error(err)
	}
}

// A text that breaks half-way still shows what stood before the fault.
func TestParsePartial(t *testing.T) {
	v, err := Parse([]byte(`{"id":7,"sweep":[{"a":NaN}]}`))
	if err == nil {
		t.Fatal("no error")
	}
	id, ok := v.Find("id")
	if !ok || id.Number != 7 {
		t.Errorf("id %+v, %v; want 7", id, ok)
	}
}

// The tree is the one encoding/json sees.
func TestParseAgainstStandard(t *testing.T) {
	leaf := rapid.OneOf(
		rapid.Just(any(nil)), rapid.Map(rapid.Bool(), toAny), rapid.Map(rapid.String(), toAny),
		rapid.Map(rapid.Float64Range(-1e300, 1e300), toAny),
	)
	var tree func(depth int) *rapid.Generator[any]
	tree = func(depth int) *rapid.Generator[any] {
		if depth == 0 {
			return leaf
		}
		return rapid.OneOf(leaf,
			rapid.Map(rapid.SliceOfN(tree(depth-1), 0, 4), toAny),
			rapid.Map(rapid.MapOfN(rapid.String(), tree(depth-1), 0, 4), toAny))
	}
	rapid.Check(t, func(t *rapid.T) {
		text, err := json.Marshal(tree(3).Draw(t, "tree"))
		if err != nil {
			t.Fatal(err)
		}
		v, err := Parse(text)
		if err != nil {
			t.Fatalf("%s: %v", text, err)
		}
		again, err := json.Marshal(plain(v))
		if err != nil || string(again) != string(text) {
			t.Fatalf("parsed %s as %s (%v)", text, again, err)
		}
	})
}

func toAny[T any](x T) any { return x }

// plain turns a tree into what encoding/json would have made of the text.
func plain(v Value) any {
	switch v.Kind {
	case Bool:
		return v.Bool
	case Number:
		return v.Number
	case Text:
		return v.Text
	case List:
		l := make([]any, len(v.Items))
		for i := range l {
			l[i] = plain(v.Items[i])
		}
		return l
	case Object:
		m := map[string]any{}
		for i, k := range v.Keys {
			m[k] = plain(v.Items[i])
		}
		return m
	}
	return nil
}

func FuzzParse(f *testing.F) {
	for _, seed := range []string{`{"id":1,"a":[1,2.5e-3,null,true,"x"]}`, `{"a":NaN}`, `[`, `{"a":1}x`, `"\ud800"`} {
		f.Add([]byte(seed))
	}
	f.Fuzz(func(t *testing.T, text []byte) {
		if _, err := Parse(text); err == nil && !json.Valid(text) {
			t.Errorf("Parse takes %q, which is not JSON", text)
		}
	})
}

func TestReadFaults(t *testing.T) {
	v, err := Parse([]byte(`{"count":2.5,"share":1.5,"word":"","words":["a",3],"kind":"x","flag":1,"inner":[],"shares":0,"extra":1}`))
	if err != nil {
		t.Fatal(err)
	}
	var faults Faults
	f := Read(v, "root", &faults)
	f.Whole("count", 0, 9)
	f.Number("share", Range{0, 1, ""})
	f.Number("absent", Range{0, 1, "m"})
	f.Text("word", 5)
	f.Texts("words", 5)
	f.Choice("kind", "y", "z")
	f.Flag("flag")
	f.Object("inner").Number("unseen", Range{0, 1, ""})
	f.Done()
	want := `root.count is 2.5; it should be a whole number from 0 to 9
root.share is 1.5; it should be a number from 0 to 1
root.absent is missing; it should be a number from 0 to 1 in m
root.word is ""; it should be a text of 1 to 5 bytes
root.words[1] is 3; it should be a text of at most 5 bytes
root.kind is "x"; it should be one of y, z
root.flag is 1; it should be true or false
root.inner is a list of 0; it should be an object
root.shares is no field of root; known are count, share, absent, word, words, kind, flag, inner
root.extra is no field of root; known are count, share, absent, word, words, kind, flag, inner`
	if got := faults.Err().Error(); got != want {
		t.Errorf("faults:\n%s\nwant:\n%s", got, want)
	}
}

// A long list of faults is cut, and says how much is missing.
func TestFaultsAreBounded(t *testing.T) {
	var faults Faults
	for i := range 20 {
		faults.Add("fault %d", i)
	}
	lines := strings.Split(faults.Err().Error(), "\n")
	if len(lines) != most+1 || lines[most] != "and 8 more faults" {
		t.Errorf("%d lines, the last %q", len(lines), lines[len(lines)-1])
	}
	if (&Faults{}).Err() != nil {
		t.Error("no faults should be no error")
	}
}

func TestEdits(t *testing.T) {
	for _, c := range []struct {
		a, b string
		want int
	}{{"", "", 0}, {"abc", "", 3}, {"efficency", "efficiency", 1}, {"kitten", "sitting", 3}} {
		if got := edits(c.a, c.b); got != c.want {
			t.Errorf("edits(%q, %q) = %d, want %d", c.a, c.b, got, c.want)
		}
	}
}
