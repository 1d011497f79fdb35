package app

import (
	"runtime"

	"fyne.io/fyne/v2"

	"lotpair/qa"
)

// Build says which program this is; it stands in every record.
type Build struct {
	Version  string
	Revision string
}

func (b Build) software() qa.Software {
	return qa.Software{Version: b.Version, Revision: b.Revision, OS: runtime.GOOS, Arch: runtime.GOARCH}
}

// Run opens the window, with the file named in args where there is one, and returns when it is closed: what the user did, an
// act a line.
func Run(a fyne.App, args []string, b Build, dark bool) []string {
	w := newWindow(a, b, wanted(dark))
	w.win.SetMaster()
	w.win.CenterOnScreen()
	if len(args) > 0 {
		file := absolute(args[0])
		a.Lifecycle().SetOnStarted(func() { w.open(file, readFile) })
	}
	w.win.ShowAndRun()
	return w.state.Acts
}
