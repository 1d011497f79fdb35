package opcsign

import "strings"

// is says whether the node is the element of a name.
func (n *node) is(space, local string) bool {
	return n != nil && n.kind == element && n.space == space && n.local == local
}

// attr is the value of an attribute without namespace.
func (n *node) attr(local string) (string, bool) {
	for _, a := range n.attrs {
		if a.space == "" && a.local == local {
			return a.value, true
		}
	}
	return "", false
}

// only says whether the element has no attributes but those named, none in a namespace.
func (n *node) only(names ...string) bool {
next:
	for _, a := range n.attrs {
		for _, name := range names {
			if a.space == "" && a.local == name {
				continue next
			}
		}
		return false
	}
	return true
}

// elements are the child elements; clean is false when there is anything else but white space between them.
func (n *node) elements() (list []*node, clean bool) {
	clean = true
	for _, k := range n.kids {
		switch {
		case k.kind == element:
			list = append(list, k)
		case k.kind != text || strings.Trim(k.text, " \t\n") != "":
			clean = false
		}
	}
	return list, clean
}

// leaf is the text of an element that holds nothing but text.
func (n *node) leaf() (string, bool) {
	switch {
	case len(n.kids) == 0:
		return "", true
	case len(n.kids) == 1 && n.kids[0].kind == text:
		return n.kids[0].text, true
	}
	return "", false
}

// walk visits every node below and the node itself, parents first.
func (n *node) walk(visit func(*node)) {
	visit(n)
	for _, k := range n.kids {
		k.walk(visit)
	}
}

// find is every element of a name in the subtree.
func (n *node) find(space, local string) []*node {
	var out []*node
	n.walk(func(k *node) {
		if k.is(space, local) {
			out = append(out, k)
		}
	})
	return out
}
