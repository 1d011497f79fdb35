package app

import (
	"path/filepath"
	"strings"

	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/widget"

	"fyne.io/fyne/v2"

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

// askSign asks for the identity, the meaning, the reason and the passphrase, each time.
func (w *window) askSign() {
	if w.act.sign.label == "" || w.state.Job.Name != "" || w.dialog != nil {
		return
	}
	key := w.newField("")
	key.SetPlaceHolder("your identity file (.p12)")
	key.Validator = filled("an identity file")
	browse := newButton(w.palette, "Browse", quiet, func() {
		dialog.ShowFileOpen(func(r fyne.URIReadCloser, err error) {
			if err == nil && r != nil {
				key.SetText(r.URI().Path())
				_ = r.Close() // opened for its name only
			}
		}, w.win)
	})
	meaning := widget.NewSelect([]string{"prepared", "reviewed", "approved"}, nil)
	meaning.SetSelected(w.view.foot.Meaning)
	reason, disposition, passphrase := w.newField(""), w.newField(""), w.newField("")
	disposition.SetPlaceHolder("what was decided about the lot, where that is yours to say")
	passphrase.Password = true
	passphrase.Validator = filled("the passphrase of the identity")
	to := w.newField(w.proposed())
	to.Validator = filled("a file name")
	if w.state.Workbook.Path != "" {
		to.Disable()
	}
	items := []*widget.FormItem{
		widget.NewFormItem("Identity", container.NewBorder(nil, nil, nil, browse, key)),
		widget.NewFormItem("Meaning", meaning),
		widget.NewFormItem("Reason", reason),
		widget.NewFormItem("Disposition", disposition),
		widget.NewFormItem("Workbook", to),
		widget.NewFormItem("Passphrase", passphrase),
	}
	d := dialog.NewForm("Sign this record", "Sign", "Cancel", items, func(ok bool) {
		if ok {
			w.sign(signing{
				identity: key.Text, passphrase: passphrase.Text, meaning: meaning.Selected,
				reason: strings.TrimSpace(reason.Text), disposition: strings.TrimSpace(disposition.Text), to: to.Text,
			})
		}
		passphrase.SetText("")
	}, w.win)
	w.presentForm(d, key, reason, disposition, to, passphrase)
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
			err = signFirst(to, rec, id, st, writes)
		}
		if err != nil {
			return failed(place, err)
		}
		data, err := readFile(to)
		if err != nil {
			return failed(place, err)
		}
		v := exports.Verify(data, nil)
		if v.Record != nil {
			rec = *v.Record
		}
		book := workbookOf(to, v)
		if book.SHA256, err = w.keepFile(data); err != nil {
			return failed(place, err)
		}
		return func(s desk.State) desk.State { return s.Signed(rec, book) }
	})
}

// signFirst writes the workbook with its first signature. A file of that name is left alone.
func signFirst(to string, rec qa.Record, id identity.Identity, st opcsign.Statement, writes func() error) error {
	data, err := exports.SignFirst(rec, id, st)
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

// showSignatures lists the signatures and what is wrong.
func (w *window) showSignatures() {
	box := container.NewVBox()
	for _, s := range w.state.Signatures() {
		l := widget.NewLabel(s)
		l.Wrapping = fyne.TextWrapWord
		l.Selectable = true
		box.Add(l)
	}
	d := dialog.NewCustom("Signatures of "+filepath.Base(w.state.Workbook.Path), "Close", container.NewVScroll(box), w.win)
	w.present(d, 720, 420)
}
