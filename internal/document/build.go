package document

import (
	"strings"

	"go.yaml.in/yaml/v3"
)

// build turns the parser's tree into nodes and records what is not taken: deep
// nesting, anchors, aliases, merge keys, tags and keys that stand twice.
func build(document *yaml.Node, found *Problems) *Node {
	return add(document.Content[0], &Node{problems: found}, 1)
}

// add fills in n from raw.
func add(raw *yaml.Node, n *Node, depth int) *Node {
	n.line, n.kind = int32(raw.Line), kindOf(raw)
	if n.kind == single {
		n.value = raw.Value
	}
	switch {
	case depth > maxDepth:
		n.Fail("nested deeper than %d levels", maxDepth)
		n.broken = true
		return n
	case raw.Kind == yaml.AliasNode:
		n.Fail("aliases (*name) are not used here; write the value out")
		n.broken = true
		return n
	case raw.Anchor != "":
		n.Fail("anchors (&name) are not used here; write the value out where it is needed")
	}
	if raw.Style&yaml.TaggedStyle != 0 {
		n.Fail("tags (!name) are not used here")
	}
	switch raw.Kind {
	case yaml.SequenceNode:
		for i, item := range raw.Content {
			n.inside = append(n.inside, add(item, &Node{problems: n.problems, parent: n, index: int32(i)}, depth+1))
		}
	case yaml.MappingNode:
		n.addEntries(raw, depth)
	}
	return n
}

func kindOf(raw *yaml.Node) kind {
	switch {
	case isNull(raw):
		return empty
	case raw.Kind == yaml.SequenceNode:
		return list
	case raw.Kind == yaml.MappingNode:
		return keyed
	}
	return single
}

// isNull reports an empty value, "~" and "null".
func isNull(raw *yaml.Node) bool { return raw.Kind == yaml.ScalarNode && raw.Tag == "!!null" }

func (n *Node) addEntries(raw *yaml.Node, depth int) {
	lines := map[string]int{}
	for i := 0; i+1 < len(raw.Content); i += 2 {
		key, value := raw.Content[i], raw.Content[i+1]
		if !n.keyIsPlain(key) {
			continue
		}
		name := strings.TrimSpace(key.Value)
		if line, twice := lines[name]; twice {
			n.failAt(key.Line, "%q stands twice; it is already on line %d", segment(name), line)
			continue
		}
		lines[name] = key.Line
		child := &Node{problems: n.problems, parent: n, key: name, keyLine: int32(key.Line)}
		n.inside = append(n.inside, add(value, child, depth+1))
	}
}

func (n *Node) keyIsPlain(key *yaml.Node) bool {
	switch {
	case key.Kind == yaml.ScalarNode && key.Tag == "!!merge":
		n.failAt(key.Line, "merge keys (<<) are not used here; write the values out")
	case key.Kind == yaml.AliasNode, key.Anchor != "":
		n.failAt(key.Line, "anchors and aliases are not used here; write the key out")
	case key.Kind != yaml.ScalarNode:
		n.failAt(key.Line, "a key must be a word")
	case strings.TrimSpace(key.Value) == "":
		n.failAt(key.Line, "a key is empty")
	case key.Style&yaml.TaggedStyle != 0:
		n.failAt(key.Line, "tags (!name) are not used here")
	default:
		return true
	}
	return false
}
