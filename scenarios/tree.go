package scenarios

import (
	"errors"
	"fmt"

	"github.com/pelletier/go-toml/v2/unstable"
)

// nodeKind is what a node of a TOML document is.
type nodeKind int

const (
	tableNode nodeKind = iota
	arrayNode
	textNode
	numberNode
	otherNode // true, false, dates
)

func (k nodeKind) String() string {
	return [...]string{"a table", "an array", "a text", "a number", "a truth value or a date"}[k]
}

// origin is how a table came about, which decides who may add to it.
type origin int

const (
	byPassing origin = iota // named on the way to a deeper header
	byHeader                // [table] or an element of [[table]]
	byDots                  // a.b = ...
	inline                  // {...} or [...]: closed
)

// node is a value of a TOML document with its place. Keys match by case.
type node struct {
	kind  nodeKind
	made  origin
	at    place
	text  string // of a text: its content; of anything else: as written
	keys  []member
	items []*node // of an array
}

// member is one key of a table.
type member struct {
	name  string
	at    place
	value *node
}

// mostKeys bounds the keys of one table, so that looking one up is quick.
const mostKeys = 64

// find returns the member of that name, or nil.
func (n *node) find(name string) *member {
	for i := range n.keys {
		if n.keys[i].name == name {
			return &n.keys[i]
		}
	}
	return nil
}

// put adds a member, which must be new.
func (n *node) put(k keyPart, v *node) error {
	if n.find(k.name) != nil {
		return &fault{at: k.at, key: excerptKey(k.name), msg: "is given twice", accepted: "give each key once"}
	}
	if len(n.keys) >= mostKeys {
		return &fault{at: k.at, key: excerptKey(k.name), msg: fmt.Sprintf("is one key too many: a table has at most %d", mostKeys)}
	}
	n.keys = append(n.keys, member{k.name, k.at, v})
	return nil
}

// keyPart is one part of a dotted key.
type keyPart struct {
	name string
	at   place
}

// excerptKey shows a key in a message: as it is where it is a plain word.
func excerptKey(name string) string {
	if isWord(name) && len(name) <= 40 {
		return name
	}
	return excerpt(name)
}

// parseTree reads a TOML document. It alone knows the parser, whose interface
// is not promised to stay.
func parseTree(source []byte) (*node, error) {
	var p unstable.Parser
	p.Reset(source)
	b := &treeBuilder{parser: &p, root: &node{made: byHeader}}
	b.current = b.root
	for p.NextExpression() {
		if err := b.expression(p.Expression()); err != nil {
			return nil, err
		}
	}
	var bad *unstable.ParserError
	if errors.As(p.Error(), &bad) {
		at := place(0)
		if bad.Highlight != nil {
			at = place(p.Range(bad.Highlight).Offset) + 1
		}
		return nil, &fault{at: at, msg: bad.Message, accepted: "a scenario is a TOML file (toml.io)"}
	}
	return b.root, p.Error()
}

// treeBuilder gathers the expressions of a document.
type treeBuilder struct {
	parser        *unstable.Parser
	root, current *node
}

func (b *treeBuilder) expression(e *unstable.Node) (err error) {
	keys := b.keyParts(e.Key())
	switch e.Kind {
	case unstable.Table:
		b.current, err = b.header(keys)
	case unstable.ArrayTable:
		b.current, err = b.element(keys)
	default:
		err = b.assign(b.current, keys, e.Value())
	}
	return err
}

func (b *treeBuilder) keyParts(it unstable.Iterator) []keyPart {
	var keys []keyPart
	for it.Next() {
		keys = append(keys, keyPart{string(it.Node().Data), place(it.Node().Raw.Offset) + 1})
	}
	return keys
}

// header opens the table [a.b.c].
func (b *treeBuilder) header(keys []keyPart) (*node, error) {
	parent, err := b.descend(b.root, keys[:len(keys)-1], byPassing)
	if err != nil {
		return nil, err
	}
	last := keys[len(keys)-1]
	m := parent.find(last.name)
	if m == nil {
		table := &node{made: byHeader, at: last.at}
		return table, parent.put(last, table)
	}
	if m.value.kind != tableNode || m.value.made != byPassing {
		return nil, &fault{at: last.at, key: excerptKey(last.name), msg: "is given twice", accepted: "give each table once; several layers are written [[layer]]"}
	}
	m.value.made, m.value.at = byHeader, last.at
	return m.value, nil
}

// element opens a new element of the array of tables [[a.b.c]].
func (b *treeBuilder) element(keys []keyPart) (*node, error) {
	parent, err := b.descend(b.root, keys[:len(keys)-1], byPassing)
	if err != nil {
		return nil, err
	}
	last := keys[len(keys)-1]
	m := parent.find(last.name)
	if m == nil {
		if err := parent.put(last, &node{kind: arrayNode, made: byHeader, at: last.at}); err != nil {
			return nil, err
		}
		m = parent.find(last.name)
	}
	if m.value.kind != arrayNode || m.value.made == inline {
		return nil, &fault{at: last.at, key: excerptKey(last.name), msg: "is given twice, and not always as [[" + excerptKey(last.name) + "]]", accepted: "give each of them as [[...]]"}
	}
	table := &node{made: byHeader, at: last.at}
	m.value.items = append(m.value.items, table)
	return table, nil
}

// descend follows keys from a table, making what is missing.
func (b *treeBuilder) descend(from *node, keys []keyPart, made origin) (*node, error) {
	for _, k := range keys {
		m := from.find(k.name)
		if m == nil {
			table := &node{made: made, at: k.at}
			if err := from.put(k, table); err != nil {
				return nil, err
			}
			from = table
			continue
		}
		next := m.value
		if next.kind == arrayNode && next.made == byHeader && made == byPassing {
			next = next.items[len(next.items)-1]
		}
		if next.kind != tableNode || next.made == inline || made == byDots && next.made != byDots {
			return nil, &fault{at: k.at, key: excerptKey(k.name), msg: "is given twice", accepted: "give each key once"}
		}
		from = next
	}
	return from, nil
}

// assign sets a possibly dotted key within a table.
func (b *treeBuilder) assign(table *node, keys []keyPart, v *unstable.Node) error {
	last := keys[len(keys)-1]
	table, err := b.descend(table, keys[:len(keys)-1], byDots)
	if err != nil {
		return err
	}
	value, err := b.value(v, last.at)
	if err != nil {
		return err
	}
	return table.put(last, value)
}

// value converts a value; at is its place where it has none of its own.
func (b *treeBuilder) value(v *unstable.Node, at place) (*node, error) {
	if v.Raw.Length > 0 {
		at = place(v.Raw.Offset) + 1
	}
	n := &node{kind: kindOfValue(v.Kind), made: inline, at: at}
	switch n.kind {
	case arrayNode:
		for it := v.Children(); it.Next(); {
			item, err := b.value(it.Node(), at)
			if err != nil {
				return nil, err
			}
			n.items = append(n.items, item)
		}
	case tableNode:
		for it := v.Children(); it.Next(); {
			if err := b.assign(n, b.keyParts(it.Node().Key()), it.Node().Value()); err != nil {
				return nil, err
			}
		}
	default:
		n.text = string(v.Data)
	}
	return n, nil
}

func kindOfValue(k unstable.Kind) nodeKind {
	switch k {
	case unstable.InlineTable:
		return tableNode
	case unstable.Array:
		return arrayNode
	case unstable.String:
		return textNode
	case unstable.Integer, unstable.Float:
		return numberNode
	}
	return otherNode
}
