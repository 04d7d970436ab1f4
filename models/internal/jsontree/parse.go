// Package jsontree reads JSON that other programs wrote, and says of every
// fault where it stands and what would be right. It is stricter than
// encoding/json: unknown and duplicate keys, missing fields, numbers out of
// range and text after the end are faults, and key names must match exactly.
package jsontree

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"strconv"
	"strings"
)

// deepest is the nesting that Parse follows, widest the keys of one object;
// the documents read here need 6 and 18.
const (
	deepest = 32
	widest  = 256
)

// Kind says what a Value is.
type Kind byte

// The kinds of JSON values. A Broken value could not be read to its end.
const (
	Broken Kind = iota
	Null
	Bool
	Number
	Text
	List
	Object
)

// Value is one parsed JSON value.
type Value struct {
	Kind   Kind
	Bool   bool
	Number float64
	Text   string
	Items  []Value  // of a List; of an Object, in the order of Keys
	Keys   []string // of an Object, as they stand in the text
}

// Find gives the value of an object's key.
func (v *Value) Find(key string) (*Value, bool) {
	for i, k := range v.Keys {
		if k == key {
			return &v.Items[i], true
		}
	}
	return nil, false
}

// Parse reads one JSON value and nothing after it. On an error the value
// holds what stands before the fault, so that a caller can still tell whose
// text it was.
func Parse(text []byte) (Value, error) {
	p := parser{text: text, dec: json.NewDecoder(bytes.NewReader(text))}
	v, err := p.value("", 0)
	if err != nil {
		return v, err
	}
	if _, err := p.dec.Token(); !errors.Is(err, io.EOF) {
		return v, fmt.Errorf("there is more text after the end of the JSON value, at byte %d", p.dec.InputOffset())
	}
	return v, nil
}

type parser struct {
	text []byte
	dec  *json.Decoder
}

func (p *parser) value(where string, depth int) (Value, error) {
	if depth > deepest {
		return Value{}, fmt.Errorf("%s nests deeper than %d levels", named(where), deepest)
	}
	t, err := p.dec.Token()
	if err != nil {
		return Value{}, p.fault(where, err)
	}
	switch t := t.(type) {
	case nil:
		return Value{Kind: Null}, nil
	case bool:
		return Value{Kind: Bool, Bool: t}, nil
	case float64:
		return Value{Kind: Number, Number: t}, nil
	case string:
		return Value{Kind: Text, Text: t}, nil
	case json.Delim:
		if t == '[' {
			return p.list(where, depth)
		}
		return p.object(where, depth)
	}
	panic("jsontree: unknown token")
}

func (p *parser) list(where string, depth int) (Value, error) {
	v := Value{Kind: List}
	for p.dec.More() {
		item, err := p.value(where+"["+strconv.Itoa(len(v.Items))+"]", depth+1)
		v.Items = append(v.Items, item)
		if err != nil {
			return v, err
		}
	}
	_, err := p.dec.Token()
	return v, p.fault(where, err)
}

func (p *parser) object(where string, depth int) (Value, error) {
	v := Value{Kind: Object}
	for p.dec.More() {
		t, err := p.dec.Token()
		if err != nil {
			return v, p.fault(where, err)
		}
		key := t.(string) // the decoder lets nothing else stand here
		at := join(where, key)
		if _, twice := v.Find(key); twice {
			return v, fmt.Errorf("%s stands twice; it should stand once", at)
		}
		if len(v.Keys) == widest {
			return v, fmt.Errorf("%s has more than %d keys", named(where), widest)
		}
		item, err := p.value(at, depth+1)
		v.Keys, v.Items = append(v.Keys, key), append(v.Items, item)
		if err != nil {
			return v, err
		}
	}
	_, err := p.dec.Token()
	return v, p.fault(where, err)
}

// fault names the place of a decoder's error, and the usual causes in plain
// words: many programs write NaN and Infinity, which JSON does not have.
func (p *parser) fault(where string, err error) error {
	if err == nil {
		return nil
	}
	rest := bytes.TrimLeft(p.text[p.dec.InputOffset():], " \t\r\n:,")
	word := string(rest[:min(len(rest), 12)])
	if i := strings.IndexAny(word, ",]} \t\r\n"); i >= 0 {
		word = word[:i]
	}
	switch strings.ToLower(strings.TrimLeft(word, "+-")) {
	case "nan", "inf", "infinity":
		return fmt.Errorf("%s is %s; it should be a finite number", named(where), word)
	}
	var number *json.UnmarshalTypeError
	switch {
	case errors.As(err, &number):
		return fmt.Errorf("%s is %s; it should be a number that fits 64 bits", named(where), strings.TrimPrefix(number.Value, "number "))
	case errors.Is(err, io.EOF), errors.Is(err, io.ErrUnexpectedEOF):
		return fmt.Errorf("the text ends inside %s", named(where))
	}
	return fmt.Errorf("%s is not JSON at byte %d: %v", named(where), p.dec.InputOffset(), err)
}

func named(where string) string {
	if where == "" {
		return "the value"
	}
	return where
}

func join(where, key string) string {
	if where == "" {
		return key
	}
	return where + "." + key
}
