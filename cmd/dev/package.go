package main

import (
	"crypto/sha256"
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"runtime"
	"strings"
)

var versionForm = regexp.MustCompile(`^v?[0-9]+\.[0-9]+\.[0-9]+(-[0-9A-Za-z.-]+)?$`)

// consoleTargets are the systems that the console program is built for, from any of them.
var consoleTargets = []struct{ system, arch string }{
	{"linux", "amd64"},
	{"linux", "arm64"},
	{"windows", "amd64"},
	{"darwin", "amd64"},
	{"darwin", "arm64"},
}

// release builds the programs with the version stamped in, and their digests. The console program is built for every
// target, the desktop for this machine alone: it needs the target's own C compiler.
func release(d *dev, args []string) error {
	if len(args) != 1 || !versionForm.MatchString(args[0]) {
		return usageError(fmt.Sprintf("found %q, want a version such as 1.2.0", strings.Join(args, " ")))
	}
	version := strings.TrimPrefix(args[0], "v")
	if changed, err := d.output(nil, "git", "status", "--porcelain"); err != nil {
		return err
	} else if changed != "" {
		return fmt.Errorf("the checkout has changes, want a release of what is committed:\n%s", changed)
	}
	folder := filepath.Join("out", "release", version)
	if err := os.RemoveAll(d.path(folder)); err != nil {
		return err
	}
	if err := os.MkdirAll(d.path(folder), 0o755); err != nil {
		return err
	}
	flags := []string{"-trimpath", "-buildvcs=true", "-ldflags", "-s -w -X main.version=" + version}
	compile := func(env []string, to, pkg string, more ...string) error {
		return d.run(env, "go", append(append(append([]string{"build"}, flags...), more...), "-o", to, pkg)...)
	}
	for _, t := range consoleTargets {
		to := filepath.Join(folder, strings.Join([]string{"lotpair-cli", version, t.system, t.arch}, "-")+suffix(t.system))
		if err := compile(append([]string{"GOOS=" + t.system, "GOARCH=" + t.arch}, pure...), to, "./cmd/lotpair-cli"); err != nil {
			return err
		}
	}
	if err := d.install("window", desktopNeeds); err != nil {
		return err
	}
	to := filepath.Join(folder, strings.Join([]string{"lotpair", version, runtime.GOOS, runtime.GOARCH}, "-")+suffix(runtime.GOOS))
	if err := compile(desktop, to, "./cmd/lotpair", "-tags", desktopTags); err != nil {
		return err
	}
	return d.sums(folder)
}

func suffix(system string) string {
	if system == "windows" {
		return ".exe"
	}
	return ""
}

// sums writes SHA256SUMS over the files of a folder and prints the sizes, so that growth is seen.
func (d *dev) sums(folder string) error {
	entries, err := os.ReadDir(d.path(folder))
	if err != nil {
		return err
	}
	var list strings.Builder
	for _, e := range entries {
		content, err := os.ReadFile(d.path(folder, e.Name()))
		if err != nil {
			return err
		}
		fmt.Fprintf(&list, "%x  %s\n", sha256.Sum256(content), e.Name())
		d.say("%8.1f MB  %s", float64(len(content))/1e6, e.Name())
	}
	return os.WriteFile(d.path(folder, "SHA256SUMS"), []byte(list.String()), 0o644)
}
