package opcsign

import (
	"strconv"
	"strings"
)

// element reads an element with all that it holds.
func (p *parser) element(parent *node, depth int) (*node, error) {
	if depth > maxDepth {
		return nil, p.fail("found elements nested deeper than %d", maxDepth)
	}
	if !p.has("<") {
		return nil, p.fail("found no element")
	}
	p.pos++
	n := &node{kind: element, parent: parent}
	var err error
	if n.prefix, n.local, err = p.name(); err != nil {
		return nil, err
	}
	mark := len(p.scope)
	defer func() { p.scope = p.scope[:mark] }()
	if err := p.attributes(n); err != nil {
		return nil, err
	}
	if p.has("/>") {
		p.pos += 2
		return n, nil
	}
	p.pos++ // attributes stops only at > or />
	if err := p.content(n, depth); err != nil {
		return nil, err
	}
	prefix, local, err := p.name()
	if err != nil {
		return nil, err
	}
	p.white()
	if prefix != n.prefix || local != n.local || !p.has(">") {
		return nil, p.fail("found the end of %q, want that of %q", local, n.local)
	}
	p.pos++
	return n, nil
}

// content reads up to and with the mark of an end tag.
func (p *parser) content(n *node, depth int) error {
	var run strings.Builder
	flush := func() {
		if run.Len() > 0 {
			n.kids = append(n.kids, &node{kind: text, text: run.String(), parent: n})
			run.Reset()
		}
	}
	for p.pos < len(p.src) {
		if p.nodes++; p.nodes > maxNodes {
			return p.fail("found more than %d nodes", maxNodes)
		}
		switch {
		case p.has("</"):
			flush()
			p.pos += 2
			return nil
		case p.has("<![CDATA["):
			p.pos += len("<![CDATA[")
			s, err := p.until("]]>")
			if err != nil {
				return err
			}
			run.WriteString(s)
		case p.has("<!--"), p.has("<?"):
			flush()
			k, err := p.aside(n)
			if err != nil {
				return err
			}
			n.kids = append(n.kids, k)
		case p.has("<!DOCTYPE"):
			return &xmlError{at: p.pos, msg: "found a document type declaration", dtd: true}
		case p.has("<"):
			flush()
			k, err := p.element(n, depth+1)
			if err != nil {
				return err
			}
			n.kids = append(n.kids, k)
		case p.has("&"):
			r, err := p.entity()
			if err != nil {
				return err
			}
			run.WriteRune(r)
		default:
			end := strings.IndexAny(p.src[p.pos:], "<&")
			if end < 0 {
				end = len(p.src) - p.pos
			}
			s := p.src[p.pos : p.pos+end]
			if strings.Contains(s, "]]>") {
				return p.fail("found ]]> in text")
			}
			run.WriteString(s)
			p.pos += end
		}
	}
	return p.fail("found the end of the document inside %q", n.local)
}

// entity reads a reference to a character or to one of the five predefined entities.
func (p *parser) entity() (rune, error) {
	p.pos++
	s, err := p.until(";")
	if err != nil {
		return 0, err
	}
	switch s {
	case "amp":
		return '&', nil
	case "lt":
		return '<', nil
	case "gt":
		return '>', nil
	case "quot":
		return '"', nil
	case "apos":
		return '\'', nil
	}
	digits, base := strings.TrimPrefix(s, "#"), 10
	if strings.HasPrefix(digits, "x") {
		digits, base = digits[1:], 16
	}
	u, err := strconv.ParseUint(digits, base, 32)
	if !strings.HasPrefix(s, "#") || err != nil || u > 0x10ffff || !isChar(rune(u)) {
		return 0, p.fail("found the reference &%s;", clip(s, 20))
	}
	return rune(u), nil
}

// attributes reads the rest of a start tag up to its > or />, and puts names into namespaces.
func (p *parser) attributes(n *node) error {
	for {
		spaced := p.white()
		if p.has(">") || p.has("/>") {
			return p.bind(n)
		}
		if !spaced {
			return p.fail("found no space before an attribute")
		}
		prefix, local, err := p.name()
		if err != nil {
			return err
		}
		p.white()
		if !p.has("=") {
			return p.fail("found the attribute %q without a value", local)
		}
		p.pos++
		p.white()
		value, err := p.value()
		if err != nil {
			return err
		}
		switch {
		case prefix == "" && local == "xmlns":
			err = p.declare(n, "", value)
		case prefix == "xmlns":
			err = p.declare(n, local, value)
		default:
			n.attrs = append(n.attrs, attr{prefix: prefix, local: local, value: value})
		}
		if err != nil {
			return err
		}
	}
}

// value reads an attribute's value; literal white space becomes a space each (XML 1.0, 3.3.3).
func (p *parser) value() (string, error) {
	if !p.has(`"`) && !p.has(`'`) {
		return "", p.fail("found an attribute without quotes")
	}
	quote := p.src[p.pos]
	p.pos++
	var b strings.Builder
	for p.pos < len(p.src) {
		switch c := p.src[p.pos]; c {
		case quote:
			p.pos++
			return b.String(), nil
		case '<':
			return "", p.fail("found < in an attribute")
		case '&':
			r, err := p.entity()
			if err != nil {
				return "", err
			}
			b.WriteRune(r)
		case '\t', '\n':
			b.WriteByte(' ')
			p.pos++
		default:
			b.WriteByte(c)
			p.pos++
		}
	}
	return "", p.fail("found the end of the document in an attribute")
}

// declare notes a namespace declaration (Namespaces in XML 1.0, 3 and 5).
func (p *parser) declare(n *node, prefix, uri string) error {
	for _, d := range n.decls {
		if d.prefix == prefix {
			return p.fail("found the prefix %q declared twice", prefix)
		}
	}
	switch {
	case prefix == "xmlns", uri == nsSpace, prefix == "xml" && uri != xmlSpace, prefix != "xml" && uri == xmlSpace, prefix != "" && uri == "":
		return p.fail("found the prefix %q bound to %q", prefix, clip(uri, 60))
	}
	n.decls = append(n.decls, decl{prefix, uri})
	p.scope = append(p.scope, decl{prefix, uri})
	return nil
}

// bind gives the element and its attributes their namespaces.
func (p *parser) bind(n *node) error {
	var ok bool
	if n.space, ok = p.lookup(n.prefix); !ok {
		return p.fail("found the prefix %q undeclared", n.prefix)
	}
	seen := make(map[[2]string]bool, len(n.attrs))
	for i := range n.attrs {
		a := &n.attrs[i]
		if a.prefix != "" {
			if a.space, ok = p.lookup(a.prefix); !ok {
				return p.fail("found the prefix %q undeclared", a.prefix)
			}
		}
		if key := [2]string{a.space, a.local}; seen[key] {
			return p.fail("found the attribute %q twice", a.local)
		}
		seen[[2]string{a.space, a.local}] = true
	}
	return nil
}

func (p *parser) lookup(prefix string) (string, bool) {
	switch prefix {
	case "xml":
		return xmlSpace, true
	case "xmlns":
		return "", false
	}
	for i := len(p.scope) - 1; i >= 0; i-- {
		if p.scope[i].prefix == prefix {
			return p.scope[i].uri, true
		}
	}
	return "", prefix == ""
}

// clip keeps foreign text in messages short.
func clip(s string, n int) string {
	r := []rune(s)
	if len(r) <= n {
		return s
	}
	return string(r[:n-1]) + "…"
}
