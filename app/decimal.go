package app

import (
	"lotpair/app/chart"
	"lotpair/app/desk"
	"lotpair/qa"
	"lotpair/qa/figure"
)

// shown is a text as the window shows it: its numbers with the system's decimal mark. Texts of files, paths and names stay as
// they are: they are drawn without it, or are among what is kept.
func (w *window) shown(text string, kept ...string) string {
	if w.decimal == desk.Point {
		return text
	}
	return w.decimal.Shown(text, append(kept, w.names...))
}

func (w *window) allShown(texts []string) []string {
	if w.decimal == desk.Point {
		return texts
	}
	out := make([]string, len(texts))
	for i, t := range texts {
		out[i] = w.shown(t)
	}
	return out
}

func (w *window) tableShown(rows [][]string) [][]string {
	out := make([][]string, len(rows))
	for i, r := range rows {
		out[i] = w.allShown(r)
	}
	return out
}

// readingShown is a reading of a page: the number that was read has the system's mark, the text of a cell that is none has its own.
func (w *window) readingShown(r desk.ReadingView) desk.ReadingView {
	if r.Used || r.LeftOut {
		r.Value = w.shown(r.Value)
	}
	return r
}

// pictureShown is a picture with the system's mark at its axes and in its labels.
func (w *window) pictureShown(p chart.Picture) chart.Picture {
	if p == nil || w.decimal == desk.Point {
		return p
	}
	d, names := w.decimal, w.names // as they are now: a picture is also painted off the window's thread
	return func(width, height float64) figure.Figure {
		f := p(width, height)
		f.Title, f.Marks = d.Shown(f.Title, names), append([]figure.Mark{}, f.Marks...)
		for i := range f.Marks {
			f.Marks[i].Text = d.Shown(f.Marks[i].Text, names)
		}
		return f
	}
}

// showNumbers puts the system's decimal mark into everything that the regions say of the state.
func (w *window) showNumbers() {
	if w.decimal == desk.Point {
		return
	}
	w.names = desk.KeptOf(w.state.Names())
	v, d, f := &w.view, &w.drafted, &w.sheetSaid
	for _, t := range []*string{
		&v.header.Right, &v.header.Note, &v.spine.Overall, &v.spine.Sentence, &v.spine.Asked, &v.spine.Foot, &v.bench.Headline, &v.bench.Caution, &v.bench.Read,
		&v.foot.Next, &d.Together, &d.Headline, &d.Lacks, &f.Counted,
	} {
		*t = w.shown(*t)
	}
	for _, all := range []*[]string{&v.bench.Paragraphs, &v.bench.Whole, &d.Paragraphs, &f.Limits} {
		*all = w.allShown(*all)
	}
	for _, of := range []qa.Side{qa.Reference, qa.Candidate} {
		page := v.pages[of]
		page.Parts, page.Findings = w.shown(page.Parts), w.allShown(page.Findings)
		v.pages[of] = page
	}
	for i := range v.spine.Rows {
		v.spine.Rows[i].Note = w.shown(v.spine.Rows[i].Note)
	}
	for i := range d.Rows {
		r := &d.Rows[i]
		for _, t := range []*string{&r.Lower, &r.Upper, &r.Margin, &r.SD, &r.Permits, &r.Parts} {
			*t = w.shown(*t)
		}
	}
	for i := range f.Ledger {
		f.Ledger[i].Taken = w.shown(f.Ledger[i].Taken)
	}
}
