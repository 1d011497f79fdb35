package qa

import (
	"crypto/sha256"
	"encoding/hex"
)

// Source is where a value stood and what stood there.
type Source struct {
	File  string `json:"file"`            // as named in the plan
	Sheet string `json:"sheet,omitempty"` // empty for text files
	Cell  string `json:"cell"`            // column letters and 1-based row; rows of text files are counted in records
	Text  string `json:"text"`            // the stored text, as found
}

// Place is the address inside the file: "Data!D17", or "D17" for a text file.
func (s Source) Place() string {
	if s.Sheet == "" {
		return s.Cell
	}
	return s.Sheet + "!" + s.Cell
}

// String is the full address: "hub-shell.xlsx!Data!D17".
func (s Source) String() string { return s.File + "!" + s.Place() }

// Reading is one measured value, in the unit of its characteristic, with its origin. The mean of repeat readings of one part
// is one reading: its source lists the cells and texts of all of them.
type Reading struct {
	Value    float64 `json:"value"` // finite
	Source   Source  `json:"source"`
	Part     string  `json:"part,omitempty"`  // the part's id as written, empty where the file has none
	Decimals int     `json:"decimals"`        // decimals written in the cell, for the resolution
	Group    string  `json:"group,omitempty"` // the sub-lot, as written
	Order    string  `json:"order,omitempty"` // when or as which it was measured, as stored
	Pair     string  `json:"pair,omitempty"`  // the id that its partner in the other lot has, as written
	LeftOut  string  `json:"left_out,omitempty"`
}

// Used says whether the reading takes part in the test: it was not left out with a reason.
func (r Reading) Used() bool { return r.LeftOut == "" }

// File is one file that readings came from.
type File struct {
	Name   string `json:"name"`   // as in the plan
	SHA256 string `json:"sha256"` // lower-case hexadecimal digest of the bytes read
	Bytes  int64  `json:"bytes"`
}

// FileOf names a file and takes the digest of its bytes.
func FileOf(name string, data []byte) File {
	sum := sha256.Sum256(data)
	return File{Name: name, SHA256: hex.EncodeToString(sum[:]), Bytes: int64(len(data))}
}
