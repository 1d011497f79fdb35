// Command empty opens a window of the toolkit with nothing in it: what Lotpair's own window is measured against.
package main

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/app"
)

func main() {
	w := app.NewWithID("org.lotpair.empty").NewWindow("empty")
	w.Resize(fyne.NewSize(1280, 800))
	w.CenterOnScreen()
	w.ShowAndRun()
}
