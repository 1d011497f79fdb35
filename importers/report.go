package importers

import (
	"fmt"
	"slices"
	"strings"

	"lotpair/importers/cells"
)

// report is a measuring report as text: one part after another, each with lines such as "Part: 4711-B" above a table with a
// row a feature and columns such as Feature, Meas, Nom, Err.
type report struct {
	headings []field
	columns  map[string]int // by what a column means, from 1: feature, measured, deviation and the limits
	first    int            // the line of the first headings
	blocks   []reportBlock
}

// reportBlock is one part of a report.
type reportBlock struct {
	keys  map[string]cells.Cell // what stands behind "Part:", by its word
	lines []int                 // indices into the rows
}

// The parts that columns of a report play besides limits.
const (
	featureColumn   = "feature"
	measuredColumn  = "measured"
	deviationColumn = "deviation"
)

// reportWords are the headings of measuring reports.
var reportWords = words(
	means(featureColumn, "feature|feature name|feature id|characteristic|char|dimension|dim|merkmal|element|label|id|name|bezeichnung"),
	means(measuredColumn, "meas|meas.|measured|measurement|actual|act|ist|istwert|istmaß|istmass|observed|result|messwert"),
	means(deviationColumn, "err|error|dev|deviation|diff|difference|delta|abw|abweichung|out tol|outtol"),
)

// reportHeading says which columns a line of headings has; false where it is none of a report.
func reportHeading(line string) ([]field, map[string]int, bool) {
	for _, gap := range []int{2, 1} {
		fields := spaced(line, gap)
		columns := map[string]int{}
		for i, f := range fields {
			name, _ := splitUnit(f.text)
			m := reportWords[word(name)]
			if m == "" {
				m = labelWords[word(name)]
			}
			if m != "" && columns[m] == 0 {
				columns[m] = i + 1
			}
		}
		if len(fields) >= 3 && columns[featureColumn] == 1 && columns[measuredColumn] > 1 {
			return fields, columns, true
		}
	}
	return nil, nil, false
}

// keyLine takes "Part: 4711-B   Date: 2025-03-15" apart: keys and values by turns; false where the line is none.
func keyLine(line string) ([]field, bool) {
	var out []field
	for _, f := range spaced(line, 2) {
		key, value, ok := strings.Cut(f.text, ":")
		switch {
		case ok && strings.TrimSpace(key) != "" && !isNumber(key):
			out = append(out, field{text: strings.TrimSpace(key)}, field{text: strings.TrimSpace(value)})
		case len(out) > 0 && out[len(out)-1].text == "": // the value stands apart from its key
			out[len(out)-1].text = f.text
		default:
			return nil, false
		}
	}
	return out, len(out) > 0
}

// readReport reads a measuring report; false where the text is none.
func readReport(lines []string, offset int) (textFile, bool, error) {
	r := &report{}
	t := textFile{delimiter: alignedDelimiter}
	if !slices.ContainsFunc(lines[:min(len(lines), 2*lookHeadings)], func(l string) bool { _, _, ok := reportHeading(l); return ok }) {
		return t, false, nil
	}
	keys, fresh := map[string]cells.Cell{}, true
	features := map[string]bool{}
	for i, line := range lines {
		number := offset + i + 1
		if strings.TrimSpace(line) == "" {
			continue
		}
		if ruler(line) {
			t.comments = append(t.comments, number)
			t.rows = append(t.rows, lineRow(number, []string{line}))
			continue
		}
		if headings, columns, ok := reportHeading(line); ok {
			if r.headings != nil && len(headings) != len(r.headings) {
				return t, true, fmt.Errorf("line %d: found other headings than in line %d, want the same for every part; split the report", number, r.first)
			}
			if r.headings == nil {
				r.first = number
			}
			r.headings, r.columns, fresh = headings, columns, true
			t.rows = append(t.rows, fieldRow(number, headings))
			continue
		}
		if pairs, ok := keyLine(line); ok {
			if features[word(pairs[0].text)] {
				return t, true, fmt.Errorf("line %d: found %s, the name of a feature, with fewer values than columns, want a value below each heading; correct the line", number, quoted(pairs[0].text))
			}
			row := fieldRow(number, pairs)
			if !fresh {
				keys = cloneKeys(keys)
			}
			for k := 0; k+1 < len(pairs); k += 2 {
				if c := row.At(k + 2); stored(c) {
					keys[word(pairs[k].text)] = c
				}
			}
			fresh = true
			t.rows = append(t.rows, row)
			continue
		}
		if r.headings == nil {
			t.rows = append(t.rows, lineRow(number, []string{strings.TrimSpace(line)}))
			continue
		}
		put, err := r.values(line, number)
		if err != nil {
			return t, true, err
		}
		if put == nil {
			t.rows = append(t.rows, lineRow(number, []string{strings.TrimSpace(line)}))
			continue
		}
		t.rows = append(t.rows, fieldRow(number, put))
		features[word(put[0].text)] = true
		if fresh {
			r.blocks = append(r.blocks, reportBlock{keys: keys})
			keys, fresh = cloneKeys(keys), false
		}
		last := &r.blocks[len(r.blocks)-1]
		last.lines = append(last.lines, len(t.rows)-1)
	}
	if len(r.blocks) == 0 {
		return t, true, fmt.Errorf("line %d: found no values below the headings, want a line for each feature; copy the file again from where it came", r.first)
	}
	t.report = r
	return t, true, nil
}

// plain says whether the report is one table without lines above it: any table with such headings.
func (r *report) plain() bool { return len(r.blocks) == 1 && len(r.blocks[0].keys) == 0 }

func cloneKeys(keys map[string]cells.Cell) map[string]cells.Cell {
	out := make(map[string]cells.Cell, len(keys))
	for k, v := range keys {
		out[k] = v
	}
	return out
}

// values are the fields of a line below the headings: in order where there are as many, else the numbers at the end of the line
// under the columns behind the feature's, whose name may hold spaces, else each under its own heading. nil for a note, a line
// without a digit that does not fit.
func (r *report) values(line string, number int) ([]field, error) {
	fields := spaced(line, 2)
	if strings.Contains(line, "\t") && len(fields) == len(r.headings) {
		return fields, nil
	}
	if len(fields) == len(r.headings) {
		return under(fields, r.headings, number)
	}
	words, numbers := spaced(line, 1), len(r.headings)-1
	n := len(words) - numbers
	if n >= 1 && !slices.ContainsFunc(words[n:], func(f field) bool { return !isNumber(f.text) && !missing(f.text) && !nonDetect(f.text) }) {
		name := words[0]
		for _, w := range words[1:n] {
			name.text, name.to = name.text+" "+w.text, w.to
		}
		return under(append([]field{name}, words[n:]...), r.headings, number)
	}
	put, err := under(fields, r.headings, number)
	if err == nil && put[0].text == "" {
		err = fmt.Errorf("line %d: found values without a feature's name, want one; correct the line", number)
	}
	if err != nil && !strings.ContainsAny(line, "0123456789") {
		return nil, nil
	}
	return put, err
}
