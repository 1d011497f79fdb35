package main

import (
	"fmt"
	"os"
	"path/filepath"
)

// screens renders the window at its sizes and every sheet as printed, for looking at beside the drawings.
func screens(d *dev, args []string) error {
	if err := noArguments(args); err != nil {
		return err
	}
	folder := filepath.Join("out", "screens")
	if err := os.MkdirAll(d.path(folder), 0o755); err != nil {
		return err
	}
	cli, err := d.build(pure, "lotpair-cli", "./cmd/lotpair-cli")
	if err != nil {
		return err
	}
	if err := d.signedDemo(cli); err != nil {
		return err
	}
	for _, s := range []struct {
		name, size string
		more       []string
	}{
		{"window-1280", "1280x800", nil},
		{"window-1024", "1024x700", nil},
		{"window-double", "1280x800", []string{"--scale", "2"}},
		{"window-dark", "1280x800", []string{"--dark"}},
	} {
		if err := d.picture(demoOut, filepath.Join(folder, s.name+".png"), s.size, s.more...); err != nil {
			return err
		}
	}
	if !present("soffice") || !present("pdftoppm") {
		return fmt.Errorf("sheets: found no soffice or no pdftoppm; go run ./cmd/dev check --outside installs them")
	}
	// A profile of its own, so that an open LibreOffice is left alone.
	profile, err := os.MkdirTemp("", "lotpair-office-")
	if err != nil {
		return err
	}
	defer func() { _ = os.RemoveAll(profile) }() // a temporary folder
	if err := d.run(nil, "soffice", "-env:UserInstallation=file://"+filepath.ToSlash(profile), "--headless", "--convert-to", "pdf", "--outdir", folder, demoOut); err != nil {
		return err
	}
	if err := d.run(nil, "pdftoppm", "-r", "80", "-png", filepath.Join(folder, "hub-shell.pdf"), filepath.Join(folder, "sheet")); err != nil {
		return err
	}
	d.say("Look at the pictures in %s.", folder)
	return nil
}
