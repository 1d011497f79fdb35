package app

import (
	"bytes"
	"crypto/rand"
	"flag"
	"image"
	"image/png"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"
	"fyne.io/fyne/v2/theme"

	"lotpair/app/desk"
	"lotpair/app/register"
	"lotpair/exports"
	"lotpair/exports/identity"
	"lotpair/qa"
)

var pictures = flag.String("pictures", "", "keep the pictures of the window in `folder`, for looking at")

var testBuild = Build{Version: "test"}

// opened is a window of the software driver with a file open, which keeps nothing.
func opened(t testing.TB, file string, width, height float32) *window {
	t.Helper()
	return openedWith(t, nil, file, width, height)
}

// openedWith is the same with a register.
func openedWith(t testing.TB, r *register.Register, file string, width, height float32) *window {
	t.Helper()
	light := theme.VariantLight
	w := newWindow(test.NewTempApp(t), testBuild, look{forced: &light}, r)
	w.jobs.atOnce = true
	w.win.Resize(fyne.NewSize(width, height))
	if file != "" {
		w.open(file, readFile)
	}
	t.Cleanup(w.win.Close)
	return w
}

// demo is a copy of the worked example in a folder of its own.
func demo(t testing.TB) string {
	t.Helper()
	dir := t.TempDir()
	for _, name := range []string{"plan.toml", "hub-shell.xlsx"} {
		data, err := os.ReadFile(filepath.Join("..", "testdata", "demo", name))
		if err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(filepath.Join(dir, name), data, 0o600); err != nil {
			t.Fatal(err)
		}
	}
	return filepath.Join(dir, "plan.toml")
}

// key is an identity file and its passphrase.
func key(t testing.TB) (file, passphrase string) {
	t.Helper()
	id, err := identity.New("Ada Example", "quality engineer", "Kettlewick Cycle Parts (invented)", time.Now(), rand.Reader)
	if err != nil {
		t.Fatal(err)
	}
	data, err := id.Encode("not a secret", rand.Reader)
	if err != nil {
		t.Fatal(err)
	}
	file = filepath.Join(t.TempDir(), "ada.p12")
	if err := os.WriteFile(file, data, 0o600); err != nil {
		t.Fatal(err)
	}
	return file, "not a secret"
}

func noProblem(t *testing.T, w *window) {
	t.Helper()
	if p := w.state.Problem; p.Text != "" {
		t.Fatalf("%s: %s", p.Place, p.Text)
	}
}

func TestSampleIsTheWorkedExample(t *testing.T) {
	for _, name := range []string{"plan.toml", "hub-shell.xlsx"} {
		want, err := os.ReadFile(filepath.Join("..", "testdata", "demo", name))
		if err != nil {
			t.Fatal(err)
		}
		got, err := sample.ReadFile("example/" + name)
		if err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(got, want) {
			t.Errorf("app/example/%s differs from testdata/demo/%[1]s; copy it", name)
		}
	}
}

func TestOpenCompareExportSignAndOpenAgain(t *testing.T) {
	plan := demo(t)
	w := opened(t, plan, 1280, 800)
	noProblem(t, w)
	if got, want := w.view.spine.Overall, "Overall: not equivalent."; got != want {
		t.Errorf("overall: got %q, want %q", got, want)
	}
	if got, want := w.win.Title(), "Hub shell HS-40: second foundry – Lotpair"; got != want {
		t.Errorf("title: got %q, want %q", got, want)
	}
	out := filepath.Join(filepath.Dir(plan), "record.xlsx")
	w.export(out)
	noProblem(t, w)
	// The same name again is refused, and what is there stays.
	before, err := os.ReadFile(out)
	if err != nil {
		t.Fatal(err)
	}
	w.export(out)
	if w.state.Problem.Text == "" {
		t.Error("exporting over a file: got no problem, want one")
	}
	if after, err := os.ReadFile(out); err != nil || !bytes.Equal(before, after) {
		t.Errorf("exporting over a file: it changed (%v)", err)
	}
	w.apply(desk.State.Read)

	file, passphrase := key(t)
	w.sign(signing{identity: file, passphrase: "wrong", meaning: "prepared", to: out})
	if w.state.Problem.Text == "" {
		t.Error("a wrong passphrase: got no problem, want one")
	}
	if w.view.header.Title != "Hub shell HS-40: second foundry" || len(w.view.spine.Rows) != 6 {
		t.Error("a problem: the desk changed, want it as it was")
	}
	w.apply(desk.State.Read)
	w.sign(signing{identity: file, passphrase: passphrase, meaning: "prepared", reason: "first casting", to: out})
	noProblem(t, w)
	if !w.state.Closed() {
		t.Error("signed: got an open record, want a closed one")
	}
	if got, want := w.view.header.Right, "intact; who signed is not established"; got != want {
		t.Errorf("header: got %q, want %q", got, want)
	}
	if w.view.foot.Sign != "" || w.view.foot.Export != "" {
		t.Errorf("foot: got %+v, want nothing left to sign or export", w.view.foot)
	}

	again := opened(t, out, 1280, 800)
	noProblem(t, again)
	if got, want := again.view.spine.Overall, "Overall: not equivalent."; got != want {
		t.Errorf("opened again: got %q, want %q", got, want)
	}
	if got := again.view.foot.Signatures; got != "1 signature" {
		t.Errorf("opened again: got %q, want 1 signature", got)
	}
	again.showSignatures()

	// One byte changed is said in the head, and nothing can be signed.
	data, err := os.ReadFile(out)
	if err != nil {
		t.Fatal(err)
	}
	if v := exports.Verify(data, nil); v.State != exports.Intact {
		t.Fatalf("state: got %v, want intact", v.State)
	}
	for _, at := range []int{len(data) / 3, len(data) / 2, len(data) - 30} {
		broken := append([]byte{}, data...)
		broken[at] ^= 0x20
		if err := os.WriteFile(out, broken, 0o600); err != nil {
			t.Fatal(err)
		}
		x := opened(t, out, 1280, 800)
		if x.state.Problem.Text == "" && !x.view.header.Alarm {
			t.Errorf("byte %d changed: got %q, want an alarm", at, x.view.header.Right)
		}
		if x.view.foot.Sign != "" {
			t.Errorf("byte %d changed: got %q, want nothing to sign", at, x.view.foot.Sign)
		}
	}
}

