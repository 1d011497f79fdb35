package importers

import (
	"archive/zip"
	"bytes"
	"errors"
	"strings"
	"testing"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// fuzzNames claim each kind of file, and none.
var fuzzNames = []string{"d1", "d1.ods", "d1.txt", "d1.csv", "d1.xlsx", "d1.xls"}

// smallODS is an .ods spreadsheet of two lots, as small as it can be.
func smallODS(t testing.TB) []byte {
	t.Helper()
	var rows strings.Builder
	row := func(texts ...string) {
		rows.WriteString("<table:table-row>")
		for _, s := range texts {
			if isNumber(s) {
				rows.WriteString(`<table:table-cell office:value-type="float" office:value="` + s + `"/>`)
			} else {
				rows.WriteString(`<table:table-cell><text:p>` + s + `</text:p></table:table-cell>`)
			}
		}
		rows.WriteString("</table:table-row>")
	}
	row("Lot", "Bore")
	for i := range 3 {
		row("A", d1Reference[i])
	}
	for i := range 3 {
		row("B", d1Candidate[i])
	}
	var b bytes.Buffer
	z := zip.NewWriter(&b)
	write(t, z, "mimetype", "application/vnd.oasis.opendocument.spreadsheet")
	write(t, z, "content.xml", `<office:document-content xmlns:office="urn:oasis:names:tc:opendocument:xmlns:office:1.0"><office:body><office:spreadsheet><table:table table:name="D">`+
		rows.String()+`</table:table></office:spreadsheet></office:body></office:document-content>`)
	if err := z.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// Whatever a file of any kind holds, under whatever name, it is read with every cell accounted for, or refused in words.
func FuzzFormats(f *testing.F) {
	f.Add(uint8(0), "limit", smallODS(f))
	f.Add(uint8(0), "limit", xlsx(f, sheetOf{name: "Data", rows: append(long()[:4], long()[13:16]...)}))
	f.Add(uint8(2), "", []byte(coordinateReport("A", d1Reference[:2], true)+coordinateReport("B", d1Candidate[:2], true)))
	f.Add(uint8(3), "half-limit", []byte("Lot;Bore [in];x\nA;<0,05;1\nA;12-Jan;9999\nB;>100;-1\nB;BDL;12,003\n"))
	f.Add(uint8(0), "zero", []byte("L\x00o\x00t\x00,\x00x\x00\n\x00A\x00,\x001\x00\n\x00"))
	f.Fuzz(func(t *testing.T, as uint8, rule string, data []byte) {
		name := fuzzNames[int(as)%len(fuzzNames)]
		in, err := Inspect(name, data, "", "")
		if err != nil {
			file, isFile := errors.AsType[*FileError](err)
			plan, isPlan := errors.AsType[*PlanError](err)
			if !isFile && !isPlan || strings.TrimSpace(err.Error()) == "" {
				t.Fatalf("got %T %v (%v, %v), want a *FileError or a *PlanError in words", err, err, file, plan)
			}
			return
		}
		_ = in.Plan()
		if len(in.Lots) < 2 {
			return
		}
		p := plan(name, func(p *qa.Plan) {
			p.Reference.Lot, p.Candidate.Lot = in.Lots[0].Lot, in.Lots[1].Lot
			p.Reading.NonDetect = rule
		})
		if len(p.Validate()) > 0 {
			return
		}
		r, err := Read(p, files(map[string][]byte{name: data}))
		if err != nil {
			return
		}
		reconcile(t, r, map[string][]byte{name: data}, "")
		if r.Reference.Rows+r.Candidate.Rows > 20 { // the comparison has targets of its own
			return
		}
		if _, err := qa.Compare(p, r, qa.Run{}); err != nil && len(r.Characteristics) > 0 {
			t.Fatalf("got %v, want a result", err)
		}
	})
}

// A bound is a bound, a date a date and a place in the order finite, whatever the text.
func FuzzTexts(f *testing.F) {
	for _, s := range []string{"<0.05", "≤ 1,5 mm", ">1e5", "BDL", "12-Jan", "1/2/2026", "PT1H2M3S", "10:05:30,5", "2026-03-02T10:05:00Z", "１２"} {
		f.Add(s, byte('.'))
	}
	f.Fuzz(func(t *testing.T, s string, decimal byte) {
		if decimal != ',' {
			decimal = '.'
		}
		c := cells.Cell{Row: 1, Col: 1, Kind: cells.Text, Text: s}
		got := takeCell(c, true, "mm", decimal)
		ways := 0
		for _, is := range []bool{got.isValue, got.isMissing, got.isBelow, got.problem != nil} {
			if is {
				ways++
			}
		}
		if ways != 1 || got.limit != nil && !got.isBelow {
			t.Fatalf("%q: got %+v, want exactly one way", s, got)
		}
		if got.isValue && dateText(s) {
			t.Fatalf("%q: got the number %v of what looks like a date", s, got.value)
		}
		if key, kind := orderKey(c); kind != noOrder && !(key-key == 0) && kind != orderNumber {
			t.Fatalf("%q: got the place %v in the order", s, key)
		}
		_ = oddCharacter(s)
		_ = cells.ShownBy(s)
		if d, ok := keyLine(s); ok && len(d)%2 != 0 {
			t.Fatalf("%q: got %d keys and values, want pairs", s, len(d))
		}
	})
}
