package cells

import (
	"bytes"
	"flag"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"
)

var generated = flag.Int("generated", 300, "how many generated workbooks are held against the other readers")

// slowly reads with every cell by its tokens.
func slowly(data []byte) (Workbook, error) {
	o, err := openOutline(data, nil)
	if err != nil {
		return Workbook{}, err
	}
	o.slow = true
	return o.read()
}

// byReference reads with the reader over encoding/xml.
func byReference(data []byte) (Workbook, error) {
	o, err := openOutline(data, nil)
	if err != nil {
		return Workbook{}, err
	}
	w := Workbook{Date1904: o.date1904}
	for name := range o.pack.parts {
		if strings.HasSuffix(name, "sharedstrings.xml") {
			if o.strings, err = referenceStrings(o.pack, name); err != nil {
				return Workbook{}, err
			}
		}
	}
	for _, t := range o.tabs {
		s, err := o.reference(t)
		if err != nil {
			return Workbook{}, err
		}
		w.Sheets = append(w.Sheets, s)
	}
	return w, nil
}

// different says where two workbooks differ; empty where they do not.
func different(a, b Workbook) string {
	if len(a.Sheets) != len(b.Sheets) || a.Date1904 != b.Date1904 {
		return fmt.Sprintf("%d and %d sheets", len(a.Sheets), len(b.Sheets))
	}
	for i, s := range a.Sheets {
		o := b.Sheets[i]
		if s.Name != o.Name || s.Hidden != o.Hidden || len(s.Rows) != len(o.Rows) || !slices.Equal(s.Merged, o.Merged) || !slices.Equal(s.HiddenCols, o.HiddenCols) {
			return fmt.Sprintf("sheet %q and %q: %d and %d rows, or what is hidden or merged", s.Name, o.Name, len(s.Rows), len(o.Rows))
		}
		for j, r := range s.Rows {
			q := o.Rows[j]
			if r.Number != q.Number || r.Hidden != q.Hidden || len(r.Cells) != len(q.Cells) {
				return fmt.Sprintf("row %d and %d: %d and %d cells", r.Number, q.Number, len(r.Cells), len(q.Cells))
			}
			for k, c := range r.Cells {
				other := q.Cells[k]
				c.Marks, other.Marks = 0, 0 // which the reader over encoding/xml does not know
				if c != other {
					return fmt.Sprintf("%+v and %+v", c, other)
				}
			}
		}
	}
	return ""
}

// otherwise says where excelize sees another cell, kind or value. It says nothing of formats, and gives no value for dates as text.
func otherwise(data []byte, w Workbook) error {
	f, err := excelize.OpenReader(bytes.NewReader(data))
	if err != nil {
		return err
	}
	defer func() { _ = f.Close() }()
	raw := excelize.Options{RawCellValue: true}
	for _, s := range w.Sheets {
		stored := 0
		for _, r := range s.Rows {
			for _, c := range r.Cells {
				if slices.ContainsFunc(s.Merged, func(a Area) bool {
					return c.Kind == Blank && c.Row >= a.FirstRow && c.Row <= a.LastRow && c.Col >= a.FirstCol && c.Col <= a.LastCol
				}) {
					continue // excelize gives the first cell's value for all
				}
				kind, err := f.GetCellType(s.Name, c.Name())
				if err != nil {
					return err
				}
				value, err := f.GetCellValue(s.Name, c.Name(), raw)
				if err != nil {
					return err
				}
				formula, err := f.GetCellFormula(s.Name, c.Name())
				if err != nil {
					return err
				}
				if value != "" {
					stored++
				}
				if c.Kind == Bool {
					value = map[string]string{"1": "TRUE", "0": "FALSE"}[value]
				}
				if kind == excelize.CellTypeFormula { // the escapes of <v>, an ST_Xstring as well
					value = string(unescape([]byte(value)))
				}
				if c.Kind == Number || c.Kind == Date {
					value = strings.TrimSpace(value)
				}
				same := c.Text == value || c.Kind == Date && kind == excelize.CellTypeDate
				if !same || formula != "" && !c.Formula || !sameKind(c, kind) {
					return fmt.Errorf("%s!%s: %+v, excelize has %q, type %d, formula %q", s.Name, c.Name(), c, value, kind, formula)
				}
			}
		}
		if n := len(s.Rows); n > 0 && s.Rows[n-1].Number > 1e5 { // it makes every row in between
			continue
		}
		rows, err := f.GetRows(s.Name, raw)
		if err != nil {
			return err
		}
		for _, row := range rows {
			for _, value := range row {
				if value != "" {
					stored--
				}
			}
		}
		if stored != 0 {
			return fmt.Errorf("%s: excelize sees %d cells more", s.Name, -stored)
		}
	}
	return nil
}

func sameKind(c Cell, kind excelize.CellType) bool {
	switch c.Kind {
	case Number:
		return kind == excelize.CellTypeUnset || kind == excelize.CellTypeNumber
	case Date:
		return kind == excelize.CellTypeUnset || kind == excelize.CellTypeNumber || kind == excelize.CellTypeDate
	case Text:
		return kind == excelize.CellTypeSharedString || kind == excelize.CellTypeInlineString || kind == excelize.CellTypeFormula
	case Bool:
		return kind == excelize.CellTypeBool
	case Error:
		return kind == excelize.CellTypeError
	}
	return true
}

// hold reads a workbook in every way of ours and fails where one differs.
func hold(t *testing.T, data []byte) Workbook {
	t.Helper()
	w, err := Read(data)
	if err != nil {
		t.Fatal(err)
	}
	for name, read := range map[string]func([]byte) (Workbook, error){"by tokens": slowly, "with encoding/xml": byReference} {
		o, err := read(data)
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		if d := different(w, o); d != "" {
			t.Errorf("read as it is and %s: %s", name, d)
		}
	}
	return w
}

func TestReadGenerated(t *testing.T) {
	for seed := range *generated {
		m, sheetXML, sharedXML, want := makeSheet(uint64(seed))
		data := packOf(t, "", wholeParts(sheetXML, sharedXML))
		w := hold(t, data)
		if !m.mixed {
			if err := otherwise(data, w); err != nil {
				t.Error(err)
			}
		}
		var got []Cell
		for _, r := range w.Sheets[0].Rows {
			got = append(got, r.Cells...)
		}
		if !slices.Equal(got, want) {
			t.Errorf("got %+v, want %+v", got, want)
		}
		if t.Failed() {
			t.Fatalf("seed %d: %s %s", seed, sheetXML, sharedXML)
		}
	}
}

// Every workbook of the project reads the same in every way, but those that are no workbooks: cases of the importers that are refused.
func TestReadProject(t *testing.T) {
	n := 0
	for _, folder := range []string{"testdata", "app", "exports", "importers"} {
		err := filepath.WalkDir(filepath.Join("..", "..", folder), func(path string, _ fs.DirEntry, err error) error {
			if err != nil || filepath.Ext(path) != ".xlsx" && filepath.Ext(path) != ".xlsm" {
				return err
			}
			switch filepath.Base(filepath.Dir(path)) {
			case "n38-cut", "n38-entity", "n38-old", "n38-password", "n38-text":
				return nil
			}
			data, err := os.ReadFile(path)
			if err != nil {
				return err
			}
			n++
			t.Run(filepath.Base(path), func(t *testing.T) {
				if err := otherwise(data, hold(t, data)); err != nil {
					t.Error(err)
				}
			})
			return nil
		})
		if err != nil {
			t.Error(err)
		}
	}
	if n < 3 {
		t.Errorf("got %d workbooks, want 3 or more", n)
	}
}
