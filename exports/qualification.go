package exports

import (
	"fmt"
	"time"

	"lotpair/qa"
)

// SheetQualification is the one sheet of an installation check's report.
const SheetQualification = "Installation check"

// CheckLine is one published value as it came out on this machine.
type CheckLine struct {
	ID       string  `json:"id"`
	Quantity string  `json:"quantity"`
	Source   string  `json:"source"`
	Want     float64 `json:"want"`
	Got      float64 `json:"got"`
	Error    float64 `json:"error"`   // relative difference; absolute where want is 0
	Allowed  float64 `json:"allowed"` // the largest relative difference that the source's digits allow
	Holds    bool    `json:"holds"`
	Fault    string  `json:"fault,omitempty"` // why there is no value
}

// StepLine is one step with a record: read, signed, verified, changed.
type StepLine struct {
	Step  string `json:"step"`
	Holds bool   `json:"holds"`
	Fault string `json:"fault,omitempty"`
}

// Qualification is what an installation check found (lotpair.qualify/1).
type Qualification struct {
	Format   string      `json:"format"`
	Time     string      `json:"time"` // local, with offset
	Software qa.Software `json:"software"`
	Checks   []CheckLine `json:"checks"`
	Record   []StepLine  `json:"record"`
	Off      int         `json:"off"` // how many do not hold
}

// NewQualification counts what does not hold.
func NewQualification(when time.Time, software qa.Software, checks []CheckLine, record []StepLine) Qualification {
	q := Qualification{Format: "lotpair.qualify/1", Time: when.Format(time.RFC3339), Software: software, Checks: checks, Record: record}
	for _, c := range checks {
		if !c.Holds {
			q.Off++
		}
	}
	for _, s := range record {
		if !s.Holds {
			q.Off++
		}
	}
	return q
}

// QualificationReport writes an installation check as a workbook of one sheet; it is not signed.
func QualificationReport(q Qualification) ([]byte, error) {
	s := sheet{name: SheetQualification, widths: []float64{20, 44, 22, 22, 13, 13, 9, 60}, landscape: true}
	s.add(text("Installation check", titleLook))
	v := q.Software
	s.addTall(30, wide(fmt.Sprintf("Lotpair %s (%s), calculation %d, %s/%s, checked %s. %d of %d hold. Validation for the intended use stays with the user's organization.",
		v.Version, orWord(v.Revision, "no revision"), v.Calculation, v.OS, v.Arch, q.Time, len(q.Checks)+len(q.Record)-q.Off, len(q.Checks)+len(q.Record)), wrapLook, 8))
	s.add(heads("Check", "Quantity", "Published", "Here", "Difference", "Allowed", "Holds", "Source")...)
	s.frozen = len(s.rows)
	for _, c := range q.Checks {
		want, got, diff, allowed := c.Want, c.Got, c.Error, c.Allowed
		here := number(&got, ruledNumberLook)
		if c.Fault != "" {
			here = text(c.Fault, ruledWrapLook)
		}
		s.addTall(max(lines(c.Quantity, 48), lines(c.Source, 66))*13.5+1, text(c.ID, ruledLook), text(c.Quantity, ruledWrapLook), number(&want, ruledNumberLook), here,
			number(&diff, ruledNumberLook), number(&allowed, ruledNumberLook), text(yesNo(c.Holds), ruledStrongLook), text(c.Source, ruledWrapLook))
	}
	s.gap()
	for _, r := range q.Record {
		s.addTall(max(1, lines(r.Fault, 66))*13.5+1, text("record", ruledLook), wide(r.Step, ruledWrapLook, 5), text(yesNo(r.Holds), ruledStrongLook), text(r.Fault, ruledWrapLook))
	}
	b := book{title: "Installation check", sheets: []sheet{s}}
	b.foot = footerText("Installation check", v.Version)
	return b.bytes()
}

func yesNo(b bool) string {
	if b {
		return "yes"
	}
	return "NO"
}
