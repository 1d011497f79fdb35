package importers

import (
	"errors"
	"strings"
	"testing"

	"lotpair/qa"
)

// csvOf is a sheet as a text file.
func csvOf(rows [][]any) string {
	var b strings.Builder
	for _, row := range rows {
		for j, c := range row {
			if j > 0 {
				b.WriteByte(';')
			}
			switch v := c.(type) {
			case string:
				b.WriteString(v)
			case num:
				b.WriteString(string(v))
			}
		}
		b.WriteByte('\n')
	}
	return b.String()
}

// FuzzLayouts reads texts in every layout: nothing panics, every cell is accounted for, and every error is one of ours.
func FuzzLayouts(f *testing.F) {
	for _, c := range layoutCases() {
		if len(c.files) == 1 && len(c.files[0].sheets) == 1 && c.want.count < 64 {
			f.Add(uint8(0), csvOf(c.files[0].sheets[0].rows))
		}
	}
	for i, rows := range [][][]any{long()[:4], wide()[:5], inspection("", d1Reference[:3], 2).rows, form("", d1Reference[:3]).rows, results("", d1Reference[:3]).rows} {
		f.Add(uint8(i), csvOf(rows))
	}
	f.Fuzz(func(t *testing.T, which uint8, text string) {
		layout := append([]string{""}, Layouts...)[int(which)%5]
		in, err := Inspect("d1.csv", []byte(text), "", layout)
		if err != nil {
			wantOurs(t, err)
			return
		}
		_ = in.Plan()
		if len(in.Lots) < 2 {
			return
		}
		p := plan("d1.csv", func(p *qa.Plan) {
			p.Reference.Lot, p.Candidate.Lot, p.Reading.Layout = in.Lots[0].Lot, in.Lots[1].Lot, in.Layout
			if int(which) >= 128 {
				p.Reading.PartColumn, p.Reading.HeaderRow = "Part", in.HeaderRow
			}
		})
		r, err := Read(p, files(map[string][]byte{"d1.csv": []byte(text)}))
		if err != nil {
			wantOurs(t, err)
			return
		}
		reconcile(t, r, map[string][]byte{"d1.csv": []byte(text)}, "")
	})
}

// wantOurs checks that an error is a *PlanError or a *FileError with a place and words in each fault.
func wantOurs(t *testing.T, err error) {
	t.Helper()
	_, plan := errors.AsType[*PlanError](err)
	_, file := errors.AsType[*FileError](err)
	if !plan && !file {
		t.Fatalf("got %T %v, want a *PlanError or a *FileError", err, err)
	}
	for _, f := range faultsOf(err) {
		if f.Place == "" || f.Text == "" {
			t.Fatalf("got the fault %+v, want a place and words", f)
		}
	}
}
