package app

import (
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"

	"lotpair/app/desk"
	"lotpair/qa"
)

// decimalPoint is a point between digits: in a window with commas none is left but in a name and in quotation marks.
var decimalPoint = regexp.MustCompile(`[^\s“]*[0-9]\.[0-9][^\s”]*(?:\s|$)`)

// points are the decimal points among all that the window shows, also in its picture.
func points(w *window) []string {
	var out []string
	for _, p := range texts(w.win.Content(), fyne.Position{}, placed{}) {
		out = append(out, decimalPoint.FindAllString(p.text, -1)...)
	}
	f := w.picture.Figure()
	out = append(out, decimalPoint.FindAllString(f.Title, -1)...)
	for _, m := range f.Marks {
		out = append(out, decimalPoint.FindAllString(m.Text, -1)...)
	}
	return out
}

// TestAWindowWithCommas looks at every characteristic in every way: each number has a comma, each name what it had.
func TestAWindowWithCommas(t *testing.T) {
	w := opened(t, demo(t), 1280, 800)
	w.decimal = desk.Comma
	for i := range w.state.Record.Result.Characteristics {
		for l := range w.act.looks {
			w.apply(func(s desk.State) desk.State { return s.WithSelected(i).WithLook(desk.Look(l)) })
			if got := points(w); len(got) > 0 {
				t.Errorf("characteristic %d, %v: got %q", i, desk.Look(l), got)
			}
		}
	}
	w.apply(func(s desk.State) desk.State { return s.WithSelected(2).WithLook(desk.Spread) })
	for name, o := range map[string]fyne.CanvasObject{"spine-comma": w.spine, "bench-comma": w.bench} {
		text, file := test.RenderObjectToMarkup(o), filepath.Join("testdata", "markup", name+".xml")
		if *update {
			if err := os.WriteFile(file, []byte(text), 0o644); err != nil {
				t.Fatal(err)
			}
		}
		want, err := os.ReadFile(file)
		if err != nil || strings.ReplaceAll(string(want), "\r\n", "\n") != text {
			t.Errorf("%s: differs from %s, or %v; go test ./app -run %s -update writes it anew", name, file, err, t.Name())
		}
	}
	shotOf(t, "decimal-comma", w.win.Canvas().Capture())
	w.copyBench()
	if got := w.app.Clipboard().Content(); decimalPoint.MatchString(got) || !strings.Contains(got, "0,0619 mm") {
		t.Errorf("copied: got %s", got)
	}
	w.copyTable()
	if got := w.app.Clipboard().Content(); decimalPoint.MatchString(got) || !strings.Contains(got, "±0,02 mm") {
		t.Errorf("copied: got %s", got)
	}
	to := filepath.Join(t.TempDir(), "wall.svg")
	w.savePicture(to)
	noProblem(t, w)
	if svg, err := os.ReadFile(to); err != nil || !strings.Contains(string(svg), ">mean 4,0040<") {
		t.Errorf("picture: got %.80s, %v, want a mean with a comma", svg, err)
	}
	if got := qa.Asked(w.state.Record.Result); !strings.Contains(got, "0.05") {
		t.Errorf("record: got %s, want its own point", got)
	}
}

// TestNamesKeepTheirPoint opens a plan whose lots and characteristics are called what looks like a number.
func TestNamesKeepTheirPoint(t *testing.T) {
	file := demo(t)
	data, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	text := strings.Replace(string(data), `title = "Hub shell HS-40: second foundry"`, `title = "Shell 4.0: second foundry"`, 1)
	if text == string(data) {
		t.Fatal("the worked example has another title")
	}
	if err := os.WriteFile(file, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	w := opened(t, file, 1280, 800)
	w.decimal = desk.Comma
	rec := w.state.Record
	rec.Result.Characteristics = slices.Clone(rec.Result.Characteristics)
	rec.Readings.Characteristics = slices.Clone(rec.Readings.Characteristics)
	rec.Result.Characteristics[2].Name, rec.Readings.Characteristics[2].Name = "Wall 4.0", "Wall 4.0"
	w.apply(func(s desk.State) desk.State { return s.Opened(file, rec).WithSelected(2) })
	got := strings.Join(points(w), " ")
	if strings.Trim(strings.ReplaceAll(got, "4.0", ""), " :,") != "" || strings.Count(got, "4.0") < 3 {
		t.Errorf("got %q, want the names alone", got)
	}
}

// TestTypedWithCommas writes a criterion on a system with a decimal comma and on one with a point.
func TestTypedWithCommas(t *testing.T) {
	for _, x := range []struct {
		mark                          desk.Decimal
		own, other, asked, want, sure string
	}{
		{desk.Comma, "0,05", "0.2", "1.234", "found “1.234”, want 1,234 or 1234; type which", "1,234"},
		{desk.Point, "0.05", "0,2", "1,234", "found “1,234”, want 1.234 or 1234; type which", "1.234"},
	} {
		w := openedWith(t, inRegister(t, t.TempDir()), "", 1280, 800)
		w.decimal = x.mark
		w.beginComparison()
		w.open(sheetFile(t), readFile)
		w.takeHeadings()
		w.chooseKind(desk.InTheUnit)
		margin := func() float64 { return *w.state.Record.Plan.Criterion.Margin.Absolute }
		typing(w, "margin", x.own)
		if margin() != 0.05 || w.draft["margin"].Text != x.own {
			t.Errorf("own mark: got %v, shown %q", margin(), w.draft["margin"].Text)
		}
		if a := w.state.Record.Trail[len(w.state.Record.Trail)-1]; !strings.Contains(a.What+a.On+a.Why, "0.05") {
			t.Errorf("trail: got %+v, want the record's point", a)
		}
		typing(w, "margin", x.other)
		if want := strings.NewReplacer(",", ".", ".", ",").Replace(x.other); margin() != 0.2 || w.draft["margin"].Text != want {
			t.Errorf("other mark: got %v, shown %q, want %q", margin(), w.draft["margin"].Text, want)
		}
		l := w.draft["margin"].line
		l.FocusGained()
		l.SetText(x.asked)
		l.OnSubmitted(x.asked)
		if !strings.Contains(l.fault, x.want) || margin() != 0.2 || l.Text != x.asked {
			t.Errorf("asked: got %q, margin %v, line %q", l.fault, margin(), l.Text)
		}
		said := ""
		for _, p := range texts(w.win.Content(), fyne.Position{}, placed{}) {
			if strings.Contains(p.text, "type which") {
				said = p.text
			}
		}
		if said != "margin: "+x.want {
			t.Errorf("beside the line: got %q, want all of %q", said, x.want)
		}
		l.FocusLost()
		if !strings.Contains(w.state.Said, "nothing was changed") || margin() != 0.2 {
			t.Errorf("left: got %q, margin %v", w.state.Said, margin())
		}
		typing(w, "margin", x.sure)
		if margin() != 1.234 {
			t.Errorf("typed as asked: got %v, want 1.234", margin())
		}
		typing(w, "standard deviation", x.own)
		if got := points(w); x.mark == desk.Comma && len(got) > 0 {
			t.Errorf("while the criterion is written: got %q", got)
		}
		w.askTerms() // what is not touched stays, in either mark
		noProblem(t, w)
	}
}
