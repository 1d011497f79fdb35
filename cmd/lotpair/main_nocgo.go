//go:build !cgo

package main

import (
	"errors"

	"lotpair/app"
)

// window says what is missing.
func window(app.Options) ([]string, error) {
	return nil, errors.New("found a build without C, want one with a window; build it with CGO_ENABLED=1 and -tags migrated_fynedo, which needs a C compiler and the OpenGL and X11 headers, or use lotpair-cli")
}
