package app

import (
	_ "embed"
	"fmt"
	"strings"

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
	list, texts, _ := strings.Cut(licences, "\n\n")
	w.showText("Licences of what is built in", append([]string{list}, strings.Split(strings.TrimSpace(texts), "\n\f\n")...))
}
