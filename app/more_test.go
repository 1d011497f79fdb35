package app

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"lotpair/exports/identity"
)

// TestTrust trusts a signer, forgets them and trusts another.
func TestTrust(t *testing.T) {
	folder, dir := t.TempDir(), t.TempDir()
	w := decided(t, folder)
	file, passphrase := key(t)
	w.sign(signing{identity: file, passphrase: passphrase, meaning: "prepared", to: filepath.Join(dir, "r.xlsx")})
	noProblem(t, w)
	pem := func(file, passphrase, name string) string {
		id, err := openIdentity(file, passphrase)
		if err != nil {
			t.Fatal(err)
		}
		to := filepath.Join(dir, name)
		if err := os.WriteFile(to, id.PEM(), 0o600); err != nil {
			t.Fatal(err)
		}
		return to
	}
	header := func() string { return w.view.header.Right }
	if !strings.HasSuffix(header(), "who signed is not established") || w.view.header.Alarm {
		t.Errorf("without trust: got %q", header())
	}
	other, word := key(t)
	if err := w.trustToo(pem(other, word, "other.pem")); err != nil {
		t.Fatal(err)
	}
	if !strings.HasSuffix(header(), "a signer is NOT trusted here") || !w.view.header.Alarm {
		t.Errorf("another trusted: got %q", header())
	}
	if err := w.trustToo(pem(file, passphrase, "ada.pem")); err != nil {
		t.Fatal(err)
	}
	if !strings.HasSuffix(header(), "every signer is trusted here") || w.view.header.Alarm {
		t.Errorf("trusted: got %q", header())
	}
	if got := strings.Join(w.state.Signatures(), " "); !strings.Contains(got, "Trusted here.") || !strings.Contains(got, "agrees with the record") {
		t.Errorf("signatures: got %q", got)
	}
	w.showSignatures()
	shotOf(t, "signatures", w.win.Canvas().Capture())
	w.leaveDialog()
	note := filepath.Join(dir, "note.xlsx")
	w.saveNote(note)
	noProblem(t, w)
	if _, err := os.Stat(note); err != nil {
		t.Error(err)
	}
	w.saveSigners(filepath.Join(dir, "signers.pem"))
	data, err := os.ReadFile(filepath.Join(dir, "signers.pem"))
	if err != nil {
		t.Fatal(err)
	}
	if all, err := identity.ParsePEM(data); err != nil || len(all) != 1 {
		t.Errorf("certificates: got %d, %v", len(all), err)
	}
	id := w.entry.ID
	w = openedWith(t, inRegister(t, folder), "", 1280, 800)
	w.reopen(id)
	if len(w.trusted) != 2 || !strings.HasSuffix(header(), "every signer is trusted here") {
		t.Errorf("opened again: got %d trusted, %q", len(w.trusted), header())
	}
	w.showTrusted()
	shotOf(t, "trusted", w.win.Canvas().Capture())
	w.leaveDialog()
	for len(w.trusted) > 0 {
		if err := w.forget(w.trusted[0]); err != nil {
			t.Fatal(err)
		}
	}
	if !strings.HasSuffix(header(), "who signed is not established") {
		t.Errorf("forgotten: got %q", header())
	}
}

// TestInstallationIsChecked runs the installation check, which the next window remembers.
func TestInstallationIsChecked(t *testing.T) {
	folder := t.TempDir()
	w := openedWith(t, inRegister(t, folder), "", 1280, 800)
	if got := w.lastCheck(); got != "This installation was not checked yet." {
		t.Errorf("before: got %q", got)
	}
	w.qualify()
	noProblem(t, w)
	shotOf(t, "check", w.win.Canvas().Capture())
	if w.checked == nil || w.checked.Off != 0 || len(w.checked.Checks) < 20 || len(w.checked.Record) != 2 {
		t.Fatalf("check: got %+v", w.checked)
	}
	w.leaveDialog()
	w = openedWith(t, inRegister(t, folder), "", 1280, 800)
	if got := w.lastCheck(); !strings.Contains(got, "checks hold") {
		t.Errorf("after: got %q", got)
	}
	w.showAbout()
	shotOf(t, "about", w.win.Canvas().Capture())
	w.leaveDialog()
	w.showLicences()
	shotOf(t, "licences", w.win.Canvas().Capture())
}

// TestIdentityIsMadeAndShown makes an identity in the window and shows it, and those that signed a record.
func TestIdentityIsMadeAndShown(t *testing.T) {
	to := filepath.Join(t.TempDir(), "bo.p12")
	w := opened(t, "", 1280, 800)
	w.makeIdentity("Bo Example", "inspector", "Kettlewick (invented)", to, "a long passphrase")
	noProblem(t, w)
	all, err := identitiesOf(to, "a long passphrase")
	if err != nil || identityText(all[0])[:38] != "Bo Example, inspector, Kettlewick (inv" {
		t.Errorf("identity: got %v, %v", all, err)
	}
	if _, err := identitiesOf(to, "wrong"); err == nil {
		t.Error("a wrong passphrase: got no error")
	}
	w.makeIdentity("Bo Example", "", "", to, "x")
	if w.state.Problem.Text == "" {
		t.Error("the same file again: got it written over")
	}
}
