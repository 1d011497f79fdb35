package app

import (
	"fyne.io/fyne/v2/container"

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
		w.chooseFile("Choose the file: "+label, endings, func(path string) {
			x.SetText(path)
			w.win.Canvas().Focus(x)
		})
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
