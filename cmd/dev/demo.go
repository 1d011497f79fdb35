package main

import (
	"crypto/rand"
	"fmt"
	"os"
	"path/filepath"
	"runtime"
	"time"
)

// Where the demo puts what it makes; out/ is not in git.
var (
	demoOut        = filepath.Join("out", "hub-shell.xlsx")
	demoPicture    = filepath.Join("out", "hub-shell.png")
	demoIdentity   = filepath.Join("out", "demo.p12")
	demoPassphrase = filepath.Join("out", "demo.passphrase")
)

// demo runs the worked example from the spreadsheet to a signed and verified workbook, and shows it.
func demo(d *dev, args []string) error {
	if err := noArguments(args); err != nil {
		return err
	}
	d.say("The worked example: hub shells of two foundries (%s). Everything it makes goes to out/.", demoFolder)
	cli, err := d.build(pure, "lotpair-cli", "./cmd/lotpair-cli")
	if err != nil {
		return err
	}
	if err := d.signedDemo(cli); err != nil {
		return err
	}
	d.say("\nVerifying the signed workbook:")
	if err := d.run(nil, cli, "verify", demoOut); err != nil {
		return err
	}
	d.say("")
	if why := noDisplay(); why != "" {
		d.say("%s: the window is rendered to %s instead.", why, demoPicture)
		return d.picture(demoOut, demoPicture, "1280x800")
	}
	if err := d.install("window", desktopNeeds); err != nil {
		return err
	}
	d.say("Building the desktop program; the first time this takes some minutes.")
	window, err := d.build(desktop, "lotpair", "./cmd/lotpair", "-tags", desktopTags)
	if err != nil {
		return err
	}
	return d.open(window, demoOut)
}

// signedDemo compares the worked example and signs the workbook with a test identity.
func (d *dev) signedDemo(cli string) error {
	if !exists(d.path(demoIdentity)) || !exists(d.path(demoPassphrase)) {
		d.say("\nMaking a test identity, good for nothing but this example: %s, its passphrase in %s.", demoIdentity, demoPassphrase)
		for _, old := range []string{demoIdentity, demoPassphrase} {
			if err := os.Remove(d.path(old)); err != nil && !os.IsNotExist(err) {
				return err
			}
		}
		if err := os.WriteFile(d.path(demoPassphrase), []byte(rand.Text()+"\n"), 0o600); err != nil {
			return err
		}
		if err := d.run(nil, cli, "identity", "new", "--name", "Example Signer", "--title", "test identity of the demo",
			"--organization", "Kettlewick Cycle Parts (invented)", "--out", demoIdentity, "--passphrase-file", demoPassphrase); err != nil {
			return err
		}
	}
	// A signed file is never overwritten, so the demo takes its own earlier one away first.
	if exists(d.path(demoOut)) {
		d.say("Removing the %s of the demo's last run.", demoOut)
		if err := os.Remove(d.path(demoOut)); err != nil {
			return err
		}
	}
	d.say("")
	return d.run(nil, cli, "compare", filepath.Join(filepath.FromSlash(demoFolder), demoPlanFile), "--workbook", demoOut,
		"--identity", demoIdentity, "--passphrase-file", demoPassphrase, "--meaning", "prepared")
}

// noDisplay says why no window can be opened here, or nothing. The window is built for X11; under Wayland it needs the
// server's X11 side, which sets DISPLAY.
func noDisplay() string {
	switch {
	case runtime.GOOS != "linux" || os.Getenv("DISPLAY") != "":
		return ""
	case os.Getenv("WAYLAND_DISPLAY") != "":
		return "There is a Wayland display without its X11 side (DISPLAY is not set)"
	}
	return "There is no display (DISPLAY is not set)"
}

// picture renders the window to a PNG with the software painter: no display, no C compiler.
func (d *dev) picture(workbook, to, size string, more ...string) error {
	painter, err := d.build(pure, "lotpair-picture", "./cmd/lotpair")
	if err != nil {
		return err
	}
	// Where the locale is C, as on a bare machine, Fyne complains of it on every start.
	return d.run([]string{"LC_ALL=en_US.UTF-8"}, painter, append(append([]string{"--picture", to, "--size", size}, more...), workbook)...)
}

// open starts the window and leaves it open. A window that ends at once could not be opened; then the picture is made.
func (d *dev) open(window, workbook string) error {
	log, err := os.Create(d.path("out", "lotpair.log"))
	if err != nil {
		return err
	}
	args := []string{"--register", filepath.Join("out", "register"), workbook}
	d.show(nil, window, args...)
	c := d.command(nil, d.path(window), args...)
	c.Stdout, c.Stderr = log, log
	if err := c.Start(); err != nil {
		return err
	}
	ended := make(chan error, 1)
	go func() { ended <- c.Wait() }()
	select {
	case err := <-ended:
		if err == nil {
			d.say("The window was closed.")
			return nil
		}
		d.say("The window did not open (%v, see %s): it is rendered to %s instead.", err, filepath.Join("out", "lotpair.log"), demoPicture)
		return d.picture(workbook, demoPicture, "1280x800")
	case <-time.After(4 * time.Second):
		d.say("The window is open on %s and stays open; its messages go to %s.", workbook, filepath.Join("out", "lotpair.log"))
		return nil
	}
}

// cases writes the committed worked example again.
func cases(d *dev, args []string) error {
	if err := noArguments(args); err != nil {
		return err
	}
	if err := writeDemo(d.path(filepath.FromSlash(demoFolder))); err != nil {
		return fmt.Errorf("%s: %w", demoFolder, err)
	}
	return d.run(nil, "git", "status", "--short", demoFolder)
}
