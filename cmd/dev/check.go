package main

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
)

// notRun ends every check that leaves the programs of others alone.
const notRun = "NOT RUN: LibreOffice, xmlsec1, Apache POI, R, SciPy — go run ./cmd/dev check --outside runs them"

// tools runs a pinned tool: its module file keeps the product's own go.mod clean.
var tools = []string{"tool", "-modfile=.ci/tools.mod"}

// The tests of the real window, and where they are.
const windowTags = desktopTags + ",window"

var windowPackages = []string{"./cmd/lotpair/...", "./app/..."}

// check runs everything that must hold before a change lands; with --outside what other programs say of our files.
func check(d *dev, args []string) error {
	switch strings.Join(args, " ") {
	case "":
	case "--outside":
		return d.checkOutside()
	default:
		return usageError(fmt.Sprintf("found %q, want nothing or --outside", strings.Join(args, " ")))
	}
	faults := d.all(
		d.checkFormat,
		func() error { return d.run(pure, "go", "vet", "-tags", "outside", "./...") },
		func() error { return d.staticcheck(pure, "outside", "./...") },
		func() error { return d.run(nil, "go", "mod", "tidy", "-diff") },
		d.checkToolsModule,
		func() error { return d.run(pure, "go", "test", "-run", "TestPolicy", "./cmd/dev") },
		func() error { return d.run(pure, "go", "test", "./...") },
	)
	if err := d.install("window", desktopNeeds, windowNeeds); err != nil {
		return errors.Join(append(faults, err)...)
	}
	faults = append(faults, d.all(
		func() error {
			return d.run(desktop, "go", append([]string{"vet", "-tags", windowTags}, windowPackages...)...)
		},
		func() error { return d.staticcheck(desktop, windowTags, windowPackages...) },
		func() error {
			_, err := d.build(desktop, "lotpair", "./cmd/lotpair", "-tags", desktopTags)
			return err
		},
		d.checkWindow,
	)...)
	if err := errors.Join(faults...); err != nil {
		return fmt.Errorf("what does not hold:\n%w", err)
	}
	d.say("\nAll checks of this project's own hold.\n%s", notRun)
	return nil
}

// all runs every step, also after one that failed: one run shows all that is wrong.
func (d *dev) all(steps ...func() error) []error {
	var faults []error
	for _, step := range steps {
		if err := step(); err != nil {
			d.say("FAILED: %v", err)
			faults = append(faults, err)
		}
	}
	return faults
}

// staticcheck runs every check that it has; an exception carries its reason on the line.
func (d *dev) staticcheck(env []string, tags string, packages ...string) error {
	return d.run(env, "go", append(append(append([]string{}, tools...), "staticcheck", "-checks", "all", "-tags", tags), packages...)...)
}

// checkFormat fails where gofumpt would change a file.
func (d *dev) checkFormat() error {
	out, err := d.output(nil, "go", append(append([]string{}, tools...), "gofumpt", "-l", ".")...)
	if err != nil {
		return err
	}
	if files := strings.Fields(out); len(files) > 0 {
		return fmt.Errorf("gofumpt would change %s; run go tool -modfile=.ci/tools.mod gofumpt -w on them", strings.Join(files, ", "))
	}
	return nil
}

// checkToolsModule holds the tools' module file against tidy. It is copied beside nothing else, because tidy under -modfile
// would count the product's packages as the tools' own.
func (d *dev) checkToolsModule() (err error) {
	folder, err := os.MkdirTemp("", "lotpair-tools-")
	if err != nil {
		return err
	}
	defer func() {
		if removing := os.RemoveAll(folder); err == nil {
			err = removing
		}
	}()
	for from, to := range map[string]string{"tools.mod": "go.mod", "tools.sum": "go.sum"} {
		text, err := os.ReadFile(d.path(".ci", from))
		if err != nil {
			return err
		}
		if err := os.WriteFile(filepath.Join(folder, to), text, 0o644); err != nil {
			return err
		}
	}
	d.say("(in a copy of .ci/tools.mod)")
	d.show(nil, "go", "mod", "tidy", "-diff")
	c := d.command(nil, "go", "mod", "tidy", "-diff")
	c.Dir = folder
	if err := c.Run(); err != nil {
		return fmt.Errorf(".ci/tools.mod: go mod tidy -diff: %w", err)
	}
	return nil
}

// checkWindow runs the tests of the real window on a display of their own.
func (d *dev) checkWindow() error {
	env := append([]string{}, desktop...)
	if onLinux {
		managed, end, err := d.managed("1600x1000")
		if err != nil {
			return err
		}
		defer end()
		env = append(env, managed...)
	}
	return d.run(env, "go", append([]string{"test", "-count=1", "-tags", windowTags}, windowPackages...)...)
}

// checkOutside runs the tests that hold our files and numbers against other programs. What cannot run fails.
func (d *dev) checkOutside() error {
	if err := d.install("outside checks", outsideNeeds); err != nil {
		return err
	}
	// Not from the cache: the programs may have changed.
	if err := d.run(pure, "go", "test", "-count=1", "-timeout", "20m", "-tags", "outside", "./..."); err != nil {
		return err
	}
	d.say("\nAll checks by other programs hold.")
	return nil
}
