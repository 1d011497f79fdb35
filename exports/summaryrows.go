package exports

import (
	"fmt"
	"math"
	"strings"

	"lotpair/qa"
)

// Layout of the summary: eight columns, the left four the reference's page, the right four the candidate's.
const (
	summaryHalf     = 4
	summaryColumns  = 8
	spineColumn     = 6   // 1-based; the picture covers this column and the next
	spineRowHeight  = 30  // points; the picture's lines stand in the middle of these rows
	summaryLineRoom = 135 // characters a line of running text
	smallRoom       = 172
)

var summaryWidths = []float64{23, 18, 9, 12, 18, 15.5, 15.5, 16}

// summarySheet is the first page: facing lots, verdicts in words, criterion, sources, cautions and signatures.
func summarySheet(rec qa.Record, digest string) sheet {
	s := sheet{name: SheetSummary, widths: summaryWidths}
	r := rec.Result
	s.addTall(wordLines(orDash(r.Title), 72)*20+6, wide(orDash(r.Title), titleWrapLook, summaryColumns))
	paragraph(&s, supportsLine(rec), mutedLook, summaryLineRoom, 13)
	if n := len(rec.Supersedes); n > 0 {
		paragraph(&s, SupersedesText(rec.Supersedes[n-1]), strongWrapLook, 115, 14)
	}
	s.gap()
	facingLots(&s, rec)
	s.gap()
	paragraph(&s, r.Sentence, verdictLook, 105, 17)
	paragraph(&s, qa.Asked(r), mutedLook, summaryLineRoom, 14)
	verdictTable(&s, r)
	s.gap()
	criterionBlock(&s, rec)
	sourceBlock(&s, rec)
	heldBlock(&s, rec)
	s.gap()
	section(&s, "Cautions")
	for _, c := range qa.Cautions() {
		paragraph(&s, c, smallLook, smallRoom, 12.5)
	}
	s.gap()
	signatureBlock(&s, rec, digest)
	return s
}

func orDash(s string) string {
	if s == "" {
		return "—"
	}
	return s
}

func supportsLine(rec qa.Record) string {
	var parts []string
	add := func(word, s string) {
		if s != "" {
			parts = append(parts, word+" "+s)
		}
	}
	add("supports", rec.Result.Supports)
	add("part", rec.Plan.Record.Part)
	add("revision", rec.Plan.Record.Revision)
	add("claim:", map[string]string{"lots": "these two lots only"}[rec.Result.Claim])
	return strings.Join(parts, "  ·  ")
}

// section is a heading with its rule and a little room below.
func section(s *sheet, head string) {
	s.add(wide(head, groupLook, summaryColumns))
	s.addTall(3)
}

// lines is how many lines a text takes at so many characters a line.
func lines(s string, room int) float64 {
	n := 0.0
	for _, l := range strings.Split(s, "\n") {
		n += math.Max(1, math.Ceil(float64(len([]rune(l)))/float64(room)))
	}
	return n
}

func paragraph(s *sheet, t string, l look, room int, lineHeight float64) {
	n := 0.0
	for _, line := range strings.Split(t, "\n") {
		n += wordLines(line, room)
	}
	s.addTall(n*lineHeight+1, wide(t, l, summaryColumns))
}

func facingLots(s *sheet, rec qa.Record) {
	both := func(room int, line float64, left, right string, a, b look) {
		s.addTall(max(wordLines(left, room), wordLines(right, room))*line+2, wide(left, a, summaryHalf), wide(right, b, summaryHalf))
	}
	r, p := rec.Result, rec.Plan.Record
	const plain, large = 60, 34 // characters of a line of each size
	both(plain, 14, "●  REFERENCE", "CANDIDATE  ◇", referenceLook, candidateLook)
	both(large, 19, orDash(r.Reference.Lot), orDash(r.Candidate.Lot), lotLook, rightLotLook)
	both(plain, 13, orDash(r.Reference.Source), orDash(r.Candidate.Source), leftPlainLook, rightPlainLook)
	both(plain, 13, fileLine(r.Reference), fileLine(r.Candidate), mutedLook, rightMutedLook)
	both(plain, 13, qa.PartsText(rec.Readings, qa.Reference), qa.PartsText(rec.Readings, qa.Candidate), leftPlainLook, rightPlainLook)
	if p.QuantityReference != nil || p.QuantityCandidate != nil {
		both(plain, 13, quantity(p.QuantityReference), quantity(p.QuantityCandidate), mutedLook, rightMutedLook)
	}
	if p.GaugeReference != "" || p.GaugeCandidate != "" {
		both(plain, 13, "measured with "+orDash(p.GaugeReference), "measured with "+orDash(p.GaugeCandidate), mutedLook, rightMutedLook)
	}
	if p.Sampling != "" {
		paragraph(s, "Sampling: "+p.Sampling, mutedLook, summaryLineRoom, 14)
	}
}

