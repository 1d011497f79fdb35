package importers

import (
	"fmt"
	"strings"
	"testing"
	"unicode"

	"lotpair/qa"
)

// coordinateReport is D1 as a coordinate-measuring report: one part after another, fixed width, CR LF (L8). Each part has the
// bore and, where flange is set, a second feature.
func coordinateReport(lot string, values []string, flange bool) string {
	var b strings.Builder
	for i, v := range values {
		fmt.Fprintf(&b, "Part: 4711-B\r\nDate: 2025-03-15\r\n")
		if lot != "" {
			fmt.Fprintf(&b, "Lot: %s\r\nSerial: %d\r\n", lot, i+1)
		}
		b.WriteString("\r\nFeature            Meas        Nom        Err\r\n")
		m, _, _ := ParseNumber(v, '.')
		fmt.Fprintf(&b, "%-12s %10s %10s %10.3f\r\n", "Bore dia", v, "12.000", m-12)
		if flange {
			fmt.Fprintf(&b, "%-12s %10.3f %10s %10.3f\r\n", "Flange", 80+float64(i)/1000, "80.000", float64(i)/1000)
		}
		b.WriteString("\r\n")
	}
	return b.String()
}

func TestReadReport(t *testing.T) { // L8
	r := mustRead(t, plan("d1.txt"), []byte(coordinateReport("REF-0417", d1Reference, true)+coordinateReport("CAND-0931", d1Candidate, true)))
	wantD1(t, r)
	c := r.Characteristics
	if len(c) != 2 || c[0].Name != "Bore dia" || c[1].Name != "Flange" || c[0].Target == nil || *c[0].Target != 12 || *c[1].Target != 80 {
		t.Errorf("got the characteristics %+v, want Bore dia and Flange with their nominal values", c)
	}
	x := r.Reference.Series[0].Readings[1]
	if x.Source.Cell != "B16" || x.Source.Text != "11.994" || x.Part != "2" || x.Decimals != 3 {
		t.Errorf("got %+v, want 11.994 of part 2 from field B of line 16", x)
	}
	if len(r.Warnings) != 0 || len(r.Ledger) != 0 {
		t.Errorf("got the warnings %v and the ledger %v, want none", r.Warnings, r.Ledger)
	}
}

func TestReadReportFilePerLot(t *testing.T) {
	p := plan("ref.rpt", func(p *qa.Plan) { p.Candidate.File = "cand.rpt" })
	data := map[string][]byte{"ref.rpt": []byte(coordinateReport("", d1Reference, false)), "cand.rpt": []byte(coordinateReport("", d1Candidate, false))}
	r, err := Read(p, files(data))
	if err != nil {
		t.Fatal(err)
	}
	wantD1(t, r)
	reconcile(t, r, data, "")
}

func TestReadReportLines(t *testing.T) {
	whole := coordinateReport("REF-0417", d1Reference, false) + coordinateReport("CAND-0931", d1Candidate, false)
	first := "Bore dia         12.003     12.000      0.003\r\n"
	if !strings.Contains(whole, first) {
		t.Fatalf("got the report\n%s\nwant the line %q", whole[:300], first)
	}
	change := func(to string) []byte { return []byte(strings.Replace(whole, first, to, 1)) }
	for _, tt := range []struct {
		name, line string
		n, missing int
	}{
		{"dashes", "Bore dia             -     12.000          -\r\n", 11, 1},
		{"blank", "Bore dia                   12.000           \r\n", 11, 1},
		{"a note", first + "measured by hand\r\n", 12, 0},
	} {
		r, err := read(t, plan("d1.txt"), change(tt.line))
		if err != nil {
			t.Errorf("%s: got %v", tt.name, err)
			continue
		}
		if s := r.Reference.Series[0]; len(s.Values()) != tt.n || s.Missing != tt.missing {
			t.Errorf("%s: got n = %d, %d missing, want %d and %d", tt.name, len(s.Values()), s.Missing, tt.n, tt.missing)
		}
	}
	tabbed := strings.NewReplacer("Feature            Meas        Nom        Err", "Feature\tMeas\tNom\tErr", "Bore dia     ", "Bore dia\t", "     12.000     ", "\t12.000\t").Replace(whole)
	wantD1(t, mustRead(t, plan("d1.txt"), []byte(tabbed)))
	r := mustRead(t, plan("d1.txt"), change("Bore dia         12.003     12.000      0.300\r\n"))
	wantWarning(t, r, "report-deviations", "D7")
	for _, tt := range []struct {
		line  string
		words []string
	}{
		{"Bore dia         12.003     12.000      0.003      7.0\r\n", []string{"line 7", "12.000"}},
		{"Bore dia  12.003\r\n", []string{"line 7"}},
		{first + "Bore dia:        12.003\r\n", []string{"line 8", "name of a feature"}},
		{"                 12.003     12.000\r\n", []string{"line 7", "feature's name"}},
	} {
		_, err := read(t, plan("d1.txt"), change(tt.line))
		wantFileError(t, err, tt.words...)
	}
	for _, tt := range []struct {
		line  string
		words []string
	}{
		{first + first, []string{"row 8", "second time", "row 7"}},
		{"Bore dia         12.003     12.500     -0.497\r\n", []string{"12.5", "nominal"}},
	} {
		_, err := read(t, plan("d1.txt"), change(tt.line))
		wantPlanError(t, err, tt.words...)
	}
	_, err := read(t, plan("d1.txt", func(p *qa.Plan) { p.Reading.Layout = "column-per-lot" }), []byte(whole))
	wantPlanError(t, err, "reading.layout", "measuring report")
	_, err = read(t, plan("d1.txt"), []byte(strings.ReplaceAll(whole, "Lot:", "Order:")))
	if err != nil {
		t.Errorf("got %v, want the lots found by their names whatever the word before them", err)
	}
}

