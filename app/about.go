package app

import (
	_ "embed"
	"fmt"
	"strings"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
)

// licences are the modules built into the programs with their licences, as `go run ./cmd/dev licences` writes them.
//
//go:embed licences.txt
var licences string

// showAbout says what this program is: version, last installation check, and the licences of what is built in.
func (w *window) showAbout() {
	s := w.software()
	revision := s.Revision
	if revision == "" {
		revision = "not known"
	}
	version := s.Version
	if version == "" {
		version = "not stamped"
	}
	paragraphs := []string{
		desk.AboutText,
		fmt.Sprintf("Version %s, revision %s, calculation %d, %s/%s.", version, revision, s.Calculation, s.OS, s.Arch),
		"Last installation check: " + w.lastCheck(),
		"Records, files and trusted certificates of this machine: " + w.folder(),
	}
	check := newButton(w.palette, "Check now", plain, func() {
		w.leaveDialog()
		w.askQualify()
	})
	texts := newButton(w.palette, "Licences", plain, func() {
		w.leaveDialog()
		w.showLicences()
	})
	w.showText("About Lotpair", paragraphs, check, texts)
}

func (w *window) folder() string {
	if w.register == nil {
		return "none are kept"
	}
	return w.register.Dir()
}

// showLicences lists the modules built in, and their licences below.
func (w *window) showLicences() {
	const wide = 112 // characters
	var lines []string
	for _, l := range strings.Split(strings.ReplaceAll(licences, "\f", strings.Repeat("—", 40)), "\n") {
		for len(l) > wide {
			at := strings.LastIndexByte(l[:wide], ' ')
			if at <= 0 {
				at = wide
			}
			lines, l = append(lines, l[:at]), strings.TrimPrefix(l[at:], " ")
		}
		lines = append(lines, l)
	}
	const tall = 16
	rows := newScrolled(&sheet{
		palette: w.palette,
		height:  func(float32) float32 { return float32(len(lines))*tall + 8 },
		paint: func(p *pen, size fyne.Size, top, bottom float32) {
			for i := max(0, int(top/tall)); i < len(lines) && float32(i)*tall <= bottom; i++ {
				p.text(fontNote.fit(lines[i], size.Width-12), 6, float32(i+1)*tall, fontNote, p.Text)
			}
		},
	})
	w.showScrolled("Licences of what is built in", rows, func() string { return licences })
}
