package document

import (
	"encoding/binary"
	"errors"
)

// Pack appends the tree of a document without problems in a form that Unpack reads
// many times faster than Parse reads the text: first the count of its nodes, then
// each node before those inside it, as its kind, its line and its text or count.
// Numbers are varints; a text follows its length.
func (n *Node) Pack(to []byte) []byte {
	to = binary.AppendUvarint(to, uint64(n.count()))
	return n.pack(to)
}

func (n *Node) count() int {
	count := 1
	for _, value := range n.inside {
		count += value.count()
	}
	return count
}

func (n *Node) pack(to []byte) []byte {
	to = binary.AppendUvarint(append(to, byte(n.kind)), uint64(n.line))
	switch n.kind {
	case single:
		to = packText(to, n.value)
	case list, keyed:
		to = binary.AppendUvarint(to, uint64(len(n.inside)))
	}
	for _, value := range n.inside {
		if n.kind == keyed {
			to = binary.AppendUvarint(packText(to, value.key), uint64(value.keyLine))
		}
		to = value.pack(to)
	}
	return to
}

func packText(to []byte, text string) []byte {
	return append(binary.AppendUvarint(to, uint64(len(text))), text...)
}

// Unpack reads the tree that Pack wrote of the document of that name. The texts of
// its nodes are parts of packed.
func Unpack(name, packed string) (*Node, error) {
	u := &unpacker{rest: packed, found: &Problems{file: name}}
	u.nodes = make([]Node, u.length())
	root := u.node(nil)
	if u.broken || u.rest != "" {
		return nil, errors.New(name + ": this is not a packed document")
	}
	return root, nil
}

type unpacker struct {
	rest   string
	found  *Problems
	nodes  []Node // still to be filled, in one piece: one allocation is quicker than thousands
	broken bool
}

// node reads the next node, what is inside it included.
func (u *unpacker) node(parent *Node) *Node {
	if u.broken = u.broken || u.rest == "" || len(u.nodes) == 0; u.broken {
		return nil
	}
	n := &u.nodes[0]
	u.nodes = u.nodes[1:]
	n.problems, n.parent = u.found, parent
	n.kind = kind(u.rest[0])
	u.rest = u.rest[1:]
	n.line = int32(u.number())
	switch n.kind {
	case single:
		n.value = u.text()
	case list, keyed:
		n.inside = make([]*Node, u.length())
	}
	for i := range n.inside {
		key, line := "", 0
		if n.kind == keyed {
			key, line = u.text(), u.number()
		}
		value := u.node(n)
		if value == nil {
			return n
		}
		value.key, value.keyLine, value.index = key, int32(line), int32(i)
		n.inside[i] = value
	}
	return n
}

func (u *unpacker) number() int {
	const most = 5 // bytes
	x := 0
	for i := 0; i < min(len(u.rest), most); i++ {
		x |= int(u.rest[i]&0x7f) << (7 * i)
		if u.rest[i] < 0x80 {
			u.rest = u.rest[i+1:]
			return x
		}
	}
	u.broken = true
	return 0
}

// length is a number of things that each take a byte or more.
func (u *unpacker) length() int {
	n := u.number()
	if n > len(u.rest) {
		u.broken = true
		return 0
	}
	return n
}

func (u *unpacker) text() string {
	n := u.length()
	text := u.rest[:n]
	u.rest = u.rest[n:]
	return text
}
