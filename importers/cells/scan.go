package cells

import (
	"bytes"
	"io"
)

// token is what the scanner has come to.
type token int

const (
	endOfPart token = iota
	startTag        // name and attrs hold it
	endTag
	charData // chars holds it
)

// scanner goes through one part's XML 1.0 (W3C, fifth edition) in one pass over a small buffer. It checks what makes XML
// well-formed as far as the parts of a workbook use it, and refuses document type declarations, so that there are no
// entities but the five and those by number. Prefixes of names are kept and not resolved: the readers ask for local names
// at the places where the format has them.
type scanner struct {
	part     string
	src      io.Reader
	buf      []byte
	at, end  int  // buf[at:end] is read and not yet taken
	begun    bool // the first bytes were looked at
	wide     bool // the part is UTF-16
	done     bool // src is at its end
	declared bool // the XML declaration was read
	rooted   bool // the root element has begun

	names   []byte // the names of the open elements, one behind the other
	marks   []int  // where each of them begins
	closing bool   // the element just begun ends in itself: <a/>

	name  []byte // of the element just begun; it and the next three hold until the next token
	colon int    // where its local part begins
	attrs []attribute
	chars []byte

	decoded []byte // room for values and texts that do not stand as they are meant
}

type attribute struct{ name, value []byte }

func newScanner(part string, r io.Reader) *scanner { return newScannerSize(part, r, 64<<10) }

// newScannerSize has a buffer of the size given at first, 16 at least; it grows with the longest token.
func newScannerSize(part string, r io.Reader, size int) *scanner {
	return &scanner{part: part, src: r, buf: make([]byte, size)}
}

// fill reads on behind what is not yet taken; false at the end of the part. Slices of the buffer do not outlive it.
func (s *scanner) fill() (bool, error) {
	if s.done {
		return false, nil
	}
	if s.at > 0 {
		copy(s.buf, s.buf[s.at:s.end])
		s.end -= s.at
		s.at = 0
	}
	if s.end == len(s.buf) {
		if len(s.buf) >= MaxText {
			return false, &BoundError{Part: s.part, Found: "a tag or text of more than 1 MiB", Bound: "at most 1 MiB", Do: "shorten the text (a cell holds 32767 characters) and save it again as .xlsx"}
		}
		s.buf = append(s.buf, make([]byte, len(s.buf))...)
	}
	from := s.end
	for empty := 0; s.end < len(s.buf); {
		n, err := s.src.Read(s.buf[s.end:])
		s.end += n
		if err == io.EOF {
			s.done = true
			break
		}
		if err != nil {
			return false, err
		}
		if n > 0 {
			empty = 0
		} else if empty++; empty == 100 {
			return false, io.ErrNoProgress
		}
	}
	if !s.begun {
		s.begun = true
		return s.begin()
	}
	return s.end > from, nil
}

// byteAt is the byte i behind the next one to take; false at the end of the part.
func (s *scanner) byteAt(i int) (byte, bool, error) {
	for s.at+i >= s.end {
		if ok, err := s.fill(); !ok {
			return 0, false, err
		}
	}
	return s.buf[s.at+i], true, nil
}

// find gives how many bytes stand before the pattern, from the byte i on.
func (s *scanner) find(i int, pattern, what string) (int, error) {
	for {
		if have := s.at + i; have <= s.end {
			if n := bytes.Index(s.buf[have:s.end], []byte(pattern)); n >= 0 {
				return i + n, nil
			}
			i = max(i, s.end-s.at-len(pattern)+1)
		}
		if ok, err := s.fill(); err != nil {
			return 0, err
		} else if !ok {
			return 0, s.unsound("the end inside %s", what)
		}
	}
}

func (s *scanner) unsound(format string, args ...any) error {
	return damaged(s.part, "unsound XML: "+format, args...)
}

// next goes on to the next start, end or text.
func (s *scanner) next() (token, error) {
	if s.closing {
		s.closing = false
		s.pop()
		return endTag, nil
	}
	for {
		for s.end-s.at < 2 {
			if ok, err := s.fill(); err != nil {
				return 0, err
			} else if ok {
				continue
			}
			if s.at == s.end {
				return endOfPart, s.finish()
			}
			break
		}
		if s.buf[s.at] != '<' {
			return charData, s.text()
		}
		if s.end-s.at < 2 {
			return 0, s.unsound("the end inside a tag")
		}
		var err error
		switch s.buf[s.at+1] {
		case '/':
			return endTag, s.endTag()
		case '?':
			err = s.instruction()
		case '!':
			var is bool
			if is, err = s.declaration(); is {
				return charData, err
			}
		default:
			return startTag, s.startTag()
		}
		if err != nil {
			return 0, err
		}
	}
}

// finish says whether the part may end here.
func (s *scanner) finish() error {
	if n := len(s.marks); n > 0 {
		return s.unsound("the end inside <%s>", s.names[s.marks[n-1]:])
	}
	if !s.rooted {
		return s.unsound("no element")
	}
	return nil
}

// depth is how many elements are open, with the one just begun.
func (s *scanner) depth() int { return len(s.marks) }

func (s *scanner) push() error {
	switch {
	case len(s.marks) == MaxDepth:
		return &BoundError{Part: s.part, Found: "elements nested more than 64 deep", Bound: "at most 64", Do: "open it in the spreadsheet program and save it again as .xlsx"}
	case len(s.marks) == 0 && s.rooted:
		return s.unsound("<%s> behind the end of the root", s.name)
	}
	s.rooted = true
	s.marks = append(s.marks, len(s.names))
	s.names = append(s.names, s.name...)
	return nil
}

func (s *scanner) pop() {
	last := len(s.marks) - 1
	s.names = s.names[:s.marks[last]]
	s.marks = s.marks[:last]
}

// local is the name of the element just begun without its prefix.
func (s *scanner) local() []byte { return s.name[s.colon:] }

// is says whether the element just begun has the local name.
func (s *scanner) is(local string) bool { return string(s.local()) == local }

// attr is an attribute of the element just begun, by its name with prefix; nil where there is none.
func (s *scanner) attr(name string) []byte {
	for _, a := range s.attrs {
		if string(a.name) == name {
			return a.value
		}
	}
	return nil
}

// root goes to the root element, which must have the name.
func (s *scanner) root(local string) error {
	for {
		t, err := s.next()
		if err != nil {
			return err
		}
		if t == startTag {
			if !s.is(local) {
				return damaged(s.part, "<%s> where <%s> should be", s.name, local)
			}
			return nil
		}
	}
}

// children calls f for each child of the element just begun, to that element's end; what f leaves of a child is passed over.
func (s *scanner) children(f func() error) error {
	depth := s.depth()
	for {
		t, err := s.next()
		if err != nil {
			return err
		}
		if t == startTag {
			if err := f(); err != nil {
				return err
			}
			if err := s.leave(depth); err != nil {
				return err
			}
		}
		if s.depth() < depth {
			return nil
		}
	}
}

// leave goes on until no more than depth elements are open.
func (s *scanner) leave(depth int) error {
	for s.depth() > depth {
		if _, err := s.next(); err != nil {
			return err
		}
	}
	return nil
}

// rest reads the part to its end, that a cut-off or unsound one is found.
func (s *scanner) rest() error {
	for {
		if t, err := s.next(); err != nil || t == endOfPart {
			return err
		}
	}
}
