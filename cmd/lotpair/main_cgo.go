//go:build cgo

package main

import (
	fyneapp "fyne.io/fyne/v2/app"

	"lotpair/app"
)

// window opens the window and returns what was done in it when it is closed.
func window(args []string, build app.Build, dark bool) ([]string, error) {
	return app.Run(fyneapp.NewWithID("org.lotpair.desktop"), args, build, dark), nil
}
