package plan

import (
	"fmt"
	"strings"

	"go.yaml.in/yaml/v4"
)

const (
	setMark  = "--set " // in the line comment of a node that an override put in
	fromHere = "\x00here:"
)

// overrideOf tells which override a node came from.
func overrideOf(n *yaml.Node) (string, bool) {
	return n.LineComment, strings.HasPrefix(n.LineComment, setMark)
}

// override puts KEY=VALUE into the plan's text before it is checked; list items go by name or place.
func (r *reader) override(root *yaml.Node, assignment string) {
	key, value, ok := strings.Cut(assignment, "=")
	mark := setMark + assignment
	bad := func(fix string) { r.faults = append(r.faults, Fault{File: mark, Fix: fix}) }
	if !ok || strings.TrimSpace(key) == "" {
		bad("write --set KEY=VALUE")
		return
	}
	var doc yaml.Node
	text := strings.TrimSpace(value)
	if err := yaml.Load([]byte(text), &doc); err != nil || len(doc.Content) != 1 {
		doc = yaml.Node{Content: []*yaml.Node{{Kind: yaml.ScalarNode, Tag: "!!str", Value: text}}}
	}
	n := doc.Content[0]
	markNode(n, mark)
	if err := place(root, strings.TrimSpace(key), n, mark); err != nil {
		bad(err.Error())
	}
}

func markNode(n *yaml.Node, mark string) {
	n.LineComment = mark
	for _, c := range n.Content {
		markNode(c, mark)
	}
}

// place walks down a dotted path and sets its end.
func place(at *yaml.Node, path string, value *yaml.Node, mark string) error {
	switch at.Kind {
	case yaml.SequenceNode:
		item, rest, err := itemOf(at, path)
		if err != nil {
			return err
		}
		if rest == "" {
			*item = *value
			return nil
		}
		return place(item, rest, value, mark)
	case yaml.MappingNode:
		name, rest, _ := strings.Cut(path, ".")
		for i := 0; i+1 < len(at.Content); i += 2 {
			if at.Content[i].Value != name {
				continue
			}
			if rest == "" {
				at.Content[i+1] = value
				return nil
			}
			if k := at.Content[i+1].Kind; k != yaml.MappingNode && k != yaml.SequenceNode {
				at.Content[i+1] = block(mark)
			}
			return place(at.Content[i+1], rest, value, mark)
		}
		key := &yaml.Node{Kind: yaml.ScalarNode, Tag: "!!str", Value: name, LineComment: mark}
		if rest == "" {
			at.Content = append(at.Content, key, value)
			return nil
		}
		child := block(mark)
		at.Content = append(at.Content, key, child)
		return place(child, rest, value, mark)
	}
	return fmt.Errorf("%s is inside a single value; name a key of the plan", path)
}

func block(mark string) *yaml.Node {
	return &yaml.Node{Kind: yaml.MappingNode, Tag: "!!map", LineComment: mark}
}

// itemOf finds a list item by the longest name (or species) that the path begins with.
func itemOf(list *yaml.Node, path string) (item *yaml.Node, rest string, err error) {
	best := -1
	var names []string
	for i, n := range list.Content {
		for _, name := range []string{nameOf(n), fmt.Sprint(i)} {
			if name == "" {
				continue
			}
			tail, ok := strings.CutPrefix(path, name)
			if ok && (tail == "" || tail[0] == '.') && len(name) > best {
				best, item, rest = len(name), n, strings.TrimPrefix(tail, ".")
			}
		}
		if name := nameOf(n); name != "" {
			names = append(names, name)
		}
	}
	if item == nil {
		return nil, "", fmt.Errorf("no item of that name; there are %s", strings.Join(names, ", "))
	}
	return item, rest, nil
}

func nameOf(n *yaml.Node) string {
	name := ""
	for i := 0; i+1 < len(n.Content) && n.Kind == yaml.MappingNode; i += 2 {
		switch n.Content[i].Value {
		case "name":
			return n.Content[i+1].Value
		case "species":
			name = n.Content[i+1].Value
		}
	}
	return name
}
