package importers

import (
	"strings"
	"testing"

	"lotpair/qa"
)

func attributePlan(change ...func(*qa.Plan)) qa.Plan {
	p := plan("a.csv", func(p *qa.Plan) {
		p.Characteristics = []qa.Characteristic{{Name: "Burr", Kind: "attribute", Failed: []string{"NOK", "1", "not ok"}}}
	})
	for _, f := range change {
		f(&p)
	}
	return p
}

// A cell whose text is in failed counts as 1, every other as 0, whatever the case; blanks and missing marks as ever.
func TestReadAttribute(t *testing.T) {
	text := "Lot,Burr\n"
	for _, w := range []string{"OK", "nok", "1", "1.0", "0", "", "n/a", " not  OK ", "ok"} {
		text += "REF-0417," + w + "\n"
	}
	text += strings.Repeat("CAND-0931,OK\n", 8)
	r := mustRead(t, attributePlan(), []byte(text))
	s := r.Reference.Series[0]
	want := []float64{0, 1, 1, 1, 0, 1, 0}
	got := s.Values()
	if len(got) != len(want) || s.Missing != 2 || s.Rows != 9 || s.Unread != 0 {
		t.Fatalf("got %v, %d missing of %d rows, want %v, 2 of 9", got, s.Missing, s.Rows, want)
	}
	for i := range want {
		if got[i] != want[i] {
			t.Errorf("row %d: got %v, want %v", i+1, got[i], want[i])
		}
	}
	if n := len(r.Candidate.Series[0].Readings); n != 8 {
		t.Errorf("got %d candidate parts, want 8", n)
	}
	wantWords(t, strings.Join(r.Said, "\n"), `Burr: taken for failed parts: "nok", "1", "1.0", "not OK"; for good parts: "OK", "0", "ok"`)
}

// What cannot be seen in a cell stops the verdict, and a word that the plan lists is no missing mark.
func TestReadAttributeOfSheets(t *testing.T) {
	rows := [][]any{{"Lot", "Burr"}}
	for _, c := range []any{failed("#DIV/0!"), formula{"A1", ""}, truth(true), num("1"), "-", styled{"44000", 1}} {
		rows = append(rows, []any{"REF-0417", c}, []any{"CAND-0931", "OK"})
	}
	p := attributePlan(func(p *qa.Plan) {
		p.Reference.File, p.Candidate.File = "a.xlsx", "a.xlsx"
		p.Characteristics[0].Failed = []string{"TRUE", "1", "-"}
	})
	r := mustRead(t, p, xlsx(t, sheetOf{name: "Data", rows: rows}))
	s := r.Reference.Series[0]
	if v := s.Values(); s.Unread != 3 || len(v) != 3 || v[0] != 1 || v[1] != 1 || v[2] != 1 {
		t.Errorf("got %v and %d unread, want three failed and 3 unread", s.Values(), s.Unread)
	}
}

// A part is left out with its reason as any reading is; lots that are alike are no copies, and deviations no matter.
func TestReadAttributeLeftOut(t *testing.T) {
	text := "Lot,Burr,Bore\n" + strings.Repeat("REF-0417,OK,1.5\nREF-0417,NOK,1.75\n", 4) + strings.Repeat("CAND-0931,OK,2\n", 8)
	p := attributePlan(func(p *qa.Plan) {
		p.Reading.Exclude = []qa.Exclusion{{Cell: "B3", Reason: "dropped"}}
		p.Candidate.Values, p.Reference.Values = "deviation", "deviation"
	})
	r := mustRead(t, p, []byte(text))
	if s := r.Reference.Series[0]; s.Excluded() != 1 || len(s.Values()) != 7 {
		t.Errorf("got %d left out and %d used, want 1 and 7", s.Excluded(), len(s.Values()))
	}
}
