package cells

import (
	"strconv"
	"strings"
)

// builtin are the number formats that have a number and no code in the file (ISO/IEC 29500-1, 18.8.30); the codes 27 to 36
// and 50 to 58 are dates of East Asian locales.
var builtin = map[int]string{
	1: "0", 2: "0.00", 3: "#,##0", 4: "#,##0.00", 9: "0%", 10: "0.00%", 11: "0.00E+00", 12: "# ?/?", 13: "# ??/??",
	14: "mm-dd-yy", 15: "d-mmm-yy", 16: "d-mmm", 17: "mmm-yy", 18: "h:mm AM/PM", 19: "h:mm:ss AM/PM", 20: "h:mm", 21: "h:mm:ss",
	22: "m/d/yy h:mm", 37: "#,##0 ;(#,##0)", 38: "#,##0 ;[Red](#,##0)", 39: "#,##0.00;(#,##0.00)", 40: "#,##0.00;[Red](#,##0.00)",
	45: "mm:ss", 46: "[h]:mm:ss", 47: "mmss.0", 48: "##0.0E+0", 49: "@",
}

// style is what a cell's style says of its value.
type style struct {
	code string
	date bool
}

// readStyles gives the style and the marks of each index into cellXfs.
func readStyles(p *pack, name string) ([]style, []Marks, error) {
	r, err := p.open(name)
	if err != nil || r == nil {
		return nil, nil, err
	}
	defer func() { _ = r.Close() }()
	codes := map[int]string{}
	var styles []style
	var d dress
	x := newScanner(name, r)
	format := func() error {
		if id, ok := whole(x.attr("numFmtId")); ok && x.is("numFmt") {
			if len(codes) == maxStyles {
				return damaged(name, "more than %d number formats", maxStyles)
			}
			codes[id] = string(x.attr("formatCode"))
		}
		return nil
	}
	xf := func() error {
		if !x.is("xf") {
			return nil
		}
		if len(styles) == maxStyles {
			return damaged(name, "more than %d cell styles", maxStyles)
		}
		id, ok := whole(x.attr("numFmtId"))
		if !ok && len(x.attr("numFmtId")) > 0 {
			return damaged(name, "the number format %q", clip(x.attr("numFmtId")))
		}
		styles = append(styles, styleOf(id, codes))
		d.use(x)
		return nil
	}
	if err := x.root("styleSheet"); err != nil {
		return nil, nil, err
	}
	err = x.children(func() error {
		switch string(x.local()) {
		case "numFmts":
			return x.children(format)
		case "fonts":
			return x.children(func() error { return d.font(x) })
		case "fills":
			return x.children(func() error { return d.fill(x) })
		case "cellXfs":
			return x.children(xf)
		}
		return nil
	})
	if err == nil {
		err = x.rest()
	}
	return styles, d.marks(), err
}

const maxStyles = 1 << 17 // spreadsheet programs hold half as many

func styleOf(id int, codes map[int]string) style {
	code, custom := codes[id]
	if !custom {
		code = builtin[id]
		if id >= 27 && id <= 36 || id >= 50 && id <= 58 {
			return style{code: "date " + strconv.Itoa(id), date: true}
		}
	}
	if strings.EqualFold(code, "general") {
		code = ""
	}
	return style{code: code, date: isDate(code)}
}

// isDate says whether a format's code shows a date or a time: one of y m d h s outside quotes, escapes, colours and conditions.
func isDate(code string) bool {
	return strings.ContainsAny(strings.ToLower(bare(code)), "ymdhs")
}

// Percent says whether a number format shows a hundredfold.
func Percent(code string) bool { return strings.Contains(bare(code), "%") }

// bare is a format's code without quoted and escaped text, brackets (but those of elapsed time) and the general format.
func bare(code string) string {
	var b strings.Builder
	for i := 0; i < len(code); i++ {
		switch c := code[i]; c {
		case '"':
			if end := strings.IndexByte(code[i+1:], '"'); end >= 0 {
				i += end + 1
			} else {
				i = len(code)
			}
		case '\\', '_', '*':
			i++
		case '[':
			end := strings.IndexByte(code[i:], ']')
			if end < 0 {
				i = len(code)
				break
			}
			if in := strings.ToLower(code[i+1 : i+end]); in != "" && strings.Trim(in, in[:1]) == "" && strings.ContainsAny(in[:1], "hms") {
				b.WriteString(in)
			}
			i += end
		default:
			b.WriteByte(c)
		}
	}
	s := b.String()
	for _, general := range []string{"general", "standard"} {
		if i := strings.Index(strings.ToLower(s), general); i >= 0 && len(strings.ToLower(s)) == len(s) {
			s = s[:i] + s[i+len(general):]
		}
	}
	return s
}
