package main

import (
	"bytes"
	"errors"
	"fmt"
	"path/filepath"

	"lotpair/exports"
	"lotpair/exports/identity"
	"lotpair/exports/opcsign"
	"lotpair/importers"
	"lotpair/qa"
)

// compareFlags is what compare was asked for.
type compareFlags struct {
	json, gate, force                       bool
	workbook, identityFile, meaning, reason string
	passphraseFile                          string
	referenceFile, candidateFile, candidate string
	seal                                    string
	supersedes, because                     string
}

func (p *program) compare(args []string) int {
	var c compareFlags
	f := p.flags("compare PLAN.toml [--json] [--workbook OUT.xlsx] [--seal PLAN.seal.xlsx] [--reference-file F] [--candidate-file F] [--candidate-lot L] [--supersedes OLD.xlsx --because REASON] [--identity KEY.p12 --meaning prepared] [--gate] [--force]",
		"Runs the plan: reads both lots, holds them against the criterion, says the verdict, and writes the workbook where one is asked for,\nsigned when an identity is given. The verdict never changes the exit code unless --gate is given.",
		"lotpair-cli compare testdata/demo/plan.toml --workbook hub-shell.xlsx")
	f.BoolVar(&c.json, "json", false, "print the result as JSON (lotpair.result/1)")
	f.BoolVar(&c.gate, "gate", false, "exit 1 unless the overall verdict is what was to be shown")
	f.BoolVar(&c.force, "force", false, "overwrite an existing workbook; never one that holds a signature")
	f.StringVar(&c.workbook, "workbook", "", "write the record to `OUT.xlsx`")
	f.StringVar(&c.identityFile, "identity", "", "sign the workbook with `KEY.p12`")
	f.StringVar(&c.meaning, "meaning", "", "what the signature stands for: `prepared`, reviewed or approved")
	f.StringVar(&c.reason, "reason", "", "the `reason` stated with the signature")
	f.StringVar(&c.passphraseFile, "passphrase-file", "", "read the passphrase from the first line of `FILE`")
	f.StringVar(&c.referenceFile, "reference-file", "", "read the reference from `FILE` instead of the plan's")
	f.StringVar(&c.candidateFile, "candidate-file", "", "read the candidate from `FILE` instead of the plan's")
	f.StringVar(&c.candidate, "candidate-lot", "", "take lot `L` as the candidate instead of the plan's")
	f.StringVar(&c.seal, "seal", "", "hold the plan against the criterion sealed in `PLAN.seal.xlsx`; a plan that departs from it is refused")
	f.StringVar(&c.supersedes, "supersedes", "", "put the record in the place of the signed record `OLD.xlsx`, which is named by its id and digest")
	f.StringVar(&c.because, "because", "", "the `reason` why the earlier record is superseded")
	pos, code, err := f.parse(args, "PLAN.toml")
	if err != nil {
		return code
	}
	if t := c.wrong(); t != "" {
		return p.usageError(f, t)
	}
	rec, code := p.runPlan(pos[0], c)
	if code != exitDone {
		return code
	}
	if c.workbook != "" {
		if code := p.writeWorkbook(rec, c); code != exitDone {
			return code
		}
	}
	if c.json {
		b, err := exports.ResultJSON(rec.Result)
		if err != nil {
			p.say(err)
			return exitFault
		}
		if _, err := p.out.Write(b); err != nil {
			p.say(err)
			return exitFile
		}
	} else {
		p.printResult(rec)
	}
	if c.gate && !rec.Result.Verdict.Shown() {
		fmt.Fprintf(p.err, "gate: found the verdict %q, want what was to be shown\n", rec.Result.Verdict)
		return exitCheck
	}
	return exitDone
}

// wrong says which flags do not go together.
func (c compareFlags) wrong() string {
	switch {
	case (c.supersedes == "") != (c.because == ""):
		return "found one of --supersedes and --because, want both: the earlier record and the reason"
	case c.supersedes != "" && c.workbook == "":
		return "found --supersedes without --workbook, want the workbook of the new record"
	case c.identityFile != "" && c.workbook == "":
		return "found --identity without --workbook, want the workbook that is to be signed"
	case c.identityFile != "" && c.meaning == "":
		return "found --identity without --meaning, want prepared, reviewed or approved"
	case c.identityFile == "" && (c.meaning != "" || c.reason != "" || c.passphraseFile != ""):
		return "found --meaning, --reason or --passphrase-file without --identity, want the identity to sign with"
	}
	return ""
}

