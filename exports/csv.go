package exports

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"strings"

	"lotpair/qa"
)

// ResultCSV writes the figures of a result as text of comma-separated values (RFC 4180), UTF-8, the names of the result format
// at the top, then a line a characteristic: the sheet Results for programs that read no workbook. Numbers are in the shortest
// form that reads back the same. A text that a spreadsheet program would take for a formula has an apostrophe before it.
func ResultCSV(r qa.Result) ([]byte, error) {
	t := resultsTable(r)
	var b bytes.Buffer
	w := csv.NewWriter(&b)
	if err := w.Write(t.names); err != nil {
		return nil, fmt.Errorf("result: %w", err)
	}
	line := make([]string, len(t.names))
	for _, row := range t.rows {
		for i, n := range t.names {
			f := row[n]
			if line[i] = guarded(f.text); f.number != nil {
				line[i] = shortest(*f.number)
			}
		}
		if err := w.Write(line); err != nil {
			return nil, fmt.Errorf("result: %w", err)
		}
	}
	w.Flush()
	if err := w.Error(); err != nil {
		return nil, fmt.Errorf("result: %w", err)
	}
	return b.Bytes(), nil
}

// guarded keeps a text from being taken for a formula.
func guarded(s string) string {
	if s != "" && strings.ContainsRune("=+-@\t\r", rune(s[0])) {
		return "'" + s
	}
	return s
}
