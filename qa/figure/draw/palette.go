package draw

import (
	"image/color"

	"lotpair/qa/figure"
)

// Palette gives each role its colour.
type Palette struct {
	Paper     color.NRGBA // the ground
	Text      color.NRGBA
	Muted     color.NRGBA
	Rule      color.NRGBA
	Reference color.NRGBA
	Candidate color.NRGBA // marks of the candidate
	Margin    color.NRGBA

	ReferenceText color.NRGBA // labels of a lot: 4.5:1 on paper and on the margin band, where the mark's colour has less
	CandidateText color.NRGBA
	MutedText     color.NRGBA
}

// Light is ink on paper.
func Light() Palette {
	return Palette{
		Paper: rgb(0xFBFAF7), Text: rgb(0x1E2A32), Muted: rgb(0x5F6B72), Rule: rgb(0xD9D4C7),
		Reference: rgb(0x2F5D8C), Candidate: rgb(0xB5651D), Margin: rgb(0xE9E3D2),
		ReferenceText: rgb(0x2F5D8C), CandidateText: rgb(0x8F4D12), MutedText: rgb(0x555F66),
	}
}

// Dark has the same roles on a dark ground.
func Dark() Palette {
	return Palette{
		Paper: rgb(0x171C20), Text: rgb(0xECE8DE), Muted: rgb(0x9AA5AB), Rule: rgb(0x3A444B),
		Reference: rgb(0x7FB0E0), Candidate: rgb(0xE0964F), Margin: rgb(0x33362F),
		ReferenceText: rgb(0x8DBAE6), CandidateText: rgb(0xE6A263), MutedText: rgb(0xA9B3B8),
	}
}

func rgb(v uint32) color.NRGBA {
	return color.NRGBA{R: uint8(v >> 16), G: uint8(v >> 8), B: uint8(v), A: 0xFF}
}

// Of is the colour of a mark.
func (p Palette) Of(m figure.Mark) color.NRGBA {
	label := m.Kind == figure.Label
	switch m.Role {
	case figure.Muted:
		if label {
			return p.MutedText
		}
		return p.Muted
	case figure.Rule:
		return p.Rule
	case figure.Reference:
		if label {
			return p.ReferenceText
		}
		return p.Reference
	case figure.Candidate:
		if label {
			return p.CandidateText
		}
		return p.Candidate
	case figure.Margin:
		return p.Margin
	}
	return p.Text
}