func TestSignFirstWritesTheWorkbook(t *testing.T) {
	plan := demo(t)
	w := opened(t, plan, 1280, 800)
	file, passphrase := key(t)
	out := filepath.Join(filepath.Dir(plan), "signed.xlsx")
	w.sign(signing{identity: file, passphrase: passphrase, meaning: "prepared", to: out})
	noProblem(t, w)
	w2 := opened(t, plan, 1280, 800)
	w2.sign(signing{identity: file, passphrase: passphrase, meaning: "prepared", to: out})
	if !strings.Contains(w2.state.Problem.Text, "existing file") {
		t.Errorf("signing to a name that is taken: got %q, want a refusal", w2.state.Problem.Text)
	}
}

func TestLeaveOutAndCompareAgain(t *testing.T) {
	w := opened(t, demo(t), 1280, 800)
	at := w.view.pages[qa.Candidate].Readings.At(3).Source
	w.change("Leaving out", func(s desk.State) (desk.State, error) { return s.LeftOut(at, "burr, NCR-90", "tester", now()) })
	noProblem(t, w)
	if w.view.foot.Compare == "" || w.view.foot.Export != "" {
		t.Errorf("foot: got %+v, want Compare alone", w.view.foot)
	}
	w.win.Canvas().Capture()
	w.compare()
	noProblem(t, w)
	if r := w.view.pages[qa.Candidate].Readings.At(0); !r.LeftOut || r.Source != at {
		t.Errorf("first reading: got %+v, want the one left out", r)
	}
	for _, side := range []qa.Side{qa.Reference, qa.Candidate} {
		for i := range 2 {
			w.onReading(side, i)
			w.win.Canvas().Capture()
			w.typed(&fyne.KeyEvent{Name: fyne.KeyEscape})
			if w.dialog != nil || w.win.Canvas().Overlays().Top() != nil {
				t.Errorf("%s reading %d: escape did not leave the dialog", side, i)
			}
		}
	}
}

func TestKeysWalkTheSpine(t *testing.T) {
	w := opened(t, demo(t), 1280, 800)
	start := w.state.Selected
	w.win.Canvas().OnTypedKey()(&fyne.KeyEvent{Name: fyne.KeyDown})
	if w.state.Selected != start+1 {
		t.Errorf("down: got line %d, want %d", w.state.Selected, start+1)
	}
	w.spineRows.content.TypedKey(&fyne.KeyEvent{Name: fyne.KeyHome})
	if w.state.Selected != 0 {
		t.Errorf("home: got line %d, want 0", w.state.Selected)
	}
	test.TapAt(w.spineRows.content, fyne.NewPos(30, 2*rowHeight+5))
	if w.state.Selected != 2 {
		t.Errorf("tap on the third line: got line %d, want 2", w.state.Selected)
	}
	w.leftRows.content.FocusGained()
	w.leftRows.content.TypedKey(&fyne.KeyEvent{Name: fyne.KeyEnd})
	if got, want := w.cursor[qa.Reference], w.view.pages[qa.Reference].Readings.Len()-1; got != want {
		t.Errorf("end on the left page: got reading %d, want %d", got, want)
	}
	w.act.order.TypedKey(&fyne.KeyEvent{Name: fyne.KeySpace})
	if w.state.Sorted != desk.ByVerdict {
		t.Errorf("space on the order: got %v, want verdict", w.state.Sorted)
	}
}

// TestTabReachesEveryControl goes round with the Tab key.
func TestTabReachesEveryControl(t *testing.T) {
	w := opened(t, demo(t), 1280, 800)
	want := []fyne.Focusable{w.leftRows.content, w.act.order, w.spineRows.content, w.rightRows.content, w.act.picture, w.sentences.content, w.act.export, w.act.sign}
	seen := map[fyne.Focusable]bool{}
	for range 20 {
		w.win.Canvas().FocusNext()
		seen[w.win.Canvas().Focused()] = true
	}
	for i, f := range want {
		if !seen[f] {
			t.Errorf("control %d of the order is not reached", i)
		}
	}
}

