package importers

import (
	"fmt"
	"slices"

	"lotpair/qa"
)

// Plan is a plan file to start from: the first two lots, everything that was detected, and blanks where only a person can
// say. Filled in, it loads with LoadPlan.
func (in Inspection) Plan() string {
	w := planWriter{notes: map[string]string{
		"title": "", "supports": "the record this is evidence for", "record.part": "", "record.revision": "",
	}, after: map[string][]string{}}
	m := in.mapping
	p := qa.Plan{Format: qa.PlanFormat, Reading: m.Reading} // what was stated and what was found
	p.Reading.Layout, p.Reading.HeaderRow, p.Reading.Decimal, p.Reading.Encoding = in.Layout, 0, "", ""
	in.startLots(&p, w.notes)
	if !slices.ContainsFunc(m.tables, func(t *table) bool { return t.heading != in.HeaderRow }) {
		p.Reading.HeaderRow = in.HeaderRow
	}
	if t := m.tables[0]; (!t.turned || t.tidy != nil) && t.part > 0 && t.repeats(t.part) && m.Reading.PartColumn == "" {
		heading := t.column(t.part).heading
		if t.tidy != nil {
			heading = t.tidy.partColumn
		}
		w.after["reading.part_column"] = []string{fmt.Sprintf("# part_column = %s # ids repeat in a lot: take the # off where they are repeat readings of a part, to be averaged", tomlText(heading))}
	}
	switch {
	case in.Decimal == "":
		w.notes["reading.decimal"] = `fill in: "." or ","; the file does not settle it`
	case in.Encoding != "" || m.Reading.Decimal != "":
		p.Reading.Decimal = in.Decimal
	}
	p.Reading.Encoding = in.Encoding
	alpha, fraction, none := qa.DefaultAlpha, 0.1, 0.0
	p.Criterion = qa.Criterion{Objective: qa.Equivalence, Alpha: &alpha, Method: "welch"}
	if in.bothLimits() {
		p.Criterion.Margin = &qa.Margin{ToleranceFraction: &fraction}
		w.notes["criterion.margin"] = "a tenth of the tolerance: decide it before the readings are compared"
	} else {
		p.Criterion.Margin = &qa.Margin{Absolute: &none}
		w.notes["criterion.margin"] = "fill in: the largest difference that does not matter, in the unit, above 0"
	}
	for i, c := range in.Characteristics {
		p.Characteristics = append(p.Characteristics, qa.Characteristic{Name: c.Name, Unit: c.Unit, Lower: c.Limits.Lower, Target: c.Limits.Target, Upper: c.Limits.Upper})
		for key, v := range map[string]*float64{"lower": c.Limits.Lower, "target": c.Limits.Target, "upper": c.Limits.Upper} {
			if v != nil {
				w.notes[fmt.Sprintf("characteristic[%d].%s", i+1, key)] = "from the sheet: check against the drawing"
			}
		}
	}
	return w.text(p)
}

// startLots names the first two lots and where they stand.
func (in Inspection) startLots(p *qa.Plan, notes map[string]string) {
	m := in.mapping
	named := m.tables[0].lot > 0
	for i, l := range []*qa.LotPlan{&p.Reference, &p.Candidate} {
		side := []string{"reference", "candidate"}[i]
		switch {
		case i < len(m.Lots):
			l.Lot = m.Lots[i].Name
			if !named {
				notes[side+".lot"] = "the sheet names no lot: call it as it is called"
			}
		default:
			notes[side+".lot"] = "fill in: the lot's name"
		}
		if named || i < len(m.Lots) {
			l.File = in.File.Name
		} else {
			notes[side+".file"] = "fill in: the file of the other lot"
		}
		if len(m.tables) > 1 && i < len(m.Lots) {
			l.Sheet = m.Lots[i].Sheet
		}
	}
}

func (in Inspection) bothLimits() bool {
	for _, c := range in.Characteristics {
		if c.Limits.Lower == nil || c.Limits.Upper == nil {
			return false
		}
	}
	return len(in.Characteristics) > 0
}
