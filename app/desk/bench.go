package desk

import (
	"strings"

	"lotpair/qa"
)

// BenchView is what the bench says of the characteristic looked at. Its picture is State.Picture.
type BenchView struct {
	Name       string
	Looks      []LookView
	Headline   string   // the verdict
	Paragraphs []string // what was found, then what to look at
	Whole      []string // what to look at in the comparison as a whole
	Caution    string
	Read       string // how the files were read: what was detected or done by default
}

// Bench says what was found for the characteristic looked at.
func (s State) Bench() BenchView {
	v := BenchView{Name: s.name()}
	c, ok := s.Characteristic()
	if !ok {
		v.Headline = "Not compared."
		return v
	}
	shown, cautions := s.Shown(), qa.Cautions()
	for l := range looks {
		if offers(Look(l), c) {
			v.Looks = append(v.Looks, LookView{Look(l), Look(l).String(), Look(l) == shown})
		}
	}
	switch shown {
	case Order:
		v.Headline, v.Paragraphs, v.Caution = "One reading after the other.", s.orderSentences(c), cautions[3]
		return v
	case Shape:
		v.Headline, v.Paragraphs, v.Caution = "Against the normal distribution.", s.shapeSentences(c), cautions[3]
		return v
	case Sensitivity:
		v.Headline, v.Paragraphs, v.Caution = "The same question, asked otherwise.", s.sensitivitySentences(c), cautions[2]
		return v
	case Limits:
		v.Headline, v.Paragraphs, v.Caution = "Between the limits.", s.limitsSentences(c), cautions[5]
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
	v.Caution = cautions[5] + " " + cautions[0]
	return v
}
