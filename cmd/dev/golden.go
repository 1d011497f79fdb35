package main

import (
	"errors"
	"io/fs"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
)

// golden rewrites the golden files of every package whose tests have an -update flag, and shows what changed.
func golden(d *dev, args []string) error {
	if err := noArguments(args); err != nil {
		return err
	}
	packages, err := d.withUpdate()
	if err != nil {
		return err
	}
	if len(packages) == 0 {
		return errors.New("found no test with an -update flag")
	}
	for _, p := range packages {
		if err := d.run(pure, "go", "test", "-count=1", p, "-update"); err != nil {
			return err
		}
	}
	d.say("What changed; read every line before you commit it:")
	return d.run(nil, "git", "diff", "--stat")
}

// withUpdate lists the packages whose tests define the flag.
func (d *dev) withUpdate() ([]string, error) {
	var out []string
	err := filepath.WalkDir(d.root, func(name string, entry fs.DirEntry, err error) error {
		switch {
		case err != nil:
			return err
		case entry.IsDir() && name != d.root && (entry.Name() == "out" || strings.HasPrefix(entry.Name(), ".")):
			return filepath.SkipDir
		case entry.IsDir() || !strings.HasSuffix(name, "_test.go"):
			return nil
		}
		text, err := os.ReadFile(name)
		if err != nil {
			return err
		}
		folder, err := filepath.Rel(d.root, filepath.Dir(name))
		if err != nil {
			return err
		}
		if p := "./" + filepath.ToSlash(folder); strings.Contains(string(text), "flag.Bool(\"update\"") && !slices.Contains(out, p) {
			out = append(out, p)
		}
		return nil
	})
	return out, err
}

// referencePrograms compute reference values by another program than ours; each prints the table that stands beside it.
var referencePrograms = []struct{ program, table string }{
	{"qa/stats/dist/testdata/refdata.R", "qa/stats/dist/testdata/r.txt"},
	{"qa/stats/testdata/refdata.R", "qa/stats/testdata/r.txt"},
	{"qa/stats/testdata/refdata_means.R", "qa/stats/testdata/means.txt"},
}

// refdata computes the reference values again and shows what changed. It changes the tables; git keeps the old ones.
func refdata(d *dev, args []string) error {
	if err := noArguments(args); err != nil {
		return err
	}
	if !present("Rscript") {
		return errors.New("reference values: found no Rscript; install R (Debian: apt-get install r-base-core)")
	}
	for _, r := range referencePrograms {
		program := d.path(filepath.FromSlash(r.program))
		if !exists(program) {
			return errors.New(r.program + ": found none; correct the list in cmd/dev/golden.go")
		}
		d.say("(in %s)", filepath.Dir(program))
		d.show(nil, "Rscript", filepath.Base(program))
		c := exec.Command("Rscript", filepath.Base(program))
		c.Dir, c.Stderr = filepath.Dir(program), d.stderr
		out, err := c.Output()
		if err != nil {
			return err
		}
		if len(out) > 0 {
			if err := os.WriteFile(d.path(filepath.FromSlash(r.table)), out, 0o644); err != nil {
				return err
			}
		}
	}
	return d.run(nil, "git", "diff", "--stat", "--", "qa")
}
