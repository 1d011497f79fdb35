package cells

import (
	"errors"
	"fmt"
	"strings"
	"testing"
)

const odsHead = `<?xml version="1.0" encoding="UTF-8"?><office:document-content xmlns:office="urn:oasis:names:tc:opendocument:xmlns:office:1.0"` +
	` xmlns:table="urn:oasis:names:tc:opendocument:xmlns:table:1.0" xmlns:text="urn:oasis:names:tc:opendocument:xmlns:text:1.0"` +
	` xmlns:style="urn:oasis:names:tc:opendocument:xmlns:style:1.0" xmlns:number="urn:oasis:names:tc:opendocument:xmlns:datastyle:1.0"` +
	` xmlns:fo="urn:oasis:names:tc:opendocument:xmlns:xsl-fo-compatible:1.0" xmlns:calcext="urn:org:documentfoundation:names:experimental:calc:xmlns:calcext:1.0">`

const odsStyles = `<office:automatic-styles>` +
	`<number:number-style style:name="N2"><number:number number:decimal-places="2"/></number:number-style>` +
	`<number:number-style style:name="Nmm"><number:number number:decimal-places="3"/><number:text> mm</number:text></number:number-style>` +
	`<number:percentage-style style:name="N11"><number:number number:decimal-places="1"/><number:text>%</number:text></number:percentage-style>` +
	`<number:currency-style style:name="N4"><number:currency-symbol>€</number:currency-symbol><number:number number:decimal-places="2"/></number:currency-style>` +
	`<number:date-style style:name="D1"><number:year/></number:date-style>` +
	`<style:style style:name="base" style:family="table-cell" style:data-style-name="N2"><style:text-properties style:text-line-through-style="solid"/></style:style>` +
	`<style:style style:name="ce1" style:family="table-cell" style:parent-style-name="base"/>` +
	`<style:style style:name="ce2" style:family="table-cell" style:data-style-name="N11"><style:table-cell-properties fo:background-color="#ff0000"/></style:style>` +
	`<style:style style:name="ce3" style:family="table-cell" style:data-style-name="N4"/>` +
	`<style:style style:name="ce4" style:family="table-cell" style:data-style-name="D1"/>` +
	`<style:style style:name="ce5" style:family="table-cell" style:data-style-name="Nmm"/>` +
	`<style:style style:name="loop" style:family="table-cell" style:parent-style-name="loop"/>` +
	`<style:style style:name="ta2" style:family="table"><style:table-properties table:display="false"/></style:style>` +
	`</office:automatic-styles>`

// odsOf is a spreadsheet whose content.xml has the tables given.
func odsOf(t testing.TB, tables string, replace parts) []byte {
	t.Helper()
	all := parts{
		"xl/workbook.xml": "", "_rels/.rels": "", "xl/_rels/workbook.xml.rels": "", "xl/styles.xml": "", "xl/sharedStrings.xml": "",
		"xl/worksheets/sheet1.xml": "", "xl/worksheets/sheet2.xml": "",
		"mimetype":    odsType,
		"content.xml": odsHead + odsStyles + `<office:body><office:spreadsheet>` + tables + `</office:spreadsheet></office:body></office:document-content>`,
	}
	for name, text := range replace {
		all[name] = text
	}
	return packOf(t, "", all)
}

// odsTable is one sheet with the rows given.
func odsTable(rows string) string {
	return `<table:table table:name="Data"><table:table-column table:number-columns-repeated="16384" table:default-cell-style-name="Default"/>` + rows + `</table:table>`
}

