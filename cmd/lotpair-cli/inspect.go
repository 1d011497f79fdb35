package main

import (
	"encoding/json"
	"fmt"
	"path/filepath"
	"strconv"
	"strings"

	"lotpair/importers"
	"lotpair/qa"
)

func (p *program) inspect(args []string) int {
	var sheet, layout string
	var asJSON, asPlan bool
	f := p.flags("inspect FILE [--sheet S] [--layout L] [--json] [--plan]",
		"Shows how a file would be read: layout, heading, lots, characteristics, limits, and every cell that is not a number.",
		"lotpair-cli inspect testdata/demo/hub-shell.xlsx")
	f.StringVar(&sheet, "sheet", "", "look at sheet `S`")
	f.StringVar(&layout, "layout", "", "read it in layout `L`: "+strings.Join(importers.Layouts, ", "))
	f.BoolVar(&asJSON, "json", false, "print it as JSON (lotpair.inspect/1)")
	f.BoolVar(&asPlan, "plan", false, "print a plan file to start from")
	pos, code, err := f.parse(args, "FILE")
	if err != nil {
		return code
	}
	b, code := p.read(pos[0])
	if code != exitDone {
		return code
	}
	seen, err := importers.Under(p.watch).Inspect(filepath.Base(pos[0]), b, sheet, layout)
	if err != nil {
		return p.failed(err)
	}
	switch {
	case asJSON:
		e := json.NewEncoder(p.out)
		e.SetEscapeHTML(false)
		e.SetIndent("", "  ")
		if err := e.Encode(seen); err != nil {
			p.say(err)
			return exitFile
		}
	case asPlan:
		fmt.Fprint(p.out, seen.Plan())
	default:
		p.printInspection(seen)
	}
	return exitDone
}

func (p *program) printInspection(s importers.Inspection) {
	fmt.Fprintf(p.out, "%s, %d bytes, sha-256 %s\n", s.File.Name, s.File.Bytes, s.File.SHA256)
	fmt.Fprintf(p.out, "layout %s, heading in row %d%s\n", s.Layout, s.HeaderRow, after(" of sheet ", s.Sheet))
	first, rest := s.Reasons, []string{}
	for i, r := range s.Reasons {
		if strings.HasPrefix(r, "the layout ") {
			first, rest = s.Reasons[:i+1], s.Reasons[i+1:]
			break
		}
	}
	for _, r := range first {
		fmt.Fprintf(p.out, "- %s\n", r)
	}
	fmt.Fprintln(p.out, "\nlots")
	for _, l := range s.Lots {
		fmt.Fprintf(p.out, "  %s: %s\n", l.Lot, qa.Count(l.Rows, "row", "rows"))
	}
	fmt.Fprintln(p.out, "\ncharacteristics")
	for _, c := range s.Characteristics {
		fmt.Fprintf(p.out, "  %s%s%s\n", c.Name, after(" in ", c.Unit), limitsText(c.Limits))
		for _, l := range c.Lots {
			mean := "no mean"
			if l.Mean != nil {
				mean = "mean " + strconv.FormatFloat(*l.Mean, 'g', 9, 64) // --json has all digits
			}
			fmt.Fprintf(p.out, "    %s: n %d, %s\n", l.Lot, l.N, mean)
		}
	}
	if len(s.Warnings) > 0 {
		fmt.Fprintln(p.out, "\nto look at or to settle")
		for _, w := range s.Warnings {
			fmt.Fprintf(p.out, "! %s: %s\n", w.Code, w.Text)
		}
	}
	p.printUnread(s.Unread)
	if len(rest) > 0 {
		fmt.Fprintln(p.out, "\nhow it was read")
		for _, r := range rest {
			fmt.Fprintf(p.out, "- %s\n", r)
		}
	}
}

// printUnread lists the cells that are no plain numbers. Of many texts that were taken as numbers the first say enough.
func (p *program) printUnread(cells []qa.UnreadResult) {
	const show = 5
	if len(cells) == 0 {
		return
	}
	fmt.Fprintln(p.out, "\nnot taken as plain numbers")
	numbers := 0
	for _, u := range cells {
		if u.TakenAs == qa.TakenNumber {
			if numbers++; numbers > show {
				continue
			}
		}
		fmt.Fprintf(p.out, "  %s!%s: found %q, taken as %s\n", u.File, u.Cell, u.Found, u.TakenAs)
	}
	if numbers > show {
		fmt.Fprintf(p.out, "  and %s taken as numbers; --json lists them\n", qa.Count(numbers-show, "more text", "more texts"))
	}
}

func limitsText(l qa.Limits) string {
	var parts []string
	for _, x := range []struct {
		name string
		v    *float64
	}{{"lower", l.Lower}, {"target", l.Target}, {"upper", l.Upper}} {
		if x.v != nil {
			parts = append(parts, x.name+" "+qa.Plain(*x.v))
		}
	}
	return after(", ", strings.Join(parts, ", "))
}
