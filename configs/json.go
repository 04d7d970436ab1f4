package configs

import (
	"bytes"
	"encoding/json"
	"errors"
	"strconv"
)

// parseJSON makes a tree of JSON. The library's decoder judges the whole
// first, depth and all; the tree, with its lines, is then made from tokens.
func (r *reader) parseJSON(data []byte) *node {
	if len(bytes.TrimSpace(data)) == 0 {
		return nil
	}
	var whole json.RawMessage
	if err := json.Unmarshal(data, &whole); err != nil {
		line := 0
		var at *json.SyntaxError
		if errors.As(err, &at) {
			line = lineAt(data, at.Offset-1)
		}
		r.add(line, "", "is no valid JSON: "+err.Error(), "check the brackets, commas and quotes about there; a file holds one object")
		return nil
	}
	t := jsonTree{data: data, decoder: json.NewDecoder(bytes.NewReader(data))}
	t.decoder.UseNumber()
	return t.value()
}

// lineAt is the line of an offset, counted from 1.
func lineAt(data []byte, offset int64) int {
	return 1 + bytes.Count(data[:max(0, min(offset, int64(len(data))))], []byte{'\n'})
}

type jsonTree struct {
	data    []byte
	decoder *json.Decoder
	// past is how far lines have been counted, and line the one reached.
	past int64
	line int
}

// token is the next token of a text known to be sound, and its line.
func (t *jsonTree) token() (json.Token, int) {
	token, err := t.decoder.Token()
	if err != nil {
		panic("configs: sound JSON does not read: " + err.Error())
	}
	end := t.decoder.InputOffset()
	t.line += bytes.Count(t.data[t.past:end], []byte{'\n'})
	t.past = end
	return token, 1 + t.line
}

func (t *jsonTree) value() *node {
	token, line := t.token()
	n := &node{line: line}
	switch v := token.(type) {
	case string:
		n.kind, n.text = text, v
	case json.Number:
		n.kind, n.text = number, v.String()
	case bool:
		n.kind, n.text = truth, strconv.FormatBool(v)
	case json.Delim:
		n.kind = list
		if v == '{' {
			n.kind = table
		}
		for t.decoder.More() {
			if n.kind == list {
				n.items = append(n.items, t.value())
				continue
			}
			key, line := t.token()
			n.keys = append(n.keys, entry{key.(string), line, t.value()})
		}
		t.token()
	}
	return n
}
