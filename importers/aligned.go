package importers

import (
	"slices"
	"strings"

	"lotpair/importers/cells"
)

// alignedDelimiter is what Book.Delimiter says of a text whose columns stand below each other.
const alignedDelimiter = "spaces"

// rare says whether a delimiter stands in fewer than half of the first lines that hold something: it belongs to the text of
// a report rather than to its table.
func rare(text, delimiter string) bool {
	with, all := 0, 0
	for _, line := range strings.SplitN(text[:min(len(text), 64<<10)], "\n", 200) {
		if strings.TrimSpace(line) != "" {
			all++
		}
		if strings.Contains(line, delimiter) {
			with++
		}
	}
	return 2*with < all
}

// readSpaced reads a text that is a measuring report, or that has no delimiter and is a table whose columns stand below each
// other; false where it is neither. Reports may have tabs between their columns.
func readSpaced(text string, offset int, delimiter string) (textFile, bool, error) {
	if delimiter == "\t" && !slices.ContainsFunc(strings.SplitN(text[:min(len(text), 64<<10)], "\n", 2*lookHeadings), func(l string) bool { _, _, ok := reportHeading(l); return ok }) {
		return textFile{}, false, nil
	}
	lines := lineTexts(text)
	if err := tooMany(lines); err != nil {
		return textFile{}, delimiter != "\t", err
	}
	t, ok, err := readReport(lines, offset)
	switch {
	case delimiter == "\t" && (!ok || err == nil && t.report.plain()):
		return textFile{}, false, nil
	case ok && (err == nil || delimiter == ""):
		return t, true, err
	}
	t, ok, err = aligned(lines, offset)
	if delimiter != "" && (err != nil || !ok || t.heldBelow(delimiter)) {
		return textFile{}, false, nil // the delimiter counts after all
	}
	return t, ok, err
}

// heldBelow says whether a text stands below the headings of aligned columns, in rows of two fields or more or alone.
func (t textFile) heldBelow(text string) bool {
	below := false
	for _, r := range t.rows {
		if below && slices.ContainsFunc(r.Cells, func(c cells.Cell) bool { return strings.Contains(c.Text, text) }) {
			return true
		}
		below = below || len(r.Cells) > 1
	}
	return false
}

// aligned reads a text without a delimiter whose columns stand below each other. Its headings are the first line of two
// fields or more, one of them with a letter, that is followed by lines of as many fields with a number in one column; what
// stands before is kept as lines of one field, rules of dashes are comments. false where the text is no such table.
func aligned(lines []string, offset int) (textFile, bool, error) {
	for i := range lines {
		if i == 2*lookHeadings {
			break
		}
		for _, gap := range []int{2, 1} {
			headings, ok := alignedHeading(lines, i, gap)
			if !ok {
				continue
			}
			t, err := alignedRows(lines, i, gap, headings, offset)
			return t, true, err
		}
	}
	return textFile{}, false, nil
}

// alignedHeading says whether a line is the headings of a table of aligned columns.
func alignedHeading(lines []string, i, gap int) ([]field, bool) {
	headings := spaced(lines[i], gap)
	if len(headings) > 2 && strings.EqualFold(headings[0].text, "data:") {
		headings = headings[1:]
	}
	if len(headings) < 2 || strings.HasSuffix(headings[0].text, ":") || ruler(lines[i]) ||
		!slices.ContainsFunc(headings, func(f field) bool { return strings.IndexFunc(f.text, isLetter) >= 0 }) ||
		slices.ContainsFunc(headings, func(f field) bool { return isNumber(f.text) }) {
		return nil, false
	}
	numbers := make([]int, len(headings))
	looked, blanks := 0, 0
	for _, line := range lines[i+1:] {
		if strings.TrimSpace(line) == "" || ruler(line) {
			continue
		}
		fields := spaced(line, gap)
		if len(fields) > len(headings) || strings.HasSuffix(fields[0].text, ":") {
			break
		}
		if len(fields) < len(headings) { // blank fields
			if blanks++; blanks > 3 || gap == 1 || len(fields) < 2 {
				break
			}
			continue
		}
		for j, f := range fields {
			if isNumber(f.text) {
				numbers[j]++
			}
		}
		if looked++; looked == 3 {
			break
		}
	}
	return headings, looked >= 2 && slices.Contains(numbers, looked)
}

func alignedRows(lines []string, heading, gap int, headings []field, offset int) (textFile, error) {
	t := textFile{delimiter: alignedDelimiter}
	for i, line := range lines {
		number := offset + i + 1
		switch {
		case strings.TrimSpace(line) == "":
		case ruler(line):
			t.comments = append(t.comments, number)
			t.rows = append(t.rows, lineRow(number, []string{line}))
		case i < heading:
			t.rows = append(t.rows, lineRow(number, []string{strings.TrimSpace(line)}))
		case i == heading:
			t.rows = append(t.rows, fieldRow(number, headings))
		default:
			row, err := alignedRow(line, number, gap, headings)
			if err != nil {
				return textFile{}, err
			}
			t.rows = append(t.rows, row)
		}
	}
	return t, nil
}

// alignedRow is one line below the headings; one without a digit that does not fit is a note of one field.
func alignedRow(line string, number, gap int, headings []field) (cells.Row, error) {
	fields := spaced(line, gap)
	if gap == 1 && len(fields) == len(headings) { // separated by spaces rather than standing below each other
		return fieldRow(number, fields), nil
	}
	put, err := under(fields, headings, number)
	if err != nil && !strings.ContainsAny(line, "0123456789") {
		return lineRow(number, []string{strings.TrimSpace(line)}), nil
	}
	if err != nil {
		return cells.Row{}, err
	}
	return fieldRow(number, put), nil
}