// runPlan goes the whole way from the plan file to the record.
func (p *program) runPlan(path string, c compareFlags) (qa.Record, int) {
	text, code := p.read(path)
	if code != exitDone {
		return qa.Record{}, code
	}
	name := filepath.Base(path)
	plan, err := importers.LoadPlan(name, text)
	if err != nil {
		return qa.Record{}, p.failed(err)
	}
	open := p.files(&plan, path, c.referenceFile, c.candidateFile)
	if c.candidate != "" {
		plan.Candidate.Lot = c.candidate
	}
	if faults := plan.Validate(); len(faults) > 0 {
		for _, f := range faults {
			p.say(f)
		}
		return qa.Record{}, exitUsage
	}
	seal, code := p.sealOf(plan, c.seal)
	if code != exitDone {
		return qa.Record{}, code
	}
	earlier, attempts, code := p.earlier(c.supersedes, c.because)
	if code != exitDone {
		return qa.Record{}, code
	}
	readings, err := importers.Under(p.watch).Read(plan, open)
	if err != nil {
		return qa.Record{}, p.failed(err)
	}
	result, err := qa.Compare(plan, readings, qa.Run{
		Software: p.software(),
		Seal:     seal.result(plan),
		Attempts: attempts,
		Watch:    p.watch,
	})
	var stopped *qa.StoppedError
	if errors.As(err, &stopped) {
		return qa.Record{}, p.failed(err)
	}
	if err != nil {
		p.say(fmt.Errorf("%s: %w", name, err))
		return qa.Record{}, exitUsage
	}
	rec := qa.NewRecord(plan, qa.FileOf(name, text), readings, result, "console", p.now())
	rec.Trail = seal.trail(rec.Trail)
	return rec.Superseding(earlier, "console", p.now()), exitDone
}

// failed prints an error of reading and gives its exit code.
func (p *program) failed(err error) int {
	p.say(err)
	var plan *importers.PlanError
	var stopped *qa.StoppedError
	if errors.As(err, &stopped) {
		return exitStopped
	}
	if errors.As(err, &plan) {
		return exitUsage
	}
	return exitFile
}

func (p *program) writeWorkbook(rec qa.Record, c compareFlags) int {
	var pkg []byte
	var err error
	if c.identityFile != "" {
		id, code := p.openIdentity(c.identityFile, c.passphraseFile)
		if code != exitDone {
			return code
		}
		pkg, err = exports.Under(p.watch).SignFirst(rec, id, opcsign.Statement{Meaning: c.meaning, Reason: c.reason, Time: p.now(), Zone: zoneOf(p.now())})
	} else {
		pkg, err = exports.Under(p.watch).Workbook(rec)
	}
	if err != nil {
		return p.notWritten(err)
	}
	if err := p.save(c.workbook, pkg, c.force); err != nil {
		return p.notWritten(err)
	}
	if v := exports.Verify(pkg, nil); v.State != exports.Intact && v.State != exports.Incomplete && v.State != exports.Unsigned || !v.Agrees {
		fmt.Fprintf(p.err, "%s: internal fault: the workbook just written is %s: %v\n", c.workbook, v.State, v.Differences)
		return exitFault
	}
	fmt.Fprintf(p.err, "wrote %s\n", c.workbook)
	return exitDone
}

// notWritten prints why a workbook was not written or signed and gives the exit code.
func (p *program) notWritten(err error) int {
	p.say(err)
	var exists *exports.ExistsError
	var many exports.TooManyReadings
	var sound *exports.NotSoundError
	var unstated *exports.UnstatedError
	var stopped *qa.StoppedError
	switch {
	case errors.As(err, &stopped):
		return exitStopped
	case errors.As(err, &exists):
		return exitLost
	case errors.As(err, &many):
		return exitFile
	case errors.As(err, &sound):
		return exitCheck
	case errors.As(err, &unstated), errors.Is(err, exports.ErrMeaning):
		return exitUsage
	}
	return exitFile
}

// saveNew writes a file under a name that is still free; no flag overwrites it.
func (p *program) saveNew(name string, b []byte) int {
	err := p.save(name, b, false)
	var exists *exports.ExistsError
	switch {
	case err == nil:
		return exitDone
	case errors.As(err, &exists) && !exists.Signed:
		fmt.Fprintf(p.err, "%s: found an existing file, want another name; it is not overwritten\n", name)
		return exitLost
	}
	return p.notWritten(err)
}

// openIdentity opens a .p12 file with its passphrase.
func (p *program) openIdentity(file, passphraseFile string) (identity.Identity, int) {
	b, code := p.read(file)
	if code != exitDone {
		return identity.Identity{}, code
	}
	word, code := p.passphrase(passphraseFile, "passphrase of "+file+": ")
	if code != exitDone {
		return identity.Identity{}, code
	}
	id, err := identity.Open(bytes.Clone(b), word)
	if err != nil {
		p.say(fmt.Errorf("%s: %w", file, err))
		return identity.Identity{}, exitFile
	}
	return id, exitDone
}
