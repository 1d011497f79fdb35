package importers

import (
	"fmt"
	"strings"

	"lotpair/importers/cells"
)

// textFile is a text file taken apart: records counted from 1 as a spreadsheet would show them, comments and blank lines counted too.
type textFile struct {
	delimiter string
	rows      []cells.Row
	comments  []int
	report    *report // the text is a measuring report
}

// readText splits the text into records and fields. A field in double quotes may hold delimiters, line breaks and doubled
// quotes (RFC 4180). Lines that begin with # before the first other record are comments.
func readText(text string, told func(done, total int) error) (textFile, error) {
	var t textFile
	s := &splitter{rest: text, line: 1}
	var room cellRoom
	record := 0
	comment := func(line string) {
		record++
		t.comments = append(t.comments, record)
		t.rows = append(t.rows, room.row(record, []string{line}))
	}
	for { // what stands before the heading
		line, after, _ := strings.Cut(s.rest, "\n")
		line = strings.TrimSuffix(line, "\r")
		if d, ok := strings.CutPrefix(strings.ToLower(line), "sep="); ok && record == 0 && len(d) == 1 {
			comment(line)
			t.delimiter = d
		} else if strings.HasPrefix(line, "#") && !headingOfNumbers(line) {
			comment(line)
		} else if strings.TrimSpace(line) == "" && after != "" {
			record++
		} else {
			break
		}
		s.rest, s.line = after, s.line+1
	}
	if t.delimiter == "" {
		t.delimiter = detectDelimiter(s.rest)
	}
	if t.delimiter == "" || t.delimiter == "\t" || record == 0 && rare(s.rest, t.delimiter) {
		if spaced, ok, err := readSpaced(s.rest, record, t.delimiter); ok || err != nil {
			spaced.comments = append(t.comments, spaced.comments...)
			spaced.rows = append(t.rows, spaced.rows...)
			return spaced, err
		}
	}
	if t.delimiter != "" {
		s.delimiter = t.delimiter[0]
		if n := strings.Count(s.rest, t.delimiter); n > cells.MaxCells { // before room is made for them
			return textFile{}, fmt.Errorf("found %d fields, want at most %d; split the file, or take out what is not readings", n, cells.MaxCells)
		}
	}
	for s.rest != "" {
		fields, err := s.record()
		if err != nil {
			return textFile{}, err
		}
		if record++; record%watchRows == 0 {
			if err := told(len(text)-len(s.rest), len(text)); err != nil {
				return textFile{}, err
			}
		}
		if record > cells.MaxRow {
			return textFile{}, fmt.Errorf("found more than %d records, want at most so many; split the file", cells.MaxRow)
		}
		if len(fields) > cells.MaxCol {
			return textFile{}, fmt.Errorf("record %d: found %d fields, want at most %d; split the file", record, len(fields), cells.MaxCol)
		}
		if row := room.row(record, fields); len(row.Cells) > 0 {
			t.rows = append(t.rows, row)
		}
	}
	if len(t.rows) == len(t.comments) {
		return textFile{}, fmt.Errorf("found no records, want a heading and readings; copy the file again from where it came")
	}
	return t, nil
}

// headingOfNumbers recognises a heading whose first column is called "#": it is no comment.
func headingOfNumbers(line string) bool {
	for _, d := range []string{"\t", ";", ","} {
		if fields := strings.Split(line, d); len(fields) > 1 && strings.TrimSpace(fields[0]) == "#" {
			return true
		}
	}
	return false
}

// cellRoom gives rows their cells out of few allocations.
type cellRoom []cells.Cell

func (room *cellRoom) row(number int, fields []string) cells.Row {
	const block = 4096
	if len(*room) < len(fields) {
		*room = make([]cells.Cell, max(len(fields), min(block, 2*len(*room)+64*len(fields))))
	}
	row := (*room)[:0]
	for i, f := range fields {
		if f != "" {
			row = append(row, cells.Cell{Row: number, Col: i + 1, Kind: cells.Text, Text: f})
		}
	}
	*room = (*room)[len(row):]
	return cells.Row{Number: number, Cells: row[:len(row):len(row)]}
}

