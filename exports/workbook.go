package exports

import (
	"bytes"
	"fmt"
	"strings"

	"github.com/xuri/excelize/v2"

	"lotpair/qa"
)

// MaxReadings is how many readings a workbook takes: a sheet has 1,048,576 rows (contract: console, exit code 3).
const MaxReadings = 1_000_000

// TooManyReadings says that a record is too large for a workbook.
type TooManyReadings struct{ N int }

func (e TooManyReadings) Error() string {
	return fmt.Sprintf("workbook: found %d readings, want at most %d, the rows of one sheet; compare and print JSON instead", e.N, MaxReadings)
}

// Workbook writes the record as an .xlsx package, unsigned: the sheets, one picture and the record itself as custom XML.
// The same record gives the same bytes.
func Workbook(rec qa.Record) ([]byte, error) {
	n := 0
	for _, l := range []qa.Lot{rec.Readings.Reference, rec.Readings.Candidate} {
		for _, s := range l.Series {
			n += len(s.Readings)
		}
	}
	if n > MaxReadings {
		return nil, TooManyReadings{N: n}
	}
	f := excelize.NewFile()
	defer f.Close()
	w := &looks{file: f, ids: map[look]int{}}
	if err := f.SetDefaultFont(workbookFont); err != nil {
		return nil, fmt.Errorf("workbook: %w", err)
	}
	data := map[string][]byte{} // part name to its cells
	for i, s := range sheets(rec) {
		if i == 0 {
			if err := f.SetSheetName("Sheet1", s.name); err != nil {
				return nil, fmt.Errorf("workbook: %w", err)
			}
		} else if _, err := f.NewSheet(s.name); err != nil {
			return nil, fmt.Errorf("workbook: %w", err)
		}
		if s.name == SheetSummary {
			if err := spinePicture(f, s, rec.Result); err != nil {
				return nil, err
			}
		}
		if err := frame(f, s, rec); err != nil {
			return nil, fmt.Errorf("workbook, sheet %s: %w", s.name, err)
		}
		b, err := sheetData(s, w)
		if err != nil {
			return nil, fmt.Errorf("workbook, sheet %s: %w", s.name, err)
		}
		data[fmt.Sprintf("xl/worksheets/sheet%d.xml", i+1)] = b
	}
	if err := f.SetAppProps(&excelize.AppProperties{Application: "Lotpair", AppVersion: "1.0"}); err != nil {
		return nil, fmt.Errorf("workbook: %w", err)
	}
	if err := f.SetDocProps(&excelize.DocProperties{Creator: "Lotpair", Title: rec.Result.Title, Created: epoch, Modified: epoch}); err != nil {
		return nil, fmt.Errorf("workbook: %w", err)
	}
	var b bytes.Buffer
	if err := f.Write(&b); err != nil {
		return nil, fmt.Errorf("workbook: %w", err)
	}
	record, err := encodeRecord(rec)
	if err != nil {
		return nil, err
	}
	return pack(b.Bytes(), data, record)
}

// epoch stands in the document properties, which are removed before signing: the true times are in the record.
const epoch = "2000-01-01T00:00:00Z"

// frame sets everything of a sheet but its cells.
func frame(f *excelize.File, s sheet, rec qa.Record) error {
	for i, width := range s.widths {
		col, err := excelize.ColumnNumberToName(i + 1)
		if err != nil {
			return err
		}
		if err := f.SetColWidth(s.name, col, col, width); err != nil {
			return err
		}
	}
	if s.frozen > 0 {
		top := fmt.Sprintf("A%d", s.frozen+1)
		if err := f.SetPanes(s.name, &excelize.Panes{Freeze: true, YSplit: s.frozen, TopLeftCell: top, ActivePane: "bottomLeft"}); err != nil {
			return err
		}
	}
	if err := merge(f, s); err != nil {
		return err
	}
	return pageSetup(f, s, rec)
}

// pageSetup makes the sheet print on A4, as wide as the page, with its title and page numbers at the foot.
func pageSetup(f *excelize.File, s sheet, rec qa.Record) error {
	a4, one, none, orientation, yes, no := 9, 1, 0, "portrait", true, false
	if s.landscape {
		orientation = "landscape"
	}
	if err := f.SetSheetProps(s.name, &excelize.SheetPropsOptions{FitToPage: &yes}); err != nil {
		return err
	}
	if err := f.SetPageLayout(s.name, &excelize.PageLayoutOptions{Size: &a4, Orientation: &orientation, FitToWidth: &one, FitToHeight: &none}); err != nil {
		return err
	}
	side, top, foot := 0.55, 0.6, 0.3
	if err := f.SetPageMargins(s.name, &excelize.PageLayoutMarginsOptions{Left: &side, Right: &side, Top: &top, Bottom: &top, Header: &foot, Footer: &foot}); err != nil {
		return err
	}
	if err := f.SetSheetView(s.name, 0, &excelize.ViewOptions{ShowGridLines: &no}); err != nil {
		return err
	}
	footer := "&L&8" + footerText(rec) + "&R&8" + s.name + ", page &P of &N"
	if err := f.SetHeaderFooter(s.name, &excelize.HeaderFooterOptions{OddFooter: footer}); err != nil {
		return err
	}
	if s.frozen > 0 {
		return f.SetDefinedName(&excelize.DefinedName{
			Name: "_xlnm.Print_Titles", Scope: s.name, RefersTo: fmt.Sprintf("'%s'!$%d:$%d", s.name, s.frozen, s.frozen),
		})
	}
	return nil
}

// footerText is the title and what it supports, short enough for a footer (255 characters in all) and with its codes escaped.
func footerText(rec qa.Record) string {
	t := rec.Result.Title
	if rec.Result.Supports != "" {
		t += ", " + rec.Result.Supports
	}
	r := []rune(cleanText(t))
	if len(r) > 80 {
		r = append(r[:79], '…')
	}
	return strings.ReplaceAll(strings.ReplaceAll(string(r), "\n", " "), "&", "&&")
}
