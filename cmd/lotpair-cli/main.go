// Command lotpair-cli runs Lotpair without a window: it compares two lots by a plan, shows how a file would be read, makes
// identities, signs records and verifies them. The result goes to standard output, messages to standard error.
package main

import (
	"fmt"
	"io"
	"os"
	"runtime"
	"runtime/debug"
	"strings"
	"sync"
	"time"

	"lotpair/qa"
)

// version and revision are stamped at release by the linker; a build without them says so.
var (
	version  = "0.1.0-dev"
	revision = ""
)

// The exit codes (contract: console).
const (
	exitDone  = 0
	exitCheck = 1  // the check failed
	exitUsage = 2  // usage or plan
	exitFile  = 3  // a file that cannot be opened or understood, a wrong passphrase, an unusable identity
	exitLost  = 4  // nothing written because something would be lost
	exitFault = 70 // a fault of ours

	exitStopped = 130 // stopped by Ctrl-C, as shells have it (128 and the signal's number); nothing was written
)

func main() {
	p := program{
		in: os.Stdin, out: os.Stdout, err: os.Stderr,
		now: time.Now, workDir: ".", terminal: readPassphrase,
	}
	p.watch = p.interrupted()
	os.Exit(p.run(os.Args[1:]))
}

// program is one run of the console program; what it takes from the world stands here, so that tests can give their own.
type program struct {
	in       io.Reader
	out, err io.Writer
	now      func() time.Time
	workDir  string
	terminal func(prompt string) (string, error)
	watch    qa.Watch   // stopped by Ctrl-C
	writing  sync.Mutex // held while a file is put in its place
}

// call is one thing the program can do.
type call struct {
	name, args, does string
	run              func(p *program, args []string) int
}

func calls() []call {
	return []call{
		{"compare", "PLAN.toml", "runs the plan: reads both lots, says the verdict, writes the workbook", (*program).compare},
		{"seal", "PLAN.toml", "fixes the criterion of a plan: a workbook with its digest and time", (*program).seal},
		{"inspect", "FILE", "shows how a file would be read", (*program).inspect},
		{"size", "--sd S …", "says how many readings a study needs, or the power that it has", (*program).size},
		{"identity", "new|show", "makes or shows a signing identity", (*program).identity},
		{"sign", "RECORD.xlsx", "adds a signature to a record", (*program).sign},
		{"qualify", "", "runs the published checks on this machine", (*program).qualify},
		{"verify", "RECORD.xlsx", "checks every signature and part of a record and computes it again", (*program).verify},
	}
}

// run does one call and gives its exit code. A fault of ours is one line, never a stack of calls.
func (p *program) run(args []string) (code int) {
	defer func() {
		if fault := recover(); fault != nil {
			fmt.Fprintf(p.err, "lotpair-cli %s: internal fault: %v; nothing was decided; report this line with the command\n", version, fault)
			code = exitFault
		}
	}()
	if len(args) == 0 || args[0] == "--help" || args[0] == "-h" || args[0] == "help" {
		p.usage(p.out)
		if len(args) == 0 {
			return exitUsage
		}
		return exitDone
	}
	if args[0] == "--version" {
		fmt.Fprintf(p.out, "lotpair-cli %s %s %s/%s\n", version, revisionOf(), runtime.GOOS, runtime.GOARCH)
		return exitDone
	}
	for _, c := range calls() {
		if c.name == args[0] {
			return c.run(p, args[1:])
		}
	}
	fmt.Fprintf(p.err, "lotpair-cli: found the call %q, want one of %s; see lotpair-cli --help\n", args[0], callNames())
	return exitUsage
}

// callNames lists the calls for a message.
func callNames() string {
	var names []string
	for _, c := range calls() {
		names = append(names, c.name)
	}
	return strings.Join(names, ", ")
}

func (p *program) usage(w io.Writer) {
	fmt.Fprintf(w, "lotpair-cli holds a candidate lot against a reference lot.\n\n")
	for _, c := range calls() {
		fmt.Fprintf(w, "  lotpair-cli %-9s %-12s %s\n", c.name, c.args, c.does)
	}
	fmt.Fprintf(w, "\nEvery call has --help with an example that runs.\n")
}

// revisionOf is the revision stamped by the linker, else the one the compiler recorded.
func revisionOf() string {
	if revision != "" {
		return revision
	}
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return ""
	}
	rev, dirty := "", ""
	for _, s := range info.Settings {
		switch s.Key {
		case "vcs.revision":
			rev = s.Value
		case "vcs.modified":
			if s.Value == "true" {
				dirty = "+local changes"
			}
		}
	}
	return rev + dirty
}