func TestReadODSCells(t *testing.T) {
	for _, tt := range []struct {
		xml  string
		want []Cell // in row 1
	}{
		{`<table:table-cell office:value-type="float" office:value="12.003000000000001"><text:p>12.00</text:p></table:table-cell>`, []Cell{{Col: 1, Kind: Number, Text: "12.003000000000001"}}},
		{`<table:table-cell/><table:table-cell table:style-name="ce1" office:value-type="float" office:value="1"/>`, []Cell{{Col: 2, Kind: Number, Text: "1", Format: "0.00", Marks: Struck}}},
		{`<table:table-cell table:style-name="ce2" office:value-type="percentage" office:value="0.953"><text:p>95.3%</text:p></table:table-cell>`, []Cell{{Col: 1, Kind: Number, Text: "0.953", Format: "0.0%", Marks: Filled}}},
		{`<table:table-cell table:style-name="ce3" office:value-type="currency" office:currency="EUR" office:value="3.5"/>`, []Cell{{Col: 1, Kind: Number, Text: "3.5", Format: "[$€]0.00"}}},
		{`<table:table-cell table:style-name="ce5" office:value-type="float" office:value="12.0034"/>`, []Cell{{Col: 1, Kind: Number, Text: "12.0034", Format: `0.000" mm"`}}},
		{`<table:table-cell table:style-name="ce4" office:value-type="date" office:date-value="1987-05-01"/>`, []Cell{{Col: 1, Kind: Date, Text: "1987-05-01", Format: "date"}}},
		{`<table:table-cell office:value-type="time" office:time-value="PT00H12M01S"/>`, []Cell{{Col: 1, Kind: Date, Text: "PT00H12M01S"}}},
		{`<table:table-cell office:value-type="boolean" office:boolean-value="true"/>`, []Cell{{Col: 1, Kind: Bool, Text: "TRUE"}}},
		{`<table:table-cell office:value-type="string"><text:p>a<text:s text:c="2"/>b
			c<text:span>d</text:span></text:p><text:p>e<text:tab/>f<text:line-break/>g</text:p></table:table-cell>`, []Cell{{Col: 1, Kind: Text, Text: "a  b cd\ne\tf\ng"}}},
		{`<table:table-cell office:value-type="string" office:string-value="x y"><text:p>shown</text:p></table:table-cell>`, []Cell{{Col: 1, Kind: Text, Text: "x y"}}},
		{`<table:table-cell><text:p>12,003</text:p></table:table-cell>`, []Cell{{Col: 1, Kind: Text, Text: "12,003"}}},
		{`<table:table-cell table:formula="of:=1/0" office:value-type="string" office:string-value="" calcext:value-type="error"><text:p>#DIV/0!</text:p></table:table-cell>`, []Cell{{Col: 1, Kind: Error, Text: "#DIV/0!", Formula: true}}},
		{`<table:table-cell table:formula="of:=x" office:value-type="float" office:value="0"><text:p>Err:508</text:p></table:table-cell>`, []Cell{{Col: 1, Kind: Error, Text: "Err:508", Formula: true}}},
		{`<table:table-cell table:formula="of:=[.A5]+0.005"/>`, []Cell{{Col: 1, Kind: FormulaNoValue, Formula: true}}},
		{`<table:table-cell table:formula="of:=[.A5]+1" office:value-type="float" office:value="3"/>`, []Cell{{Col: 1, Kind: Number, Text: "3", Formula: true}}},
		{`<table:table-cell office:value-type="float" office:value="1"><office:annotation><text:p>measured again</text:p></office:annotation><text:p>1</text:p></table:table-cell>`, []Cell{{Col: 1, Kind: Number, Text: "1", Marks: Commented}}},
		{`<table:table-cell table:number-columns-repeated="2" office:value-type="float" office:value="7"/><table:table-cell table:number-columns-repeated="16382"/>`, []Cell{{Col: 1, Kind: Number, Text: "7"}, {Col: 2, Kind: Number, Text: "7"}}},
		{`<table:covered-table-cell office:value-type="float" office:value="7"/>`, []Cell{{Col: 1, Kind: Number, Text: "7"}}},
		{`<table:table-cell table:style-name="loop" office:value-type="float" office:value="7"/>`, []Cell{{Col: 1, Kind: Number, Text: "7"}}},
		{`<table:table-cell table:style-name="ce1"/>`, nil},
	} {
		w, err := ReadODS(odsOf(t, odsTable(`<table:table-row>`+tt.xml+`</table:table-row>`), nil))
		if err != nil {
			t.Errorf("%s: got %v", tt.xml, err)
			continue
		}
		var got []Cell
		if len(w.Sheets[0].Rows) > 0 {
			got = w.Sheets[0].Rows[0].Cells
		}
		for i := range tt.want {
			tt.want[i].Row = 1
		}
		if fmt.Sprint(got) != fmt.Sprint(tt.want) {
			t.Errorf("%s: got %+v, want %+v", tt.xml, got, tt.want)
		}
	}
}

