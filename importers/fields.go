package importers

import (
	"fmt"
	"strings"

	"lotpair/importers/cells"
)

// field is one field of a line whose columns stand below each other; from and to count characters.
type field struct {
	text     string
	from, to int
}

// spaced splits a line at runs of at least gap spaces; a tab is as good as any run.
func spaced(line string, gap int) []field {
	var out []field
	at, begun, spaces := 0, -1, 0
	var text, held strings.Builder
	end := func() {
		if begun >= 0 {
			out = append(out, field{text: text.String(), from: begun, to: at - spaces})
		}
		text.Reset()
		held.Reset()
		begun = -1
	}
	for _, r := range line {
		switch {
		case r == '\t':
			end()
			spaces = 0
			at++
			continue
		case r == ' ' || r == '\u00a0':
			spaces++
			held.WriteRune(' ')
			if spaces >= gap {
				at++
				if begun >= 0 {
					end()
				}
				continue
			}
		default:
			if begun < 0 {
				begun = at
			} else {
				text.WriteString(held.String())
			}
			held.Reset()
			spaces = 0
			text.WriteRune(r)
		}
		at++
	}
	end()
	return out
}

// ruler says whether a line is a rule under headings: dashes and the like only.
func ruler(line string) bool {
	s := strings.TrimSpace(line)
	return len(s) >= 3 && strings.Trim(s, "-=_+| \t*") == ""
}

// under puts the fields of a line under the headings: in order where there are as many, else each under the one heading that
// it stands below. The error says why it cannot be told.
func under(fields, headings []field, number int) ([]field, error) {
	out := make([]field, len(headings))
	if len(fields) > len(headings) {
		return nil, fmt.Errorf("line %d: found %d fields, want at most %d as there are headings; correct the line", number, len(fields), len(headings))
	}
	last := -1
	for i, f := range fields {
		at := -1
		for j, h := range headings {
			if f.from < h.to && h.from < f.to {
				if at >= 0 && len(fields) < len(headings) {
					return nil, fmt.Errorf("line %d: found %s below two headings, %s and %s, want it below one; correct the line", number, quoted(f.text), quoted(headings[at].text), quoted(h.text))
				}
				if at < 0 || j == i {
					at = j
				}
			}
		}
		switch {
		case len(fields) == len(headings) && at >= 0 && at != i:
			return nil, fmt.Errorf("line %d: found %s below the heading %s, want it below %s; correct the line", number, quoted(f.text), quoted(headings[at].text), quoted(headings[i].text))
		case len(fields) == len(headings):
			at = i
		case at < 0:
			return nil, fmt.Errorf("line %d: found %s below no heading, want as many fields as headings (%d), or each below its own; correct the line", number, quoted(f.text), len(headings))
		case at <= last:
			return nil, fmt.Errorf("line %d: found two fields below the heading %s, want one; correct the line", number, quoted(headings[at].text))
		}
		out[at], last = f, at
	}
	return out, nil
}

// fieldRow makes a row of fields; empty ones are no cells.
func fieldRow(number int, fields []field) cells.Row {
	texts := make([]string, len(fields))
	for i, f := range fields {
		texts[i] = f.text
	}
	return lineRow(number, texts)
}

// lineTexts are the lines of a text without their ends.
func lineTexts(text string) []string {
	text = strings.ReplaceAll(text, "\r\n", "\n")
	text = strings.ReplaceAll(text, "\r", "\n")
	return strings.Split(strings.TrimSuffix(text, "\n"), "\n")
}

// tooMany refuses more lines than a sheet has rows.
func tooMany(lines []string) error {
	if len(lines) > cells.MaxRow {
		return fmt.Errorf("found more than %d lines, want at most so many; split the file", cells.MaxRow)
	}
	return nil
}

// lineRow is one line as a row; empty fields are no cells.
func lineRow(number int, fields []string) cells.Row {
	row := cells.Row{Number: number}
	for i, f := range fields {
		if f != "" {
			row.Cells = append(row.Cells, cells.Cell{Row: number, Col: i + 1, Kind: cells.Text, Text: f})
		}
	}
	return row
}
