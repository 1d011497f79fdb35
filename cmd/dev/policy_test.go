package main

import (
	"go/ast"
	"go/parser"
	"go/token"
	"io/fs"
	"os"
	"os/exec"
	"path"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
)

// source is one Go file of the project, parsed whatever its build tags.
type source struct {
	name  string // from the project's folder, with slashes
	pkg   string // its folder
	test  bool
	lines int
	file  *ast.File
}

const root = "../.."

// sources parses every Go file of the project.
func sources(t *testing.T) []source {
	t.Helper()
	var out []source
	err := filepath.WalkDir(root, func(name string, entry fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if entry.IsDir() {
			if base := entry.Name(); name != root && (base == "testdata" || base == "out" || strings.HasPrefix(base, ".")) {
				return filepath.SkipDir
			}
			return nil
		}
		if filepath.Ext(name) != ".go" {
			return nil
		}
		text, err := os.ReadFile(name)
		if err != nil {
			return err
		}
		file, err := parser.ParseFile(token.NewFileSet(), name, text, parser.ParseComments)
		if err != nil {
			return err
		}
		relative, err := filepath.Rel(root, name)
		if err != nil {
			return err
		}
		relative = filepath.ToSlash(relative)
		out = append(out, source{
			name: relative, pkg: path.Dir(relative), test: strings.HasSuffix(relative, "_test.go"),
			lines: strings.Count(string(text), "\n"), file: file,
		})
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	return out
}

// imported are the import paths of a file.
func imported(t *testing.T, s source) []string {
	t.Helper()
	var out []string
	for _, i := range s.file.Imports {
		p, err := strconv.Unquote(i.Path.Value)
		if err != nil {
			t.Fatal(err)
		}
		out = append(out, p)
	}
	return out
}

// allows says whether the rule lets a file of the package import p.
func (r rule) allows(pkg, p string, test bool) bool {
	if own, ok := strings.CutPrefix(p, "lotpair/"); ok {
		return slices.Contains(r.own, own) || test && (own == pkg || slices.Contains(r.tests, own))
	}
	if first, _, _ := strings.Cut(p, "/"); !strings.Contains(first, ".") {
		return true // the standard library
	}
	within := func(prefix string) bool { return p == prefix || strings.HasPrefix(p, prefix+"/") }
	return slices.ContainsFunc(r.outside, within) || test && (slices.ContainsFunc(testTools, within) || slices.ContainsFunc(r.tests, within))
}

func TestPolicyImports(t *testing.T) {
	for _, s := range sources(t) {
		r, ok := policy[s.pkg]
		if !ok {
			t.Errorf("%s: found package %s, want one that policy.go lists; add it there and to the picture in DEVELOPERS.md", s.name, s.pkg)
			continue
		}
		for _, p := range imported(t, s) {
			if !r.allows(s.pkg, p, s.test) {
				t.Errorf("%s: found import %s, want only what policy.go allows %s; move the code or change the policy and the picture", s.name, p, s.pkg)
			}
		}
	}
}

// The policy's own rules: what reads never knows what writes, the domain knows neither, and Fyne stays at home.
func TestPolicyItself(t *testing.T) {
	for pkg, r := range policy {
		for _, p := range append(append([]string{}, r.own...), r.tests...) {
			if _, ok := policy[p]; !ok && !strings.Contains(p, ".") {
				t.Errorf("%s: found %s, want a package that has a rule of its own", pkg, p)
			}
		}
		below := strings.HasPrefix(pkg, apart[0]) || strings.HasPrefix(pkg, apart[1])
		for i, side := range apart {
			if below && strings.HasPrefix(pkg, apart[1-i]) && slices.Contains(append(append([]string{}, r.own...), r.tests...), side) {
				t.Errorf("%s: found %s, want them apart", pkg, side)
			}
		}
		if slices.Contains(r.outside, fyneModule) && pkg != "app" && pkg != "app/chart" && pkg != "cmd/lotpair" {
			t.Errorf("%s: found Fyne, want it in app, app/chart and cmd/lotpair alone", pkg)
		}
		if strings.HasPrefix(pkg, "qa") && slices.ContainsFunc(r.own, func(p string) bool { return !strings.HasPrefix(p, "qa") }) {
			t.Errorf("%s: found %v, want nothing outside qa", pkg, r.own)
		}
	}
}

// The rules bite: each line is an import that must be refused.
func TestPolicyRefuses(t *testing.T) {
	for _, c := range []struct {
		pkg, imports string
		test         bool
	}{
		{"importers", "lotpair/exports", false},
		{"exports", "lotpair/importers", false},
		{"exports", "lotpair/importers", true},
		{"qa", "lotpair/importers", false},
		{"qa/stats", "lotpair/qa", false},
		{"qa/stats", "gonum.org/v1/gonum/stat", false},
		{"importers", excelizeModule, false},
		{"app/desk", fyneModule + "/widget", false},
		{"app/desk", "lotpair/exports", false},
		{"cmd/dev", "lotpair/app", false},
		{"cmd/dev", fyneModule, true},
		{"exports/opcsign", "lotpair/qa", false},
		{"importers", tomlModule + "x", false},
	} {
		if policy[c.pkg].allows(c.pkg, c.imports, c.test) {
			t.Errorf("%s importing %s: got allowed, want refused", c.pkg, c.imports)
		}
	}
}

func TestPolicyFyneApp(t *testing.T) {
	var users []string
	for _, s := range sources(t) {
		if s.pkg == "cmd/lotpair" && !s.test && slices.Contains(imported(t, s), fyneModule+"/app") {
			users = append(users, s.name)
		}
	}
	if len(users) > 1 || len(users) == 1 && users[0] != "cmd/lotpair/main_cgo.go" {
		t.Errorf("Fyne's app package: got %v, want cmd/lotpair/main_cgo.go alone", users)
	}
}

// TestPolicyTopLevel holds what the project has at its top against the owner's list. Where git tells, a file that only lies
// there, such as the log of this very check, is none of the project's.
func TestPolicyTopLevel(t *testing.T) {
	for _, name := range topEntries(t) {
		if !strings.HasPrefix(name, ".") && name != "out" && !slices.Contains(topLevel, name) {
			t.Errorf("found %s in the project's folder, want one of %v", name, topLevel)
		}
	}
}

func topEntries(t *testing.T) []string {
	t.Helper()
	git := exec.Command("git", "ls-files", "-z")
	git.Dir = root
	if out, err := git.Output(); err == nil && len(out) > 0 {
		var names []string
		for _, path := range strings.Split(strings.TrimSuffix(string(out), "\x00"), "\x00") {
			if top, _, _ := strings.Cut(path, "/"); !slices.Contains(names, top) {
				names = append(names, top)
			}
		}
		return names
	}
	entries, err := os.ReadDir(root)
	if err != nil {
		t.Fatal(err)
	}
	names := make([]string, len(entries))
	for i, e := range entries {
		names[i] = e.Name()
	}
	return names
}

func TestPolicyPackageComment(t *testing.T) {
	comments := map[string][]string{}
	seen := map[string]bool{}
	for _, s := range sources(t) {
		if s.test {
			continue
		}
		seen[s.pkg] = true
		if s.file.Doc != nil {
			comments[s.pkg] = append(comments[s.pkg], s.file.Doc.Text())
		}
	}
	for pkg := range seen {
		c := comments[pkg]
		if len(c) != 1 || !strings.HasPrefix(c[0], "Package "+path.Base(pkg)+" ") && !strings.HasPrefix(c[0], "Command "+path.Base(pkg)+" ") {
			t.Errorf("%s: got %d package comments %.60q, want one that begins with Package %s", pkg, len(c), c, path.Base(pkg))
		}
	}
}

func TestPolicyFileLength(t *testing.T) {
	for _, s := range sources(t) {
		if s.lines > longestFile {
			t.Errorf("%s: found %d lines, want at most %d; it likely holds two nouns", s.name, s.lines, longestFile)
		}
	}
}

// outsideCalls lists what a file uses of outsideWorld.
func outsideCalls(file *ast.File) []string {
	names := map[string]string{} // what the file calls a package -> its path
	for _, i := range file.Imports {
		p, err := strconv.Unquote(i.Path.Value)
		if err != nil || outsideWorld[p] == nil {
			continue
		}
		name := path.Base(p)
		if name == "v2" {
			name = path.Base(path.Dir(p))
		}
		if i.Name != nil {
			name = i.Name.Name
		}
		names[name] = p
	}
	var out []string
	ast.Inspect(file, func(n ast.Node) bool {
		selector, ok := n.(*ast.SelectorExpr)
		if !ok {
			return true
		}
		if x, ok := selector.X.(*ast.Ident); ok && slices.Contains(outsideWorld[names[x.Name]], selector.Sel.Name) {
			out = append(out, x.Name+"."+selector.Sel.Name)
		}
		return true
	})
	return out
}

func TestPolicyNoClockNoEnvironment(t *testing.T) {
	for _, s := range sources(t) {
		first, _, _ := strings.Cut(s.pkg, "/")
		if s.test || !slices.Contains(pureFolders, first) {
			continue
		}
		for _, call := range outsideCalls(s.file) {
			t.Errorf("%s: found %s, want time, user and settings as arguments; take it as a parameter", s.name, call)
		}
		ast.Inspect(s.file, func(n ast.Node) bool {
			if _, ok := n.(*ast.GoStmt); ok {
				t.Errorf("%s: found a go statement, want concurrency in app/jobs.go alone", s.name)
			}
			return true
		})
	}
}

func TestPolicyFindsCalls(t *testing.T) {
	const text = `package p
import ("os"; clock "time"; "math/rand/v2")
var a = clock.Now()
func f() string { return os.Getenv("X") }
var g = rand.New(rand.NewPCG(1, 2))
var h = rand.Float64
type os2 struct{ Environ int }
`
	file, err := parser.ParseFile(token.NewFileSet(), "p.go", text, 0)
	if err != nil {
		t.Fatal(err)
	}
	want := []string{"clock.Now", "os.Getenv", "rand.Float64"}
	if got := outsideCalls(file); !slices.Equal(got, want) {
		t.Errorf("got %v, want %v", got, want)
	}
}
