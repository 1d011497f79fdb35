//go:build cgo

package main

import (
	fyneapp "fyne.io/fyne/v2/app"

	"lotpair/app"
)

// window opens the window and returns when it is closed.
func window(args []string, build app.Build) error {
	app.Run(fyneapp.NewWithID("org.lotpair.desktop"), args, build)
	return nil
}
