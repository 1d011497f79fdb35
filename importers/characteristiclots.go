package importers

import (
	"slices"
	"strings"

	"lotpair/importers/cells"
)

// findLots finds the lot of each part's column: by the names above the headings, each above its columns; else by the letters
// before the parts' numbers (R1, R2 … C1, C2 …); else the sheet is one lot.
func (s *characteristicSheet) findLots() error {
	s.lotOf = map[int]cells.Cell{}
	for i := s.partsAt - 1; i >= max(0, s.at-10); i-- {
		if names := s.lotsAbove(i); names != nil {
			s.giveLots(names)
			s.headingTop = s.sheet.Rows[i].Number
			s.lot = turnedLot
			s.say("the lots are named in row %d.", s.headingTop)
			return nil
		}
	}
	prefixes := s.prefixes()
	switch {
	case s.byPrefix(prefixes):
		for _, p := range s.parts {
			c := p
			c.Text = prefix(p)
			s.lotOf[p.Col] = c
		}
		s.lot = turnedLot
		s.say("the lots are told apart by the letters before the parts' numbers: %s.", list(prefixes))
		return nil
	case s.whole:
		s.say("no name of a lot stands above the parts; the sheet is taken as one lot.")
		return nil
	}
	return s.refuse("found no row above the headings in row %d that names the lots %s, want each lot's name above its parts; correct the lots' names in the plan or the sheet", s.heading, list(s.hints.lots))
}

// lotsAbove are the cells of a row that name lots above the parts' columns; nil where the row is no such row.
func (s *characteristicSheet) lotsAbove(i int) []cells.Cell {
	r := s.sheet.Rows[i]
	var names []cells.Cell
	found := map[string]bool{}
	first, last := 0, 0
	if n := len(s.parts); n > 0 {
		first, last = s.parts[0].Col, s.parts[n-1].Col
	}
	for _, c := range r.Cells {
		if text := filledText(c); text != "" && c.Col >= first && c.Col <= last {
			names = append(names, c)
			found[text] = true
		}
	}
	switch {
	case len(s.hints.lots) > 0:
		if slices.ContainsFunc(s.hints.lots, func(l string) bool { return !found[joined(l)] }) {
			return nil
		}
	case len(names) < 2 || names[0].Col != first || i != s.filledAbove() || slices.ContainsFunc(names, func(c cells.Cell) bool { return c.Kind != cells.Text }):
		return nil
	}
	return names
}

// filledAbove is the index of the nearest row above the headings that holds something.
func (s *characteristicSheet) filledAbove() int {
	for i := s.partsAt - 1; i >= 0; i-- {
		if slices.ContainsFunc(s.sheet.Rows[i].Cells, stored) {
			return i
		}
	}
	return -1
}

// giveLots gives each part the nearest name at or left of its column; a merged name reaches as far as it is merged, and an
// empty column ends it.
func (s *characteristicSheet) giveLots(names []cells.Cell) {
	start, last := 0, -1 // of the run of headings without a gap
	runs := map[int]int{}
	for _, c := range s.sheet.Rows[s.partsAt].Cells {
		if filledText(c) == "" {
			continue
		}
		if c.Col != last+1 {
			start = c.Col
		}
		last = c.Col
		runs[c.Col] = start
	}
	for _, p := range s.parts {
		for _, n := range names {
			if n.Col > p.Col {
				break
			}
			if a, ok := s.mergedAt(n); ok && p.Col > a.LastCol || n.Col < runs[p.Col] {
				delete(s.lotOf, p.Col)
				continue
			}
			s.lotOf[p.Col] = n
		}
	}
}

// prefix is what stands before a part's number, without the marks between.
func prefix(p cells.Cell) string {
	m := partNumbered.FindStringSubmatch(filledText(p))
	if m == nil {
		return ""
	}
	return strings.TrimRight(m[1], " .#-")
}

// prefixes are the different letters before the parts' numbers.
func (s *characteristicSheet) prefixes() []string {
	var out []string
	for _, p := range s.parts {
		if x := prefix(p); !slices.Contains(out, x) {
			out = append(out, x)
		}
	}
	return out
}

// byPrefix says whether the letters before the parts' numbers are the lots: all those looked for, or without such names two or
// more of them.
func (s *characteristicSheet) byPrefix(prefixes []string) bool {
	if len(prefixes) < 2 || slices.Contains(prefixes, "") {
		return false
	}
	return !slices.ContainsFunc(s.hints.lots, func(l string) bool { return !slices.Contains(prefixes, joined(l)) })
}