func TestReadODSSheets(t *testing.T) {
	cell := func(v string) string {
		return `<table:table-cell office:value-type="float" office:value="` + v + `"/>`
	}
	rows := `<table:table-header-rows><table:table-row>` + cell("1") + `</table:table-row></table:table-header-rows>` +
		`<table:table-row table:number-rows-repeated="3"/>` +
		`<table:table-row-group><table:table-row table:visibility="filter" table:number-rows-repeated="2">` + cell("5") + `</table:table-row></table:table-row-group>` +
		`<table:table-row><table:table-cell table:number-rows-spanned="3" table:number-columns-spanned="2" office:value-type="string"><text:p>lot</text:p></table:table-cell></table:table-row>` +
		`<table:table-row table:number-rows-repeated="1048569"/>`
	tables := `<table:table table:name="Data"><table:table-column/><table:table-column table:visibility="collapse" table:number-columns-repeated="2"/>` + rows + `</table:table>` +
		`<table:table table:name="raw" table:style-name="ta2"><table:table-row>` + cell("9") + `</table:table-row></table:table>` +
		`<table:table table:name="'file:///other.ods'#$A"><table:table-row>` + cell("9") + `</table:table-row></table:table>`
	for _, prefixed := range []bool{false, true} {
		change := parts{}
		if prefixed { // other prefixes for the same name spaces
			whole := odsHead + odsStyles + `<office:body><office:spreadsheet>` + tables + `</office:spreadsheet></office:body></office:document-content>`
			change["content.xml"] = strings.NewReplacer("table:", "t:", "xmlns:table", "xmlns:t", "office:", "o:", "xmlns:office", "xmlns:o", "xmlns:t:1.0", "xmlns:table:1.0", "xmlns:o:1.0", "xmlns:office:1.0").Replace(whole)
			change["content.xml"] = strings.NewReplacer("xmlns:t:1.0", "xmlns:table:1.0", "xmlns:o:1.0", "xmlns:office:1.0").Replace(change["content.xml"])
		}
		w, err := ReadODS(odsOf(t, tables, change))
		if err != nil {
			t.Fatal(err)
		}
		if len(w.Sheets) != 2 || w.Sheets[0].Hidden || !w.Sheets[1].Hidden {
			t.Fatalf("got the sheets %+v, want Data and the hidden raw", w.Sheets)
		}
		s := w.Sheets[0]
		if len(s.Rows) != 4 || s.Rows[1].Number != 5 || !s.Rows[2].Hidden || s.Rows[2].Number != 6 || s.Rows[3].Number != 7 || s.Rows[2].Cells[0].Name() != "A6" {
			t.Errorf("got the rows %+v, want 1, 5, 6 and 7", s.Rows)
		}
		if len(s.HiddenCols) != 1 || s.HiddenCols[0] != (Area{FirstCol: 2, LastCol: 3}) || len(s.Merged) != 1 || s.Merged[0] != (Area{FirstCol: 1, FirstRow: 7, LastCol: 2, LastRow: 9}) {
			t.Errorf("got hidden %+v, merged %+v", s.HiddenCols, s.Merged)
		}
	}
}

