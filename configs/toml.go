package configs

import (
	"bytes"
	"errors"
	"sort"
	"strconv"
	"strings"

	"github.com/pelletier/go-toml/v2"
	"github.com/pelletier/go-toml/v2/unstable"
)

// parseTOML makes a tree of TOML. The library's decoder judges the whole
// first, duplicate keys and all; the tree, with its lines, is then made from
// the parser below it.
func (r *reader) parseTOML(data []byte) *node {
	var whole map[string]any
	if err := toml.Unmarshal(data, &whole); err != nil {
		line := 0
		var at *toml.DecodeError
		if errors.As(err, &at) {
			line, _ = at.Position()
		}
		r.add(line, "", "is no valid TOML: "+err.Error(), "check the brackets, equals signs and quotes about there")
		return nil
	}
	t := tomlTree{root: &node{kind: table, line: 1}}
	for i, c := range data {
		if c == '\n' {
			t.ends = append(t.ends, i)
		}
	}
	t.parser.Reset(bytes.Clone(data))
	current := t.root
	for t.parser.NextExpression() {
		e := t.parser.Expression()
		switch e.Kind {
		case unstable.Table:
			current = t.descend(t.root, e.Key(), false)
		case unstable.ArrayTable:
			current = t.descend(t.root, e.Key(), true)
		case unstable.KeyValue:
			t.keyValue(current, e)
		}
	}
	if len(t.root.keys) == 0 {
		return nil
	}
	return t.root
}

type tomlTree struct {
	parser unstable.Parser
	root   *node
	ends   []int // offsets of the line ends
}

func (t *tomlTree) line(n *unstable.Node) int {
	return 1 + sort.SearchInts(t.ends, int(n.Raw.Offset))
}

// descend walks a dotted key from a table, making what is not there; with
// another it appends a table to the list at its end.
func (t *tomlTree) descend(from *node, key unstable.Iterator, another bool) *node {
	for key.Next() {
		k := key.Node()
		name, line := string(k.Data), t.line(k)
		next := from.find(name)
		if next == nil {
			next = &node{kind: table, line: line}
			if another && key.IsLast() {
				next.kind = list
			}
			from.keys = append(from.keys, entry{name, line, next})
		}
		if next.kind == list {
			if another && key.IsLast() {
				next.items = append(next.items, &node{kind: table, line: line})
			}
			next = next.items[len(next.items)-1]
		}
		from = next
	}
	return from
}

func (t *tomlTree) keyValue(into *node, e *unstable.Node) {
	var parts []*unstable.Node
	for it := e.Key(); it.Next(); {
		parts = append(parts, it.Node())
	}
	for i, k := range parts {
		name, line := string(k.Data), t.line(k)
		if i == len(parts)-1 {
			into.keys = append(into.keys, entry{name, line, t.value(e.Value(), line)})
			break
		}
		next := into.find(name)
		if next == nil {
			next = &node{kind: table, line: line}
			into.keys = append(into.keys, entry{name, line, next})
		}
		into = next
	}
}

// value makes a node of a value on a line.
func (t *tomlTree) value(v *unstable.Node, line int) *node {
	if v.Raw.Length > 0 {
		line = t.line(v)
	}
	n := &node{kind: text, text: string(v.Data), line: line}
	switch v.Kind {
	case unstable.Bool:
		n.kind = truth
	case unstable.Integer, unstable.Float:
		n.kind, n.text = number, strings.ReplaceAll(n.text, "_", "")
	case unstable.Array:
		n.kind, n.text = list, ""
		for it := v.Children(); it.Next(); {
			n.items = append(n.items, t.value(it.Node(), line))
		}
	case unstable.InlineTable:
		n.kind, n.text = table, ""
		for it := v.Children(); it.Next(); {
			t.keyValue(n, it.Node())
		}
	}
	return n
}

// item is the path of an element of a list, counted from 1 as people do.
func item(path string, i int) string { return path + "[" + strconv.Itoa(i+1) + "]" }
