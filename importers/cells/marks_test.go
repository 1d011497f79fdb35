package cells

import (
	"strings"
	"testing"
)

func TestReadMarks(t *testing.T) {
	const dressed = `<styleSheet><fonts><font/><font><strike/></font><font><strike val="0"/></font></fonts>` +
		`<fills><fill><patternFill patternType="none"/></fill><fill><patternFill patternType="gray125"/></fill><fill><patternFill patternType="solid"><fgColor rgb="FFFF0000"/></patternFill></fill></fills>` +
		`<cellXfs><xf fontId="0" fillId="1"/><xf fontId="1" fillId="0"/><xf fontId="2" fillId="2"/><xf fontId="1" fillId="2"/><xf fontId="9" fillId="9"/></cellXfs></styleSheet>`
	pad := strings.Repeat(" ", lookahead) // so that the first cells are read in one go
	rows := `<row r="1"><c r="A1" s="0"><v>1</v></c><c r="B1" s="1"><v>2</v></c><c r="C1" s="2"><v>3</v></c><c s='3' r="D1"><v>4</v></c><c r="E1" s="4"><v>5</v></c></row>` + pad
	data := packOf(t, rows, parts{
		"xl/styles.xml":                       dressed,
		"xl/worksheets/_rels/sheet1.xml.rels": `<Relationships><Relationship Id="c" Type="x/comments" Target="../comments1.xml"/><Relationship Id="v" Type="x/vmlDrawing" Target="../d.vml"/></Relationships>`,
		"xl/comments1.xml":                    `<comments><authors/><commentList><comment ref="E1"><text><t>measured again 12.006</t></text></comment><comment ref="Z9"/></commentList></comments>`,
	})
	w, err := Read(data)
	if err != nil {
		t.Fatal(err)
	}
	one, err := ReadSheet(data, w.Sheets[0].Name)
	if err != nil {
		t.Fatal(err)
	}
	for i, want := range []Marks{0, Struck, Filled, Struck | Filled, Commented} {
		for _, s := range []Sheet{w.Sheets[0], one} {
			if got := s.Rows[0].Cells[i].Marks; got != want {
				t.Errorf("%s: got the marks %b, want %b", s.Rows[0].Cells[i].Name(), got, want)
			}
		}
	}
	if m := Struck | Commented; !m.Has(Struck) || m.Has(Filled) {
		t.Errorf("got %b, want struck and commented", m)
	}
}
