package desk

import (
	"slices"
	"strings"

	"lotpair/qa"
)

// PageView is what one page says: the left one of the reference, the right one of the candidate.
type PageView struct {
	Side          qa.Side
	Heading       string
	Lot, Source   string
	File, Digest  string
	Parts         string
	FindingsTitle string
	Findings      []string
	ReadingsTitle string
	Readings      Readings
}

// ReadingView is one cell of a lot on a page: a reading, or what stands in the ledger where a reading was looked for.
type ReadingView struct {
	Source  qa.Source
	Cell    string // without the sheet, which stands above
	Value   string
	Note    string // why it is not used, "" for a reading in use
	LeftOut bool   // a reading that can be put back
	Used    bool
}

// Page says what is known of one lot.
func (s State) Page(side qa.Side) PageView {
	v := PageView{Side: side, Heading: strings.ToUpper(string(side))}
	if !s.Open {
		return v
	}
	l := s.Record.Readings.Reference
	if side == qa.Candidate {
		l = s.Record.Readings.Candidate
	}
	v.Lot, v.Source = s.LotName(side), l.Source
	v.File, v.Digest = fileText(l)
	v.Parts = qa.PartsText(s.Record.Readings, side)
	name := s.name()
	v.FindingsTitle, v.ReadingsTitle = "Findings, "+name, "Readings"
	if c, ok := s.Characteristic(); ok {
		v.Findings = qa.Findings(c, side)
	}
	if len(v.Findings) == 0 {
		v.Findings = []string{"nothing to look at"}
		if c, ok := s.Characteristic(); ok && slices.ContainsFunc(c.Warnings, func(w qa.Warning) bool { return w.Side == "" }) {
			v.Findings = []string{"nothing in this lot alone; see the sentences below"}
		}
	}
	v.Readings = readingsOf(l.Of(name), unread(s.Record.Readings.Ledger, side, name))
	return v
}

// LotName is what a lot is called; it may have no name.
func (s State) LotName(side qa.Side) string {
	l := s.Record.Readings.Reference
	if side == qa.Candidate {
		l = s.Record.Readings.Candidate
	}
	if s.Open && l.Name == "" {
		return "lot not named"
	}
	return l.Name
}

// ReadingText says what is known of one reading of the characteristic looked at.
func (s State) ReadingText(r qa.Reading) string {
	unit, decimals := "", r.Decimals
	if c, ok := s.Characteristic(); ok {
		unit, decimals = c.Unit, max(decimals, c.Decimals)
	}
	text := withUnit(qa.Fixed(r.Value, min(decimals, 12)), unit) + " in " + r.Source.Place()
	if r.Part != "" {
		text += ", part " + r.Part
	}
	if !r.Used() {
		text += ", left out: " + r.LeftOut
	}
	return text
}

// name is the characteristic looked at, also while there is no result.
func (s State) name() string {
	if cs := s.Record.Readings.Characteristics; s.Selected >= 0 && s.Selected < len(cs) {
		return cs[s.Selected].Name
	}
	return ""
}

// fileText names the files of a lot, the sheet where there is one, and the first file's digest.
func fileText(l qa.Lot) (file, digest string) {
	if len(l.Files) == 0 {
		return "no file", ""
	}
	file, digest = base(l.Files[0].Name), "sha-256 "+shortDigest(l.Files[0].SHA256)
	if n := len(l.Files) - 1; n > 0 {
		return file + " and " + qa.Count(n, "file", "files") + " more", digest
	}
	for _, s := range l.Series {
		if len(s.Readings) > 0 && s.Readings[0].Source.Sheet != "" {
			return file + ", sheet " + s.Readings[0].Source.Sheet, digest
		}
	}
	return file, digest
}
