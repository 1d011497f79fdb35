package cells

import (
	"bytes"
	"strconv"
	"strings"
)

// odsStyle is what one style says: of a cell style also its parent and the number format that it names.
type odsStyle struct {
	parent, data string
	code         string
	marks        Marks
}

// styleKey tells number formats and cell styles of one name apart.
func styleKey(family, name string) string { return family + "\x00" + name }

// style follows a cell style to its number format's code and its marks.
func (o *odsReader) style(name string) odsStyle {
	if o.last.known && o.last.name == name {
		return o.last.style
	}
	out := o.follow(name)
	o.last.known, o.last.name, o.last.style = true, name, out
	return out
}

func (o *odsReader) follow(name string) odsStyle {
	var out odsStyle
	format := ""
	for range MaxDepth { // parents never go that deep, and a circle ends here
		s, ok := o.styles[styleKey("cell", name)]
		if !ok {
			break
		}
		out.marks |= s.marks
		if format == "" {
			format = s.data
		}
		if name = s.parent; name == "" {
			break
		}
	}
	out.code = o.styles[styleKey("data", format)].code
	return out
}

// readStyles reads the children of office:styles or office:automatic-styles.
func (o *odsReader) readStyles() error {
	return o.x.children(func() error {
		if len(o.styles) > maxStyles {
			return damaged(o.x.part, "more than %d styles", maxStyles)
		}
		switch string(o.usual(o.x.name)) {
		case "style:style":
			return o.cellStyle()
		case "number:number-style", "number:percentage-style", "number:currency-style":
			return o.numberStyle()
		case "number:date-style", "number:time-style":
			o.styles[styleKey("data", string(o.attr("style:name")))] = odsStyle{code: "date"}
		}
		return nil
	})
}

func (o *odsReader) cellStyle() error {
	name, family := string(o.attr("style:name")), string(o.attr("style:family"))
	s := odsStyle{parent: string(o.attr("style:parent-style-name")), data: string(o.attr("style:data-style-name"))}
	hides := false
	err := o.x.children(func() error {
		switch string(o.usual(o.x.name)) {
		case "style:table-properties":
			hides = string(o.attr("table:display")) == "false"
		case "style:table-cell-properties":
			if c := string(o.attr("fo:background-color")); c != "" && c != "transparent" {
				s.marks |= Filled
			}
		case "style:text-properties":
			for _, a := range []string{"style:text-line-through-style", "style:text-line-through-type"} {
				if v := string(o.attr(a)); v != "" && v != "none" {
					s.marks |= Struck
				}
			}
		}
		return nil
	})
	switch family {
	case "table":
		o.hides[name] = hides
	case "table-cell":
		o.styles[styleKey("cell", name)] = s
	}
	return err
}

// numberStyle writes a number format as the code that the other format has for it: 0.00%, [$€] 0.00, 0.000" mm".
func (o *odsReader) numberStyle() error {
	name, percent := string(o.attr("style:name")), o.is("number:percentage-style")
	var b strings.Builder
	err := o.x.children(func() error {
		switch string(o.usual(o.x.name)) {
		case "number:number":
			b.WriteString(o.places("0"))
		case "number:scientific-number":
			b.WriteString(o.places("0") + "E+00")
		case "number:fraction":
			b.WriteString("# ?/?")
		case "number:currency-symbol":
			v, err := o.x.gather(nil)
			b.WriteString("[$" + string(clip(v)) + "]")
			return err
		case "number:text":
			v, err := o.x.gather(nil)
			v = bytes.ReplaceAll(clip(v), []byte(`"`), nil)
			if percent && string(bytes.TrimSpace(v)) == "%" {
				b.WriteString("%")
			} else if len(v) > 0 {
				b.WriteString(`"` + string(v) + `"`)
			}
			return err
		}
		return nil
	})
	code := b.String()
	if percent && !strings.Contains(code, "%") {
		code += "%"
	}
	o.styles[styleKey("data", name)] = odsStyle{code: code}
	return err
}

// places is the code of a number with its decimal places; the general format where they are left open.
func (o *odsReader) places(code string) string {
	v := o.attr("number:decimal-places")
	if v == nil {
		return ""
	}
	n, ok := whole(v)
	if !ok {
		return ""
	}
	if n > 0 {
		code += "." + strings.Repeat("0", min(n, 30))
	}
	if factor, err := strconv.ParseFloat(string(o.attr("number:display-factor")), 64); err == nil {
		for ; factor >= 1000; factor /= 1000 {
			code += ","
		}
	}
	return code
}
