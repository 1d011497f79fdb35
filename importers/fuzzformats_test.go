package importers

import (
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// fuzzNames claim each kind of file, and none.
var fuzzNames = []string{"d1", "d1.ods", "d1.txt", "d1.csv", "d1.xlsx", "d1.xls"}

// Whatever a file of any kind holds, under whatever name, it is read with every cell accounted for, or refused in words.
func FuzzFormats(f *testing.F) {
	for _, path := range []string{"formats/marked.xlsx", "formats/marked.ods", "public/sleep.ods", "public/warpbreaks.txt"} {
		data, err := os.ReadFile(filepath.Join("testdata", filepath.FromSlash(path)))
		if err != nil {
			f.Fatal(err)
		}
		f.Add(uint8(0), "limit", data)
	}
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