func quantity(x *float64) string {
	if x == nil {
		return "lot size not stated"
	}
	return "from a lot of " + qa.Plain(*x)
}

func fileLine(l qa.LotResult) string {
	names := make([]string, len(l.Files))
	for i, f := range l.Files {
		names[i] = f.Name
	}
	return strings.Join(names, ", ")
}

// verdictTable is the spine in print: a line a characteristic; the picture is laid over the two empty columns.
func verdictTable(s *sheet, r qa.Result) {
	heads := []cell{
		text("Characteristic", headLook), text("Asked", headLook), text("Readings", headLook), text("Difference", headLook),
		text("Interval", headLook), wide("on the scale of its margin", headLook, 2), text("Verdict", headLook),
	}
	s.add(heads...)
	n := len(r.Characteristics)
	if n > 0 && n <= maxSpineLines {
		s.pictures = append(s.pictures, spinePicture(r, len(s.rows)+1))
	}
	for i, c := range r.Characteristics {
		if i > 0 && headsAgain(i, n) > headsAgain(i-1, n) {
			s.breaks = append(s.breaks, len(s.rows)+1)
			s.addTall(spineRowHeight, heads...)
		}
		s.addTall(spineRowHeight, nameCell(c), text(askedText(c), ruledWrapLook),
			text(fmt.Sprintf("%d | %d", c.Reference.N, c.Candidate.N), ruledLook),
			text(optional(c.Difference.Estimate, c.Decimals+1), ruledLook), text(intervalText(c), ruledWrapLook),
			wide("", ruledLook, 2), text(verdictText(c), ruledStrongLook))
	}
}

// headsAgain is how often the headings of a table of so many lines stand again above a line: where it goes over several pages, at
// the head of each, as many lines as have room on A4 and on Letter.
func headsAgain(line, lines int) int {
	const whole, first, next = 28, 20, 28
	if lines <= whole || line < first {
		return 0
	}
	return 1 + (line-first)/next
}

// nameCell is a name in the room of a line of the spine; the sheet Results has it in full.
func nameCell(c qa.Comparison) cell {
	const plain, most = 44, 84
	name := []rune(nameWithUnit(c))
	if len(name) <= plain {
		return text(string(name), ruledWrapLook)
	}
	if len(name) > most {
		name = append(name[:most-1], '…')
	}
	return text(string(name), ruledSmallLook)
}

func nameWithUnit(c qa.Comparison) string {
	if c.Kind == "attribute" {
		return c.Name + " [fraction that failed]"
	}
	if c.Unit == "" {
		return c.Name
	}
	return c.Name + " [" + c.Unit + "]"
}

func askedText(c qa.Comparison) string {
	if c.Objective.AgainstMargin() {
		word := map[qa.Objective]string{qa.Equivalence: "within", qa.NotLower: "not lower:", qa.NotHigher: "not higher:"}[c.Objective]
		return word + " " + qa.MarginText(c)
	}
	return string(c.Objective)
}

func verdictText(c qa.Comparison) string {
	s := string(c.Verdict)
	if c.Detectable && c.Verdict == qa.Equivalent {
		s += "; a shift is detectable"
	}
	return s
}

func optional(x *float64, decimals int) string {
	if x == nil {
		return "—"
	}
	return qa.Fixed(*x, decimals)
}

func intervalText(c qa.Comparison) string {
	level, low, high := c.Difference.Level, c.Difference.Lower, c.Difference.Upper
	if e := c.Equivalence; e != nil && c.Objective.AgainstMargin() {
		level, low, high = e.Level, e.Lower, e.Upper
	}
	if level == nil || low == nil || high == nil {
		return "none"
	}
	return fmt.Sprintf("%s to %s\n(%s)", qa.Fixed(*low, c.Decimals+1), qa.Fixed(*high, c.Decimals+1), qa.Percent(*level, 2))
}

func criterionBlock(s *sheet, rec qa.Record) {
	r := rec.Result
	section(s, "Criterion")
	paragraph(s, sealText(r.Seal), plainLook, summaryLineRoom, 14)
	paragraph(s, "Digest of the criterion (SHA-256): "+r.Seal.Digest, smallLook, smallRoom, 12.5)
	paragraph(s, "The margin is the equivalence limit of ASTM E2935. All characteristics asked for equivalence, not lower or not higher must hold.", smallLook, smallRoom, 12.5)
	var reasons []string
	of := map[string][]string{}
	for _, c := range r.Characteristics {
		e := c.Equivalence
		if e == nil || e.Margin.Reason == "" {
			continue
		}
		t := e.Margin.Reason + prefixed("; approved by ", e.Margin.ApprovedBy)
		if of[t] == nil {
			reasons = append(reasons, t)
		}
		of[t] = append(of[t], c.Name)
	}
	for _, t := range reasons {
		paragraph(s, "Margin of "+someOf(of[t])+": "+t, smallLook, smallRoom, 12.5)
	}
	permits := shortList{sheet: s, where: "Results, under equivalence.permits"}
	for _, c := range r.Characteristics {
		if e := c.Equivalence; e != nil && e.Permits != nil {
			permits.add(fmt.Sprintf("%s: at the worse end of its margin (%s) Ppk would be %s and %s outside the limits, from the reference's mean and spread.",
				c.Name, qa.MarginText(c), qa.Fixed(e.Permits.Ppk, 2), qa.ShareText(e.Permits.Outside)))
		}
	}
	permits.end()
	s.gap()
}

