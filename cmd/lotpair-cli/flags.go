package main

import (
	"bufio"
	"errors"
	"flag"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"

	"golang.org/x/term"
)

// flags is one call's flag set with its help.
type flags struct {
	*flag.FlagSet
	p       *program
	usage   string
	example string
	about   string
}

func (p *program) flags(usage, about, example string) *flags {
	f := &flags{FlagSet: flag.NewFlagSet("", flag.ContinueOnError), p: p, usage: usage, about: about, example: example}
	f.SetOutput(io.Discard)
	return f
}

// errHelp says that help was asked for and given.
var errHelp = errors.New("help")

// parse takes flags and the want positional arguments in any order. It prints what is wrong, or the help.
func (f *flags) parse(args []string, want ...string) ([]string, int, error) {
	var positional []string
	for {
		err := f.Parse(args)
		if errors.Is(err, flag.ErrHelp) {
			f.help(f.p.out)
			return nil, exitDone, errHelp
		}
		if err != nil {
			return nil, f.p.usageError(f, f.wrong(err)), err
		}
		rest := f.Args()
		if len(rest) == 0 {
			break
		}
		positional = append(positional, rest[0])
		args = rest[1:]
	}
	if len(positional) != len(want) {
		names := strings.Join(want, " ")
		if len(want) == 0 {
			names = "none"
		}
		err := fmt.Errorf("found %d arguments %q, want %s", len(positional), positional, names)
		return nil, f.p.usageError(f, err.Error()), err
	}
	return positional, exitDone, nil
}

// wrong says an error of the flag package as the program's other errors are said.
func (f *flags) wrong(err error) string {
	text := err.Error()
	if name, ok := strings.CutPrefix(text, "flag provided but not defined: -"); ok {
		return fmt.Sprintf("found --%s, want a flag of this call; see --help", name)
	}
	if name, ok := strings.CutPrefix(text, "flag needs an argument: -"); ok {
		return fmt.Sprintf("found --%s without a value, want one after it", name)
	}
	return "found " + strings.ReplaceAll(text, "flag -", "flag --")
}

func (p *program) usageError(f *flags, text string) int {
	fmt.Fprintf(p.err, "lotpair-cli: %s; usage: lotpair-cli %s\n", text, f.usage)
	return exitUsage
}

func (f *flags) help(w io.Writer) {
	fmt.Fprintf(w, "lotpair-cli %s\n\n%s\n\n", f.usage, f.about)
	f.VisitAll(func(x *flag.Flag) {
		name, usage := flag.UnquoteUsage(x)
		fmt.Fprintf(w, "  --%-28s %s\n", strings.TrimSpace(x.Name+" "+name), usage)
	})
	fmt.Fprintf(w, "\nExample:\n  %s\n", f.example)
}

// file is a path as the program sees it.
func (p *program) file(path string) string {
	if filepath.IsAbs(path) {
		return path
	}
	return filepath.Join(p.workDir, path)
}

// read reads a file and says what is wrong in one line.
func (p *program) read(path string) ([]byte, int) {
	b, err := os.ReadFile(p.file(path))
	if err == nil {
		return b, exitDone
	}
	var pe *os.PathError
	if errors.As(err, &pe) {
		err = pe.Err
	}
	fmt.Fprintf(p.err, "%s: found %v, want a file that can be read; check the name\n", path, err)
	return nil, exitFile
}

// say prints an error, a line a fact.
func (p *program) say(err error) { fmt.Fprintln(p.err, err.Error()) }

// passphrase reads the first line of the file, or asks on the terminal.
func (p *program) passphrase(file, prompt string) (string, int) {
	if file != "" {
		b, code := p.read(file)
		if code != exitDone {
			return "", code
		}
		line, _, _ := strings.Cut(string(b), "\n")
		return strings.TrimSuffix(line, "\r"), exitDone
	}
	s, err := p.terminal(prompt)
	if err != nil {
		fmt.Fprintf(p.err, "passphrase: %v; name a file with --passphrase-file\n", err)
		return "", exitUsage
	}
	return s, exitDone
}

// readPassphrase asks on the terminal without showing what is typed.
func readPassphrase(prompt string) (string, error) {
	tty, err := os.OpenFile("/dev/tty", os.O_RDWR, 0)
	if err != nil {
		if !term.IsTerminal(int(os.Stdin.Fd())) {
			return "", errors.New("found no terminal to ask on, want one")
		}
		tty = os.Stdin
	} else {
		defer func() { _ = tty.Close() }()
	}
	if term.IsTerminal(int(tty.Fd())) {
		fmt.Fprint(os.Stderr, prompt)
		b, err := term.ReadPassword(int(tty.Fd()))
		fmt.Fprintln(os.Stderr)
		return string(b), err
	}
	line, err := bufio.NewReader(tty).ReadString('\n')
	return strings.TrimRight(line, "\r\n"), err
}
