package app

import (
	"strings"

	"lotpair/app/desk"
	"lotpair/exports"
	"lotpair/exports/identity"
	"lotpair/exports/opcsign"
	"lotpair/qa"
)

// signing is what a person states when signing.
type signing struct {
	identity, passphrase         string
	meaning, reason, disposition string
	to                           string // the workbook; existing where the record has one already
}

// lastIdentity is where, among the program's settings, the identity file is named that was made or used last.
const lastIdentity = "identity"

// askSign asks for the identity, the meaning, the reason and the passphrase, each time.
func (w *window) askSign() {
	if w.act.sign.label == "" || w.state.Job.Name != "" || w.dialog != nil {
		return
	}
	if s := w.state; !s.Closed() && len(exports.Unstated(s.Record.Plan)) > 0 {
		w.askParticulars() // which says why: whoever signs would hear of it only after the passphrase
		return
	}
	f := w.newForm()
	f.add("", wrapped(desk.SignText), "")
	key := w.identityLine(f, "yours alone")
	key.SetText(w.app.Preferences().String(lastIdentity))
	f.first = key
	meaning := f.choice("Meaning", w.view.foot.Meaning, meanings, "what the signature stands for (21 CFR 11.50)")
	reason := f.text("Reason", "", "why you sign; it stands beside the signature")
	disposition := f.text("Disposition", "", "what was decided about the lot, where that is yours to say")
	to := f.text("Workbook", w.proposed(), "")
	if w.state.Workbook.Path != "" {
		to.Disable()
	}
	passphrase := f.secret("Passphrase", "")
	f.ask("Sign this record", "Sign", func() error {
		for _, x := range []struct {
			of   *field
			want string
		}{{key, "an identity file; choose it"}, {to, "a file name for the workbook"}, {passphrase, "the passphrase of the identity"}} {
			if err := filled(x.want)(x.of.Text); err != nil {
				return err
			}
		}
		w.app.Preferences().SetString(lastIdentity, key.Text)
		w.sign(signing{
			identity: key.Text, passphrase: passphrase.Text, meaning: meaning.Selected,
			reason: strings.TrimSpace(reason.Text), disposition: strings.TrimSpace(disposition.Text), to: to.Text,
		})
		passphrase.SetText("")
		return nil
	})
}

// sign signs the record's workbook, which is written first where there is none, and reads back what was written.
func (w *window) sign(x signing) {
	place := "Signing as " + x.meaning
	rec, had := w.state.Record, w.state.Workbook.Path != ""
	to := absolute(withExtension(x.to))
	when := now()
	st := opcsign.Statement{Meaning: x.meaning, Reason: x.reason, Disposition: x.disposition, Time: when, Zone: zone(when.Location().String())}
	w.work(place, func(watch qa.Watch) change {
		p12, err := readFile(x.identity)
		if err != nil {
			return failed(place, err)
		}
		id, err := identity.Open(p12, x.passphrase)
		if err != nil {
			return failed(place, err)
		}
		writes := func() error { return w.jobs.writes(watch) }
		if had {
			err = signAgain(to, id, st, writes)
		} else {
			err = signFirst(to, rec, id, st, watch, writes)
		}
		if err != nil {
			return failed(place, err)
		}
		data, err := readFile(to)
		if err != nil {
			return failed(place, err)
		}
		v := exports.Verify(data, w.trusted)
		if v.Record != nil {
			rec = *v.Record
		}
		book := w.workbookOf(to, v)
		if book.SHA256, err = w.keepFile(data); err != nil {
			return failed(place, err)
		}
		return func(s desk.State) desk.State { return s.Signed(rec, book) }
	})
}

// signFirst writes the workbook with its first signature. A file of that name is left alone.
func signFirst(to string, rec qa.Record, id identity.Identity, st opcsign.Statement, watch qa.Watch, writes func() error) error {
	data, err := exports.Under(watch).SignFirst(rec, id, st)
	if err != nil {
		return err
	}
	if err := writes(); err != nil {
		return err
	}
	return saved(exports.Save(to, data, false))
}

// signAgain adds a signature to the workbook as it is on disk.
func signAgain(to string, id identity.Identity, st opcsign.Statement, writes func() error) error {
	before, err := readFile(to)
	if err != nil {
		return err
	}
	after, err := exports.Sign(before, id, st)
	if err != nil {
		return err
	}
	if err := writes(); err != nil {
		return err
	}
	return exports.Replace(to, before, after)
}

// zone is the name of the time zone where the system knows one.
func zone(name string) string {
	if name == "Local" {
		return ""
	}
	return name
}
