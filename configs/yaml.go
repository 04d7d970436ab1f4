package configs

import (
	"bytes"
	"errors"
	"io"
	"regexp"
	"strconv"
	"strings"

	"go.yaml.in/yaml/v3"
)

// yamlLine is how the YAML library says where.
var yamlLine = regexp.MustCompile(`^yaml: (?:line ([0-9]+): )?(.*)`)

// parseYAML makes a tree of YAML. Only plain data is taken: no anchors,
// aliases, merge keys or tags.
func (r *reader) parseYAML(data []byte) *node {
	dec := yaml.NewDecoder(bytes.NewReader(data))
	var doc, second yaml.Node
	if err := dec.Decode(&doc); err != nil {
		if errors.Is(err, io.EOF) {
			return nil
		}
		r.yamlError(err)
		return nil
	}
	if err := dec.Decode(&second); err == nil {
		r.add(second.Line, "", "a second document starts here", "keep one to a file")
	} else if !errors.Is(err, io.EOF) {
		r.yamlError(err)
		return nil
	}
	if len(doc.Content) != 1 {
		return nil
	}
	return r.fromYAML(doc.Content[0], "")
}

func (r *reader) yamlError(err error) {
	m := yamlLine.FindStringSubmatch(strings.ReplaceAll(err.Error(), "\n", " "))
	line, what := 0, err.Error()
	if m != nil {
		line, _ = strconv.Atoi(m[1])
		what = m[2]
	}
	r.add(line, "", "is no valid YAML: "+what, "check the indentation, colons, brackets and quotes about there")
}

func (r *reader) fromYAML(y *yaml.Node, path string) *node {
	n := &node{line: y.Line, text: y.Value}
	bad := func(what, remedy string) *node {
		r.add(y.Line, path, what, remedy)
		n.kind = broken
		return n
	}
	if y.Anchor != "" {
		return bad("has an anchor, &"+clip(y.Anchor), "write the value out at every place")
	}
	switch y.Kind {
	case yaml.AliasNode:
		return bad("refers to an anchor, *"+clip(y.Value), "write the value out at every place")
	case yaml.SequenceNode:
		n.kind = list
		for i, c := range y.Content {
			n.items = append(n.items, r.fromYAML(c, item(path, i)))
		}
	case yaml.MappingNode:
		n.kind = table
		for i := 0; i+1 < len(y.Content); i += 2 {
			key := y.Content[i]
			if key.Kind != yaml.ScalarNode || key.Anchor != "" {
				r.add(key.Line, path, "a key here is not a plain word", "write key: value")
				continue
			}
			at := join(path, key.Value)
			if key.Tag == "!!merge" {
				r.add(key.Line, at, "merge keys are not taken", "write the keys out at every place")
				continue
			}
			value := r.fromYAML(y.Content[i+1], at)
			if value.kind == table || value.kind == list {
				value.line = key.Line // else that of what stands first in it
			}
			n.keys = append(n.keys, entry{key.Value, key.Line, value})
		}
	default:
		switch y.ShortTag() {
		case "!!null":
			n.kind = null
		case "!!int", "!!float":
			n.kind = number
		case "!!bool":
			n.kind = truth
		case "!!str", "!!timestamp":
			n.kind = text
		default:
			return bad("has the tag "+clip(y.Tag), "write the value without a tag")
		}
	}
	return n
}

// join is the path of a key inside a path.
func join(path, key string) string {
	if path == "" {
		return clip(key)
	}
	return path + "." + clip(key)
}
