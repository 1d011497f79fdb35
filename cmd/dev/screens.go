package main

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
)

// screens renders the window at its sizes, keeps a picture of each step of the walks through the real window, and renders every
// sheet as printed, for looking at beside the drawings.
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
	if err := d.walks(folder); err != nil {
		return err
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

// walks does the whole job in the real window, by mouse and by keys, and keeps a picture of each step.
func (d *dev) walks(folder string) error {
	if !onLinux {
		d.say("walks: NOT RUN: they need Xvfb and xdotool, which this system has not")
		return nil
	}
	if err := d.install("window", desktopNeeds, windowNeeds); err != nil {
		return err
	}
	env, end, err := d.managed("4000x2300")
	if err != nil {
		return err
	}
	defer end()
	var faults []error
	for _, x := range []struct {
		size, by string
		dark     bool
	}{{"1024x700", "Mouse", false}, {"1280x800", "Keys", false}, {"1280x800", "Mouse", true}, {"2560x1440", "Keys", true}, {"3840x2160", "Mouse", false}} {
		to := d.path(folder, "walk-"+x.size)
		if x.dark {
			to += "-dark"
		}
		args := []string{"test", "-count=1", "-v", "-tags", windowTags, "-run", "TestTheWholeJobBy" + x.by + "$", "./cmd/lotpair", "-walk-pictures", to, "-walk-size", x.size}
		if x.dark {
			args = append(args, "-walk-dark")
		}
		faults = append(faults, d.run(append(append([]string{}, desktop...), env...), "go", args...))
	}
	return errors.Join(faults...)
}
