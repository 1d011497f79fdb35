package cells

import (
	"slices"
	"strings"
)

// readComments marks the cells of a sheet on which a comment hangs. What the comments say is not read.
func (o *outline) readComments(part string, s *Sheet) error {
	rels, err := relations(o.pack, part)
	if err != nil {
		return err
	}
	for _, r := range rels {
		if !strings.HasSuffix(r.kind, "/comments") {
			continue
		}
		if err := o.commented(r.target, s); err != nil {
			return err
		}
	}
	return nil
}

func (o *outline) commented(name string, s *Sheet) error {
	r, err := o.pack.open(name)
	if err != nil || r == nil {
		return err
	}
	defer func() { _ = r.Close() }()
	x := newScanner(name, r)
	if err := x.root("comments"); err != nil {
		return err
	}
	err = x.children(func() error {
		if !x.is("commentList") {
			return nil
		}
		return x.children(func() error {
			if col, row, ok := Parse(string(x.attr("ref"))); ok && x.is("comment") {
				s.mark(col, row, Commented)
			}
			return nil
		})
	})
	if err == nil {
		err = x.rest()
	}
	return err
}

// mark adds a mark to a stored cell.
func (s *Sheet) mark(col, row int, m Marks) {
	r, ok := s.Row(row)
	if !ok {
		return
	}
	if i, ok := slices.BinarySearchFunc(r.Cells, col, func(c Cell, col int) int { return c.Col - col }); ok {
		r.Cells[i].Marks |= m
	}
}
