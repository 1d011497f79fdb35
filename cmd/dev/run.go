package main

import (
	"fmt"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
)

// dev runs commands in the project's folder and says what it runs.
type dev struct {
	root           string
	stdout, stderr io.Writer
}

// say prints one line of the tool's own.
func (d *dev) say(format string, args ...any) {
	fmt.Fprintf(d.stdout, format+"\n", args...)
}

// path is a place in the project.
func (d *dev) path(parts ...string) string {
	return filepath.Join(append([]string{d.root}, parts...)...)
}

// command prepares a command in the project's folder. env holds what is set besides the environment, "NAME=value".
func (d *dev) command(env []string, name string, args ...string) *exec.Cmd {
	c := exec.Command(name, args...)
	c.Dir = d.root
	c.Env = append(os.Environ(), env...)
	c.Stdout, c.Stderr = d.stdout, d.stderr
	return c
}

// run prints a command and runs it with its output shown.
func (d *dev) run(env []string, name string, args ...string) error {
	d.show(env, name, args...)
	if err := d.command(env, name, args...).Run(); err != nil {
		return fmt.Errorf("%s: %w", strings.Join(append([]string{name}, args...), " "), err)
	}
	return nil
}

// output prints a command, runs it and returns what it printed; its messages are shown.
func (d *dev) output(env []string, name string, args ...string) (string, error) {
	d.show(env, name, args...)
	c := d.command(env, name, args...)
	c.Stdout = nil
	out, err := c.Output()
	if err != nil {
		return string(out), fmt.Errorf("%s: %w", strings.Join(append([]string{name}, args...), " "), err)
	}
	return string(out), nil
}

// show prints a command as one would type it.
func (d *dev) show(env []string, name string, args ...string) {
	words := append(append(append([]string{}, env...), name), args...)
	for i, w := range words {
		if w == "" || strings.ContainsAny(w, " \t'\"$*;&|<>()") {
			words[i] = "'" + strings.ReplaceAll(w, "'", `'\''`) + "'"
		}
	}
	d.say("$ %s", strings.Join(words, " "))
}

// pure is the environment of everything but the desktop; desktop that of the program with a window.
var (
	pure    = []string{"CGO_ENABLED=0"}
	desktop = []string{"CGO_ENABLED=1"}
)

// desktopTags: Fyne asks programs written for its threading rules to say so with this tag.
const desktopTags = "migrated_fynedo"

// program is where a built program goes.
func (d *dev) program(name string) string {
	if onWindows {
		name += ".exe"
	}
	return filepath.Join("out", "bin", name)
}

// build builds a program into out/bin and returns its place.
func (d *dev) build(env []string, as, pkg string, flags ...string) (string, error) {
	to := d.program(as)
	args := append([]string{"build"}, flags...)
	return to, d.run(env, "go", append(args, "-o", to, pkg)...)
}

// present says whether a program can be found.
func present(name string) bool {
	_, err := exec.LookPath(name)
	return err == nil
}

func exists(path string) bool {
	_, err := os.Stat(path)
	return err == nil
}