func TestErrorsStandWhereTheyHappened(t *testing.T) {
	plan := demo(t)
	for name, text := range map[string]string{
		"broken.toml":  "format = \"lotpair.plan/1\"\nmargn = 3\n",
		"empty.xlsx":   "",
		"faulty.toml":  "format = \"lotpair.plan/2\"\n",
		"missing.toml": "",
	} {
		w := opened(t, plan, 1024, 700)
		file := filepath.Join(t.TempDir(), name)
		if name != "missing.toml" {
			if err := os.WriteFile(file, []byte(text), 0o600); err != nil {
				t.Fatal(err)
			}
		}
		w.open(file, readFile)
		if w.state.Problem.Text == "" {
			t.Errorf("%s: got no problem, want one", name)
		}
		if len(w.view.spine.Rows) != 6 {
			t.Errorf("%s: the comparison on the desk is gone", name)
		}
		if w.bannerHeight(1024) == 0 || w.banner.Hidden {
			t.Errorf("%s: the problem is not shown", name)
		}
		w.win.Canvas().Capture()
	}
}

func TestAFaultOfOursClosesNothing(t *testing.T) {
	w := opened(t, demo(t), 1280, 800)
	w.work("Testing", func(qa.Watch) change { panic("deliberate") })
	if !strings.Contains(w.state.Problem.Text, "deliberate") || len(w.view.spine.Rows) != 6 || w.state.Job.Name != "" {
		t.Errorf("problem: got %+v", w.state.Problem)
	}
}

func TestWhatACancelledJobBringsIsNotTaken(t *testing.T) {
	w := opened(t, demo(t), 1280, 800)
	before := w.state.Path
	w.work("Testing", func(qa.Watch) change {
		w.cancel()
		return func(s desk.State) desk.State { s.Path = "taken"; return s }
	})
	if w.state.Path != before || w.state.Job.Name != "" {
		t.Errorf("after cancel: got path %q and job %q", w.state.Path, w.state.Job.Name)
	}
}

func TestThePictureIsSaved(t *testing.T) {
	w := opened(t, demo(t), 1280, 800)
	dir := t.TempDir()
	for name, begins := range map[string]string{"a.svg": "<svg", "a.PNG": "\x89PNG"} {
		to := filepath.Join(dir, name)
		w.savePicture(to)
		noProblem(t, w)
		data, err := os.ReadFile(to)
		if err != nil || !strings.HasPrefix(string(data), begins) {
			t.Errorf("%s: got %.8q, %v, want it to begin with %q", name, data, err, begins)
		}
	}
	w.savePicture(filepath.Join(dir, "a.svg"))
	if w.state.Problem.Text == "" {
		t.Error("over a file: got no problem, want one")
	}
	w.savePicture(filepath.Join(dir, "a.gif"))
	if !strings.Contains(w.state.Problem.Text, "want .svg or .png") {
		t.Errorf("another ending: got %q", w.state.Problem.Text)
	}
	w.apply(desk.State.Read)
	w.askPicture()
	w.win.Canvas().Capture()
	w.leaveDialog()
}

// shotOf keeps a picture where -pictures asks for that.
func shotOf(t testing.TB, name string, img image.Image) {
	t.Helper()
	if *pictures == "" {
		return
	}
	var b bytes.Buffer
	if err := png.Encode(&b, img); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(filepath.Join(*pictures, name+".png"), b.Bytes(), 0o600); err != nil {
		t.Fatal(err)
	}
}

// TestPictures renders the window in its states; with -pictures they are kept.
func TestPictures(t *testing.T) {
	signed := filepath.Join(t.TempDir(), "signed.xlsx")
	w := opened(t, demo(t), 1280, 800)
	file, passphrase := key(t)
	w.sign(signing{identity: file, passphrase: passphrase, meaning: "prepared", to: signed})
	noProblem(t, w)
	for name, s := range map[string]Shot{
		"start":  {Width: 1280, Height: 800, Scale: 1},
		"window": {File: "example", Width: 1280, Height: 800, Scale: 1},
		"small":  {File: signed, Width: 1024, Height: 700, Scale: 1},
		"double": {File: "example", Width: 1280, Height: 800, Scale: 2},
		"dark":   {File: "example", Width: 1280, Height: 800, Scale: 1, Dark: true},
		"large":  {File: signed, Width: 1920, Height: 1080, Scale: 1},
	} {
		img, err := Picture(s, testBuild)
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		if got, want := img.Bounds().Dx(), int(float64(s.Width)*s.Scale); got != want {
			t.Errorf("%s: got %d pixels, want %d", name, got, want)
		}
		shotOf(t, name, img)
	}
	for _, s := range []Shot{{Width: 10, Height: 10, Scale: 1}, {Width: 1280, Height: 800}, {File: "no such file.toml", Width: 1280, Height: 800, Scale: 1}} {
		if _, err := Picture(s, testBuild); err == nil {
			t.Errorf("%+v: got a picture, want an error", s)
		}
	}
}
