package draw

import (
	"bytes"
	"encoding/xml"
	"fmt"
	"image/color"
	"strconv"

	"lotpair/qa/figure"
)

// SVG is a figure as an SVG file in the light palette. Words stay text, so that they can be found and read aloud.
func SVG(f figure.Figure) []byte {
	p := Light()
	var b bytes.Buffer
	fmt.Fprintf(&b, "<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"%s\" height=\"%s\" viewBox=\"0 0 %[1]s %[2]s\" font-family=\"Noto Sans, sans-serif\" role=\"img\">\n", number(f.Width), number(f.Height))
	fmt.Fprintf(&b, "<title>%s</title>\n", escaped(f.Title))
	fmt.Fprintf(&b, "<rect width=\"%s\" height=\"%s\" fill=\"%s\"/>\n", number(f.Width), number(f.Height), hex(p.Paper))
	for _, m := range f.Marks {
		b.WriteString(element(m, p))
	}
	b.WriteString("</svg>\n")
	return b.Bytes()
}

func element(m figure.Mark, p Palette) string {
	col := hex(p.Of(m))
	paint := fmt.Sprintf(`fill="%s"`, col)
	if m.Open {
		width := "1.2"
		if m.Kind == figure.Diamond {
			width = "1.5"
		}
		paint = fmt.Sprintf(`fill="%s" stroke="%s" stroke-width="%s"`, hex(p.Paper), col, width)
	}
	x, y, size := number(m.X), number(m.Y), number(m.Size)
	switch m.Kind {
	case figure.Line:
		dash := ""
		if m.Dashed {
			dash = ` stroke-dasharray="2 3"`
		}
		return fmt.Sprintf("<line x1=\"%s\" y1=\"%s\" x2=\"%s\" y2=\"%s\" stroke=\"%s\" stroke-width=\"%s\"%s/>\n", x, y, number(m.X2), number(m.Y2), col, size, dash)
	case figure.Box:
		return fmt.Sprintf("<rect x=\"%s\" y=\"%s\" width=\"%s\" height=\"%s\" %s/>\n", x, y, number(m.X2-m.X), number(m.Y2-m.Y), paint)
	case figure.Dot:
		return fmt.Sprintf("<circle cx=\"%s\" cy=\"%s\" r=\"%s\" %s/>\n", x, y, size, paint)
	case figure.Diamond:
		return fmt.Sprintf("<path d=\"M%s %sL%s %sL%s %sL%s %sZ\" %s/>\n",
			x, number(m.Y-m.Size), number(m.X+m.Size), y, x, number(m.Y+m.Size), number(m.X-m.Size), y, paint)
	case figure.Label:
		anchor, weight := m.Anchor, ""
		if anchor == "" {
			anchor = figure.Start
		}
		if m.Bold {
			weight = ` font-weight="700"`
		}
		return fmt.Sprintf("<text x=\"%s\" y=\"%s\" font-size=\"%s\" text-anchor=\"%s\"%s %s>%s</text>\n", x, y, size, anchor, weight, paint, escaped(m.Text))
	}
	return ""
}

// number writes a coordinate with at most three decimals.
func number(v float64) string {
	f, _ := strconv.ParseFloat(strconv.FormatFloat(v, 'f', 3, 64), 64)
	if f == 0 {
		f = 0 // no minus zero
	}
	return strconv.FormatFloat(f, 'f', -1, 64)
}

func hex(c color.NRGBA) string { return fmt.Sprintf("#%02X%02X%02X", c.R, c.G, c.B) }

func escaped(s string) string {
	var b bytes.Buffer
	_ = xml.EscapeText(&b, []byte(s)) // a bytes.Buffer does not fail
	return b.String()
}
