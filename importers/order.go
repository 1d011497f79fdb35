package importers

import (
	"math"
	"slices"
	"strconv"
	"strings"
	"time"

	"lotpair/importers/cells"
)

// orderKind tells what the cells of an order column hold: only cells of one kind can be put in order.
type orderKind int

const (
	noOrder     orderKind = iota
	orderNumber           // a number, or a date or time as a workbook stores it: days in either date system
	orderTime             // a date with or without a time
	orderClock            // a time of day or a duration
)

// orderKey is the place of a cell in the order: numbers and stored dates as they are, texts that state a date or a time in
// seconds. Dates with slashes are not read: 03/04 is a day in March or in April.
func orderKey(c cells.Cell) (float64, orderKind) {
	s := trimmed(c.Text)
	if c.Kind != cells.Number && c.Kind != cells.Date && c.Kind != cells.Text || s == "" {
		return 0, noOrder
	}
	if v, err := strconv.ParseFloat(s, 64); err == nil && !math.IsNaN(v) {
		return v, orderNumber
	}
	if v, ok := duration(s); ok {
		return v, orderClock
	}
	if v, ok := clock(s); ok {
		return v, orderClock
	}
	day, rest, _ := strings.Cut(strings.Replace(s, "T", " ", 1), " ")
	for _, form := range []string{"2006-01-02", "2.1.2006", "2.1.06"} {
		d, err := time.Parse(form, day)
		if err != nil {
			continue
		}
		v := float64(d.Unix())
		if rest = strings.TrimSpace(rest); rest == "" {
			return v, orderTime
		}
		if at, ok := clock(rest); ok {
			return v + at, orderTime
		}
		if d, err := time.Parse(time.RFC3339Nano, strings.Replace(s, " ", "T", 1)); err == nil { // with a zone
			return float64(d.UnixNano()) / 1e9, orderTime
		}
	}
	return 0, noOrder
}

// clock reads hh:mm, hh:mm:ss and fractions of a second.
func clock(s string) (float64, bool) {
	parts := strings.Split(s, ":")
	if len(parts) < 2 || len(parts) > 3 {
		return 0, false
	}
	total := 0.0
	for i, p := range parts {
		v, err := strconv.ParseFloat(strings.Replace(p, ",", ".", 1), 64)
		if err != nil || !(v >= 0) || i < 2 && !digits(p) || p == "" || !digits(p[:1]) || i > 0 && v >= 60 || v > 1e6 {
			return 0, false
		}
		total = total*60 + v
	}
	if len(parts) == 2 {
		total *= 60
	}
	return total, true
}

// duration reads PT00H12M01.5S, as .ods spreadsheets store times.
func duration(s string) (float64, bool) {
	rest, ok := strings.CutPrefix(s, "PT")
	if !ok {
		return 0, false
	}
	total := 0.0
	for _, u := range []struct {
		mark    string
		seconds float64
	}{{"H", 3600}, {"M", 60}, {"S", 1}} {
		number, after, ok := strings.Cut(rest, u.mark)
		if !ok {
			continue
		}
		v, err := strconv.ParseFloat(number, 64)
		if err != nil || !(v >= 0) || v > 1e9 {
			return 0, false
		}
		total, rest = total+v*u.seconds, after
	}
	return total, rest == ""
}

// ordered puts the rows in the order of the order column where its cells can be, else it leaves the order of the file, which
// is said.
func (t *table) ordered(rows []row) []row {
	if t.order == 0 {
		return rows
	}
	type placed struct {
		row row
		key float64
	}
	all := make([]placed, len(rows))
	kind := noOrder
	for i, r := range rows {
		key, is := orderKey(t.cell(r, t.order))
		if i == 0 {
			kind = is
		}
		if is == noOrder || is != kind {
			t.say("%s does not hold a number, date or time of one kind in every row; the readings stay in the order of the file.", t.columnText(t.order))
			return rows
		}
		all[i] = placed{row: r, key: key}
	}
	slices.SortStableFunc(all, func(a, b placed) int {
		switch {
		case a.key < b.key:
			return -1
		case a.key > b.key:
			return 1
		}
		return 0
	})
	sorted := make([]row, len(all))
	for i, p := range all {
		sorted[i] = p.row
	}
	t.say("the readings are put in the order of %s.", t.columnText(t.order))
	return sorted
}
