package opcsign

import (
	"bytes"
	"fmt"
	"regexp"
	"strings"
	"unicode/utf8"
)

// The parser reads the small strict part of XML that packages need: UTF-8, namespaces, no document type. It is our own
// because canonicalisation needs what encoding/xml does not keep (prefixes, where a line break in an attribute came
// from), and because a signature has to be read by one reading only: whatever is unusual is refused.

type kind int

const (
	element kind = iota
	text
	comment
	instruction
)

// node is a node of the tree. A text node holds CDATA as well.
type node struct {
	kind          kind
	prefix, local string // of an element; local is also the target of an instruction
	space         string
	attrs         []attr
	decls         []decl
	parent        *node
	kids          []*node
	text          string
}

type attr struct{ prefix, local, space, value string }

// decl is a namespace declaration; the prefix of a default namespace is "".
type decl struct{ prefix, uri string }

// document is a parsed document: the root element and the comments and instructions around it.
type document struct {
	root          *node
	before, after []*node
}

const (
	maxDepth = 200
	maxNodes = 1 << 20
	xmlSpace = "http://www.w3.org/XML/1998/namespace"
	nsSpace  = "http://www.w3.org/2000/xmlns/"
)

// xmlError says where and what; dtd marks the one kind that has a code of its own.
type xmlError struct {
	at  int
	msg string
	dtd bool
}

func (e *xmlError) Error() string { return fmt.Sprintf("byte %d: %s", e.at, e.msg) }

var declaration = regexp.MustCompile(`^<\?xml[ \t\n]+version[ \t\n]*=[ \t\n]*(?:"1\.0"|'1\.0')(?:[ \t\n]+encoding[ \t\n]*=[ \t\n]*(?:"([A-Za-z][A-Za-z0-9._-]*)"|'([A-Za-z][A-Za-z0-9._-]*)'))?(?:[ \t\n]+standalone[ \t\n]*=[ \t\n]*(?:"(?:yes|no)"|'(?:yes|no)'))?[ \t\n]*\?>`)

type parser struct {
	src   string
	pos   int
	nodes int
	scope []decl // in force, innermost last
}

// parseXML reads a document.
func parseXML(b []byte) (doc *document, err error) {
	b = bytes.TrimPrefix(b, []byte("\xef\xbb\xbf"))
	if !utf8.Valid(b) {
		return nil, &xmlError{msg: "found bytes that are no UTF-8"}
	}
	// Line ends become LF before anything else (XML 1.0, 2.11).
	b = bytes.ReplaceAll(bytes.ReplaceAll(b, []byte("\r\n"), []byte("\n")), []byte("\r"), []byte("\n"))
	p := &parser{src: string(b)}
	for i, r := range p.src {
		if !isChar(r) {
			return nil, &xmlError{at: i, msg: fmt.Sprintf("found the character %U", r)}
		}
	}
	if m := declaration.FindStringSubmatch(p.src); m != nil {
		if enc := m[1] + m[2]; enc != "" && !strings.EqualFold(enc, "utf-8") {
			return nil, &xmlError{msg: "found the encoding " + enc + ", want UTF-8"}
		}
		p.pos = len(m[0])
	}
	doc = &document{}
	if doc.before, err = p.misc(); err != nil {
		return nil, err
	}
	if doc.root, err = p.element(nil, 0); err != nil {
		return nil, err
	}
	if doc.after, err = p.misc(); err != nil {
		return nil, err
	}
	if p.pos < len(p.src) {
		return nil, p.fail("found something after the root element")
	}
	return doc, nil
}

func (p *parser) fail(format string, args ...any) error {
	return &xmlError{at: p.pos, msg: fmt.Sprintf(format, args...)}
}

func (p *parser) has(s string) bool { return strings.HasPrefix(p.src[p.pos:], s) }

func (p *parser) white() bool {
	from := p.pos
	for p.pos < len(p.src) && strings.IndexByte(" \t\n", p.src[p.pos]) >= 0 {
		p.pos++
	}
	return p.pos > from
}

// until takes what stands before a mark, and the mark.
func (p *parser) until(mark string) (string, error) {
	i := strings.Index(p.src[p.pos:], mark)
	if i < 0 {
		return "", p.fail("found no %q", mark)
	}
	s := p.src[p.pos : p.pos+i]
	p.pos += i + len(mark)
	return s, nil
}

// misc reads comments, instructions and white space outside the root.
func (p *parser) misc() ([]*node, error) {
	var out []*node
	for {
		p.white()
		switch {
		case p.has("<!--"), p.has("<?"):
			n, err := p.aside(nil)
			if err != nil {
				return nil, err
			}
			out = append(out, n)
		case p.has("<!DOCTYPE"):
			return nil, &xmlError{at: p.pos, msg: "found a document type declaration", dtd: true}
		default:
			return out, nil
		}
	}
}

// aside reads a comment or an instruction.
func (p *parser) aside(parent *node) (*node, error) {
	if p.has("<!--") {
		p.pos += len("<!--")
		s, err := p.until("--")
		if err != nil {
			return nil, err
		}
		if !p.has(">") {
			return nil, p.fail("found -- inside a comment")
		}
		p.pos++
		return &node{kind: comment, text: s, parent: parent}, nil
	}
	p.pos += len("<?")
	prefix, target, err := p.name()
	if err != nil {
		return nil, err
	}
	if prefix != "" || strings.EqualFold(target, "xml") {
		return nil, p.fail("found the instruction %q", target)
	}
	if !p.white() && !p.has("?>") {
		return nil, p.fail("found no space after an instruction's target")
	}
	s, err := p.until("?>")
	return &node{kind: instruction, local: target, text: s, parent: parent}, err
}

// name reads a qualified name.
func (p *parser) name() (prefix, local string, err error) {
	local, err = p.ncname()
	if err == nil && p.has(":") {
		p.pos++
		prefix = local
		local, err = p.ncname()
	}
	return prefix, local, err
}

func (p *parser) ncname() (string, error) {
	from := p.pos
	for i, r := range p.src[p.pos:] {
		if !nameStart(r) && (i == 0 || !nameRest(r)) {
			break
		}
		p.pos = from + i + utf8.RuneLen(r)
	}
	if p.pos == from {
		return "", p.fail("found no name")
	}
	return p.src[from:p.pos], nil
}

// isChar is the production Char of XML 1.0 (fifth edition, 2.2).
func isChar(r rune) bool {
	return r == '\t' || r == '\n' || r == '\r' || r >= 0x20 && r <= 0xd7ff || r >= 0xe000 && r <= 0xfffd || r >= 0x10000 && r <= 0x10ffff
}

// nameStart is the production NameStartChar without the colon, of ASCII: the editions of XML 1.0 differ on which other
// letters a name may have, and nothing that is read here needs them.
func nameStart(r rune) bool {
	return r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r == '_'
}

// nameRest are the characters that NameChar has beyond NameStartChar, of ASCII.
func nameRest(r rune) bool {
	return r == '-' || r == '.' || r >= '0' && r <= '9'
}
