package importers

import (
	"lotpair/qa"
)

// OpenText opens what a spreadsheet puts on the clipboard: text, tabs between the cells. The name is the one that messages
// and the record show. The error is a *FileError. Read opens the same bytes by Open, so that a record made of them verifies.
func OpenText(name, text string) (Book, error) { return Watched{}.OpenText(name, text) }

// OpenText opens as the function of the name does, under the watch.
func (w Watched) OpenText(name, text string) (Book, error) {
	b, err := w.Open(name, []byte(text), "utf-8")
	if err != nil {
		return Book{}, err
	}
	if !b.IsText {
		return Book{}, fileError(name, "found a workbook, want text; open it as a file")
	}
	b.File = qa.FileOf(name, []byte(text))
	b.Said = append(b.Said, name+": text from the clipboard holds what the cells showed: decimals that their format hid are not there.")
	return b, nil
}
