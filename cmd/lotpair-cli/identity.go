package main

import (
	"crypto/rand"
	"fmt"
	"strings"

	"lotpair/exports"
	"lotpair/exports/identity"
)

func (p *program) identity(args []string) int {
	switch {
	case len(args) > 0 && args[0] == "new":
		return p.identityNew(args[1:])
	case len(args) > 0 && args[0] == "show":
		return p.identityShow(args[1:])
	}
	f := p.flags("identity new|show …", "Makes a signing identity, or shows one.", "lotpair-cli identity new --name \"Ada Quill\" --out ada.p12")
	if len(args) > 0 && (args[0] == "--help" || args[0] == "-h") {
		f.help(p.out)
		return exitDone
	}
	return p.usageError(f, fmt.Sprintf("found %q, want new or show", args))
}

func (p *program) identityNew(args []string) int {
	var name, title, organization, out, passphraseFile string
	f := p.flags("identity new --name N [--title T] [--organization O] --out KEY.p12 [--passphrase-file F]",
		"Makes a signing identity: a key (ECDSA P-256) and a self-signed certificate, in one file behind a passphrase.\nKeep the file and the passphrase to yourself; give the certificate (identity show --pem) to those who verify.",
		"lotpair-cli identity new --name \"Ada Quill\" --title \"Quality engineer\" --out ada.p12")
	f.StringVar(&name, "name", "", "the signer's `name`, as it shall be printed")
	f.StringVar(&title, "title", "", "the signer's `title`")
	f.StringVar(&organization, "organization", "", "the signer's `organization`")
	f.StringVar(&out, "out", "", "write the identity to `KEY.p12`")
	f.StringVar(&passphraseFile, "passphrase-file", "", "read the passphrase from the first line of `FILE`")
	if _, code, err := f.parse(args); err != nil {
		return code
	}
	if strings.TrimSpace(name) == "" || out == "" {
		return p.usageError(f, "found no --name or no --out, want both")
	}
	word, code := p.newPassphrase(passphraseFile)
	if code != exitDone {
		return code
	}
	id, err := identity.New(name, title, organization, p.now(), rand.Reader)
	if err != nil {
		p.say(err)
		return exitUsage
	}
	b, err := id.Encode(word, rand.Reader)
	if err != nil {
		p.say(err)
		return exitFile
	}
	if err := exports.SaveSecret(p.file(out), b); err != nil {
		return p.notWritten(err)
	}
	fmt.Fprintf(p.out, "wrote %s\n%s, certificate SHA-256 %s\n", out, id.Name(), id.Fingerprint())
	return exitDone
}

// newPassphrase asks twice, or reads the file.
func (p *program) newPassphrase(file string) (string, int) {
	word, code := p.passphrase(file, "new passphrase: ")
	if code != exitDone {
		return "", code
	}
	if word == "" {
		fmt.Fprintln(p.err, "passphrase: found an empty one, want some words; choose one that only you know")
		return "", exitUsage
	}
	if len(word) < 12 {
		fmt.Fprintln(p.err, "passphrase: fewer than 12 characters are soon guessed by whoever has the file; a longer one is better")
	}
	if file == "" {
		again, code := p.passphrase("", "the same again: ")
		if code != exitDone {
			return "", code
		}
		if again != word {
			fmt.Fprintln(p.err, "passphrase: found two different ones, want the same twice; start again")
			return "", exitUsage
		}
	}
	return word, exitDone
}

func (p *program) identityShow(args []string) int {
	var pem bool
	var passphraseFile string
	f := p.flags("identity show KEY.p12|RECORD.xlsx [--pem] [--passphrase-file F]",
		"Prints an identity, or the identities that signed a record; with --pem their certificates, to be kept as trusted ones.",
		"lotpair-cli identity show ada.p12 --pem")
	f.BoolVar(&pem, "pem", false, "print the certificates as PEM")
	f.StringVar(&passphraseFile, "passphrase-file", "", "read the passphrase from the first line of `FILE`")
	pos, code, err := f.parse(args, "KEY.p12|RECORD.xlsx")
	if err != nil {
		return code
	}
	b, code := p.read(pos[0])
	if code != exitDone {
		return code
	}
	if strings.HasPrefix(string(b), "PK") {
		signers, err := exports.Signers(b)
		if err != nil {
			p.say(fmt.Errorf("%s: %w", pos[0], err))
			return exitFile
		}
		if len(signers) == 0 {
			fmt.Fprintf(p.err, "%s: found no signature, want a record that was signed; name another file\n", pos[0])
			return exitFile
		}
		for _, id := range signers {
			p.printIdentity(id, pem)
		}
		return exitDone
	}
	id, code := p.openIdentity(pos[0], passphraseFile)
	if code != exitDone {
		return code
	}
	p.printIdentity(id, pem)
	return exitDone
}

func (p *program) printIdentity(id identity.Identity, pem bool) {
	if pem {
		fmt.Fprintf(p.out, "%s", id.PEM())
		return
	}
	fmt.Fprintf(p.out, "%s\n", id.Name())
	for _, l := range [][2]string{{"title", id.Title()}, {"organization", id.Organization()}, {"certificate SHA-256", id.Fingerprint()}} {
		if l[1] != "" {
			fmt.Fprintf(p.out, "  %s: %s\n", l[0], l[1])
		}
	}
}
