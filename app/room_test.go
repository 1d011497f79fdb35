package app

import (
	"fmt"
	"strings"
	"testing"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/test"

	"lotpair/app/desk"
	"lotpair/qa"
)

// placed is a text where it stands in the window, and what may be seen of it.
type placed struct {
	text                     string
	left, top, right, bottom float32
	clipLeft, clipTop, clipR float32
	clipBottom               float32
	scrolls                  bool
}

// texts are all texts that are seen, with their places.
func texts(o fyne.CanvasObject, at fyne.Position, clip placed) []placed {
	if !o.Visible() {
		return nil
	}
	at = at.Add(o.Position())
	var children []fyne.CanvasObject
	switch x := o.(type) {
	case *canvas.Text:
		s := x.MinSize()
		clip.text, clip.left, clip.top, clip.right, clip.bottom = x.Text, at.X, at.Y, at.X+s.Width, at.Y+s.Height
		return []placed{clip}
	case *fyne.Container:
		children = x.Objects
	case fyne.Widget:
		if _, ok := x.(*container.Scroll); ok {
			s := x.Size()
			clip.clipLeft, clip.clipTop, clip.clipR, clip.clipBottom, clip.scrolls = at.X, at.Y, at.X+s.Width, at.Y+s.Height, true
		}
		children = test.WidgetRenderer(x).Objects()
	}
	var out []placed
	for _, c := range children {
		out = append(out, texts(c, at, clip)...)
	}
	return out
}

// crowded lists the texts that stand on each other or leave the window or their region.
func crowded(w *window) []string {
	size := w.win.Canvas().Size()
	all := texts(w.win.Content(), fyne.Position{}, placed{clipR: size.Width, clipBottom: size.Height})
	var out []string
	var seen []placed
	for _, p := range all {
		if p.bottom <= p.clipTop || p.top >= p.clipBottom {
			continue // scrolled out of sight
		}
		if p.left < p.clipLeft-1 || p.right > p.clipR+1 || !p.scrolls && (p.top < p.clipTop-2 || p.bottom > p.clipBottom+2) {
			out = append(out, fmt.Sprintf("%q at %.0f to %.0f leaves its place %.0f to %.0f", p.text, p.left, p.right, p.clipLeft, p.clipR))
		}
		seen = append(seen, p)
	}
	for i, a := range seen {
		for _, b := range seen[i+1:] {
			// Boxes of texts hold their ascents and descents, which letters rarely fill: a third of a line may overlap.
			x := min(a.right, b.right) - max(a.left, b.left)
			y := min(min(a.bottom, b.bottom), min(a.clipBottom, b.clipBottom)) - max(max(a.top, b.top), max(a.clipTop, b.clipTop))
			if x > 1 && y > 6 {
				out = append(out, fmt.Sprintf("%q stands on %q", a.text, b.text))
			}
		}
	}
	return out
}

// unruly is a record whose every text is as long as people make them.
func unruly(t testing.TB, characteristics, readings int) qa.Record {
	t.Helper()
	long := "Concentricity of the drive-side bearing seat to the axle bore after shot peening, measured at 20 °C"
	file := []qa.File{{Name: "measurement-report-of-the-second-foundry-2026-11-30-final-version-2.xlsx", SHA256: strings.Repeat("0123456789abcdef", 4)}}
	upper, margin := 0.08, 0.004
	r := qa.Readings{}
	lot := func(name string, shift float64) qa.Lot {
		l := qa.Lot{Name: name, Source: "Foundry at the river, line 4, shift B, melt 2291-C", Files: file, Rows: readings}
		for i := range characteristics {
			s := qa.Series{Characteristic: fmt.Sprintf("%s, no. %d", long, i), Rows: readings}
			for k := range readings {
				x := qa.Reading{
					Value: 0.02 + shift + float64((k*7919)%101)*1e-4, Decimals: 6,
					Source: qa.Source{File: file[0].Name, Sheet: "Sheet of the measuring room", Cell: fmt.Sprintf("AB%d", 10000+k)},
				}
				if k%9 == 4 {
					x.LeftOut = "dropped in the measuring room before the third measurement, see non-conformance report NCR-2026-0077"
				}
				s.Readings = append(s.Readings, x)
			}
			l.Series = append(l.Series, s)
		}
		return l
	}
	r.Reference, r.Candidate = lot("R-118 / 2026-11-14 / pallet 7 of 12", 0), lot("C-022 / 2026-11-21 / pallet 1 of 4", 0.003)
	for i := range characteristics {
		c := qa.Characteristic{Name: fmt.Sprintf("%s, no. %d", long, i), Unit: "mm", Upper: &upper, Margin: &qa.Margin{Absolute: &margin}}
		if i%3 == 1 {
			c.Objective = qa.NotHigher
		}
		r.Characteristics = append(r.Characteristics, c)
	}
	plan := qa.Plan{
		Title:    "Comparison of the second foundry with the existing one for the hub shell HS-40 after the change of the mould and of the melt",
		Supports: "deviation DEV-2291, change request CR-118 and the qualification report of the second source, revision C", Characteristics: r.Characteristics,
	}
	res, err := qa.Compare(plan, r, qa.Run{Seal: qa.Seal{Digest: plan.SealDigest()}})
	if err != nil {
		t.Fatal(err)
	}
	return qa.NewRecord(plan, qa.File{Name: "plan.toml"}, r, res, "tester", time.Unix(0, 0))
}