// someOf lists a few names and counts the others.
func someOf(names []string) string {
	const most = 6
	if n := len(names) - most; n > 0 {
		return strings.Join(names[:most], ", ") + fmt.Sprintf(" and %d others", n)
	}
	return strings.Join(names, ", ")
}

// sealText says whether the criterion is known to have been fixed before the readings were seen.
func sealText(seal qa.Seal) string {
	if seal.Time == "" {
		return "The criterion was not sealed: this record does not show that it was fixed before the readings were seen."
	}
	when := map[string]string{"unopened": "before the readings were opened", "opened": "after the readings had been opened"}[seal.Readings]
	if when == "" {
		when = "and it is not known whether the readings had been opened"
	}
	t := "The criterion was sealed " + seal.Time + ", " + when + "."
	if seal.Amended > 0 {
		t += fmt.Sprintf(" It was amended %d times since.", seal.Amended)
	}
	return t
}

func sourceBlock(s *sheet, rec qa.Record) {
	section(s, "Source files")
	seen := map[string]bool{}
	files := append(append([]qa.File{}, rec.Result.Reference.Files...), rec.Result.Candidate.Files...)
	if rec.PlanFile.Name != "" {
		files = append(files, rec.PlanFile)
	}
	for _, f := range files {
		if seen[f.Name+f.SHA256] {
			continue
		}
		seen[f.Name+f.SHA256] = true
		paragraph(s, fmt.Sprintf("%s, %d bytes, SHA-256 %s", f.Name, f.Bytes, f.SHA256), smallLook, smallRoom, 12.5)
	}
	s.gap()
}

// heldBlock says what stands in the ledger and what the checks came upon.
func heldBlock(s *sheet, rec qa.Record) {
	section(s, "Findings")
	paragraph(s, ledgerText(rec.Readings.Ledger), plainLook, summaryLineRoom, 14)
	out := shortList{sheet: s, where: "Ledger"}
	for _, e := range rec.Readings.Ledger {
		if e.TakenAs == qa.TakenExcluded {
			out.add(fmt.Sprintf("Left out: %s %s, found %q: %s", e.Characteristic, e.Source.Place(), e.Source.Text, e.Reason))
		}
	}
	out.end()
	for _, w := range rec.Result.Warnings { // of the whole comparison: all of them
		paragraph(s, w.Text, smallLook, smallRoom, 12.5)
	}
	found := shortList{sheet: s, where: "Findings"}
	for _, c := range rec.Result.Characteristics {
		for _, w := range c.Warnings {
			found.add(c.Name + ": " + w.Text)
		}
	}
	found.end()
}

// shortList writes the first lines of a list on the summary, and where the others stand.
type shortList struct {
	sheet *sheet
	where string
	n     int
}

// mostLines is how many lines of a list the summary has.
const mostLines = 24

func (l *shortList) add(t string) {
	if l.n++; l.n <= mostLines {
		paragraph(l.sheet, t, smallLook, smallRoom, 12.5)
	}
}

func (l *shortList) end() {
	if l.n > mostLines {
		paragraph(l.sheet, fmt.Sprintf("… and %d more: sheet %s.", l.n-mostLines, l.where), smallLook, smallRoom, 12.5)
	}
}

func ledgerText(ledger []qa.Entry) string {
	if len(ledger) == 0 {
		return "Every cell of the lots was a plain number."
	}
	counts := map[qa.TakenAs]int{}
	for _, e := range ledger {
		counts[e.TakenAs]++
	}
	var parts []string
	for _, as := range []qa.TakenAs{qa.TakenNotANumber, qa.TakenExcluded, qa.TakenMissing, qa.TakenNonDetect, qa.TakenNumber, qa.TakenSummary} {
		word := map[qa.TakenAs]string{
			qa.TakenNotANumber: "could not be read", qa.TakenExcluded: "left out with a reason", qa.TakenMissing: "missing",
			qa.TakenNonDetect: "beyond a detection limit", qa.TakenNumber: "converted to a number", qa.TakenSummary: "in summary rows, not used",
		}[as]
		if n := counts[as]; n > 0 {
			parts = append(parts, fmt.Sprintf("%d %s", n, word))
		}
	}
	return "Cells in the ledger: " + strings.Join(parts, ", ") + "."
}
