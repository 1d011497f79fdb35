package importers

import (
	"errors"
	"fmt"
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
	report    *report  // the text is a measuring report
	Said      []string // what was detected or done, a sentence each
}

// Open reads one file: a workbook (.xlsx, .xlsm), an .ods spreadsheet or text, told apart by what it holds. The name is the
// one that messages and the record show; enc is the encoding of a text file as the plan states it, empty where it does not.
// The error is a *FileError.
func Open(name string, data []byte, enc string) (Book, error) {
	return Watched{}.Open(name, data, enc)
}

// Open opens as the function of the name does, under the watch.
func (w Watched) Open(name string, data []byte, enc string) (Book, error) {
	if err := w.told(reading, name, 0, int64(len(data))); err != nil {
		return Book{}, err
	}
	b := Book{File: qa.FileOf(name, data)}
	switch {
	case len(data) > cells.MaxFile:
		return Book{}, fileError(name, "found %d bytes, want at most 256 MiB; use a smaller file", len(data))
	case len(data) == 0:
		return Book{}, fileError(name, "found an empty file, want a workbook or a text file; copy the file again from where it came")
	}
	is, err := checkContent(name, data)
	if err != nil {
		return Book{}, err
	}
	if is.kind == textContent {
		return b.text(data, enc, w)
	}
	return b.workbook(data, is.kind, w)
}

func (b Book) workbook(data []byte, kind contentKind, watch Watched) (Book, error) {
	read := watch.cells(b.File.Name).Read
	if kind == odsContent {
		read = watch.cells(b.File.Name).ReadODS
	}
	w, err := read(data)
	if err != nil {
		if stopped(err) {
			return Book{}, err
		}
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

func (b Book) text(data []byte, enc string, w Watched) (Book, error) {
	text, encoding, said, err := decodeText(data, enc)
	if err != nil {
		return Book{}, fileError(b.File.Name, "%s", err)
	}
	b.Encoding = encoding
	if said != "" {
		b.Said = append(b.Said, b.File.Name+": "+said)
	}
	t, err := readText(text, w.records(b.File.Name))
	if err != nil {
		if stopped(err) {
			return Book{}, err
		}
		return Book{}, fileError(b.File.Name, "%s", err)
	}
	return b.taken(t), nil
}

// taken puts what a text file was taken apart into.
func (b Book) taken(t textFile) Book {
	b.IsText, b.Delimiter, b.Comments, b.report = true, t.delimiter, t.comments, t.report
	b.Sheets = []cells.Sheet{{Rows: t.rows}}
	if t.delimiter == alignedDelimiter {
		b.Said = append(b.Said, b.File.Name+": no delimiter; the columns stand below each other and are split at spaces.")
	} else if n := len(t.comments); n > 0 {
		b.Said = append(b.Said, fmt.Sprintf("%s: %s before the heading skipped as comments.", b.File.Name, qa.Count(n, "line", "lines")))
	}
	return b
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
