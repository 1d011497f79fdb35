package importers

import (
	"maps"
	"slices"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// tidySheet is a sheet with a row a reading: one column names what was measured, one holds the readings, others say of which
// part, and perhaps the unit and the limits. It is the layout row-per-part with the characteristics below each other.
type tidySheet struct {
	name, value, unit, requirement int              // columns; 0 where there is none
	limits                         map[string][]int // columns of nominal values, limits and tolerances
	lotColumn, partColumn          string           // the headings, for the plan
	across                         []int            // columns of a part each, where a row is a characteristic of a lot; else nil
}

// readingColumn are the headings of a column of readings beside one that names what each row measured.
var readingColumn = words(means(resultHeading, "value|values|reading|readings|measured|measured value|measurement|measurement value|result|results|actual|actual value|observed|data|"+
	"wert|werte|messwert|messwerte|ist|istwert|istwerte|istmaß|ergebnis|ergebnisse"))

// characteristicColumn are the headings of a column that names what each row measured.
var characteristicColumn = words(means(nameHeading, "characteristic|characteristics|characteristic name|feature|feature name|dimension|parameter|merkmal|prüfmerkmal|"+
	"merkmalsbezeichnung|charakteristik"))

// findTidy finds a column that names what each row measured: by its heading, or because it holds what the plan asks for and no
// column is called so.
func (t *table) findTidy() error {
	s := &tidySheet{limits: map[string][]int{}}
	var names map[string]int
	clear := false
	for _, c := range t.columns {
		byHeading, byPlan := characteristicColumn[word(c.name)] != "", t.asksForNames()
		if c.col == t.lot || c.col == t.group || c.col == t.part || c.col == t.pair || c.col == t.order || t.planned(c) || !byHeading && !byPlan {
			continue
		}
		seen, rows := t.namesUnder(c.col)
		switch {
		case byPlan && t.holdsPlanned(seen), byHeading && len(seen) > 1 && rows >= 2*len(seen):
			clear = byHeading
		case byHeading && len(seen) > 0 && !t.anyPlanned() && (t.readingsByHeading(c.col) != nil || t.partsAcross(c.col) != nil):
		default:
			continue
		}
		s.name, names = c.col, seen
		break
	}
	if s.name == 0 {
		return nil
	}
	if err := t.tidyColumns(s, slices.Sorted(maps.Keys(names))); err != nil {
		return err
	}
	t.tidy = s
	reason := "a row is one reading of a part: " + t.columnText(s.name) + " names what was measured, " + t.columnText(s.value) + " holds the readings."
	if s.across != nil {
		reason = "a row is a characteristic of a lot: " + t.columnText(s.name) + " names what was measured, " + t.columnText(s.value) + " to " + t.columnText(s.across[len(s.across)-1]) + " hold a part each."
	}
	if t.confidence == Stated {
		t.reasons = append(t.reasons, reason)
		return nil
	}
	t.confidence = Likely
	if clear && readingColumn[word(t.column(s.value).name)] != "" {
		t.confidence = Clear
	}
	t.reasons = []string{reason}
	return nil
}

// tidyHeading says whether a row may be the headings of a row a reading, or a row a characteristic of a lot.
func (t *table) tidyHeading() bool {
	return slices.ContainsFunc(t.lookRows(), func(i int) bool {
		names, values, lots, parts := 0, 0, 0, 0
		for _, c := range t.sheet.Rows[i].Cells {
			switch name, _ := splitUnit(filledText(c)); {
			case characteristicColumn[word(name)] != "":
				names++
			case readingColumn[word(name)] != "" && t.numbersBelow(i, c.Col):
				values++
			case headingMeans(name) == lotHeading:
				lots++
			case partNumbered.MatchString(name):
				parts++
			}
		}
		return names > 0 && (values == 1 || lots > 0 && parts > 1)
	})
}

// anyPlanned says whether a column is called as the plan calls a characteristic.
func (t *table) anyPlanned() bool {
	return slices.ContainsFunc(t.characteristics, func(ch qa.Characteristic) bool { return len(t.named(ch.Heading())) > 0 })
}

// asksForNames says whether the plan names a characteristic that no column is called by.
func (t *table) asksForNames() bool {
	return slices.ContainsFunc(t.characteristics, func(ch qa.Characteristic) bool { return len(t.named(ch.Heading())) == 0 })
}

// holdsPlanned says whether names are all those that the plan asks for.
func (t *table) holdsPlanned(names map[string]int) bool {
	bare := map[string]bool{}
	for n := range names {
		name, _ := splitUnit(n)
		bare[name] = true
	}
	return !slices.ContainsFunc(t.characteristics, func(ch qa.Characteristic) bool {
		want := joined(ch.Heading())
		return names[want] == 0 && !bare[want]
	})
}

// namesUnder counts the texts under a heading that are no numbers, and the rows that hold one.
func (t *table) namesUnder(col int) (names map[string]int, rows int) {
	names = map[string]int{}
	for _, r := range t.below() {
		cell := r.At(col)
		if text := filledText(cell); cell.Kind == cells.Text && text != "" && !missing(text) && !numeric(cell) {
			names[text]++
			rows++
		}
	}
	return names, rows
}

// readingsByHeading are the columns whose headings say that they hold the readings.
func (t *table) readingsByHeading(names int) []int {
	var out []int
	for _, c := range t.columns {
		if readingColumn[word(c.name)] != "" && t.tidyFree(c, names) && t.mostlyNumbers(c.col) {
			out = append(out, c.col)
		}
	}
	return out
}

// tidyFree says whether a column plays no part that the plan gave it.
func (t *table) tidyFree(c column, names int) bool {
	return c.col != names && c.col != t.lot && c.col != t.part && c.col != t.order && c.col != t.group && c.col != t.pair
}

// mostlyNumbers says whether at least half of what stands under a heading are numbers, non-detects or marks of attributes that the plan asks for.
func (t *table) mostlyNumbers(col int) bool {
	numbers, filled := 0, 0
	attributes := slices.ContainsFunc(t.characteristics, func(ch qa.Characteristic) bool { return ch.Kind == kindAttribute })
	for _, r := range t.below() {
		switch c := r.At(col); {
		case filledText(c) == "" && c.Kind != cells.FormulaNoValue || c.Kind == cells.Text && missing(c.Text):
		case numeric(c) || attributes || c.Kind == cells.FormulaNoValue || c.Kind == cells.Error || c.Kind == cells.Date:
			numbers++
			filled++
		default:
			filled++
		}
	}
	return filled > 0 && 2*numbers >= filled
}

// tidyColumns finds the parts of the other columns, and refuses a sheet where which of them holds the readings is not known.
func (t *table) tidyColumns(s *tidySheet, names []string) error {
	var rest []column
	limits := map[int]string{}
	for _, c := range t.columns {
		if !t.tidyFree(c, s.name) {
			continue
		}
		heading := c.heading
		if means := labelWords[word(c.name)]; means != "" { // Nominal [mm]
			heading = c.name
		}
		switch means := rowColumnMeans(heading); {
		case means == unitLabel && s.unit == 0:
			s.unit = c.col
		case means == requirementHeading && s.requirement == 0:
			s.requirement = c.col
		case isLimit(means):
			limits[c.col] = means
		case word(c.name) == "min" || word(c.name) == "minimum":
			limits[c.col] = lowerLabel
		case word(c.name) == "max" || word(c.name) == "maximum":
			limits[c.col] = upperLabel
		case means == summaryLabel, means == unitLabel, headingMeans(c.heading) != "" && (t.part == 0 || headingMeans(c.heading) != partHeading):
		default:
			rest = append(rest, c)
		}
	}
	values := t.readingsByHeading(s.name)
	if len(values) == 0 {
		for _, c := range rest {
			if t.mostlyNumbers(c.col) {
				values = append(values, c.col)
			}
		}
	}
	if across := t.partsAcross(s.name); across != nil && !slices.ContainsFunc(values, func(col int) bool { return col > across[0] && !slices.Contains(across, col) }) {
		s.across, values = across, across[:1]                  // no other number stands behind them
		maps.DeleteFunc(limits, func(col int, _ string) bool { // Min and Max of the readings
			w := word(t.column(col).name)
			return col > values[0] && (w == "min" || w == "minimum" || w == "max" || w == "maximum")
		})
	}
	if len(values) != 1 {
		found := "no column of numbers"
		if len(values) > 1 {
			texts := make([]string, 0, len(values))
			for _, col := range values {
				texts = append(texts, t.columnText(col))
			}
			found = "numbers in " + join2(texts)
		}
		return t.refuse("%s: found the characteristics %s below each other and %s beside them, want one column of readings, with a heading such as Value; correct the heading, or bring the sheet into a column a characteristic",
			t.columnText(s.name), list(names), found)
	}
	s.value = values[0]
	for _, c := range t.columns {
		if means := limits[c.col]; means != "" && c.col != s.value {
			s.limits[means] = append(s.limits[means], c.col)
		}
	}
	s.lotColumn = t.column(t.lot).heading
	return nil
}
