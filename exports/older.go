package exports

import (
	"bufio"
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"

	"lotpair/exports/opcsign"
	"lotpair/importers/cells"
	"lotpair/qa"
)

// A record has to be verifiable for decades, and this program is not the one that wrote it then: words, widths and pages have
// changed since. Of a record of an earlier layout the figures are therefore held by what they mean and not by where they stand:
// the sheet Results by its headings, which are the names of the result format, against the result as it stands in the record;
// Readings, Ledger, Findings and Trail by their headings, line by line; of the Summary the sentence of the verdict, the table of
// verdicts, the digests and the signer. The rest is wording, which that version alone can make again.
//
// What a forger gains by claiming an earlier layout. The number stands in the record and under the signature, so whoever claims
// it is the signer, or somebody who signs in a name of his own making. He gains what is not compared: running text of Summary and
// Method, Workings, Sensitivity, pictures, pages and how cells look. There he can write a sentence that the record does not
// state. He can change no figure, reading, verdict word, finding, act, digest or signer where they are stated, hide no line and
// add no sheet or line to a table. It is said with every such record what was not compared (layout-version), and the version
// that wrote it, or any that has its layout, finds the rest. With a number that no version known here has nothing could be held
// against anything: such a file is not called intact (layout-unknown).

// knownLayout says whether a layout is one that this program can hold a workbook against.
func knownLayout(n int) bool { return n >= 1 && n <= Layout }

// unknownLayout ends the verification of a file whose layout is not known here. It is no record that this version can read.
func (v *Verification) unknownLayout(report opcsign.Report, layout int) {
	text := fmt.Sprintf("found layout %d, want 1 to %d: a newer version of Lotpair wrote this file, and its sheets cannot be held against the record in it; verify it with that version", layout, Layout)
	if layout < 1 {
		text = fmt.Sprintf("found layout %d or none, want 1 to %d: no version of Lotpair writes a file like this; ask the signer for the original", layout, Layout)
	}
	v.reason("layout-unknown", recordPart, text)
	v.State = Unreadable
	if len(report.Signatures) > 0 && !report.Sound() {
		v.State = Changed
	}
}

// olderBook is a workbook of an earlier layout, held by what it means.
type olderBook struct {
	v     *Verification
	book  cells.Workbook
	found int
}

// say notes a difference.
func (o *olderBook) say(format string, a ...any) {
	if o.found++; o.found <= maxDifferences {
		o.v.disagree("sheets-differ", "", fmt.Sprintf(format, a...))
	}
}

// older opens a workbook of an earlier layout and looks for what may be on no sheet: one that the layouts do not have, or
// anything hidden.
func (v *Verification) older(pkg []byte, must, may []string) (*olderBook, bool) {
	book, err := cells.Read(pkg)
	if err != nil {
		v.disagree("sheets-differ", "", err.Error())
		return nil, false
	}
	o := &olderBook{v: v, book: book}
	for _, name := range must {
		if _, ok := book.Sheet(name); !ok {
			o.say("sheet %s: found none, want one", name)
		}
	}
	seen := map[string]bool{}
	for _, s := range book.Sheets {
		if seen[s.Name] || !slices.Contains(must, s.Name) && !slices.Contains(may, s.Name) {
			o.say("sheet %s: found one that the record does not give", s.Name)
		}
		seen[s.Name] = true
		if s.Hidden {
			o.say("sheet %s: found it hidden, want it in sight", s.Name)
		}
		if len(s.HiddenCols) > 0 {
			o.say("sheet %s: found hidden columns, want all in sight", s.Name)
		}
		for i := range s.Rows {
			if s.Rows[i].Hidden {
				o.say("sheet %s: row %d is hidden", s.Name, s.Rows[i].Number)
			}
			for _, c := range s.Rows[i].Cells {
				if c.Formula && s.Name != SheetWorkings {
					o.say("%s!%s: found a formula, want a value", s.Name, c.Name())
				}
				if c.Format != "" { // it could show another number than the cell holds
					o.say("%s!%s: found the number format %q, want none", s.Name, c.Name(), c.Format)
				}
			}
		}
	}
	return o, true
}

// olderRecord holds a record's workbook of an earlier layout against the record.
func (v *Verification) olderRecord(pkg []byte, rec qa.Record, x *recordXML) {
	o, ok := v.older(pkg, []string{SheetSummary, SheetResults, SheetFindings, SheetReadings, SheetLedger, SheetWorkings, SheetPictures, SheetTrail, SheetMethod}, []string{SheetSensitivity})
	if !ok {
		return
	}
	o.results(rec.Result.Verdict, x.Result)
	o.summary(rec, v.digest)
	for _, s := range []sheet{findingsSheet(rec), readingsSheet(rec), ledgerSheet(rec), trailSheet(rec)} {
		o.tables(&s)
	}
	v.reason("layout-version", recordPart, fmt.Sprintf("the workbook is of layout %d, this program writes layout %d. Compared were all figures and verdicts of Results, every line of Readings, Ledger, Findings and Trail, "+
		"and of Summary the sentence of the verdict, the table of verdicts, digests and signer; not compared were other wording, Workings, Sensitivity, Method, pictures, pages and how it looks; the version that wrote it (%s) compares these too",
		x.Layout, Layout, orWord(rec.Result.Software.Version, "see the sheet Method")))
}

// olderSeal holds a seal's workbook of an earlier layout against the seal.
func (v *Verification) olderSeal(pkg []byte, s Sealed, layout int) {
	o, ok := v.older(pkg, []string{SheetCriterion}, nil)
	if !ok {
		return
	}
	o.criterion(s)
	v.reason("layout-version", recordPart, fmt.Sprintf("the workbook of this seal is of layout %d, this program writes layout %d. Compared were every key of the plan with its value, digests, time and signer; not compared were "+
		"other wording, pages and how it looks; the version that wrote it (%s) compares these too", layout, Layout, orWord(s.Software.Version, "stated in the sheet")))
}

// storedDigest is the digest of a record's content from the bytes that stand in the file: what this program would write of the
// same record may have a field more by now, and the record would get another id.
func storedDigest(pkg []byte, x *recordXML) (string, error) {
	r, _, err := opcsign.OpenPart(pkg, recordPart)
	if err != nil {
		return "", fmt.Errorf("record: %w", err)
	}
	var acts, content []json.RawMessage
	if err := json.Unmarshal([]byte(x.Trail), &acts); err != nil {
		return "", fmt.Errorf("record %s: %w", recordPart, err)
	}
	for _, a := range acts {
		var act struct {
			What string `json:"what"`
		}
		if err := json.Unmarshal(a, &act); err != nil {
			return "", fmt.Errorf("record %s: %w", recordPart, err)
		}
		if !strings.HasPrefix(act.What, signedAs) {
			content = append(content, a)
		}
	}
	sum, in := sha256.New(), bufio.NewReaderSize(r, 1<<16)
	for { // tag by tag: a ">" in a text is escaped
		b, err := in.ReadBytes('>')
		if errors.Is(err, io.EOF) {
			return "", fmt.Errorf("record %s: found no trail, want one", recordPart)
		}
		if err != nil {
			return "", fmt.Errorf("record: %w", err)
		}
		if string(b) == "<trail>" {
			break
		}
		sum.Write(b)
	}
	sum.Write([]byte("["))
	sum.Write(bytes.Join(rawBytes(content), []byte(",")))
	sum.Write([]byte("]"))
	return hex.EncodeToString(sum.Sum(nil)), nil
}

func rawBytes(list []json.RawMessage) [][]byte {
	out := make([][]byte, len(list))
	for i, m := range list {
		out[i] = m
	}
	return out
}