func TestReadReportPages(t *testing.T) {
	page := "Serial: %d\nLot: %s\n\nFeature  Meas  Nom\nBore  %s  12.000\n\nSerial: %d\nLot: %s\n\nFeature  Meas  Nom\nFlange  80.01  80.00\n\n"
	var b strings.Builder
	for i := range d1Reference {
		fmt.Fprintf(&b, page, i+1, "REF-0417", d1Reference[i], i+1, "REF-0417")
	}
	for i := range d1Candidate {
		fmt.Fprintf(&b, page, i+1, "CAND-0931", d1Candidate[i], i+1, "CAND-0931")
	}
	r := mustRead(t, plan("d1.txt"), []byte(b.String()))
	wantD1(t, r)
	if r.Reference.Rows != 12 {
		t.Errorf("got %d parts, want 12: a part on two pages is one", r.Reference.Rows)
	}
}

func TestReadAligned(t *testing.T) {
	var b strings.Builder
	b.WriteString("Bore of the hub\n\nLot         Part   Bore dia [mm]\n----------------------------------\n")
	for i, v := range d1Reference {
		fmt.Fprintf(&b, "%-9s %6d   %13s\n", "REF-0417", i+1, v)
	}
	for i, v := range d1Candidate {
		fmt.Fprintf(&b, "%-9s %6d   %13s\n", "CAND-0931", i+1, v)
	}
	r := mustRead(t, plan("d1.prn"), []byte(b.String()))
	wantD1(t, r)
	if x := r.Reference.Series[0].Readings[0]; x.Source.Cell != "C5" || x.Part != "1" {
		t.Errorf("got %+v, want part 1 from field C of line 5", x)
	}
	single := strings.NewReplacer("Bore dia [mm]", "Bore", "   ", " ", "  ", " ").Replace(b.String())
	wantD1(t, mustRead(t, plan("d1.txt"), []byte(single)))
	gap := strings.Replace(b.String(), "       11.994\n", "             \n", 1)
	if s := mustRead(t, plan("d1.prn"), []byte(gap)).Reference.Series[0]; s.Missing != 1 || len(s.Values()) != 11 {
		t.Errorf("got %+v, want one missing", s)
	}
	titled := "Report, by hand, of the bores\nwith text, more of it\n"
	wantD1(t, mustRead(t, plan("d1.prn"), []byte(titled+b.String())))
	delimited := "Name  Value\nTemp  20.1\nHumidity  45.0\nPressure  990.5\nGauge  14.0\nScale  1.0\n" + strings.Repeat("note\n", 40) + longCSV(";", ".")
	wantD1(t, mustRead(t, plan("d1.csv"), []byte(delimited)))
	_, err := read(t, plan("d1.prn"), []byte(strings.Replace(b.String(), "12.011\n", "12.011   7.5\n", 1)))
	wantFileError(t, err, "line 7", "4 fields")
}

// Whatever a text holds, its lines are taken apart without loss: every character that is no space stands in a cell, but for
// the colons behind the keys of a report and the word "Data:" before headings.
func FuzzSpaced(f *testing.F) {
	f.Add(coordinateReport("R", d1Reference[:2], true))
	f.Add("x\n\nLot  Bore\n--- ---\nA  1.0\nA  1.1\nB  1.2\nB\n")
	f.Add("Part: 1   Date: 2\nFeature Meas Nom\nBore 1 1\n")
	f.Fuzz(func(t *testing.T, text string) {
		got, ok, err := readSpaced(text, 0, "")
		if err != nil || !ok {
			return
		}
		have := map[int]string{}
		for _, r := range got.rows {
			for _, c := range r.Cells {
				have[r.Number] += letters(c.Text)
			}
		}
		for i, line := range lineTexts(text) {
			want, got := letters(line), have[i+1]
			if want != got && !strings.HasPrefix(strings.ToLower(want), "data") {
				t.Fatalf("line %d %q: got %q in its cells, want %q", i+1, line, got, want)
			}
		}
	})
}

// letters are the characters of a text that are neither white space nor colons.
func letters(s string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsSpace(r) || r == ':' {
			return -1
		}
		return r
	}, s)
}
