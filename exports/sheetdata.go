package exports

import (
	"bytes"
	"encoding/xml"
	"fmt"
	"strconv"
	"strings"

	"github.com/xuri/excelize/v2"

	"lotpair/importers/cells"
)

// The cells are written here and not by the spreadsheet library: it cuts numbers to 15 significant digits, and the record
// needs the double that was computed. Everything around the cells (columns, merged areas, panes, printing, pictures, styles)
// is the library's.

// sheetData is the <sheetData> element of a sheet (ISO/IEC 29500-1, 18.3.1.80): numbers in the shortest form that reads back
// as the same double, texts inline.
func sheetData(s sheet, w *looks) ([]byte, error) {
	var b bytes.Buffer
	b.WriteString("<sheetData>")
	for i, r := range s.rows {
		if len(r.cells) == 0 && r.height == 0 {
			continue
		}
		n := strconv.Itoa(i + 1)
		b.WriteString(`<row r="` + n + `"`)
		if r.height > 0 {
			b.WriteString(` ht="` + strconv.FormatFloat(min(r.height, 409), 'f', -1, 64) + `" customHeight="1"`)
		}
		b.WriteString(">")
		col := 1
		for _, c := range r.cells {
			id, err := w.id(c.look)
			if err != nil {
				return nil, err
			}
			writeCell(&b, c, cells.Name(col, i+1), id)
			for k := 1; k < c.span; k++ {
				fmt.Fprintf(&b, `<c r="%s" s="%d"/>`, cells.Name(col+k, i+1), id)
			}
			col += max(c.span, 1)
		}
		b.WriteString("</row>")
	}
	b.WriteString("</sheetData>")
	return b.Bytes(), nil
}

func writeCell(b *bytes.Buffer, c cell, name string, style int) {
	b.WriteString(`<c r="` + name + `" s="` + strconv.Itoa(style) + `"`)
	switch {
	case c.formula != "":
		writeFormula(b, c)
	case c.number != nil:
		b.WriteString("><v>" + shortest(*c.number) + "</v></c>")
	case c.text != "":
		b.WriteString(` t="inlineStr"><is><t xml:space="preserve">`)
		// Writing into a buffer cannot fail.
		_ = xml.EscapeText(b, []byte(escapeMarks(c.text)))
		b.WriteString("</t></is></c>")
	default:
		b.WriteString("/>")
	}
}

// writeFormula writes a formula with what it gives (ISO/IEC 29500-1, 18.3.1.40).
func writeFormula(b *bytes.Buffer, c cell) {
	value := escape(c.text)
	if c.number != nil {
		value = shortest(*c.number)
		b.WriteString("><f>")
	} else {
		b.WriteString(` t="str"><f>`)
	}
	b.WriteString(escape(c.formula) + "</f><v>" + value + "</v></c>")
}

// escapeMarks keeps a text that looks like an escape as it is: programs read "_x0041_" as "A" (ISO/IEC 29500-1, 22.4.2.4), so
// the underscore itself is written as an escape.
func escapeMarks(s string) string {
	if !strings.Contains(s, "_x") {
		return s
	}
	var b strings.Builder
	for i := 0; i < len(s); i++ {
		if s[i] == '_' && isEscape(s[i:]) {
			b.WriteString("_x005F")
		}
		b.WriteByte(s[i])
	}
	return b.String()
}

// isEscape says whether s begins as an escape does: _xHHHH_.
func isEscape(s string) bool {
	if len(s) < 7 || s[0] != '_' || s[1] != 'x' || s[6] != '_' {
		return false
	}
	for _, c := range s[2:6] {
		if !strings.ContainsRune("0123456789abcdefABCDEF", c) {
			return false
		}
	}
	return true
}

// merge joins the areas that the sheet's cells cover.
func merge(f *excelize.File, s sheet) error {
	for i, r := range s.rows {
		col := 1
		for _, c := range r.cells {
			if c.span > 1 {
				if err := f.MergeCell(s.name, cells.Name(col, i+1), cells.Name(col+c.span-1, i+1)); err != nil {
					return err
				}
			}
			col += max(c.span, 1)
		}
	}
	return nil
}