func TestNoTextIsCutOrStandsOnAnother(t *testing.T) {
	states := map[string]desk.State{
		"empty":  {},
		"unruly": desk.State{}.Opened("plan.toml", unruly(t, 7, 30)),
		"problem": desk.State{}.Opened("plan.toml", unruly(t, 2, 30)).Failed("Exporting to record.xlsx",
			fmt.Errorf("%s", strings.Repeat("a long message that says what was found, what was wanted and what to do now; ", 9))),
		"working": desk.State{}.Opened("plan.toml", unruly(t, 2, 30)).Working("Opening a file with a long name", 0.4),
		"signed": desk.State{}.OpenedWorkbook(unruly(t, 4, 30), desk.Workbook{
			Path: "record.xlsx", State: "incomplete", Missing: []string{"reviewed", "approved"},
			Signatures: []desk.Signature{{Signer: "Dr Maximiliane Example-Longname", Meaning: "prepared", Time: "2026-12-01T09:12:00+01:00", Valid: true, CoversAll: true}},
		}),
	}
	for name, s := range states {
		for _, size := range []fyne.Size{{Width: 1024, Height: 700}, {Width: 1280, Height: 800}, {Width: 1920, Height: 1080}} {
			w := opened(t, "", size.Width, size.Height)
			w.apply(func(desk.State) desk.State { return s })
			for _, c := range crowded(w) {
				t.Errorf("%s at %v by %v: %s", name, size.Width, size.Height, c)
			}
		}
	}
	for _, size := range []fyne.Size{{Width: 1024, Height: 700}, {Width: 1280, Height: 800}} {
		w := opened(t, demo(t), size.Width, size.Height)
		for range 6 {
			w.spineKey(fyne.KeyDown)
			for _, c := range crowded(w) {
				t.Errorf("demo at %v: %s", size.Width, c)
			}
		}
	}
}

func TestWrapKeepsEveryLetter(t *testing.T) {
	test.NewTempApp(t)
	for _, s := range []string{"", "one", "two words", "averyveryverylongwordwithoutanyspaceinit and more", "ends with 4.9 % of it", strings.Repeat("x", 300), "日本語のとても長い名前です"} {
		for _, width := range []float32{1, 20, 60, 200} {
			got := strings.Join(strings.Fields(strings.Join(fontBody.wrap(s, width, width), "")), "")
			if want := strings.Join(strings.Fields(s), ""); got != want {
				t.Errorf("%q at %v: got %q, want %q", s, width, got, want)
			}
		}
	}
	for _, l := range fontBody.wrap("some words that have room in lines of this width", 120, 120) {
		if w := fontBody.width(l); w > 120 {
			t.Errorf("line %q: got %v wide, want at most 120", l, w)
		}
	}
	if got := fontBody.fit("some words that have no room", 80); !strings.HasSuffix(got, "…") || fontBody.width(got) > 80 {
		t.Errorf("fit: got %q", got)
	}
}

// BenchmarkSpine walks one line down a spine of 2,000: it must stay fluent.
func BenchmarkSpine(b *testing.B) {
	w := opened(b, "", 1280, 800)
	rec := unruly(b, 2000, 6)
	w.apply(func(s desk.State) desk.State { return s.Opened("plan.toml", rec) })
	b.ReportAllocs()
	for i := 0; b.Loop(); i++ {
		w.apply(func(s desk.State) desk.State { return s.WithSelected(i % 2000) })
	}
}

// BenchmarkReadings shows a line of two lots of 10,000 readings.
func BenchmarkReadings(b *testing.B) {
	w := opened(b, "", 1280, 800)
	rec := unruly(b, 2, 10000)
	w.apply(func(s desk.State) desk.State { return s.Opened("plan.toml", rec) })
	b.ReportAllocs()
	for i := 0; b.Loop(); i++ {
		w.apply(func(s desk.State) desk.State { return s.WithSelected(i % 2) })
	}
}
