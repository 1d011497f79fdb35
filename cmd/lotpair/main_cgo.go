//go:build cgo

package main

import (
	fyneapp "fyne.io/fyne/v2/app"

	"lotpair/app"
)

// window opens the window and returns what was done in it when it is closed.
func window(o app.Options) ([]string, error) {
	return app.Run(fyneapp.NewWithID("org.lotpair.desktop"), o), nil
}
