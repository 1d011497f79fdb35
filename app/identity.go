package app

import (
	"crypto/rand"
	"errors"
	"fmt"
	"path/filepath"
	"strings"

	"lotpair/app/desk"
	"lotpair/exports"
	"lotpair/exports/identity"
	"lotpair/qa"
)

// askNewIdentity asks for what a new identity states and makes it.
func (w *window) askNewIdentity() {
	if w.busy() {
		return
	}
	f := w.newForm()
	f.add("", wrapped(desk.IdentityText), "")
	name := f.text("Name", "", "as it shall be printed")
	title := f.text("Title", "", "")
	organization := f.text("Organization", "", "")
	to := f.text("File", w.home("identity.p12"), "no existing file is written over")
	first := f.secret("Passphrase", "fewer than 12 characters are soon guessed by whoever has the file")
	second := f.secret("The same again", "")
	f.first = name
	f.ask("Make an identity", "Make", func() error {
		switch {
		case strings.TrimSpace(name.Text) == "":
			return errors.New("name: found none, want the signer's name; type it")
		case first.Text == "":
			return errors.New("passphrase: found an empty one, want some words that only you know; type them")
		case first.Text != second.Text:
			return errors.New("passphrase: found two different ones, want the same twice; type it again")
		}
		w.makeIdentity(name.Text, title.Text, organization.Text, to.Text, first.Text)
		first.SetText("")
		second.SetText("")
		return nil
	})
}

// makeIdentity makes a key and its certificate and writes them.
func (w *window) makeIdentity(name, title, organization, to, passphrase string) {
	const place = "Making an identity"
	to = absolute(to)
	when := now()
	w.work(place, func(watch qa.Watch) change {
		id, err := identity.New(name, title, organization, when, rand.Reader)
		if err != nil {
			return failed(place, err)
		}
		data, err := id.Encode(passphrase, rand.Reader)
		if err == nil {
			err = saved(exports.SaveSecret(to, data))
		}
		if err != nil {
			return failed(place, err)
		}
		said := fmt.Sprintf("Identity of %s", id.Name())
		return func(s desk.State) desk.State {
			w.app.Preferences().SetString(lastIdentity, to)
			return s.SavedFile(said, to)
		}
	})
}

// askShowIdentity asks for an identity, or for a record that was signed, and shows whose it is.
func (w *window) askShowIdentity() {
	if w.busy() {
		return
	}
	f := w.newForm()
	file := w.fileLine(f, "File", "an identity (.p12), or a signed record (.xlsx)", ".p12", ".pfx", ".xlsx")
	pass := f.secret("Passphrase", "of an identity; a record needs none")
	f.ask("Show an identity", "Show", func() error {
		all, err := identitiesOf(file.Text, pass.Text)
		if err != nil {
			return err
		}
		var text []string
		var pem []byte
		for _, id := range all {
			text = append(text, identityText(id))
			pem = append(pem, id.PEM()...)
		}
		pass.SetText("")
		w.leaveDialog()
		w.showText("Identity", append(text, string(pem)), newButton(w.palette, "Save certificates", plain, func() {
			w.leaveDialog()
			w.askFile("Save the certificates", "Save", w.home("certificate.pem"), "a file name that ends in .pem", func(to string) {
				w.saveBytes("Certificates", to, func() ([]byte, error) { return pem, nil })
			})
		}))
		return nil
	})
}

// identitiesOf are the identities of a file: its own, or those that signed it.
func identitiesOf(file, passphrase string) ([]identity.Identity, error) {
	data, err := readFile(file)
	if err != nil {
		return nil, err
	}
	if strings.HasPrefix(string(data), "PK") {
		signers, err := exports.Signers(data)
		if err == nil && len(signers) == 0 {
			err = fmt.Errorf("%s: found no signature, want a record that was signed; name another file", filepath.Base(file))
		}
		return signers, err
	}
	id, err := identity.Open(data, passphrase)
	return []identity.Identity{id}, err
}
