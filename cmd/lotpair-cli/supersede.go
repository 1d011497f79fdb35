package main

import (
	"path/filepath"

	"lotpair/exports"
	"lotpair/qa"
)

// earlier reads the record that is to be superseded: what the new one states of it, and how many attempts are known with it.
func (p *program) earlier(file, because string) ([]qa.Superseded, qa.Attempts, int) {
	if file == "" {
		return nil, qa.Attempts{Known: 1, KeptBy: qa.NotCounted}, exitDone
	}
	pkg, code := p.read(file)
	if code != exitDone {
		return nil, qa.Attempts{}, code
	}
	list, err := exports.Supersede(filepath.Base(file), pkg, because)
	if err != nil {
		return nil, qa.Attempts{}, p.notWritten(err)
	}
	return list, qa.Attempts{Known: len(list) + 1, KeptBy: "the records that this one supersedes"}, exitDone
}

// superseded is the earlier records that a verified one names.
func superseded(v exports.Verification) []qa.Superseded {
	if v.Record == nil {
		return nil
	}
	return v.Record.Supersedes
}
