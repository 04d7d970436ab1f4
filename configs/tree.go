package configs

// kind is what a node of a file is.
type kind int

const (
	null kind = iota
	text
	number
	truth
	list
	table
	broken // said to be wrong already
)

var kindNames = map[kind]string{
	null: "empty", text: "text", number: "a number", truth: "true or false", list: "a list", table: "a block of keys",
}

// node is one value of a file, whatever its format, with the line it stands
// on. A scalar keeps the text it was written with.
type node struct {
	kind  kind
	text  string
	line  int
	keys  []entry
	items []*node
}

// entry is one key of a table.
type entry struct {
	name  string
	line  int
	value *node
}

// find is the first entry of a name.
func (n *node) find(name string) *node {
	for i := range n.keys {
		if n.keys[i].name == name {
			return n.keys[i].value
		}
	}
	return nil
}
