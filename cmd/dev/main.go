// Command dev is the developer's tool of Lotpair: `go run ./cmd/dev TASK`. It needs nothing but Go and git to start, builds
// and starts the programs and the tests as children, and prints every command that it runs. It never imports the desktop.
package main

import (
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"
)

// task is one thing the tool can do.
type task struct {
	name string
	help string
	run  func(d *dev, args []string) error
}

// tasks are listed in this order where none or an unknown one is named.
var tasks = []task{
	{"demo", "run the worked example to a signed workbook, verify it, and show it in the window", demo},
	{"check", "format, vet, staticcheck, imports, all tests and the real window; --outside: the checks by other programs", check},
	{"golden", "rewrite the golden files and show what changed; a person reads the difference", golden},
	{"refdata", "compute the reference values again with R, --slow also in many digits, and show what changed", refdata},
	{"cases", "write the worked example in testdata/demo again", cases},
	{"licences", "write the licences of what is built in, for the window", licences},
	{"screens", "render the window and the sheets of the worked example into out/screens", screens},
	{"bench", "time every workload beside its floor and its peers (gonum, R, SciPy): bench [PART OF A NAME]; bench window: the real window", bench},
	{"accuracy", "print the worst error of every function and method by region, beside gonum, R and SciPy; fail where a claim fails", accuracy},
	{"fuzz", "run the fuzz targets: fuzz [--minutes N] [PART OF A NAME]", fuzz},
	{"package", "build the programs of a release into out/release: package VERSION", release},
}

func main() {
	os.Exit(start(os.Args[1:], os.Stdout, os.Stderr))
}

// start runs the task that args name and gives the exit code: 0 done, 1 the task failed, 2 no such task.
func start(args []string, stdout, stderr io.Writer) int {
	if len(args) == 0 || args[0] == "help" || args[0] == "--help" || args[0] == "-h" {
		listTasks(stdout)
		if len(args) == 0 {
			return 2
		}
		return 0
	}
	for _, t := range tasks {
		if t.name != args[0] {
			continue
		}
		root, err := moduleRoot()
		if err == nil {
			err = t.run(&dev{root: root, stdout: stdout, stderr: stderr}, args[1:])
		}
		var usage usageError
		switch {
		case errors.As(err, &usage):
			fmt.Fprintf(stderr, "dev %s: %v\n", t.name, err)
			return 2
		case err != nil:
			fmt.Fprintf(stderr, "dev %s: %v\n", t.name, err)
			return 1
		}
		return 0
	}
	fmt.Fprintf(stderr, "dev: found task %q, want one of these:\n", args[0])
	listTasks(stderr)
	return 2
}

func listTasks(w io.Writer) {
	fmt.Fprintln(w, "go run ./cmd/dev TASK")
	for _, t := range tasks {
		fmt.Fprintf(w, "  %-9s %s\n", t.name, t.help)
	}
}

// usageError is an argument that a task does not take.
type usageError string

func (e usageError) Error() string { return string(e) }

// noArguments refuses arguments, for the tasks that take none.
func noArguments(args []string) error {
	if len(args) > 0 {
		return usageError(fmt.Sprintf("found %q, want no arguments", strings.Join(args, " ")))
	}
	return nil
}

// moduleRoot is the folder of go.mod, from the working folder upwards.
func moduleRoot() (string, error) {
	folder, err := os.Getwd()
	if err != nil {
		return "", err
	}
	for {
		if _, err := os.Stat(filepath.Join(folder, "go.mod")); err == nil {
			return folder, nil
		}
		parent := filepath.Dir(folder)
		if parent == folder {
			return "", errors.New("go.mod: found none from here upwards, want the folder of the project; change into it")
		}
		folder = parent
	}
}
