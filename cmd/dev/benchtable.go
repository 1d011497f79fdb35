package main

import (
	"fmt"
	"strconv"
	"strings"
	"unicode/utf8"
)

// nothing stands where there is nothing to hold the work against.
const nothing = "–"

// benchTable is the table of all lines. The columns of Go are gathered from the lines, so that a row may bring a peer that no
// other has.
func benchTable(lines []benchLine, programs []outsider) string {
	var inGo []string
	for _, l := range lines {
		for _, p := range l.peers {
			if !contains(inGo, p.name) {
				inGo = append(inGo, p.name)
			}
		}
	}
	head := []string{"workload", "ours", "floor", "ours/floor", "goal"}
	head = append(head, inGo...)
	for _, o := range programs {
		head = append(head, o.name)
	}
	rows := [][]string{head}
	for _, l := range lines {
		row := []string{l.name, duration(l.ours.seconds), nothing, nothing, l.goal.said(l.ours.seconds, l.floor.seconds)}
		if l.floor.seconds > 0 {
			row[2] = duration(l.floor.seconds) + " " + l.floor.name
			row[3] = fmt.Sprintf("%.2f", l.ours.seconds/l.floor.seconds)
		}
		for _, name := range inGo {
			row = append(row, against(l.ours.seconds, named(l.peers, name), ""))
		}
		for _, o := range programs {
			row = append(row, against(l.ours.seconds, l.theirs[o.name], l.outside[o.name]))
		}
		rows = append(rows, row)
	}
	return table(rows)
}

// against says a peer's times beside ours, or why there are none.
func against(ours float64, theirs []timed, why string) string {
	var out []string
	for _, t := range theirs {
		out = append(out, strings.TrimSpace(fmt.Sprintf("%s (%s) %s", duration(t.seconds), ratio(t.seconds/ours), t.name)))
	}
	switch {
	case len(out) > 0:
		return strings.Join(out, "; ")
	case why != "":
		return why
	}
	return nothing
}

// named are the times under that name, the name itself left out: it stands over the column.
func named(all []timed, name string) []timed {
	var out []timed
	for _, t := range all {
		if t.name == name {
			out = append(out, timed{seconds: t.seconds})
		}
	}
	return out
}

// said is the goal, and whether it was met in this run.
func (g goal) said(ours, floor float64) string {
	var text string
	var met bool
	switch {
	case g.ofFloor > 0:
		text, met = fmt.Sprintf("≤ %g × floor", g.ofFloor), ours <= g.ofFloor*floor
	case g.seconds > 0:
		text, met = "≤ "+duration(g.seconds), ours <= g.seconds
	default:
		return nothing
	}
	if met {
		return text + ", met"
	}
	return text + ", NOT MET"
}

// duration writes seconds with three digits and the unit that suits.
func duration(seconds float64) string {
	for _, u := range []struct {
		size float64
		name string
	}{{1, "s"}, {1e-3, "ms"}, {1e-6, "µs"}} {
		if seconds >= 0.9995*u.size {
			return strconv.FormatFloat(seconds/u.size, 'g', 3, 64) + " " + u.name
		}
	}
	return strconv.FormatFloat(seconds*1e9, 'g', 3, 64) + " ns"
}

// ratio writes a ratio with two digits, whole from ten on.
func ratio(r float64) string {
	if r >= 9.95 {
		return grouped(int(r+0.5)) + "×"
	}
	return fmt.Sprintf("%.1f×", r)
}

// grouped writes a number with a comma at every third digit.
func grouped(n int) string {
	s := strconv.Itoa(n)
	for i := len(s) - 3; i > 0; i -= 3 {
		s = s[:i] + "," + s[i:]
	}
	return s
}

func joined(s []string) string { return strings.Join(s, " / ") }

func contains(all []string, s string) bool {
	for _, a := range all {
		if a == s {
			return true
		}
	}
	return false
}

// table lays rows out in columns, the first one being the heading: to be read as it stands, and as Markdown.
func table(rows [][]string) string {
	wide := make([]int, len(rows[0]))
	for _, r := range rows {
		for i, cell := range r {
			wide[i] = max(wide[i], utf8.RuneCountInString(cell))
		}
	}
	var out strings.Builder
	for n, r := range rows {
		for i, cell := range r {
			fmt.Fprintf(&out, "| %s%s ", cell, strings.Repeat(" ", wide[i]-utf8.RuneCountInString(cell)))
		}
		out.WriteString("|\n")
		if n == 0 {
			for _, w := range wide {
				out.WriteString("|" + strings.Repeat("-", w+2))
			}
			out.WriteString("|\n")
		}
	}
	return out.String()
}
