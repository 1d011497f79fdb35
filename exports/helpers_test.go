package exports_test

import (
	"archive/zip"
	"bytes"
	"crypto/rand"
	"io"
	mrand "math/rand/v2"
	"strconv"
	"testing"
	"time"

	"lotpair/exports"
	"lotpair/exports/identity"
	"lotpair/exports/opcsign"
	"lotpair/importers/cells"
	"lotpair/qa"
)

var when = time.Date(2026, 12, 1, 9, 30, 0, 0, time.FixedZone("CET", 3600))

// hostile are texts that a file may hold and that must come back as they were, as text.
var hostile = []string{`=HYPERLINK("http://example.invalid","x")`, "+12.003", "-1+1", "@SUM(A1)", "_x0041_", "<b>&amp;\"'", " lead and trail ", "tab\tand\nbreak", "ctrl\x01\x0b", "naïve µm 測定 🚲", ""}

func ptr[T any](x T) *T { return &x }

// record is a whole record of three characteristics, with hostile texts among names and readings.
func record(t testing.TB) qa.Record {
	t.Helper()
	rng := mrand.New(mrand.NewPCG(7, 11))
	m := 0.05
	plan := qa.Plan{
		Format: qa.PlanFormat, Title: "Axle A-7 & sons: second line", Supports: "DEV-1", Record: qa.Particulars{Part: "A-7", Revision: "B"},
		Reference: qa.LotPlan{Lot: "R", Source: "=cmd", File: "lots.xlsx"}, Candidate: qa.LotPlan{Lot: "C", File: "lots.xlsx"},
		Criterion: qa.Criterion{Objective: qa.Equivalence, Margin: &qa.Margin{Absolute: &m}},
		Characteristics: []qa.Characteristic{
			{Name: "Bore", Unit: "mm", Lower: ptr(9.8), Upper: ptr(10.2)},
			{Name: "=Length", Unit: "mm"},
			{Name: "Run-out", Unit: "µm", Upper: ptr(10.5), Objective: qa.NotHigher},
		},
	}
	r := qa.Readings{Characteristics: plan.Characteristics, Said: []string{"The heading was found in row 1."}}
	for _, side := range []qa.Side{qa.Reference, qa.Candidate} {
		lot := qa.Lot{Name: plan.LotOf(side).Lot, Source: plan.LotOf(side).Source, Rows: 12, Files: []qa.File{{Name: "lots.xlsx", SHA256: "00ff", Bytes: 12}}}
		for j, c := range plan.Characteristics {
			s := qa.Series{Characteristic: c.Name, Rows: 12}
			for i := range 12 {
				v := 10 + 0.01*rng.NormFloat64()
				one := qa.Reading{Value: v, Decimals: 3, Part: strconv.Itoa(i), Source: qa.Source{File: "lots.xlsx", Sheet: "Data", Cell: "C" + strconv.Itoa(i+2), Text: strconv.FormatFloat(v, 'f', -1, 64)}}
				if j == 0 && i < len(hostile) {
					one.Source.Text = hostile[i]
				}
				if j == 2 {
					one.Group, one.Order = "heat "+hostile[i%3], "2026-03-02T10:"+strconv.Itoa(i)
				}
				if j == 1 && i == 3 {
					one.LeftOut = "@dropped"
				}
				s.Readings = append(s.Readings, one)
			}
			lot.Series = append(lot.Series, s)
		}
		if side == qa.Reference {
			r.Reference = lot
		} else {
			r.Candidate = lot
		}
	}
	for i, h := range hostile {
		r.Ledger = append(r.Ledger, qa.Entry{Source: qa.Source{File: "lots.xlsx", Sheet: "Data", Cell: "E" + strconv.Itoa(i+2), Text: h}, TakenAs: qa.TakenMissing, Side: qa.Reference, Characteristic: "Bore"})
	}
	r.Account = []qa.Account{{File: "lots.xlsx", Sheet: "Data", As: "readings", Cells: 72}}
	result, err := qa.Compare(plan, r, qa.Run{Software: qa.Software{Version: "test"}, Seal: qa.Seal{Digest: plan.SealDigest(), Readings: "unknown"}, Attempts: qa.Attempts{Known: 1, KeptBy: "not counted"}})
	if err != nil {
		t.Fatal(err)
	}
	return qa.NewRecord(plan, qa.File{Name: "plan.toml", SHA256: "aa"}, r, result, "tester", when)
}

func person(t testing.TB, name string) identity.Identity {
	t.Helper()
	id, err := identity.New(name, "Engineer", "Invented works", when, rand.Reader)
	if err != nil {
		t.Fatal(err)
	}
	return id
}

func signed(t testing.TB) []byte {
	t.Helper()
	pkg, err := exports.SignFirst(record(t), person(t, "Ada Quill"), opcsign.Statement{Meaning: "prepared", Reason: "a reason", Time: when, Zone: "CET"})
	if err != nil {
		t.Fatal(err)
	}
	return pkg
}

// rezip writes a package anew after edit has changed its parts; every entry keeps its name and place.
func rezip(t testing.TB, pkg []byte, edit func(name string, b []byte) []byte) []byte {
	t.Helper()
	in, err := zip.NewReader(bytes.NewReader(pkg), int64(len(pkg)))
	if err != nil {
		t.Fatal(err)
	}
	var out bytes.Buffer
	w := zip.NewWriter(&out)
	for _, f := range in.File {
		r, err := f.Open()
		if err != nil {
			t.Fatal(err)
		}
		b, err := io.ReadAll(r)
		if err != nil {
			t.Fatal(err)
		}
		b = edit(f.Name, b)
		if b == nil {
			continue
		}
		e, err := w.Create(f.Name)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := e.Write(b); err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	return out.Bytes()
}

// sheetFile is the part of a sheet in a workbook of ours: they are numbered in their order.
func sheetFile(t testing.TB, pkg []byte, name string) string {
	t.Helper()
	book, err := cells.Read(pkg)
	if err != nil {
		t.Fatal(err)
	}
	for i, s := range book.Sheets {
		if s.Name == name {
			return "xl/worksheets/sheet" + strconv.Itoa(i+1) + ".xml"
		}
	}
	t.Fatalf("found no sheet %s", name)
	return ""
}

// cellsOf is the texts of a sheet's cells by their names.
func cellsOf(t testing.TB, pkg []byte, name string) map[string]string {
	t.Helper()
	book, err := cells.Read(pkg)
	if err != nil {
		t.Fatal(err)
	}
	s, ok := book.Sheet(name)
	if !ok {
		t.Fatalf("found no sheet %s", name)
	}
	out := map[string]string{}
	for _, r := range s.Rows {
		for _, c := range r.Cells {
			out[c.Name()] = c.Text
		}
	}
	return out
}
