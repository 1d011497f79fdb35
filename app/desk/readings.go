package desk

import (
	"strings"

	"lotpair/qa"
)

// Readings are the cells of one lot on a page, those that are not used first: they are what a reader must see. A cell is put into
// words when it is asked for, because a page may have a million.
type Readings struct {
	ledger   []ReadingView // cells that hold no reading
	series   []qa.Reading
	leftOut  []int // places in series
	decimals int
}

// readingsOf is the page's list of a series, and of what stands in the ledger in its place.
func readingsOf(s qa.Series, ledger []ReadingView) Readings {
	out := Readings{ledger: ledger, series: s.Readings}
	for i := range s.Readings {
		out.decimals = max(out.decimals, s.Readings[i].Decimals)
		if !s.Readings[i].Used() {
			out.leftOut = append(out.leftOut, i)
		}
	}
	return out
}

// Len is how many cells there are.
func (r Readings) Len() int { return len(r.ledger) + len(r.series) }

// Unused is how many of the first are not used.
func (r Readings) Unused() int { return len(r.ledger) + len(r.leftOut) }

// At is the cell at a place of the list.
func (r Readings) At(i int) ReadingView {
	if i < len(r.ledger) {
		return r.ledger[i]
	}
	x := &r.series[r.place(i-len(r.ledger))]
	return ReadingView{Source: x.Source, Cell: x.Source.Cell, Value: qa.Fixed(x.Value, min(r.decimals, 12)), Note: x.LeftOut, LeftOut: !x.Used(), Used: x.Used()}
}

// place is where in the series the i-th of its readings on the page stands.
func (r Readings) place(i int) int {
	if i < len(r.leftOut) {
		return r.leftOut[i]
	}
	i -= len(r.leftOut)
	for _, at := range r.leftOut { // in order: each that stands before moves those behind it on
		if at > i {
			break
		}
		i++
	}
	return i
}

// Find is the place of the cell that a reading came from; -1 where there is none.
func (r Readings) Find(source qa.Source) int {
	for i, x := range r.ledger {
		if x.Source == source {
			return i
		}
	}
	used := 0
	for i := range r.series {
		x := &r.series[i]
		switch {
		case x.Source == source && x.Used():
			return r.Unused() + used
		case x.Source == source:
			for k, at := range r.leftOut {
				if at == i {
					return len(r.ledger) + k
				}
			}
		}
		if x.Used() {
			used++
		}
	}
	return -1
}

// Longest is the longest cell and the longest value of the list.
func (r Readings) Longest() (cell, value string) {
	for i := range r.ledger {
		cell, value = longer(cell, r.ledger[i].Cell), longer(value, r.ledger[i].Value)
	}
	low, high := 0.0, 0.0
	for i := range r.series {
		x := &r.series[i]
		cell = longer(cell, x.Source.Cell)
		low, high = min(low, x.Value), max(high, x.Value)
	}
	if len(r.series) > 0 { // with the same decimals the largest of either sign is the longest
		d := min(r.decimals, 12)
		value = longer(longer(value, qa.Fixed(low, d)), qa.Fixed(high, d))
	}
	return cell, value
}

func longer(a, b string) string {
	if len(b) > len(a) {
		return b
	}
	return a
}

// unread are the cells of the ledger that stand where a reading of the characteristic was looked for.
func unread(all []qa.Entry, side qa.Side, name string) []ReadingView {
	var out []ReadingView
	for _, e := range all {
		if e.Side != side || e.Characteristic != name || e.TakenAs == qa.TakenNumber || e.TakenAs == qa.TakenSummary || e.TakenAs == qa.TakenExcluded && e.Value != nil {
			continue
		}
		note := spaced(string(e.TakenAs))
		if e.TakenAs == qa.TakenExcluded {
			note = e.Reason
		}
		out = append(out, ReadingView{Source: e.Source, Cell: e.Source.Cell, Value: e.Source.Text, Note: note})
	}
	return out
}

// spaced is a code as words; a non-detect keeps its hyphen.
func spaced(code string) string {
	return strings.ReplaceAll(strings.ReplaceAll(code, "-", " "), "non detect", "non-detect")
}
