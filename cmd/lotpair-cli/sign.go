package main

import (
	"fmt"

	"lotpair/exports"
	"lotpair/exports/opcsign"
)

func (p *program) sign(args []string) int {
	var key, meaning, reason, disposition, passphraseFile string
	f := p.flags("sign RECORD.xlsx --identity KEY.p12 --meaning reviewed [--reason R] [--disposition D] [--passphrase-file F]",
		"Adds a signature to a record; earlier ones stay valid. The record must be sound: unchanged, and giving the same result again.",
		"lotpair-cli sign hub-shell.xlsx --identity ada.p12 --meaning reviewed --reason \"figures checked\"")
	f.StringVar(&key, "identity", "", "sign with `KEY.p12`")
	f.StringVar(&meaning, "meaning", "", "what the signature stands for: `prepared`, reviewed or approved")
	f.StringVar(&reason, "reason", "", "the `reason` stated with the signature")
	f.StringVar(&disposition, "disposition", "", "what the responsible unit `decided` about the lot")
	f.StringVar(&passphraseFile, "passphrase-file", "", "read the passphrase from the first line of `FILE`")
	pos, code, err := f.parse(args, "RECORD.xlsx")
	if err != nil {
		return code
	}
	if key == "" || meaning == "" {
		return p.usageError(f, "found no --identity or no --meaning, want both")
	}
	before, code := p.read(pos[0])
	if code != exitDone {
		return code
	}
	if v := exports.Verify(before, nil); v.State == exports.Unreadable {
		p.printReasons(pos[0], v)
		return exitFile
	}
	id, code := p.openIdentity(key, passphraseFile)
	if code != exitDone {
		return code
	}
	now := p.now()
	after, err := exports.Sign(before, id, opcsign.Statement{Meaning: meaning, Reason: reason, Disposition: disposition, Time: now, Zone: zoneOf(now)})
	if err != nil {
		return p.notWritten(fmt.Errorf("%s: %w", pos[0], err))
	}
	if err := exports.Replace(p.file(pos[0]), before, after); err != nil {
		p.say(err)
		return exitFile
	}
	fmt.Fprintf(p.out, "signed %s as %s: %s, certificate SHA-256 %s\n", pos[0], meaning, id.Name(), id.Fingerprint())
	return exitDone
}
