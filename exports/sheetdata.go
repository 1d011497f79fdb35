package exports

import (
	"bytes"
	"encoding/xml"
	"fmt"
	"io"
	"strconv"
	"strings"

	"github.com/xuri/excelize/v2"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// The cells are written here and not by the spreadsheet library: it cuts numbers to 15 significant digits, and the record
// needs the double that was computed. Everything around the cells (columns, merged areas, panes, printing, pictures, styles)
// is the library's.

// cols is the <cols> element of a sheet (ISO/IEC 29500-1, 18.3.1.17).
func (s *sheet) cols() []byte {
	if len(s.widths) == 0 {
		return nil
	}
	b := []byte("<cols>")
	for i, w := range s.widths {
		b = fmt.Appendf(b, `<col min="%d" max="%[1]d" width="%v" customWidth="1"/>`, i+1, w)
	}
	return append(b, "</cols>"...)
}

// writeSheetData writes the <sheetData> element of a sheet (ISO/IEC 29500-1, 18.3.1.80): numbers in the shortest form that
// reads back as the same double, texts inline.
func writeSheetData(to io.Writer, s *sheet, w *looks) error {
	const full = 1 << 16
	var b bytes.Buffer
	var err error
	b.WriteString("<sheetData>")
	s.lines(func(number int, r row) bool {
		if len(r.cells) == 0 && r.height == 0 {
			return true
		}
		if err = writeRow(&b, number, r, w); err == nil && b.Len() >= full {
			if err = w.watch.Told(qa.Progress{Doing: writing, Of: s.name, Done: int64(number), Total: int64(s.filterTo)}); err == nil {
				_, err = to.Write(b.Bytes())
			}
			b.Reset()
		}
		return err == nil
	})
	if err != nil {
		return err
	}
	b.WriteString("</sheetData>")
	_, err = to.Write(b.Bytes())
	return err
}

func writeRow(b *bytes.Buffer, number int, r row, w *looks) error {
	var room [8]byte
	at := strconv.AppendInt(room[:0], int64(number), 10)
	b.WriteString(`<row r="`)
	b.Write(at)
	if r.height > 0 {
		b.WriteString(`" ht="` + strconv.FormatFloat(min(r.height, 409), 'f', -1, 64) + `" customHeight="1`)
	}
	b.WriteString(`">`)
	col := 1
	for i := range r.cells {
		c := &r.cells[i]
		id, err := w.id(c.look)
		if err != nil {
			return err
		}
		writeCell(b, c, col, at, id)
		for k := 1; k < c.span; k++ {
			startCell(b, col+k, at, id)
			b.WriteString("/>")
		}
		col += max(c.span, 1)
	}
	b.WriteString("</row>")
	return nil
}

// letters are the names of the columns, made once.
var letters = func() (out [cells.MaxCol + 1]string) {
	for i := 1; i <= 256; i++ {
		out[i] = cells.Letters(i)
	}
	return out
}()

func startCell(b *bytes.Buffer, col int, row []byte, style int) {
	var room [8]byte
	b.WriteString(`<c r="`)
	if name := letters[col]; name != "" {
		b.WriteString(name)
	} else {
		b.WriteString(cells.Letters(col))
	}
	b.Write(row)
	b.WriteString(`" s="`)
	b.Write(strconv.AppendInt(room[:0], int64(style), 10))
	b.WriteByte('"')
}

func writeCell(b *bytes.Buffer, c *cell, col int, row []byte, style int) {
	var room [32]byte
	startCell(b, col, row, style)
	switch {
	case c.formula != "":
		writeFormula(b, *c)
	case c.number != nil:
		b.WriteString("><v>")
		b.Write(strconv.AppendFloat(room[:0], *c.number, 'g', -1, 64))
		b.WriteString("</v></c>")
	case c.text != "":
		b.WriteString(` t="inlineStr"><is><t`)
		if first, last := c.text[0], c.text[len(c.text)-1]; first <= ' ' || last <= ' ' || strings.ContainsAny(c.text, "\n\t") || strings.Contains(c.text, "  ") {
			b.WriteString(` xml:space="preserve"`)
		}
		b.WriteByte('>')
		if plainText(c.text) && !strings.Contains(c.text, "_x") {
			b.WriteString(c.text)
		} else {
			_ = xml.EscapeText(b, []byte(escapeMarks(c.text))) // a bytes.Buffer does not fail
		}
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