func TestReadODSRefuses(t *testing.T) {
	full := `<table:table-cell office:value-type="float" office:value="1" table:number-columns-repeated="1000"/>`
	for _, tt := range []struct {
		name, tables string
		replace      parts
		bound        bool
		words        []string
	}{
		{"encrypted", "", parts{"META-INF/manifest.xml": `<manifest:manifest xmlns:manifest="m"><manifest:file-entry><manifest:encryption-data/></manifest:file-entry></manifest:manifest>`}, false, []string{"encrypted with a password", "without a password"}},
		{"encrypted as a whole", "", parts{"encrypted-package": "x"}, false, []string{"encrypted with a password"}},
		{"a text document", "", parts{"mimetype": "application/vnd.oasis.opendocument.text"}, false, []string{"opendocument.text", ".ods"}},
		{"no content", "", parts{"content.xml": ""}, false, []string{"without a spreadsheet"}},
		{"no sheet", "", nil, false, []string{"no sheet"}},
		{"external entity", "", parts{"content.xml": `<!DOCTYPE a [<!ENTITY x SYSTEM "file:///etc/passwd">]><a>&x;</a>`}, false, []string{"document type declaration", ".ods"}},
		{"cut off", "", parts{"content.xml": odsHead + `<office:body>`}, false, []string{"the end inside"}},
		{"a kind without its value", odsTable(`<table:table-row><table:table-cell office:value-type="float"/></table:table-row>`), nil, false, []string{"without its value in row 1"}},
		{"two sheets of one name", odsTable("") + odsTable(""), nil, false, []string{`"Data" twice`}},
		{"a cell outside a row", odsTable(`<table:table-cell/>`), nil, false, []string{"where it has no place"}},
		{"a table in a cell", odsTable(`<table:table-row><table:table-cell><table:table/></table:table-cell></table:table-row>`), nil, false, []string{"inside a cell"}},
		{"a repetition that is none", odsTable(`<table:table-row table:number-rows-repeated="-2"/>`), nil, false, []string{"the repetition"}},
		{"beyond the last column", odsTable(`<table:table-row><table:table-cell table:number-columns-repeated="16384"/><table:table-cell office:value-type="float" office:value="1"/></table:table-row>`), nil, true, []string{"column 16384"}},
		{"beyond the last row", odsTable(`<table:table-row table:number-rows-repeated="1048576"/><table:table-row>` + full + `</table:table-row>`), nil, true, []string{"row 1048576"}},
		{"a small file that unfolds", odsTable(`<table:table-row table:number-rows-repeated="999999">` + full + `</table:table-row>`), nil, true, []string{"1048576 cells that repeat", "split the file"}},
		{"deep nesting", odsTable(`<table:table-row><table:table-cell>` + strings.Repeat("<text:p>", 100) + strings.Repeat("</text:p>", 100) + `</table:table-cell></table:table-row>`), nil, true, []string{"more than 64 deep", ".ods"}},
		{"a long text", odsTable(`<table:table-row><table:table-cell office:value-type="string"><text:p><text:s text:c="99999999"/></text:p></table:table-cell></table:table-row>`), nil, true, []string{"1 MiB"}},
	} {
		_, err := ReadODS(odsOf(t, tt.tables, tt.replace))
		var format *FormatError
		var bound *BoundError
		if !errors.As(err, &format) && !errors.As(err, &bound) || tt.bound != errors.As(err, &bound) {
			t.Errorf("%s: got %v (%T)", tt.name, err, err)
			continue
		}
		for _, w := range tt.words {
			if !strings.Contains(err.Error(), w) {
				t.Errorf("%s: got %q, want it to hold %q", tt.name, err, w)
			}
		}
		if strings.Contains(err.Error(), "sound .xlsx") {
			t.Errorf("%s: got %q, want no word of .xlsx workbooks", tt.name, err)
		}
	}
}

// Whatever stands in content.xml is read or refused with an error of this package, and no cell stands twice.
func FuzzReadODS(f *testing.F) {
	f.Add([]byte(`<table:table-row table:number-rows-repeated="2"><table:table-cell table:number-columns-repeated="3" office:value-type="float" office:value="1"/></table:table-row>`))
	f.Add([]byte(`<table:table-row><table:table-cell office:value-type="string"><office:annotation/><text:p>a<text:s text:c="2"/></text:p></table:table-cell></table:table-row>`))
	f.Add([]byte(`<table:table-row-group><table:table-row table:visibility="filter"><table:covered-table-cell office:value-type="date" office:date-value="1987-05-01"/></table:table-row></table:table-row-group>`))
	f.Fuzz(func(t *testing.T, rows []byte) {
		w, err := ReadODS(odsOf(t, odsTable(string(rows)), nil))
		if err != nil {
			var format *FormatError
			var bound *BoundError
			if !errors.As(err, &format) && !errors.As(err, &bound) {
				t.Fatalf("got %T %v, want an error of this package", err, err)
			}
			return
		}
		for _, s := range w.Sheets {
			last := 0
			for _, r := range s.Rows {
				if r.Number <= last || r.Number > MaxRow {
					t.Fatalf("got row %d behind row %d", r.Number, last)
				}
				last = r.Number
				col := 0
				for _, c := range r.Cells {
					if c.Col <= col || c.Row != r.Number || c.Col > MaxCol {
						t.Fatalf("got %+v in row %d behind column %d", c, r.Number, col)
					}
					col = c.Col
				}
			}
		}
	})
}
