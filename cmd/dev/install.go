package main

import (
	"fmt"
	"os"
	"os/exec"
	"runtime"
	"strings"
)

const onWindows = runtime.GOOS == "windows"

// need is one thing that a task needs beyond Go and git: its Debian package and how to see that it is there.
type need struct {
	pkg   string
	there func() bool
}

func program(name string) func() bool { return func() bool { return present(name) } }
func file(path string) func() bool    { return func() bool { return exists(path) } }

func command(name string, args ...string) func() bool {
	return func() bool { return exec.Command(name, args...).Run() == nil }
}

// header asks pkg-config, as cgo and the compiler's own search would.
func header(module string) func() bool { return command("pkg-config", "--exists", module) }

// debian asks the package manager, for what leaves no better trace.
func debian(pkg string) func() bool {
	return func() bool {
		out, err := exec.Command("dpkg-query", "-W", "-f", "${db:Status-Status}", pkg).Output()
		return err == nil && strings.TrimSpace(string(out)) == "installed"
	}
}

// python is the system's own: the packages below belong to it and not to another that may come first in PATH.
const python = "/usr/bin/python3"

// desktopNeeds is what building and running the window takes on Linux: a C compiler, the headers that GLFW names in its cgo
// flags (X11 only), software GL, and for the tests a display without a screen.
var desktopNeeds = []need{
	{"gcc", program("gcc")},
	{"libc6-dev", file("/usr/include/stdlib.h")},
	{"pkg-config", program("pkg-config")},
	{"libgl1-mesa-dev", header("gl")},
	{"libx11-dev", header("x11")},
	{"libxcursor-dev", header("xcursor")},
	{"libxrandr-dev", header("xrandr")},
	{"libxinerama-dev", header("xinerama")},
	{"libxi-dev", header("xi")},
	{"libxxf86vm-dev", header("xxf86vm")},
	{"libgl1-mesa-dri", debian("libgl1-mesa-dri")},
}

// windowNeeds is what the tests of the real window take besides.
var windowNeeds = []need{
	{"xvfb", program("Xvfb")},
	{"openbox", program("openbox")},
	{"xdotool", program("xdotool")},
	{"imagemagick", program("import")}, // keeps the pictures of the walks
}

// outsideNeeds are the programs that check the work from outside.
var outsideNeeds = []need{
	{"libreoffice-calc", program("soffice")},
	{"python3-uno", command(python, "-c", "import uno")},
	{"poppler-utils", program("pdftoppm")},
	{"fonts-noto-core", debian("fonts-noto-core")},
	{"xmlsec1", program("xmlsec1")},
	{"libxml2-utils", program("xmllint")},
	{"default-jdk-headless", program("javac")},
	{"libapache-poi-java", file("/usr/share/java/poi.jar")},
	{"libxml-security-java", file("/usr/share/java/xmlsec.jar")},
	{"libbcpkix-java", file("/usr/share/java/bcpkix.jar")},
	{"r-base-core", program("Rscript")},
	{"r-cran-readxl", command("Rscript", "-e", "library(readxl)")},
	{"python3-scipy", command(python, "-c", "import scipy")},
	{"python3-openpyxl", command(python, "-c", "import openpyxl")},
}

// missing lists the packages of what is not there.
func missing(groups ...[]need) []string {
	var out []string
	for _, group := range groups {
		for _, n := range group {
			if !n.there() {
				out = append(out, n.pkg)
			}
		}
	}
	return out
}

// install brings in what is missing with the system's package manager. Where nothing is missing it does nothing; where it
// has no right or no package manager it knows, the error is the command to run or the list of what is needed.
func (d *dev) install(what string, groups ...[]need) error {
	if runtime.GOOS != "linux" {
		d.say("%s: on %s nothing is installed for you; a C compiler must be present for the window", what, runtime.GOOS)
		return nil
	}
	packages := missing(groups...)
	if len(packages) == 0 {
		d.say("%s: all there", what)
		return nil
	}
	d.say("%s: missing %s", what, strings.Join(packages, " "))
	names := strings.Join(packages, " ")
	if !present("apt-get") {
		return fmt.Errorf("%s: found no apt-get, want the packages %s (Debian's names); install them with this system's package manager and run the task again", what, names)
	}
	var prefix []string
	if os.Geteuid() != 0 {
		if !present("sudo") || exec.Command("sudo", "-n", "true").Run() != nil {
			return fmt.Errorf("%s: no right to install packages here; run this once, then the task again:\n  sudo apt-get update && sudo apt-get install -y --no-install-recommends %s", what, names)
		}
		prefix = []string{"sudo", "-n"}
	}
	prefix = append(prefix, "env", "DEBIAN_FRONTEND=noninteractive", "apt-get", "-q", "-o", "DPkg::Lock::Timeout=300")
	for _, args := range [][]string{{"update"}, append([]string{"install", "-y", "--no-install-recommends"}, packages...)} {
		words := append(append([]string{}, prefix...), args...)
		if err := d.run(nil, words[0], words[1:]...); err != nil {
			return fmt.Errorf("%s: %w; see the lines above", what, err)
		}
	}
	if left := missing(groups...); len(left) > 0 {
		return fmt.Errorf("%s: installed, and still not found: %s; look at what the package manager printed above", what, strings.Join(left, " "))
	}
	return nil
}
