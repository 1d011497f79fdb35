package desk

import (
	"strings"

	"lotpair/qa"
)

// BenchView is what the bench says of the characteristic looked at. Its picture is figure.Facing of the same comparison.
type BenchView struct {
	Name       string
	Views      []string // what can be looked at
	Headline   string   // the verdict
	Paragraphs []string // what was found, then what to look at
	Whole      []string // what to look at in the comparison as a whole
	Caution    string
	Read       string // how the files were read: what was detected or done by default
}

// Bench says what was found for the characteristic looked at.
func (s State) Bench() BenchView {
	v := BenchView{Name: s.name(), Views: []string{"Spread"}}
	c, ok := s.Characteristic()
	if !ok {
		v.Headline = "Not compared."
		return v
	}
	said := qa.Sentences(c)
	if len(said) > 0 {
		v.Headline, v.Paragraphs = said[0], said[1:]
	}
	for _, w := range c.Warnings {
		if w.Side == "" {
			v.Paragraphs = append(v.Paragraphs, w.Text)
		}
	}
	for _, w := range s.Record.Result.Warnings {
		v.Whole = append(v.Whole, w.Text)
	}
	if said := s.Record.Readings.Said; len(said) > 0 {
		v.Read = "How the files were read: " + strings.Join(said, " ")
	}
	cautions := qa.Cautions()
	v.Caution = cautions[5] + " " + cautions[0]
	return v
}
