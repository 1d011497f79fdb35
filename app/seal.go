package app

import (
	"errors"
	"fmt"
	"path/filepath"
	"time"

	"lotpair/app/desk"
	"lotpair/exports"
	"lotpair/exports/opcsign"
	"lotpair/qa"
)

// askSaveSeal asks where the seal alone goes, and with which identity it is signed.
func (w *window) askSaveSeal() {
	if w.busy() || !w.state.Sealed() {
		return
	}
	f := w.newForm()
	to := f.text("File", w.besides(".seal.xlsx"), "no existing file is written over")
	key := w.identityLine(f, "empty leaves it unsigned: its time is then only what the file says")
	meaning := f.choice("Meaning", "approved", meanings, "")
	reason := f.text("Reason", "", "")
	pass := f.secret("Passphrase", "")
	f.ask("Save the seal", "Save", func() error {
		if err := filled("a file name")(to.Text); err != nil {
			return err
		}
		sealed, err := w.sealed()
		if err != nil {
			return err
		}
		st := opcsign.Statement{Meaning: meaning.Selected, Reason: reason.Text, Time: now(), Zone: zone(now().Location().String())}
		file, word := key.Text, pass.Text
		w.saveBytes("Seal", to.Text, func() ([]byte, error) {
			if file == "" {
				return sealed.Workbook()
			}
			id, err := openIdentity(file, word)
			if err != nil {
				return nil, err
			}
			return exports.SignSeal(sealed, id, st)
		})
		return nil
	})
}

// sealed is the seal of the record on the desk, as it was set.
func (w *window) sealed() (exports.Sealed, error) {
	r := w.state.Record
	seal := r.Result.Seal
	at, err := time.Parse(time.RFC3339, seal.Time)
	switch {
	case err != nil:
		return exports.Sealed{}, fmt.Errorf("seal: %w", err)
	case seal.Digest != r.Plan.SealDigest():
		return exports.Sealed{}, errors.New("seal: found another criterion on the desk than was sealed, want the same; amend it first")
	}
	who := person()
	for _, a := range r.Trail {
		if a.What == "sealed the criterion" {
			who = a.Who
		}
	}
	out := exports.Seal(r.Plan, r.PlanFile, w.build.software(), seal.Readings, who, at)
	return out, nil
}

// openSeal begins a comparison whose criterion was sealed in a workbook of its own.
func openSeal(place, name string, data []byte, v exports.Verification) change {
	s := *v.Sealed
	if !v.Agrees || v.State != exports.Intact && v.State != exports.Unsigned {
		return failed(place, errors.New(joinLines(workbookOf(name, v).Reasons)))
	}
	if s.Time.After(now()) {
		return failed(place, fmt.Errorf("%s: found the time %s, want one that has passed; check the clock of this machine and of the one that sealed", filepath.Base(name), s.Result().Time))
	}
	file := qa.FileOf(filepath.Base(name), data)
	return func(st desk.State) desk.State {
		return st.BegunSealed(s.Plan, s.Result(), s.Trail(nil, file), file, person(), now())
	}
}
