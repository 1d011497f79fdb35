package cells

import (
	"fmt"
	"math/rand/v2"
	"strconv"
	"strings"
)

// maker makes workbooks with their cells known: every syntax that XML allows for the same cells, chosen by the seed.
type maker struct {
	*rand.Rand
	prefix string
	odd    bool // any syntax; else the plain one of the common programs
	mixed  bool // addresses left out here and there in one row, which excelize misreads
	shared []string
	b      strings.Builder
}

// makeSheet gives the sheet and the shared strings as XML, and the cells.
func makeSheet(seed uint64) (m *maker, sheetXML, sharedXML string, want []Cell) {
	m = &maker{Rand: rand.New(rand.NewPCG(seed, 7))}
	m.odd = m.IntN(3) > 0
	m.mixed = m.odd && m.IntN(4) == 0
	if m.odd && m.IntN(2) == 0 {
		m.prefix = "x:"
	}
	var rows strings.Builder
	number := 0
	for range m.IntN(12) {
		step := 1 + m.IntN(3)*m.IntN(2)
		number += step
		r := ` r=` + m.quote(strconv.Itoa(number))
		if m.odd && step == 1 && m.IntN(2) == 0 {
			r = ""
		}
		fmt.Fprintf(&rows, "%s<%srow%s%s>", m.space(), m.prefix, r, m.choose("", ` spans="1:3"`, ` ht='12'`))
		bare, col := m.odd && m.IntN(3) == 0, 0
		for range m.IntN(8) {
			step := 1
			if m.mixed || !bare {
				step += m.IntN(40) * m.IntN(2) * m.IntN(2)
			}
			col += step
			c := m.cell(Cell{Row: number, Col: col}, bare && !m.mixed || m.mixed && step == 1 && m.IntN(2) == 0)
			rows.WriteString(m.space() + m.b.String())
			want = append(want, c)
		}
		fmt.Fprintf(&rows, "%s</%srow%s>", m.space(), m.prefix, m.choose("", " ", "\n"))
	}
	open := `<?xml version="1.0" encoding="UTF-8" standalone="yes"?>` + m.choose("", "\n", "\r\n") + m.comment()
	space := ` xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"`
	if m.prefix != "" {
		space = ` xmlns:x='http://schemas.openxmlformats.org/spreadsheetml/2006/main'`
	}
	p := m.prefix
	sheetXML = open + "<" + p + "worksheet" + space + ">" + m.choose("", `<`+p+`dimension ref="A1"/>`, `<`+p+`dimension ref="A1:XFD1048576"/>`) +
		"<" + p + "sheetData>" + rows.String() + m.space() + "</" + p + "sheetData></" + p + "worksheet>" + m.choose("", "\n")
	var shared strings.Builder
	for _, s := range m.shared {
		fmt.Fprintf(&shared, "<si>%s</si>%s", m.richText("", s), m.space())
	}
	sharedXML = `<sst xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main">` + shared.String() + `</sst>`
	return m, sheetXML, sharedXML, want
}

// cell writes one cell and says what it holds.
func (m *maker) cell(c Cell, bare bool) Cell {
	m.b.Reset()
	attrs := []string{}
	if !bare {
		attrs = append(attrs, "r="+m.quote(c.Name()))
	}
	if i := m.IntN(2 * len(made)); i < len(made) {
		attrs = append(attrs, "s="+m.quote(strconv.Itoa(i)))
		c.Format = made[i].code
		if made[i].date {
			c.Kind = Date
		}
	}
	formula := ""
	if m.IntN(6) == 0 {
		c.Formula, formula = true, m.element("f", "A1+1")
	}
	kind, content := "", ""
	switch m.IntN(10) {
	case 0:
		kind, c.Kind, c.Text = "s", Text, m.words()
		content = m.element("v", strconv.Itoa(len(m.shared)))
		m.shared = append(m.shared, c.Text)
	case 1:
		kind, c.Kind, c.Text = "inlineStr", Text, m.words()
		c.Formula, formula = false, ""
		content = "<" + m.prefix + "is>" + m.richText(m.prefix, c.Text) + "</" + m.prefix + "is>"
	case 2:
		kind, c.Kind, c.Text = "str", Text, m.words()
		content = m.element("v", m.escape(c.Text))
	case 3:
		kind, c.Kind, c.Text = "b", Bool, m.choose("TRUE", "FALSE")
		content = m.element("v", map[string]string{"TRUE": "1", "FALSE": "0"}[c.Text])
	case 4:
		kind, c.Kind, c.Text = "e", Error, m.choose("#DIV/0!", "#N/A", "#VALUE!")
		content = m.element("v", c.Text)
	case 5:
		if c.Kind = Blank; c.Formula {
			c.Kind = FormulaNoValue
		}
		content = m.choose("", "<"+m.prefix+"v/>")
	default:
		if kind = m.choose("", "n"); c.Kind != Date {
			c.Kind = Number
		}
		c.Text = strconv.FormatFloat(m.NormFloat64()*[]float64{1, 1e-3, 12, 1e9, 1e20}[m.IntN(5)], m.choose("g", "f", "E")[0], []int{-1, 3, 16}[m.IntN(3)], 64)
		content = m.element("v", c.Text)
	}
	if kind != "" {
		attrs = append(attrs, "t="+m.quote(kind))
	}
	if m.odd {
		m.Shuffle(len(attrs), func(i, j int) { attrs[i], attrs[j] = attrs[j], attrs[i] })
	}
	fmt.Fprintf(&m.b, "<%sc", m.prefix)
	for _, a := range attrs {
		m.b.WriteString(m.gap() + a)
	}
	if content = formula + m.space() + content; content == "" && m.IntN(2) == 0 {
		m.b.WriteString("/>")
	} else {
		fmt.Fprintf(&m.b, ">%s%s</%sc>", content, m.space(), m.prefix)
	}
	return c
}

