package exports

import (
	"bytes"
	"fmt"
	"image/png"
	"io"
	"strings"

	"github.com/xuri/excelize/v2"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// book is a workbook as it is to be written.
type book struct {
	title  string
	foot   string // at the left of every page's foot
	sheets []sheet
	record func(w io.Writer) error // writes the custom XML part; nil for a workbook that carries none
	draft  bool
	watch  qa.Watch
}

// epoch stands in the document properties, which are removed before signing: the true times are in the record.
const epoch = "2000-01-01T00:00:00Z"

// bytes is the package. The same book gives the same bytes.
func (b book) bytes() ([]byte, error) {
	parts, err := b.parts()
	if err != nil {
		return nil, err
	}
	return writeZip(parts, b.room())
}

// room is how many bytes a package takes that holds so many lines: none is copied to grow, and what is not used costs nothing.
func (b book) room() int {
	const around, line = 1 << 18, 96
	n := around
	for _, s := range b.sheets {
		n += line * s.filterTo
	}
	return n
}

// parts is what the package is made of, by name.
func (b book) parts() (map[string]part, error) {
	f := excelize.NewFile()
	defer f.Close()
	w := &looks{file: f, watch: b.watch}
	var hand painter
	if err := f.SetDefaultFont(workbookFont); err != nil {
		return nil, fmt.Errorf("workbook: %w", err)
	}
	data := map[string]sheetWriter{} // by the name of the part
	for i := range b.sheets {
		s := &b.sheets[i]
		if err := b.watch.Stop(qa.Progress{Doing: writing, Of: s.name}); err != nil {
			return nil, err
		}
		if i == 0 {
			if err := f.SetSheetName("Sheet1", s.name); err != nil {
				return nil, fmt.Errorf("workbook: %w", err)
			}
		} else if _, err := f.NewSheet(s.name); err != nil {
			return nil, fmt.Errorf("workbook: %w", err)
		}
		if err := b.frame(f, *s, &hand); err != nil {
			return nil, fmt.Errorf("workbook, sheet %s: %w", s.name, err)
		}
		data[fmt.Sprintf("xl/worksheets/sheet%d.xml", i+1)] = sheetWriter{s.cols(), func(to io.Writer) error { return writeSheetData(to, s, w) }}
	}
	for k := range look(lastLook + 1) { // the styles stand in the file before the cells are written
		if _, err := w.id(k); err != nil {
			return nil, fmt.Errorf("workbook: %w", err)
		}
	}
	if err := f.SetAppProps(&excelize.AppProperties{Application: "Lotpair", AppVersion: "1.0"}); err != nil {
		return nil, fmt.Errorf("workbook: %w", err)
	}
	if err := f.SetDocProps(&excelize.DocProperties{Creator: "Lotpair", Title: cleanText(b.title), Created: epoch, Modified: epoch}); err != nil {
		return nil, fmt.Errorf("workbook: %w", err)
	}
	written := collector{}
	if err := f.SetZipWriter(func(io.Writer) excelize.ZipWriter { return written }).Write(io.Discard); err != nil {
		return nil, fmt.Errorf("workbook: %w", err)
	}
	return assemble(written, data, b.record)
}

// frame sets everything of a sheet but its cells.
func (b book) frame(f *excelize.File, s sheet, hand *painter) error {
	if len(s.pictures) > 0 { // they are placed by the columns, which else are written by us: the library takes long for many
		for i, w := range s.widths {
			if err := f.SetColWidth(s.name, cells.Letters(i+1), cells.Letters(i+1), w); err != nil {
				return err
			}
		}
	}
	if s.frozen > 0 || s.columns > 0 {
		pane := "bottomLeft"
		if s.columns > 0 {
			pane = "bottomRight"
		}
		if err := f.SetPanes(s.name, &excelize.Panes{
			Freeze: true, XSplit: s.columns, YSplit: s.frozen, TopLeftCell: cells.Name(s.columns+1, s.frozen+1), ActivePane: pane,
		}); err != nil {
			return err
		}
	}
	if err := merge(f, s); err != nil {
		return err
	}
	if s.filter > 0 && s.filterTo > s.filter {
		if err := f.AutoFilter(s.name, cells.Name(1, s.filter)+":"+cells.Name(len(s.widths), s.filterTo), nil); err != nil {
			return err
		}
	}
	if n := max(len(s.rows), s.filterTo); n > 0 {
		if err := f.SetSheetDimension(s.name, "A1:"+cells.Name(max(1, len(s.widths)), n)); err != nil {
			return err
		}
	}
	for _, row := range s.breaks {
		if err := f.InsertPageBreak(s.name, cells.Name(1, row)); err != nil {
			return err
		}
	}
	for _, p := range s.pictures {
		if err := p.lay(f, s.name, hand); err != nil {
			return err
		}
	}
	return b.pageSetup(f, s)
}

// lay paints the picture and puts it over its cells.
func (p picture) lay(f *excelize.File, sheet string, hand *painter) error {
	b, err := p.paint(hand)
	if err != nil {
		return err
	}
	size, err := png.DecodeConfig(bytes.NewReader(b))
	if err != nil {
		return fmt.Errorf("picture: %w", err)
	}
	return f.AddPictureFromBytes(sheet, cells.Name(p.col, p.row), &excelize.Picture{
		Extension: ".png", File: b, InsertType: excelize.PictureInsertTypePlaceOverCells,
		Format: &excelize.GraphicOptions{
			AltText: p.about, ScaleX: p.width / pixelPoints / float64(size.Width), ScaleY: p.height / pixelPoints / float64(size.Height),
			OffsetX: 2, OffsetY: 1, Positioning: "oneCell",
		},
	})
}

// pageSetup makes the sheet print on A4 (and, as nothing is set to the last line, on Letter), as wide as the page, with the
// record's id and page numbers at the foot.
func (b book) pageSetup(f *excelize.File, s sheet) error {
	a4, one, none, orientation, no := 9, 1, 0, "portrait", false
	if s.landscape {
		orientation = "landscape"
	}
	layout := &excelize.PageLayoutOptions{Size: &a4, Orientation: &orientation}
	if s.flows {
		scale := uint(58)
		layout.AdjustTo = &scale
	} else {
		yes := true
		layout.FitToWidth, layout.FitToHeight = &one, &none
		if err := f.SetSheetProps(s.name, &excelize.SheetPropsOptions{FitToPage: &yes}); err != nil {
			return err
		}
	}
	if err := f.SetPageLayout(s.name, layout); err != nil {
		return err
	}
	side, edge, low, foot := 0.55, 0.6, 0.8, 0.3 // two lines of the foot need their room at every scale
	if err := f.SetPageMargins(s.name, &excelize.PageLayoutMarginsOptions{Left: &side, Right: &side, Top: &edge, Bottom: &low, Header: &foot, Footer: &foot}); err != nil {
		return err
	}
	if err := f.SetSheetView(s.name, 0, &excelize.ViewOptions{ShowGridLines: &no}); err != nil {
		return err
	}
	// A space after the size: a title that begins with a digit would be read as part of it.
	marks := &excelize.HeaderFooterOptions{OddFooter: "&L&8 " + b.foot + "&R&8 " + s.name + ", page &P of &N"}
	if b.draft {
		marks.OddHeader = "&C&\"" + workbookFont + ",Bold\"&10" + draft
	}
	if err := f.SetHeaderFooter(s.name, marks); err != nil {
		return err
	}
	if titles := s.titles(); titles != "" {
		return f.SetDefinedName(&excelize.DefinedName{Name: "_xlnm.Print_Titles", Scope: s.name, RefersTo: titles})
	}
	return nil
}

// titles are the columns and the rows that repeat on every printed page. Two heading rows repeat where the sheet is a table of
// figures.
func (s sheet) titles() string {
	var parts []string
	if s.columns > 0 {
		parts = append(parts, fmt.Sprintf("'%s'!$A:$%s", s.name, cells.Letters(s.columns)))
	}
	if s.heads > 0 {
		first := s.heads
		if s.columns > 0 {
			first--
		}
		parts = append(parts, fmt.Sprintf("'%s'!$%d:$%d", s.name, first, s.heads))
	}
	return strings.Join(parts, ",")
}

// footerText is a title and what it supports, short enough for a footer (255 characters in all) and with its codes escaped.
func footerText(title, supports string) string {
	if supports != "" {
		title += ", " + supports
	}
	r := []rune(cleanText(title))
	if len(r) > 80 {
		r = append(r[:79], '…')
	}
	return strings.ReplaceAll(strings.ReplaceAll(string(r), "\n", " "), "&", "&&")
}
