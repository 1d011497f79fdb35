package main

import (
	_ "embed"
	"encoding/json"
	"fmt"

	"lotpair/exports"
	"lotpair/exports/opcsign"
	"lotpair/importers"
	"lotpair/qa"
	"lotpair/qa/published"
)

// qualifyPlan and qualifyReadings are the small comparison that the installation check reads, signs, verifies and tampers with.
var (
	//go:embed qualify/plan.toml
	qualifyPlan []byte
	//go:embed qualify/readings.csv
	qualifyReadings []byte
)

func (p *program) qualify(args []string) int {
	var report, key, passphraseFile string
	var asJSON bool
	f := p.flags("qualify [--report OUT.xlsx [--identity KEY.p12 [--passphrase-file F]]] [--json]",
		"Runs the published checks on this machine and reports each against its source, then reads, signs, verifies and tampers with one record.\nExit code 0 when all hold, else 1. Validation for your intended use stays with your organization.",
		"lotpair-cli qualify")
	f.StringVar(&report, "report", "", "write what was found to `OUT.xlsx`")
	f.StringVar(&key, "identity", "", "sign the report with `KEY.p12`, as prepared")
	f.StringVar(&passphraseFile, "passphrase-file", "", "read the passphrase from the first line of `FILE`")
	f.BoolVar(&asJSON, "json", false, "print what was found as JSON (lotpair.qualify/1)")
	if _, code, err := f.parse(args); err != nil {
		return code
	}
	if key != "" && report == "" {
		return p.usageError(f, "found --identity without --report, want the report that is to be signed")
	}
	q := exports.NewQualification(p.now(), p.software(), publishedLines(), p.recordSteps())
	if asJSON {
		b, err := json.MarshalIndent(q, "", "  ")
		if err != nil {
			p.say(err)
			return exitFault
		}
		fmt.Fprintf(p.out, "%s\n", b)
	} else {
		p.printQualification(q)
	}
	if report != "" {
		if code := p.writeQualification(q, report, key, passphraseFile); code != exitDone {
			return code
		}
	}
	if q.Off > 0 {
		return exitCheck
	}
	return exitDone
}

// writeQualification writes the report, signed where an identity is given.
func (p *program) writeQualification(q exports.Qualification, report, key, passphraseFile string) int {
	b, err := exports.QualificationReport(q)
	if err != nil {
		p.say(err)
		return exitFault
	}
	if key != "" {
		id, code := p.openIdentity(key, passphraseFile)
		if code != exitDone {
			return code
		}
		now := p.now()
		st := opcsign.Statement{Name: id.Name(), Title: id.Title(), Organization: id.Organization(), Meaning: "prepared", Time: now, Zone: zoneOf(now)}
		if b, err = opcsign.Sign(b, id.Key, id.Chain, st); err != nil {
			p.say(fmt.Errorf("%s: %w", report, err))
			return exitFile
		}
	}
	if err := p.save(report, b, false); err != nil {
		return p.notWritten(err)
	}
	fmt.Fprintf(p.err, "wrote %s\n", report)
	return exitDone
}

// publishedLines runs the published checks.
func publishedLines() []exports.CheckLine {
	var out []exports.CheckLine
	for _, o := range published.Run() {
		l := exports.CheckLine{ID: o.ID, Quantity: o.Quantity, Source: o.Source, Want: o.Want, Got: o.Got, Error: o.Error, Allowed: o.Relative, Holds: o.Holds}
		if o.Err != nil {
			l.Got, l.Error, l.Fault = 0, 0, o.Err.Error()
		}
		out = append(out, l)
	}
	return out
}

func (p *program) printQualification(q exports.Qualification) {
	word := map[bool]string{true: "holds", false: "IS OFF"}
	for _, c := range q.Checks {
		fmt.Fprintf(p.out, "%s: %s, %s\n  published %v, here %v, difference %.1e, allowed %.1e\n  %s\n", c.ID, c.Quantity, word[c.Holds], c.Want, c.Got, c.Error, c.Allowed, c.Source)
		if c.Fault != "" {
			fmt.Fprintf(p.out, "  %s\n", c.Fault)
		}
	}
	for _, s := range q.Record {
		fmt.Fprintf(p.out, "record: %s: %s%s\n", s.Step, word[s.Holds], after(": ", s.Fault))
	}
	fmt.Fprintf(p.out, "\n%d published checks and %d of the record, %d off. Lotpair %s on %s/%s, calculation %d.\n",
		len(q.Checks), len(q.Record), q.Off, q.Software.Version, q.Software.OS, q.Software.Arch, q.Software.Calculation)
	fmt.Fprintln(p.out, "This shows that the program computes as published on this machine; validation for your intended use stays with your organization.")
}

// recordSteps read, sign, verify and change the small record.
func (p *program) recordSteps() []exports.StepLine {
	rec, err := p.record()
	if err != nil {
		return []exports.StepLine{{Step: "a record is made", Fault: err.Error()}}
	}
	return exports.CheckRecord(rec, p.now(), zoneOf(p.now()))
}

// record makes the small record.
func (p *program) record() (qa.Record, error) {
	plan, err := importers.LoadPlan("plan.toml", qualifyPlan)
	if err != nil {
		return qa.Record{}, err
	}
	readings, err := importers.Read(plan, func(string) ([]byte, error) { return qualifyReadings, nil })
	if err != nil {
		return qa.Record{}, err
	}
	result, err := qa.Compare(plan, readings, qa.Run{Software: p.software(), Seal: qa.Seal{Digest: plan.SealDigest(), Readings: "unknown"}, Attempts: qa.Attempts{Known: 1, KeptBy: qa.NotCounted}})
	if err != nil {
		return qa.Record{}, err
	}
	return qa.NewRecord(plan, qa.FileOf("plan.toml", qualifyPlan), readings, result, "installation check", p.now()), nil
}
