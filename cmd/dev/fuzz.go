package main

import (
	"errors"
	"flag"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"time"
)

// target is one fuzz target of the project.
type target struct{ pkg, name string }

var fuzzFunction = regexp.MustCompile(`(?m)^func (Fuzz\w+)\(\w+ \*testing\.F\)`)

// fuzz runs every fuzz target for some minutes, or those whose name or package holds the text given. What a target finds lies
// in its testdata/fuzz and becomes a named case. It goes on after a finding: one run shows all.
func fuzz(d *dev, args []string) error {
	flags := flag.NewFlagSet("fuzz", flag.ContinueOnError)
	flags.SetOutput(io.Discard)
	minutes := flags.Float64("minutes", 1, "")
	if err := flags.Parse(args); err != nil || flags.NArg() > 1 || !(*minutes > 0) || *minutes > 24*60 {
		return usageError(fmt.Sprintf("found %q, want --minutes N and, where only some are meant, a part of their name", strings.Join(args, " ")))
	}
	targets, err := fuzzTargets(d.root, flags.Arg(0))
	if err != nil {
		return err
	}
	if len(targets) == 0 {
		return usageError(fmt.Sprintf("found no fuzz target with %q in its name or package", flags.Arg(0)))
	}
	each := time.Duration(*minutes * float64(time.Minute)).Round(time.Second)
	d.say("%d fuzz targets of %s each, %s in all.", len(targets), each, each*time.Duration(len(targets)))
	var faults []error
	for _, t := range targets { // what is new is made smaller in few steps: else the time goes into that
		if err := d.run(pure, "go", "test", "-run", "^$", "-fuzz", "^"+t.name+"$", "-fuzztime", each.String(), "-fuzzminimizetime", "200x", t.pkg); err != nil {
			faults = append(faults, err)
		}
	}
	return errors.Join(faults...)
}

// fuzzTargets finds the fuzz targets below a folder, in the order of their packages.
func fuzzTargets(root, part string) ([]target, error) {
	var all []target
	err := filepath.WalkDir(root, func(path string, e fs.DirEntry, err error) error {
		switch {
		case err != nil:
			return err
		case e.IsDir() && path != root && (strings.HasPrefix(e.Name(), ".") || e.Name() == "testdata" || e.Name() == "out"):
			return filepath.SkipDir
		case e.IsDir() || !strings.HasSuffix(path, "_test.go"):
			return nil
		}
		text, err := os.ReadFile(path)
		if err != nil {
			return err
		}
		folder, err := filepath.Rel(root, filepath.Dir(path))
		if err != nil {
			return err
		}
		for _, m := range fuzzFunction.FindAllSubmatch(text, -1) {
			t := target{pkg: "./" + filepath.ToSlash(folder), name: string(m[1])}
			if strings.Contains(strings.ToLower(t.pkg+"/"+t.name), strings.ToLower(part)) {
				all = append(all, t)
			}
		}
		return nil
	})
	return all, err
}
