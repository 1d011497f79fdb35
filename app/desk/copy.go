package desk

import (
	"strings"

	"lotpair/qa"
)

// CopiedBench is what the bench says of the characteristic looked at, as text.
func (s State) CopiedBench() string {
	v := s.Bench()
	return strings.TrimSpace(strings.Join(append([]string{v.Name + ": " + v.Headline}, append(append([]string{}, v.Paragraphs...), v.Caution)...), "\n"))
}

// CopiedTable is the table of all characteristics: what a spreadsheet takes as columns.
func (s State) CopiedTable() [][]string {
	if s.Drafting {
		rows := [][]string{{"characteristic", "lower", "upper", "margin", "planned sd", "permits Ppk", "parts a lot"}}
		for _, r := range s.Draft(0, nil).Rows {
			rows = append(rows, []string{r.Name, r.Lower, r.Upper, r.Margin, r.SD, r.Permits, r.Parts})
		}
		return rows
	}
	rows := [][]string{{"characteristic", "unit", "n reference", "n candidate", "estimate", "lower", "upper", "margin", "verdict"}}
	number := func(v *float64) string {
		if v == nil {
			return ""
		}
		return Point.NumberText(v, 1)
	}
	for _, i := range s.lines() {
		c := s.Record.Result.Characteristics[i]
		r := []string{c.Name, c.Unit, qa.Plain(float64(c.Reference.N)), qa.Plain(float64(c.Candidate.N)), "", "", "", qa.MarginText(c), string(c.Verdict)}
		if e := c.Equivalence; e != nil {
			r[4], r[5], r[6] = number(e.Estimate), number(e.Lower), number(e.Upper)
		}
		rows = append(rows, r)
	}
	return rows
}
