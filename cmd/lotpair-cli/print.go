package main

import (
	"fmt"
	"strings"
	"time"
	"unicode/utf8"

	"lotpair/qa"
)

func zoneOf(t time.Time) string {
	name, _ := t.Zone()
	return name
}

// printResult says the result as text: the overall verdict, a line a characteristic, then what each rests on.
func (p *program) printResult(rec qa.Record) {
	r := rec.Result
	if r.Title != "" {
		fmt.Fprintln(p.out, r.Title)
	}
	fmt.Fprintf(p.out, "reference  %s\ncandidate  %s\n\n", lotLine(r.Reference), lotLine(r.Candidate))
	fmt.Fprintf(p.out, "%s\n%s\n\n", r.Sentence, qa.Asked(r))
	name, margin := 14, 6
	for _, c := range r.Characteristics {
		name = max(name, utf8.RuneCountInString(c.Name))
		margin = max(margin, utf8.RuneCountInString(qa.MarginText(c)))
	}
	fmt.Fprintf(p.out, "%s  %s  %7s  %s\n", pad("characteristic", name), pad("margin", margin), "n", "verdict")
	for _, c := range r.Characteristics {
		fmt.Fprintf(p.out, "%s  %s  %3d|%-3d  %s\n", pad(c.Name, name), pad(qa.MarginText(c), margin), c.Reference.N, c.Candidate.N, c.Verdict)
	}
	for _, c := range r.Characteristics {
		fmt.Fprintf(p.out, "\n%s\n", c.Name)
		for _, s := range qa.Sentences(c) {
			fmt.Fprintf(p.out, "  %s\n", s)
		}
		p.printInterval(c)
		for _, w := range c.Warnings {
			fmt.Fprintf(p.out, "  ! %s: %s\n", w.Code, w.Text)
		}
	}
	p.printLedger(rec.Readings)
	for _, w := range r.Warnings {
		fmt.Fprintf(p.out, "! %s: %s\n", w.Code, w.Text)
	}
	fmt.Fprintf(p.out, "\n%s\n", qa.Cautions()[0])
}

// printInterval gives the figures in full: what a reviewer lays beside another program's.
func (p *program) printInterval(c qa.Comparison) {
	d := c.Difference
	if d.Lower == nil || d.Upper == nil {
		return
	}
	fmt.Fprintf(p.out, "  difference %v, %s interval %v to %v", *d.Estimate, qa.Percent(*d.Level, 4), *d.Lower, *d.Upper)
	if d.DF != nil { // fractions have none
		fmt.Fprintf(p.out, ", df %v", *d.DF)
	}
	fmt.Fprintln(p.out)
	if e := c.Equivalence; e != nil && e.Lower != nil && e.P != nil {
		fmt.Fprintf(p.out, "  decision   %s interval %v to %v, p %v\n", qa.Percent(*e.Level, 4), *e.Lower, *e.Upper, *e.P)
	}
}

func (p *program) printLedger(r qa.Readings) {
	if len(r.Ledger) > 0 {
		fmt.Fprintf(p.out, "\nledger: %s\n", qa.Count(len(r.Ledger), "cell", "cells"))
		const most = 20
		for i, e := range r.Ledger {
			if i == most {
				fmt.Fprintf(p.out, "  … and %d more; --json and the workbook list all\n", len(r.Ledger)-most)
				break
			}
			why := e.Reason
			if e.Problem() {
				why = "want " + e.Want + "; " + e.Do
			}
			fmt.Fprintf(p.out, "  %s: found %q, taken as %s%s\n", e.Source, e.Source.Text, e.TakenAs, after(": ", why))
		}
	}
	for _, s := range r.Said {
		fmt.Fprintf(p.out, "- %s\n", s)
	}
}

func after(mark, s string) string {
	if s == "" {
		return ""
	}
	return mark + s
}

func pad(s string, width int) string {
	return s + strings.Repeat(" ", max(0, width-utf8.RuneCountInString(s)))
}

func lotLine(l qa.LotResult) string {
	var files []string
	for _, f := range l.Files {
		files = append(files, fmt.Sprintf("%s (sha-256 %s…)", f.Name, f.SHA256[:min(12, len(f.SHA256))]))
	}
	s := l.Lot
	if l.Source != "" {
		s += ", " + l.Source
	}
	return s + ", " + strings.Join(files, ", ")
}
