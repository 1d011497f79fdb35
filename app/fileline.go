package app

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/storage"

	"lotpair/exports/identity"
)

// meanings are what a signature may stand for.
var meanings = []string{"prepared", "reviewed", "approved"}

// fileLine is a line for the name of a file, which may be looked for.
func (w *window) fileLine(f *form, label, hint string, endings ...string) *field {
	x := w.newField("")
	x.OnChanged, x.seen = func(string) { f.say() }, f.reveal
	f.fields = append(f.fields, x)
	browse := newButton(w.palette, "Browse", quiet, func() {
		d := dialog.NewFileOpen(func(r fyne.URIReadCloser, err error) {
			if err == nil && r != nil {
				x.SetText(r.URI().Path())
				_ = r.Close() // opened for its name only
			}
		}, w.win)
		d.SetFilter(storage.NewExtensionFileFilter(endings))
		d.Show()
	})
	f.add(label, container.NewBorder(nil, nil, nil, browse, x), hint)
	if f.first == nil {
		f.first = x
	}
	return x
}

// identityLine is a line for an identity.
func (w *window) identityLine(f *form, hint string) *field {
	return w.fileLine(f, "Identity (.p12)", hint, ".p12", ".pfx")
}

// openIdentity opens an identity with its passphrase.
func openIdentity(file, passphrase string) (identity.Identity, error) {
	data, err := readFile(file)
	if err != nil {
		return identity.Identity{}, err
	}
	return identity.Open(data, passphrase)
}
