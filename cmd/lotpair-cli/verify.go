package main

import (
	"crypto/x509"
	"encoding/json"
	"fmt"
	"path/filepath"
	"strings"
	"time"

	"lotpair/exports"
	"lotpair/exports/identity"
	"lotpair/qa"
)

func (p *program) verify(args []string) int {
	var trust, note string
	var requireTrust, partial, asJSON bool
	f := p.flags("verify RECORD.xlsx [--trust FILE.pem] [--require-trust] [--partial] [--note OUT.xlsx] [--json]",
		"Checks every signature and part of a record, computes the result again from the readings in it and compares it with the record and the sheets.\nExit code 0 for an intact record, and for an incomplete one with --partial; else 1.",
		"lotpair-cli verify hub-shell.xlsx --trust ada.pem")
	f.StringVar(&trust, "trust", "", "certificates to trust, in `FILE.pem`; the signers' own or those that issued them")
	f.BoolVar(&requireTrust, "require-trust", false, "exit 1 unless every signer is trusted")
	f.BoolVar(&partial, "partial", false, "let a record pass that still lacks a required signature")
	f.StringVar(&note, "note", "", "write a printable statement of all signatures to `OUT.xlsx`; an existing file is never overwritten")
	f.BoolVar(&asJSON, "json", false, "print what was found as JSON (lotpair.verify/1)")
	pos, code, err := f.parse(args, "RECORD.xlsx")
	if err != nil {
		return code
	}
	var roots []*x509.Certificate
	if trust != "" {
		b, code := p.read(trust)
		if code != exitDone {
			return code
		}
		if roots, err = identity.ParsePEM(b); err != nil {
			p.say(fmt.Errorf("%s: %w", trust, err))
			return exitFile
		}
	}
	pkg, code := p.read(pos[0])
	if code != exitDone {
		return code
	}
	v := exports.Verify(pkg, roots)
	if asJSON {
		if err := p.verifyJSON(v); err != nil {
			p.say(err)
			return exitFile
		}
	} else {
		p.printVerification(pos[0], v)
	}
	if note != "" {
		b, err := exports.Note(filepath.Base(pos[0]), pkg, v, p.software(), p.now())
		if err != nil {
			return p.notWritten(err)
		}
		if code := p.saveNew(note, b); code != exitDone {
			return code
		}
		fmt.Fprintf(p.err, "wrote %s\n", note)
	}
	switch {
	case requireTrust && !v.AllTrusted():
		fmt.Fprintln(p.err, "found a signer who is not established, want every signer trusted; see --trust")
		return exitCheck
	case v.State == exports.Intact, v.State == exports.Incomplete && partial:
		return exitDone
	}
	return exitCheck
}

func (p *program) verifyJSON(v exports.Verification) error {
	type reason struct {
		Code string `json:"code"`
		Part string `json:"part"`
		Text string `json:"text"`
	}
	reasons := []reason{}
	for _, r := range v.Reasons {
		reasons = append(reasons, reason(r))
	}
	e := json.NewEncoder(p.out)
	e.SetEscapeHTML(false)
	e.SetIndent("", "  ")
	return e.Encode(struct {
		Format          string                  `json:"format"`
		Signatures      []exports.SignatureView `json:"signatures"`
		MissingMeanings []string                `json:"missing_meanings"`
		UnsignedParts   []string                `json:"unsigned_parts"`
		Reasons         []reason                `json:"reasons"`
		Recomputed      struct {
			Agrees      bool     `json:"agrees"`
			Differences []string `json:"differences"`
			Rebuilt     bool     `json:"rebuilt"`
		} `json:"recomputed"`
		State      exports.State   `json:"state"`
		Supersedes []qa.Superseded `json:"supersedes,omitempty"`
	}{
		"lotpair.verify/1", v.Signatures, v.MissingMeanings, v.UnsignedParts, reasons,
		struct {
			Agrees      bool     `json:"agrees"`
			Differences []string `json:"differences"`
			Rebuilt     bool     `json:"rebuilt"`
		}{v.Agrees && !v.ComputedOtherwise(), v.Differences, v.Rebuilt},
		v.State, superseded(v),
	})
}

func (p *program) printVerification(name string, v exports.Verification) {
	fmt.Fprintf(p.out, "%s: %s\n", name, v.Headline())
	for _, s := range v.Signatures {
		word := "valid"
		if !s.Valid {
			word = "NOT valid"
		}
		who := strings.Trim(strings.Join([]string{s.Signer, s.Title, s.Organization}, ", "), ", ")
		who = strings.ReplaceAll(who, ", , ", ", ")
		fmt.Fprintf(p.out, "  %s: %s, %s, %s%s%s%s\n    certificate SHA-256 %s\n", s.Meaning, who, s.Time, word, trustWord(s),
			after(", reason: ", s.Reason), after(", disposition: ", s.Disposition), s.Fingerprint)
	}
	for _, m := range v.MissingMeanings {
		fmt.Fprintf(p.out, "  missing: a signature as %s\n", m)
	}
	p.reasons(v)
	if s := v.Sealed; s != nil {
		fmt.Fprintf(p.out, "  a seal of the criterion, made %s by %s\n  digest %s\n", s.Time.Format(time.RFC3339), s.Who, s.Digest)
	}
	if v.Record != nil {
		fmt.Fprintf(p.out, "  %s\n", v.Agreement())
		for i := len(v.Record.Supersedes) - 1; i >= 0; i-- {
			fmt.Fprintf(p.out, "  %s\n", exports.SupersedesText(v.Record.Supersedes[i]))
		}
		fmt.Fprintf(p.out, "  verdict in the record: %s\n", v.Record.Result.Sentence)
	}
}

func (p *program) reasons(v exports.Verification) {
	const most = 20
	n := 0
	for _, r := range v.Reasons {
		if n++; n > most {
			fmt.Fprintf(p.out, "  … and %d more reasons; --json lists all\n", len(v.Reasons)-most)
			return
		}
		fmt.Fprintf(p.out, "  %s: %s\n", r.Code, r.Error())
	}
}

// printReasons says on standard error why a file is no record.
func (p *program) printReasons(name string, v exports.Verification) {
	fmt.Fprintf(p.err, "%s: %s\n", name, v.Headline())
	for _, r := range v.Reasons {
		fmt.Fprintf(p.err, "%s: %s\n", name, r.Error())
	}
}

func trustWord(s exports.SignatureView) string {
	switch {
	case s.Trusted == nil:
		return ", not known whether trusted"
	case *s.Trusted:
		return ", trusted"
	}
	return ", NOT trusted (" + s.Doubt + ")"
}
