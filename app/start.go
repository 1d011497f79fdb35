package app

import (
	"embed"

	"fyne.io/fyne/v2"
)

// sample is the worked example, part of the program: it opens on every machine. A test holds it against testdata/demo.
//
//go:embed example
var sample embed.FS

// startSentences say what can be opened.
var startSentences = []string{
	"A plan (.toml) names the two lots, their files and the criterion: how different is still the same.",
	"A workbook (.xlsx) is a record that Lotpair wrote: it opens with what is known of its signatures.",
}

// paintStart draws the first thing seen: the register, or where there is none what can be opened.
func (w *window) paintStart(p *pen, size fyne.Size) {
	if w.register != nil {
		w.paintList(p, size)
		return
	}
	const wide, tall = 260, 36
	x, y := size.Width/2-wide/2, size.Height/2-110
	p.centred("Open a comparison", size.Width/2, y, fontVerdict, p.Text)
	y += 24
	for _, b := range []*button{w.act.begin, w.act.openPlan, w.act.openWorkbook, w.act.openTheSample} {
		p.put(b, x, y, wide, tall)
		b.Refresh()
		y += tall + 12
	}
	y += 14
	for _, s := range startSentences {
		p.centred(fontPlain.fit(s, size.Width-2*margin), size.Width/2, y, fontPlain, p.MutedText)
		y += 20
	}
}

// openSample opens the worked example.
func (w *window) openSample() {
	w.open("example/plan.toml", func(name string) ([]byte, error) { return sample.ReadFile(name) })
}