// made are the styles of the test workbooks, as read_test.go writes them.
var made = []style{{}, {"d-mmm", true}, {`0.000" mm"`, false}, {`yyyy\-mm\-dd`, true}, {"0.00%", false}, {}}

func (m *maker) words() string {
	s := ""
	for range 1 + m.IntN(4) {
		s += m.choose("Bore", " 12.5 ", "ä€😀", "a&b<c>\"'", "]]", "_", "_x0041_", "x\ny", "\t", "12,003", "–")
	}
	return s
}

func (m *maker) choose(of ...string) string { return of[m.IntN(len(of))] }

// space is what may stand between elements.
func (m *maker) space() string {
	if !m.odd || m.IntN(4) > 0 {
		return ""
	}
	return m.choose(" ", "\n", "\r\n\t", "\r") + m.comment()
}

func (m *maker) comment() string {
	if !m.odd || m.IntN(3) > 0 {
		return ""
	}
	return m.choose("<!-- <c> & - -->", "<?p <c r='A1'> ?>")
}

// gap is what may stand before an attribute.
func (m *maker) gap() string {
	if !m.odd {
		return " "
	}
	return m.choose(" ", "  ", "\n", " \t")
}

func (m *maker) quote(s string) string {
	if !m.odd {
		return `"` + s + `"`
	}
	return m.choose(`"`+s+`"`, `'`+s+`'`, `"&#`+strconv.Itoa(int(s[0]))+`;`+s[1:]+`"`)
}

// element is an element with characters that are XML already, perhaps in pieces.
func (m *maker) element(name, inner string) string {
	if m.odd && m.IntN(3) == 0 && !strings.ContainsAny(inner, "&]<\r–ä€😀") {
		cut := m.IntN(len(inner) + 1)
		inner = inner[:cut] + m.choose("<![CDATA["+inner[cut:]+"]]>", m.comment()+inner[cut:])
	}
	return "<" + m.prefix + name + ">" + inner + "</" + m.prefix + name + ">"
}

// richText is a text as the children of <is> or <si>: plain, or in runs, with a phonetic one that does not count.
func (m *maker) richText(prefix, s string) string {
	t := func(s string) string {
		return "<" + prefix + `t xml:space="preserve">` + m.escape(s) + "</" + prefix + "t>"
	}
	if !m.odd || m.IntN(2) == 0 || len(s) < 2 || s[0] >= 0x80 || s[1] >= 0x80 || s[0] == '_' {
		return t(s)
	}
	return "<" + prefix + "r><" + prefix + "rPr/>" + t(s[:1]) + "</" + prefix + "r><" + prefix + "r>" + t(s[1:]) + "</" + prefix + "r><" + prefix + `rPh sb="0" eb="1">` + t("no") + "</" + prefix + "rPh>"
}

// escape writes a text for XML, each character in one of its ways, and what looks like an escape of the format escaped.
func (m *maker) escape(s string) string {
	s = strings.ReplaceAll(s, "_x0041_", "_x005F_x0041_")
	var b strings.Builder
	for _, r := range s {
		switch {
		case r == '<', r == '&', r == '>', r == '"' && m.IntN(2) == 0:
			b.WriteString(map[rune]string{'<': "&lt;", '&': "&amp;", '>': "&gt;", '"': "&quot;"}[r])
		case m.odd && r == '\n' && m.IntN(2) == 0:
			b.WriteString(m.choose("\r\n", "\r", "&#10;", "_x000A_"))
		case m.odd && m.IntN(12) == 0 && r != '_' && r != 'x':
			fmt.Fprintf(&b, m.choose("&#%d;", "&#x%x;"), r)
		default:
			b.WriteRune(r)
		}
	}
	return b.String()
}

// wholeParts are the parts of a workbook of one sheet that other readers open too.
func wholeParts(sheetXML, sharedXML string) parts {
	const (
		main     = `xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"`
		relation = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
		types    = "application/vnd.openxmlformats-officedocument.spreadsheetml."
	)
	target := func(kind, target string) string {
		return `<Relationship Id="` + kind + `" Type="` + relation + "/" + kind + `" Target="` + target + `"/>`
	}
	rels := func(all string) string {
		return `<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships">` + all + `</Relationships>`
	}
	override := func(name, kind string) string {
		return `<Override PartName="/xl/` + name + `.xml" ContentType="` + types + kind + `+xml"/>`
	}
	return parts{
		"[Content_Types].xml": `<Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types"><Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/>` +
			override("workbook", "sheet.main") + override("worksheets/sheet1", "worksheet") + override("styles", "styles") + override("sharedStrings", "sharedStrings") + `</Types>`,
		"_rels/.rels":                rels(target("officeDocument", "xl/workbook.xml")),
		"xl/_rels/workbook.xml.rels": rels(target("worksheet", "worksheets/sheet1.xml") + target("styles", "styles.xml") + target("sharedStrings", "sharedStrings.xml")),
		"xl/workbook.xml":            `<workbook ` + main + ` xmlns:r="` + relation + `"><sheets><sheet name="Data" sheetId="1" r:id="worksheet"/></sheets></workbook>`,
		"xl/styles.xml":              strings.Replace(styles, "<styleSheet>", "<styleSheet "+main+">", 1),
		"xl/worksheets/sheet1.xml":   sheetXML,
		"xl/worksheets/sheet2.xml":   "",
		"xl/sharedStrings.xml":       sharedXML,
	}
}
