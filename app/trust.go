package app

import (
	"bytes"
	"crypto/x509"
	"errors"
	"fmt"
	"os"
	"path/filepath"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"

	"lotpair/app/desk"
	"lotpair/exports"
	"lotpair/exports/identity"
	"lotpair/qa"
)

// trustFile holds the trusted certificates in the folder of the register: a text that can be read and kept with it.
const trustFile = "trusted.pem"

// loadTrusted reads the trusted certificates of the register.
func (w *window) loadTrusted() error {
	if w.register == nil {
		return nil
	}
	data, err := os.ReadFile(filepath.Join(w.register.Dir(), trustFile))
	if errors.Is(err, os.ErrNotExist) {
		return nil
	}
	if err == nil && len(bytes.TrimSpace(data)) > 0 {
		w.trusted, err = identity.ParsePEM(data)
	}
	if err != nil {
		return fmt.Errorf("%s: %w", trustFile, err)
	}
	return nil
}

// keepTrusted keeps other trusted certificates. Trusting is no act on a record: it is about this machine.
func (w *window) keepTrusted(all []*x509.Certificate) error {
	if w.register != nil {
		var pem []byte
		for _, c := range all {
			pem = append(pem, identity.Identity{Chain: []*x509.Certificate{c}}.PEM()...)
		}
		path := filepath.Join(w.register.Dir(), trustFile)
		if err := os.WriteFile(path+".new", pem, 0o600); err != nil {
			return err
		}
		if err := os.Rename(path+".new", path); err != nil {
			return err
		}
	}
	w.trusted = all
	return nil
}

// trustToo trusts the certificates of a .pem file.
func (w *window) trustToo(file string) error {
	data, err := readFile(file)
	if err != nil {
		return err
	}
	more, err := identity.ParsePEM(data)
	if err != nil {
		return fmt.Errorf("%s: %w", filepath.Base(file), err)
	}
	all := append([]*x509.Certificate{}, w.trusted...)
	for _, c := range more {
		known := false
		for _, k := range all {
			known = known || k.Equal(c)
		}
		if !known {
			all = append(all, c)
		}
	}
	if err := w.keepTrusted(all); err != nil {
		return err
	}
	w.verifyAgain()
	return nil
}

// forget trusts a certificate no longer.
func (w *window) forget(c *x509.Certificate) error {
	var all []*x509.Certificate
	for _, k := range w.trusted {
		if !k.Equal(c) {
			all = append(all, k)
		}
	}
	if err := w.keepTrusted(all); err != nil {
		return err
	}
	w.verifyAgain()
	return nil
}

// verifyAgain judges the workbook on the desk by the certificates that are trusted now.
func (w *window) verifyAgain() {
	book := w.state.Workbook
	if !w.state.Open || book.State == "" {
		return
	}
	const place = "Checking the signatures again"
	w.work(place, func(watch qa.Watch) change {
		data, err := w.workbookBytes(book)
		if err != nil {
			return failed(place, err)
		}
		next := w.workbookOf(book.Path, exports.Verify(data, w.trusted))
		next.SHA256, next.Opened = book.SHA256, book.Opened
		return func(s desk.State) desk.State { return s.Verified(next) }
	})
}

// workbookBytes are the bytes of the workbook on the desk.
func (w *window) workbookBytes(book desk.Workbook) ([]byte, error) {
	if w.register != nil && book.SHA256 != "" {
		return w.register.File(book.SHA256)
	}
	return readFile(book.Path)
}

// showTrusted lists the trusted certificates and takes more.
func (w *window) showTrusted() {
	if w.busy() {
		return
	}
	f := w.newForm()
	f.add("", wrapped(desk.TrustText), "")
	for _, c := range w.trusted {
		id := identity.Identity{Chain: []*x509.Certificate{c}}
		forget := newButton(w.palette, "Forget "+id.Name(), quiet, func() {
			if err := w.forget(c); err != nil {
				f.said.SetText(err.Error())
				return
			}
			w.leaveDialog()
		})
		f.add("Trusted", container.NewBorder(nil, nil, nil, forget, wrapped(identityText(id))), "")
	}
	if len(w.trusted) == 0 {
		f.add("Trusted", wrapped("none: who signed is not established"), "")
	}
	file := w.fileLine(f, "Certificate (.pem)", "of a signer, or of who issued theirs", ".pem", ".crt", ".cer")
	f.ask("Certificates trusted on this machine", "Trust", func() error {
		if err := filled("a file of certificates (.pem); choose it")(file.Text); err != nil {
			return err
		}
		return w.trustToo(file.Text)
	})
}

func identityText(id identity.Identity) string {
	text := id.Name()
	for _, more := range []string{id.Title(), id.Organization()} {
		if more != "" {
			text += ", " + more
		}
	}
	return text + "; certificate sha-256 " + id.Fingerprint()
}

// showSignatures lists the signatures and what is wrong; a statement of them and the certificates can be saved.
func (w *window) showSignatures() {
	book := w.state.Workbook
	note := newButton(w.palette, "Save a statement", plain, func() {
		w.leaveDialog()
		w.askFile("Save a printable statement of the signatures", "Save", w.besides(".signatures.xlsx"), "a file name", func(to string) { w.saveNote(withExtension(to)) })
	})
	pem := newButton(w.palette, "Save certificates", plain, func() {
		w.leaveDialog()
		w.askFile("Save the signers' certificates", "Save", w.besides(".pem"), "a file name that ends in .pem", w.saveSigners)
	})
	trust := newButton(w.palette, "Trusted here", plain, func() {
		w.leaveDialog()
		w.showTrusted()
	})
	more := []fyne.CanvasObject{note, trust}
	if len(book.Signatures) > 0 {
		more = []fyne.CanvasObject{note, pem, trust}
	}
	w.showText("Signatures of "+filepath.Base(book.Path), w.state.Signatures(), more...)
}

// saveNote writes a printable statement of all signatures.
func (w *window) saveNote(to string) {
	book := w.state.Workbook
	w.saveBytes("Statement of the signatures", to, func() ([]byte, error) {
		data, err := w.workbookBytes(book)
		if err != nil {
			return nil, err
		}
		return exports.Note(filepath.Base(book.Path), data, exports.Verify(data, w.trusted), w.software(), now())
	})
}

// saveSigners writes the certificates of those who signed.
func (w *window) saveSigners(to string) {
	book := w.state.Workbook
	w.saveBytes("Certificates", to, func() ([]byte, error) {
		data, err := w.workbookBytes(book)
		if err != nil {
			return nil, err
		}
		signers, err := exports.Signers(data)
		var pem []byte
		for _, id := range signers {
			pem = append(pem, id.PEM()...)
		}
		return pem, err
	})
}
