package exports

import (
	"encoding/json"
	"fmt"
	"regexp"
	"slices"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// line is the texts of a row that are not empty.
func line(r cells.Row) []string {
	var out []string
	for _, c := range r.Cells {
		if c.Kind != cells.Blank && c.Text != "" {
			out = append(out, c.Text)
		}
	}
	return out
}

// headed finds the first row from a place on that has all the headings, and the column of each text in it.
func headed(s cells.Sheet, from int, names []string) (int, map[string]int) {
	for i := from; i < len(s.Rows); i++ {
		at := map[string]int{}
		for _, c := range s.Rows[i].Cells {
			if c.Kind != cells.Blank {
				at[c.Text] = c.Col
			}
		}
		if !slices.ContainsFunc(names, func(n string) bool { return at[n] == 0 }) {
			return i, at
		}
	}
	return -1, nil
}

// tables holds every table of a sheet, line by line under its headings, wherever it stands. Elsewhere on the sheet a line of more
// than one cell would be one too many.
func (o *olderBook) tables(want *sheet) {
	got, ok := o.book.Sheet(want.name)
	if !ok {
		return // said already
	}
	known, from, next := map[int]bool{}, 0, 0
	first := 0         // row of the headings
	var names []string // headings of the table that the lines are of; none between tables
	var at map[string]int
	want.lines(func(_ int, r row) bool {
		switch {
		case headings(r):
			names = nil
			for _, c := range r.cells {
				names = append(names, c.text)
			}
			i, columns := headed(got, from, names)
			if i < 0 {
				o.say("sheet %s: found no line of the headings %s", want.name, strings.Join(names, ", "))
				names = nil
				return true
			}
			if n := len(line(got.Rows[i])); n != len(names) {
				o.say("sheet %s: found %d headings in row %d, want %d", want.name, n, got.Rows[i].Number, len(names))
			}
			from, next, at = i+1, got.Rows[i].Number+1, columns
			first = got.Rows[i].Number
			known[first] = true
		case len(r.cells) == 0 || r.cells[0].span > 1:
			names = nil
		case names != nil:
			have, _ := got.Row(next)
			have.Number = next
			for k := range min(len(r.cells), len(names)) {
				g := have.At(at[names[k]])
				compareCell(want.name, &r.cells[k], &g, nil, o.say)
			}
			if n := len(line(have)); n > filled(r) {
				o.say("sheet %s: found %d cells in row %d, want %d", want.name, n, next, filled(r))
			}
			known[next] = true
			next++
		}
		if names == nil && first > 0 {
			o.unmerged(got, first, next-1)
			first = 0
		}
		return true
	})
	if first > 0 {
		o.unmerged(got, first, next-1)
	}
	for i := range got.Rows {
		if n := got.Rows[i].Number; !known[n] && len(line(got.Rows[i])) > 1 {
			o.say("sheet %s: found a line in row %d that the record does not give", want.name, n)
		}
	}
}

// unmerged wants no cells of a table joined: all but the first of them would be out of sight.
func (o *olderBook) unmerged(s cells.Sheet, first, last int) {
	for _, a := range s.Merged {
		if a.FirstRow <= last && a.LastRow >= first {
			o.say("sheet %s: found joined cells at %s, want each on its own", s.Name, cells.Name(a.FirstCol, a.FirstRow))
		}
	}
}

func headings(r row) bool {
	return len(r.cells) > 1 && !slices.ContainsFunc(r.cells, func(c cell) bool { return c.look != headLook && c.look != headRightLook })
}

// filled counts the cells of a row that show something.
func filled(r row) int {
	n := 0
	for i := range r.cells {
		if r.cells[i].number != nil || r.cells[i].text != "" {
			n++
		}
	}
	return n
}

// results holds the sheet Results against the result as it stands in the record, name by name: whatever that version stated is
// held, also under a name that this version has no more.
func (o *olderBook) results(verdict qa.Verdict, result string) {
	got, ok := o.book.Sheet(SheetResults)
	if !ok {
		return
	}
	var stated struct {
		Characteristics []json.RawMessage `json:"characteristics"`
	}
	if err := json.Unmarshal([]byte(result), &stated); err != nil {
		o.say("record %s: %v", recordPart, err)
		return
	}
	head, at := headed(got, 0, []string{"name", "verdict"})
	if head < 0 {
		o.say("sheet %s: found no line of the headings name, verdict", SheetResults)
		return
	}
	if n := len(line(got.Rows[head])); n != len(at) {
		o.say("sheet %s: found a heading twice in row %d", SheetResults, got.Rows[head].Number)
	}
	o.begins(got, head, "Overall: "+string(verdict)+".")
	number := got.Rows[head].Number + 2 // below each name stands what it means
	for _, c := range stated.Characteristics {
		have, _ := got.Row(number)
		have.Number = number
		figures := map[string]cell{}
		var tree any
		if err := json.Unmarshal(c, &tree); err != nil {
			o.say("record %s: %v", recordPart, err)
		}
		statedFigures("", tree, figures)
		for name, w := range figures {
			if at[name] == 0 {
				o.say("sheet %s: found no column %s, want %s", SheetResults, name, w.shown())
			}
		}
		names := 0
		for name, col := range at {
			w, g := figures[name], have.At(col)
			compareCell(SheetResults, &w, &g, nil, o.say)
			if w.number != nil || w.text != "" {
				names++
			}
		}
		if n := len(line(have)); n > names {
			o.say("sheet %s: found %d cells in row %d, want %d", SheetResults, n, number, names)
		}
		number++
	}
	o.unmerged(got, got.Rows[head].Number, number-1)
	for i := range got.Rows {
		if i < head && len(line(got.Rows[i])) > 2 { // a title and that it is a draft
			o.say("sheet %s: found a line in row %d that the record does not give", SheetResults, got.Rows[i].Number)
		}
		if got.Rows[i].Number >= number && len(line(got.Rows[i])) > 0 {
			o.say("sheet %s: found a line in row %d that the record does not give", SheetResults, got.Rows[i].Number)
		}
	}
}

// begins looks above a row for a text that begins so.
func (o *olderBook) begins(s cells.Sheet, above int, words string) {
	for i := range above {
		if slices.ContainsFunc(line(s.Rows[i]), func(t string) bool { return strings.HasPrefix(t, words) }) {
			return
		}
	}
	o.say("sheet %s: found no %q", s.Name, words)
}

func (c cell) shown() string {
	if c.number != nil {
		return shortest(*c.number)
	}
	return fmt.Sprintf("%q", c.text)
}

// statedFigures lists the figures of a characteristic by their names, as flatten does of the struct.
func statedFigures(name string, v any, to map[string]cell) {
	switch x := v.(type) {
	case map[string]any:
		for k, one := range x {
			if k != "warnings" && k != "sensitivity" {
				statedFigures(join(name, k), one, to)
			}
		}
	case []any:
		var words []string
		for _, one := range x {
			if w, ok := one.(string); ok {
				words = append(words, w)
			}
		}
		if len(words) > 0 {
			to[name] = text(strings.Join(words, ", "), ruledLook)
		}
	case bool:
		to[name] = text(map[bool]string{true: "yes", false: "no"}[x], ruledLook)
	case float64:
		to[name] = number(&x, ruledNumberLook)
	case string:
		if x != "" {
			to[name] = text(x, ruledLook)
		}
	}
}

// summary holds what the first page states of the record: the sentence of the verdict, a line a characteristic, the digests and
// who signed.
func (o *olderBook) summary(rec qa.Record, digest string) {
	got, ok := o.book.Sheet(SheetSummary)
	if !ok {
		return
	}
	o.states(got, "the sentence of the verdict", func(t string) bool { return t == text(rec.Result.Sentence, verdictLook).text })
	o.states(got, "the record's id "+RecordID(digest)+" and digest", func(t string) bool {
		return strings.HasPrefix(t, "Record "+RecordID(digest)+":") && strings.HasSuffix(t, digest)
	})
	o.states(got, "the digest of the criterion "+rec.Result.Seal.Digest, func(t string) bool { return strings.HasSuffix(t, rec.Result.Seal.Digest) })
	for _, f := range slices.Concat(rec.Result.Reference.Files, rec.Result.Candidate.Files) {
		o.states(got, f.Name+" and its digest", func(t string) bool { return strings.Contains(t, cleanText(f.Name)) && strings.HasSuffix(t, f.SHA256) })
	}
	if g := rec.Signer; g != nil {
		o.signer(got, *g, g.Meaning, g.Name)
	}
	names := []string{"Characteristic", "Asked", "Readings", "Difference", "Interval", "Verdict"}
	head, at := headed(got, 0, names)
	if head < 0 {
		o.say("sheet %s: found no line of the headings %s", SheetSummary, strings.Join(names, ", "))
		return
	}
	rows := got.Rows[head+1:]
	for _, c := range rec.Result.Characteristics {
		if len(rows) > 0 && rows[0].At(at["Verdict"]).Text == "Verdict" { // headings again on the next page
			rows = rows[1:]
		}
		if len(rows) == 0 {
			o.say("sheet %s: found no line of %s", SheetSummary, c.Name)
			return
		}
		of := func(name string) string { return rows[0].At(at[name]).Text }
		if of("Characteristic") != nameCell(c).text {
			o.say("sheet %s: found %q in row %d, want %q", SheetSummary, of("Characteristic"), rows[0].Number, nameCell(c).text)
		}
		if t := of("Verdict"); t != string(c.Verdict) && !strings.HasPrefix(t, string(c.Verdict)+";") {
			o.say("sheet %s: found the verdict %q of %s, want %q", SheetSummary, t, c.Name, c.Verdict)
		}
		for name, want := range map[string]string{
			"Asked": askedText(c), "Readings": fmt.Sprintf("%d | %d", c.Reference.N, c.Candidate.N),
			"Difference": optional(c.Difference.Estimate, c.Decimals+1), "Interval": intervalText(c),
		} {
			if !slices.Equal(numbersIn(of(name)), numbersIn(want)) {
				o.say("sheet %s: found %q of %s under %s, want the numbers of %q", SheetSummary, of(name), c.Name, name, want)
			}
		}
		rows = rows[1:]
	}
	if len(rows) > 0 && rows[0].At(at["Verdict"]).Kind != cells.Blank {
		o.say("sheet %s: found a verdict in row %d that the record does not give", SheetSummary, rows[0].Number)
	}
}

var numberInText = regexp.MustCompile(`[-−]?\d+(\.\d+)?([eE][-+−]?\d+)?`)

// numbersIn are the numbers in a text, whatever the words about them.
func numbersIn(t string) []string { return numberInText.FindAllString(t, -1) }

// states wants a cell with a text that holds.
func (o *olderBook) states(s cells.Sheet, what string, holds func(t string) bool) {
	for i := range s.Rows {
		if slices.ContainsFunc(line(s.Rows[i]), holds) {
			return
		}
	}
	o.say("sheet %s: found no line of %s", s.Name, what)
}

// signer wants the line of the first signer, with words in cells of their own.
func (o *olderBook) signer(s cells.Sheet, g qa.Signer, words ...string) {
	words = append(words, bothTimes(g.Time), fingerprintLines(g.Fingerprint))
	for i := range s.Rows {
		have := line(s.Rows[i])
		if !slices.ContainsFunc(words, func(w string) bool { return !slices.Contains(have, text(w, signLook).text) }) {
			return
		}
	}
	o.say("sheet %s: found no line of the signer %s (%s)", s.Name, g.Name, g.Meaning)
}

// criterion holds the sheet of a seal: every key of the plan with its value in their order, under the name of its characteristic,
// then digests, time and signer.
func (o *olderBook) criterion(s Sealed) {
	got, ok := o.book.Sheet(SheetCriterion)
	if !ok {
		return
	}
	o.states(got, "the digest of the criterion "+s.Digest, func(t string) bool { return strings.HasSuffix(t, s.Digest) })
	o.states(got, s.PlanFile.Name+" and its digest", func(t string) bool {
		return strings.Contains(t, cleanText(s.PlanFile.Name)) && strings.HasSuffix(t, s.PlanFile.SHA256)
	})
	at := "sealed " + localTime(s.Time) + " (" + s.Time.UTC().Format("2006-01-02 15:04:05") + " UTC) by " + s.Who + "."
	o.states(got, "the time of the seal and who sealed it", func(t string) bool { return strings.Contains(t, cleanText(at)) })
	if g := s.Signer; g != nil {
		o.signer(got, *g, g.Meaning+": "+g.Name)
	}
	head, _ := headed(got, 0, []string{"Key of the plan", "Value"})
	if head < 0 {
		o.say("sheet %s: found no line of the headings Key of the plan, Value", SheetCriterion)
		return
	}
	var have, want [][2]string
	for _, r := range got.Rows[head+1:] {
		if t := line(r); len(t) > 0 {
			have = append(have, [2]string{r.At(1).Text, r.At(2).Text})
		}
	}
	made := s.sheets()[0]
	for _, r := range made.rows[made.frozen:] {
		switch {
		case len(r.cells) == 3 && r.cells[0].look == ruledLook:
			want = append(want, [2]string{r.cells[0].text, r.cells[1].text})
		case len(r.cells) == 1 && r.cells[0].look == groupLook:
			want = append(want, [2]string{r.cells[0].text})
		}
	}
	want = want[:len(want)-1] // the last heading is of the signature
	for i, w := range want {
		if i >= len(have) || have[i] != w {
			o.say("sheet %s: found another line than %s = %q, want it as %d. of the criterion", SheetCriterion, w[0], w[1], i+1)
			return
		}
	}
	for _, h := range have[len(want):] {
		if key, _, ok := strings.Cut(h[0], "."); ok && slices.Contains([]string{"criterion", "characteristic", "performance"}, key) {
			o.say("sheet %s: found the key %s once more", SheetCriterion, h[0])
		}
	}
}
