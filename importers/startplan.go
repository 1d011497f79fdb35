package importers

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"lotpair/qa"
)

// Plan is a plan file to start from: the first two lots, everything that was detected, and blanks where only a person can
// say. Filled in, it loads with LoadPlan.
func (in Inspection) Plan() string {
	var b strings.Builder
	line := func(format string, args ...any) { fmt.Fprintf(&b, format+"\n", args...) }
	line("format = %s", tomlText(qa.PlanFormat))
	line("title = \"\"")
	line("supports = \"\" # the record this is evidence for")
	line("")
	line("[record]")
	line("part = \"\"")
	line("revision = \"\"")
	m := in.mapping
	named := m.tables[0].lot > 0
	for i, side := range []string{"reference", "candidate"} {
		line("")
		line("[%s]", side)
		switch {
		case i < len(m.Lots) && named:
			line("lot = %s", tomlText(m.Lots[i].Name))
		case i < len(m.Lots):
			line("lot = %s # the sheet names no lot: call it as it is called", tomlText(m.Lots[i].Name))
		default:
			line("lot = \"\" # fill in: the lot's name")
		}
		if named || i < len(m.Lots) {
			line("file = %s", tomlText(in.File.Name))
		} else {
			line("file = \"\" # fill in: the file of the other lot")
		}
		if len(m.tables) > 1 && i < len(m.Lots) {
			line("sheet = %s", tomlText(m.Lots[i].Sheet))
		}
	}
	line("")
	line("[reading]")
	line("layout = %s", tomlText(in.Layout))
	if m.Reading.Sheet != "" {
		line("sheet = %s", tomlText(m.Reading.Sheet))
	}
	if !slices.ContainsFunc(m.tables, func(t *table) bool { return t.heading != in.HeaderRow }) {
		line("header_row = %d", in.HeaderRow)
	}
	if m.Reading.LotColumn != "" {
		line("lot_column = %s", tomlText(m.Reading.LotColumn))
	}
	if t := m.tables[0]; (!t.turned || t.tidy != nil) && t.part > 0 && t.repeats(t.part) {
		heading := t.column(t.part).heading
		if t.tidy != nil {
			heading = t.tidy.partColumn
		}
		line("# part_column = %s # ids repeat in a lot: take the # off where they are repeat readings of a part, to be averaged", tomlText(heading))
	}
	switch {
	case in.Decimal == "":
		line("decimal = \"\" # fill in: \".\" or \",\"; the file does not settle it")
	case in.Encoding != "":
		line("decimal = %s", tomlText(in.Decimal))
	}
	if in.Encoding != "" {
		line("encoding = %s", tomlText(in.Encoding))
	}
	line("")
	line("[criterion]")
	line("objective = \"equivalence\"")
	line("alpha = 0.05")
	line("method = \"welch\"")
	if in.bothLimits() {
		line("margin = { tolerance_fraction = 0.10 } # a tenth of the tolerance: decide it before the readings are compared")
	} else {
		line("margin = { absolute = 0 } # fill in: the largest difference that does not matter, in the unit, above 0")
	}
	for _, c := range in.Characteristics {
		line("")
		line("[[characteristic]]")
		line("name = %s", tomlText(c.Name))
		if c.Unit != "" {
			line("unit = %s", tomlText(c.Unit))
		}
		for _, l := range []struct {
			key   string
			value *float64
		}{{"lower", c.Limits.Lower}, {"target", c.Limits.Target}, {"upper", c.Limits.Upper}} {
			if l.value != nil {
				line("%s = %s # from the sheet: check against the drawing", l.key, tomlNumber(*l.value))
			}
		}
	}
	return b.String()
}

func (in Inspection) bothLimits() bool {
	for _, c := range in.Characteristics {
		if c.Limits.Lower == nil || c.Limits.Upper == nil {
			return false
		}
	}
	return len(in.Characteristics) > 0
}

// tomlText is a TOML basic string (TOML 1.0, "String").
func tomlText(s string) string {
	var b strings.Builder
	b.WriteByte('"')
	for _, r := range s {
		switch {
		case r == '"' || r == '\\':
			b.WriteByte('\\')
			b.WriteRune(r)
		case r < ' ' || r == 0x7f:
			fmt.Fprintf(&b, "\\u%04X", r)
		default:
			b.WriteRune(r)
		}
	}
	b.WriteByte('"')
	return b.String()
}

// tomlNumber is a number that reads back the same.
func tomlNumber(x float64) string {
	s := strconv.FormatFloat(x, 'g', -1, 64)
	if mantissa, exponent, ok := strings.Cut(s, "e"); ok {
		return mantissa + "e" + strings.TrimPrefix(exponent, "+")
	}
	return s
}
