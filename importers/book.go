package importers

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"path"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// Book is one opened file: every cell as text, kind and address, nothing parsed as a number.
type Book struct {
	File      qa.File
	IsText    bool // a text file: one sheet without a name, every cell a text
	Encoding  string
	Delimiter string // ";", ",", "\t"; empty for a workbook and where each record is one field
	Sheets    []cells.Sheet
	Comments  []int    // records of a text file that are comments
	Said      []string // what was detected or done, a sentence each
}

// Open reads one file: .xlsx or text (.csv, .tsv, .txt). The name is the one that messages and the record show; enc is the
// encoding of a text file as the plan states it, empty where it does not. The error is a *FileError.
func Open(name string, data []byte, enc string) (Book, error) {
	sum := sha256.Sum256(data)
	b := Book{File: qa.File{Name: name, SHA256: hex.EncodeToString(sum[:]), Bytes: int64(len(data))}}
	extension := strings.ToLower(path.Ext(strings.ReplaceAll(name, `\`, "/")))
	switch {
	case len(data) > cells.MaxFile:
		return Book{}, fileError(name, "found %d bytes, want at most 256 MiB; use a smaller file", len(data))
	case len(data) == 0:
		return Book{}, fileError(name, "found an empty file, want an .xlsx workbook or a text file; copy the file again from where it came")
	case extension == ".xlsx" || extension == ".xlsm":
		return b.workbook(data)
	case extension == ".csv" || extension == ".tsv" || extension == ".txt":
		return b.text(data, enc)
	}
	return Book{}, fileError(name, "found a name ending in %q, want .xlsx, .csv, .tsv or .txt; save the readings in one of these", extension)
}

func (b Book) workbook(data []byte) (Book, error) {
	w, err := cells.Read(data)
	if err != nil {
		e := fileError(b.File.Name, "%s", err)
		var bound *cells.BoundError
		if errors.As(err, &bound) && bound.Part == "" {
			e.Faults[0].Text = strings.TrimPrefix(e.Faults[0].Text, "the file: ")
		}
		e.Err = err
		return Book{}, e
	}
	b.Sheets = w.Sheets
	if w.Macros {
		b.Said = append(b.Said, b.File.Name+": the file holds macros; they are neither run nor read.")
	}
	return b, nil
}

func (b Book) text(data []byte, enc string) (Book, error) {
	switch {
	case bytes.HasPrefix(data, []byte("PK\x03\x04")):
		return Book{}, fileError(b.File.Name, "found a zip file or workbook, want text; name it .xlsx if it is a workbook")
	case bytes.HasPrefix(data, []byte("\xd0\xcf\x11\xe0")):
		return Book{}, fileError(b.File.Name, "found an old .xls (or password-protected) file, want text or .xlsx; save it as .xlsx")
	case bytes.HasPrefix(data, []byte("%PDF")):
		return Book{}, fileError(b.File.Name, "found a PDF file, want text or .xlsx; export the readings as a table")
	}
	text, encoding, said, err := decodeText(data, enc)
	if err != nil {
		return Book{}, fileError(b.File.Name, "%s", err)
	}
	b.IsText, b.Encoding = true, encoding
	if said != "" {
		b.Said = append(b.Said, b.File.Name+": "+said)
	}
	t, err := readText(text)
	if err != nil {
		return Book{}, fileError(b.File.Name, "%s", err)
	}
	b.Delimiter, b.Comments = t.delimiter, t.comments
	b.Sheets = []cells.Sheet{{Rows: t.rows}}
	if n := len(t.comments); n > 0 {
		b.Said = append(b.Said, fmt.Sprintf("%s: %s before the heading skipped as comments.", b.File.Name, qa.Count(n, "line", "lines")))
	}
	return b, nil
}

// sheet finds a sheet by its name; the only sheet of a text file by the empty name.
func (b Book) sheet(name string) (cells.Sheet, bool) {
	for _, s := range b.Sheets {
		if s.Name == name {
			return s, true
		}
	}
	return cells.Sheet{}, false
}

// source is the address of a cell in this book.
func (b Book) source(sheet string, c cells.Cell) qa.Source {
	return qa.Source{File: b.File.Name, Sheet: sheet, Cell: c.Name(), Text: c.Text}
}