// splitter takes one record after the other off a text.
type splitter struct {
	rest      string
	line      int
	delimiter byte // 0: each record is one field
	fields    []string
}

// record gives the fields of the next record; they hold until the one after.
func (s *splitter) record() ([]string, error) {
	s.fields = s.fields[:0]
	for {
		field, more, err := s.field()
		if err != nil {
			return nil, err
		}
		s.fields = append(s.fields, field)
		if !more {
			return s.fields, nil
		}
	}
}

// field takes one field and its delimiter or line end; more says that the record goes on.
func (s *splitter) field() (field string, more bool, err error) {
	if strings.HasPrefix(s.rest, `"`) {
		return s.quoted()
	}
	for i := 0; i < len(s.rest); i++ {
		switch c := s.rest[i]; {
		case c == s.delimiter && c != 0:
			field, s.rest = s.rest[:i], s.rest[i+1:]
			return field, true, nil
		case c == '\n' || c == '\r':
			field = s.rest[:i]
			s.endLine(i)
			return field, false, nil
		}
	}
	field, s.rest = s.rest, ""
	return field, false, nil
}

// endLine goes past the line end at i: LF, CR LF or CR.
func (s *splitter) endLine(i int) {
	n := 1
	if strings.HasPrefix(s.rest[i:], "\r\n") {
		n = 2
	}
	s.rest = s.rest[i+n:]
	s.line++
}

func (s *splitter) quoted() (string, bool, error) {
	begun := s.line
	i, doubled := 1, false
	for {
		n := strings.IndexByte(s.rest[i:], '"')
		if n < 0 {
			return "", false, fmt.Errorf("line %d: found a quoted field without its end, want a closing quote; correct the line", begun)
		}
		if i += n; !strings.HasPrefix(s.rest[i+1:], `"`) {
			break
		}
		i, doubled = i+2, true
	}
	field := s.rest[1:i]
	s.line += strings.Count(field, "\n")
	if doubled {
		field = strings.ReplaceAll(field, `""`, `"`)
	}
	i++
	switch {
	case i == len(s.rest):
		s.rest = ""
		return field, false, nil
	case s.delimiter != 0 && s.rest[i] == s.delimiter:
		s.rest = s.rest[i+1:]
		return field, true, nil
	case s.rest[i] == '\n' || s.rest[i] == '\r':
		s.endLine(i)
		return field, false, nil
	}
	return "", false, fmt.Errorf("line %d: found %s behind a closing quote, want a delimiter or the line end; correct the line", s.line, quoted(s.rest[i:min(len(s.rest), i+10)]))
}

// detectDelimiter tries tab, semicolon and comma on the first records: the one that gives the most records the same number of
// fields, two or more. The first record with a letter in it (the heading) must hold it, else a decimal comma would pass for it.
func detectDelimiter(text string) string {
	const look = 200
	best, most := "", 0
	for _, d := range []string{"\t", ";", ","} {
		s := &splitter{rest: text, line: 1, delimiter: d[0]}
		counts, heading := map[int]int{}, 0
		for n := 0; s.rest != "" && n < look; n++ {
			fields, err := s.record()
			if err != nil {
				break
			}
			for len(fields) > 1 && fields[len(fields)-1] == "" { // trailing delimiters
				fields = fields[:len(fields)-1]
			}
			if len(fields) > 1 {
				counts[len(fields)]++
				if strings.IndexFunc(strings.Join(fields, ""), isLetter) >= 0 {
					heading++
				}
			}
		}
		if heading == 0 {
			continue
		}
		for _, n := range counts {
			if n > most {
				best, most = d, n
			}
		}
	}
	return best
}

func isLetter(r rune) bool { return r >= 'A' && r <= 'Z' || r >= 'a' && r <= 'z' || r > 0x7f }
