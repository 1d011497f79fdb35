package main

import (
	"fmt"
	"path/filepath"
	"runtime"

	"lotpair/exports"
	"lotpair/exports/opcsign"
	"lotpair/importers"
	"lotpair/qa"
)

func (p *program) seal(args []string) int {
	var out, key, meaning, reason, passphraseFile string
	f := p.flags("seal PLAN.toml --out PLAN.seal.xlsx [--identity KEY.p12 --meaning approved] [--reason R] [--passphrase-file F]",
		"Fixes the criterion of a plan before the readings are opened: writes a workbook that states it, with its digest and the time,\nsigned when an identity is given. No file of readings is opened. compare --seal then holds the plan against it.",
		"lotpair-cli seal testdata/demo/plan.toml --out plan.seal.xlsx")
	f.StringVar(&out, "out", "", "write the seal to `PLAN.seal.xlsx`; an existing file is never overwritten")
	f.StringVar(&key, "identity", "", "sign the seal with `KEY.p12`")
	f.StringVar(&meaning, "meaning", "", "what the signature stands for: prepared, reviewed or `approved`")
	f.StringVar(&reason, "reason", "", "the `reason` stated with the signature")
	f.StringVar(&passphraseFile, "passphrase-file", "", "read the passphrase from the first line of `FILE`")
	pos, code, err := f.parse(args, "PLAN.toml")
	if err != nil {
		return code
	}
	switch {
	case out == "":
		return p.usageError(f, "found no --out, want the name of the seal's workbook")
	case key != "" && meaning == "":
		return p.usageError(f, "found --identity without --meaning, want prepared, reviewed or approved")
	case key == "" && (meaning != "" || reason != "" || passphraseFile != ""):
		return p.usageError(f, "found --meaning, --reason or --passphrase-file without --identity, want the identity to sign with")
	}
	text, code := p.read(pos[0])
	if code != exitDone {
		return code
	}
	name := filepath.Base(pos[0])
	plan, err := importers.LoadPlan(name, text)
	if err != nil {
		return p.failed(err)
	}
	if faults := plan.SealFaults(); len(faults) > 0 {
		for _, f := range faults {
			p.say(fmt.Errorf("%s: %w", name, f))
		}
		return exitUsage
	}
	s := exports.Seal(plan, qa.FileOf(name, text), p.software(), "unopened", "console", p.now())
	pkg, code := p.sealBytes(s, key, passphraseFile, opcsign.Statement{Meaning: meaning, Reason: reason})
	if code != exitDone {
		return code
	}
	if code := p.saveNew(out, pkg); code != exitDone {
		return code
	}
	fmt.Fprintf(p.out, "sealed the criterion of %s at %s\ndigest %s\n", name, s.Result().Time, s.Digest)
	fmt.Fprintf(p.err, "wrote %s\n", out)
	return exitDone
}

func (p *program) sealBytes(s exports.Sealed, key, passphraseFile string, st opcsign.Statement) ([]byte, int) {
	var pkg []byte
	var err error
	if key == "" {
		pkg, err = s.Workbook()
	} else {
		id, code := p.openIdentity(key, passphraseFile)
		if code != exitDone {
			return nil, code
		}
		st.Time = p.now()
		st.Zone = zoneOf(st.Time)
		s.Who = id.Name()
		pkg, err = exports.SignSeal(s, id, st)
	}
	if err != nil {
		return nil, p.notWritten(err)
	}
	if v := exports.Verify(pkg, nil); !v.Agrees || v.State != exports.Intact && v.State != exports.Unsigned {
		fmt.Fprintf(p.err, "internal fault: the seal just made is %s: %v\n", v.State, v.Differences)
		return nil, exitFault
	}
	return pkg, exitDone
}

func (p *program) software() qa.Software {
	return qa.Software{Version: version, Revision: revisionOf(), Calculation: qa.Calculation, OS: runtime.GOOS, Arch: runtime.GOARCH}
}

// givenSeal is the seal that compare was given; none where it was given none.
type givenSeal struct {
	*exports.Sealed
	file qa.File
}

func (g givenSeal) result(plan qa.Plan) qa.Seal {
	if g.Sealed == nil {
		return qa.Seal{Digest: plan.SealDigest(), Readings: "unknown"}
	}
	return g.Result()
}

func (g givenSeal) trail(t qa.Trail) qa.Trail {
	if g.Sealed == nil {
		return t
	}
	return g.Trail(t, g.file)
}

// sealOf reads the seal and holds the plan against it. The window takes an amendment with its reason; the console has no way to
// state one and refuses.
func (p *program) sealOf(plan qa.Plan, file string) (givenSeal, int) {
	if file == "" {
		return givenSeal{}, exitDone
	}
	b, code := p.read(file)
	if code != exitDone {
		return givenSeal{}, code
	}
	v := exports.Verify(b, nil)
	switch {
	case v.Sealed == nil:
		fmt.Fprintf(p.err, "%s: found no seal, want a workbook written by lotpair-cli seal; name that file\n", file)
		return givenSeal{}, exitFile
	case v.State == exports.Unsigned && v.Agrees:
		fmt.Fprintf(p.err, "%s: the seal is not signed: its time is only what the file says\n", file)
	case v.State != exports.Intact:
		p.printReasons(file, v)
		return givenSeal{}, exitCheck
	}
	if departs := exports.SealDifferences(v.Sealed.Plan, plan); len(departs) > 0 || v.Sealed.Digest != plan.SealDigest() {
		fmt.Fprintf(p.err, "%s: found a criterion other than the one sealed at %s, want the same; put the plan back, or seal the new one and keep both\n", file, v.Sealed.Result().Time)
		for _, d := range departs {
			fmt.Fprintf(p.err, "%s\n", d)
		}
		return givenSeal{}, exitUsage
	}
	if v.Sealed.Time.After(p.now()) {
		fmt.Fprintf(p.err, "%s: found the time %s, want one that has passed; check the clock of this machine and of the one that sealed\n", file, v.Sealed.Result().Time)
		return givenSeal{}, exitCheck
	}
	return givenSeal{Sealed: v.Sealed, file: qa.FileOf(filepath.Base(file), b)}, exitDone
}
