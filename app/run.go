package app

import (
	"errors"
	"runtime"
	"runtime/debug"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
	"lotpair/app/register"
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

// Options say how the window opens.
type Options struct {
	File     string // a plan or a workbook; "" for the register, or for what a program that was killed had open
	Register string // the folder of the register; "" where nothing is to be kept
	Build    Build
	Dark     bool
	Measure  Measurement
	Controls string // a file that says where everything stands; "" for none
	Decimal  desk.Decimal
}

// Run opens the window and returns when it is closed: what the user did, an act a line.
func Run(a fyne.App, o Options) []string {
	debug.SetGCPercent(50) // a window stands open all day: memory is dearer than the processor's time
	r, said, err := openRegister(o.Register)
	l := wanted(o.Dark)
	l.clears = true
	w := newWindow(a, o.Build, l, r)
	w.decimal = o.Decimal
	w.win.SetMaster()
	w.win.CenterOnScreen()
	a.Lifecycle().SetOnStarted(func() {
		w.begin(o.File, said, err)
		w.measure(o.Measure)
		w.tellControls(o.Controls)
	})
	w.win.ShowAndRun()
	w.end()
	return w.state.Acts
}

// openRegister opens the register of a folder, and says what was found where it was damaged.
func openRegister(dir string) (*register.Register, string, error) {
	if dir == "" {
		return nil, "", nil
	}
	r, d, err := register.Open(dir, now())
	return r, d.String(), err
}

// begin shows what the window opens with.
func (w *window) begin(file, said string, err error) {
	switch {
	case err != nil:
		w.apply(failed("The register cannot be opened; nothing will be kept", err))
	case said != "":
		w.apply(failed("The register", errors.New(said)))
	}
	if file != "" {
		w.open(absolute(file), readFile)
		return
	}
	if w.register == nil {
		return
	}
	if id, err := w.register.Place(); err == nil && id != 0 {
		w.reopen(id)
		return
	}
	w.win.Canvas().Focus(w.search)
}

// end closes the register. Who closes the window finds the register the next time, not the record.
func (w *window) end() {
	if w.register != nil {
		_ = w.register.At(0)   // the record would open again, nothing more
		_ = w.register.Close() // every act was kept when it was done
	}
}
