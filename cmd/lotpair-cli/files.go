package main

import (
	"errors"
	"os"
	"path/filepath"

	"lotpair/qa"
)

// files puts the files that the command line names in the place of the plan's and gives the way to open both lots' files.
// Names in the plan are relative to it, those on the command line to where the command runs. A file given there goes by its
// name alone; where the other lot's file has the same name and is another, by its path from the plan, for under one name both
// lots would be read from one file. One file has one name.
func (p *program) files(plan *qa.Plan, planFile, reference, candidate string) func(name string) ([]byte, error) {
	dir := absolute(filepath.Dir(p.file(planFile)))
	lots := [2]*qa.LotPlan{&plan.Reference, &plan.Candidate}
	given := [2]string{reference, candidate}
	var at [2]string
	for i, l := range lots {
		switch {
		case given[i] != "":
			at[i], l.File = absolute(p.file(given[i])), filepath.Base(given[i])
		case filepath.IsAbs(l.File):
			at[i] = filepath.Clean(l.File)
		default:
			at[i] = filepath.Join(dir, filepath.FromSlash(l.File))
		}
	}
	switch {
	case at[0] == at[1] && given[0] != "":
		lots[0].File = lots[1].File
	case at[0] == at[1] && given[1] != "":
		lots[1].File = lots[0].File
	case at[0] != at[1] && lots[0].File == lots[1].File:
		for i := range lots {
			if given[i] == "" {
				continue
			}
			lots[i].File = filepath.ToSlash(at[i])
			if from, err := filepath.Rel(dir, at[i]); err == nil {
				lots[i].File = filepath.ToSlash(from)
			}
		}
	}
	where := map[string]string{lots[0].File: at[0], lots[1].File: at[1]}
	return func(name string) ([]byte, error) {
		b, err := os.ReadFile(where[name])
		var path *os.PathError
		if errors.As(err, &path) {
			err = path.Err // the message names the file as the plan does
		}
		return b, err
	}
}

// absolute is a path that does not depend on where the command runs; the path itself where that is not known.
func absolute(path string) string {
	if abs, err := filepath.Abs(path); err == nil {
		return abs
	}
	return filepath.Clean(path)
}
