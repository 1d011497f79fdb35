package app

import (
	"errors"
	"flag"
	"fmt"
	"image/png"
	"os"
	"path/filepath"
	"runtime/debug"
	"strings"

	"lotpair/app/desk"
	_ "lotpair/app/language" // the toolkit finds a language
)

// Command runs the desktop program: it opens the window through open, or renders it to a file where --picture asks for that.
// The error says what is wrong with the arguments or the files.
func Command(args []string, version string, open func(Options) ([]string, error)) error {
	f := flag.NewFlagSet("lotpair", flag.ContinueOnError)
	picture := f.String("picture", "", "render the window to `OUT.png` instead of opening it")
	size := f.String("size", "1280x800", "with --picture: the window's `size` in points")
	shot := Shot{}
	f.Float64Var(&shot.Scale, "scale", 1, "with --picture: pixels a point")
	f.BoolVar(&shot.Dark, "dark", false, "the dark colours")
	decimal := f.String("decimal", "", "the decimal `mark` of numbers in the window: point or comma; the system's where it is left out, with --picture a point")
	acts := f.String("acts", "", "when the window is closed, write what was done in it to `FILE`, an act a line")
	f.StringVar(&shot.Register, "register", "", "keep the records in `DIR` instead of the user's own folder; with --picture: show those of DIR")
	measure := f.String("measure", "", "use the window as `HOW` says and close it, for the bench: still, walk, resize, spine or readings")
	controls := f.String("controls", "", "keep a `FILE` that says where every text stands, for tests that use the window")
	f.Usage = func() {
		fmt.Fprintln(f.Output(), "lotpair [FILE]\nOpens the window, with a plan (.toml) or a record (.xlsx). Example: lotpair testdata/demo/plan.toml")
		f.PrintDefaults()
	}
	if err := f.Parse(args); errors.Is(err, flag.ErrHelp) {
		return nil
	} else if err != nil {
		return err
	}
	if f.NArg() > 1 {
		return fmt.Errorf("found %d files, want at most one", f.NArg())
	}
	mark := desk.Point
	if *decimal != "" {
		var err error
		if mark, err = desk.ParseDecimal(*decimal); err != nil {
			return fmt.Errorf("--decimal: %w", err)
		}
	} else if *picture == "" {
		mark = systemDecimal()
	}
	shot.Decimal = mark
	build := Build{Version: version, Revision: revision()}
	if *picture == "" {
		dir := shot.Register
		if dir == "" {
			own, err := os.UserConfigDir()
			if err != nil {
				return fmt.Errorf("register: %w; name a folder with --register", err)
			}
			dir = filepath.Join(own, "lotpair")
		}
		done, err := open(Options{File: f.Arg(0), Register: dir, Build: build, Dark: shot.Dark, Measure: Measurement{Name: *measure, Out: os.Stdout}, Controls: *controls, Decimal: mark})
		if err == nil && *acts != "" {
			err = os.WriteFile(*acts, []byte(strings.Join(done, "\n")+"\n"), 0o600)
		}
		return err
	}
	if _, err := fmt.Sscanf(*size, "%dx%d", &shot.Width, &shot.Height); err != nil {
		return fmt.Errorf("--size: found %q, want one such as 1280x800", *size)
	}
	shot.File = f.Arg(0)
	return render(shot, build, *picture)
}

// render writes a picture of the window.
func render(shot Shot, build Build, to string) (err error) {
	img, err := Picture(shot, build)
	if err != nil {
		return err
	}
	out, err := os.Create(to)
	if err != nil {
		return err
	}
	defer func() {
		if closing := out.Close(); err == nil {
			err = closing
		}
	}()
	return png.Encode(out, img)
}

// revision is the commit this program was built from, where the build knows it.
func revision() string {
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return ""
	}
	for _, s := range info.Settings {
		if s.Key == "vcs.revision" {
			return s.Value
		}
	}
	return ""
}
