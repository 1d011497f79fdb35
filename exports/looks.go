package exports

import (
	"github.com/xuri/excelize/v2"

	"lotpair/qa"
)

// The colours of the workbook: paper and ink, the same roles as in the window.
const (
	inkColour       = "1E2A32"
	mutedColour     = "5F6B72"
	ruleColour      = "D9D4C7"
	referenceColour = "2F5D8C"
	candidateColour = "B5651D"
	paperColour     = "F4F0E6"
	workbookFont    = "Arial"
)

// looks holds the style ids of a workbook, made on first use, and who follows its writing.
type looks struct {
	file  *excelize.File
	ids   [lastLook + 1]int // 0: not made yet
	watch qa.Watch
}

func (l *looks) id(k look) (int, error) {
	if id := l.ids[k]; id != 0 {
		return id, nil
	}
	s := style(k)
	id, err := l.file.NewStyle(&s)
	if err != nil {
		return 0, err
	}
	l.ids[k] = id
	return id, nil
}

func font(size float64, colour string, bold bool) *excelize.Font {
	return &excelize.Font{Family: workbookFont, Size: size, Color: colour, Bold: bold}
}

func below(colour string, weight int) []excelize.Border {
	return []excelize.Border{{Type: "bottom", Color: colour, Style: weight}}
}

// style says what a look is.
func style(k look) excelize.Style {
	s := excelize.Style{Font: font(10, inkColour, false), Alignment: &excelize.Alignment{Vertical: "center"}}
	a := s.Alignment
	switch k {
	case titleLook:
		s.Font = font(16, inkColour, true)
	case titleWrapLook:
		s.Font = font(16, inkColour, true)
		a.WrapText = true
	case mutedLook:
		s.Font = font(9, mutedColour, false)
		a.WrapText = true
	case rightMutedLook:
		s.Font = font(9, mutedColour, false)
		a.Horizontal, a.WrapText = "right", true
	case referenceLook:
		s.Font = font(9, referenceColour, true)
		s.Border = []excelize.Border{{Type: "top", Color: inkColour, Style: 1}}
	case candidateLook:
		s.Font = font(9, candidateColour, true)
		a.Horizontal = "right"
		s.Border = []excelize.Border{{Type: "top", Color: inkColour, Style: 1}}
	case lotLook:
		s.Font = font(15, inkColour, true)
		a.WrapText = true
	case leftPlainLook:
		a.WrapText = true
	case rightPlainLook:
		a.Horizontal, a.WrapText = "right", true
	case rightLotLook:
		s.Font = font(15, inkColour, true)
		a.Horizontal, a.WrapText = "right", true
	case headLook:
		s.Font = font(9, mutedColour, true)
		s.Border = below(inkColour, 1)
		a.WrapText, a.Vertical = true, "bottom"
	case headRightLook:
		s.Font = font(9, mutedColour, true)
		s.Border = below(inkColour, 1)
		a.WrapText, a.Vertical, a.Horizontal, a.Indent = true, "bottom", "right", 1
	case headPlainLook:
		s.Font = font(8, inkColour, true)
		a.WrapText, a.Vertical = true, "bottom"
	case headPlainRightLook:
		s.Font = font(8, inkColour, true)
		a.WrapText, a.Vertical, a.Horizontal, a.Indent = true, "bottom", "right", 1
	case groupLook:
		s.Font = font(11, inkColour, true)
		s.Border = below(ruleColour, 1)
	case verdictLook:
		s.Font = font(12, inkColour, true)
		a.WrapText = true
	case wrapLook:
		a.WrapText, a.Vertical = true, "top"
	case strongWrapLook:
		s.Font.Bold = true
		a.WrapText, a.Vertical = true, "top"
	case strongLook:
		s.Font.Bold = true
	case numberLook:
		a.Horizontal, a.Indent = "right", 1
	case ruledNumberLook:
		a.Horizontal, a.Indent = "right", 1
		s.Border = below(ruleColour, 1)
	case smallLook:
		s.Font = font(8.5, inkColour, false)
		a.WrapText, a.Vertical = true, "top"
	case ruledLook:
		s.Border = below(ruleColour, 1)
	case ruledWrapLook:
		s.Border = below(ruleColour, 1)
		a.WrapText = true
	case ruledSmallLook:
		s.Font = font(7.5, inkColour, false)
		s.Border = below(ruleColour, 1)
		a.WrapText = true
	case ruledStrongLook:
		s.Font.Bold = true
		s.Border = below(ruleColour, 1)
		a.WrapText = true
	case signLook:
		s.Font = font(9, inkColour, false)
		s.Border = below(inkColour, 1)
		a.WrapText = true
	}
	return s
}
