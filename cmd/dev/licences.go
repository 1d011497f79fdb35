package main

import (
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
)

// licenceFile holds the licences of all modules built into the programs; the window shows it.
const licenceFile = "app/licences.txt"

// licences writes the licences of what is built in.
func licences(d *dev, _ []string) error {
	text, err := d.licences()
	if err != nil {
		return err
	}
	fmt.Fprintf(d.stdout, "writing %s\n", licenceFile)
	return os.WriteFile(filepath.Join(d.root, licenceFile), []byte(text), 0o644)
}

// licences is the list of the modules, a line each, an empty line, and their texts, apart by form feeds.
func (d *dev) licences() (string, error) {
	modules, err := d.builtIn()
	if err != nil {
		return "", err
	}
	var list, texts []string
	of := map[string][]string{} // the modules of each text
	var order []string
	for _, m := range modules {
		path, version, dir := m[0], m[1], m[2]
		list = append(list, strings.TrimSpace(path+" "+version))
		files, err := licenceFiles(dir)
		if err != nil {
			return "", err
		}
		if len(files) == 0 {
			return "", fmt.Errorf("%s: found no licence in %s, want one; do without the module", path, dir)
		}
		for _, name := range files {
			data, err := os.ReadFile(name)
			if err != nil {
				return "", err
			}
			text := strings.TrimSpace(strings.ReplaceAll(string(data), "\r\n", "\n"))
			if of[text] == nil {
				order = append(order, text)
			}
			if label := strings.TrimSpace(path + " " + filepath.ToSlash(strings.TrimPrefix(strings.TrimPrefix(name, dir), string(filepath.Separator)))); !slices.Contains(of[text], label) {
				of[text] = append(of[text], label)
			}
		}
	}
	for _, text := range order {
		texts = append(texts, strings.Join(of[text], "\n")+"\n\n"+strings.ReplaceAll(text, "\f", ""))
	}
	return strings.Join(list, "\n") + "\n\n" + strings.Join(texts, "\n\f\n") + "\n", nil
}

// builtIn are the modules that the programs are made of: path, version, folder. The language's own library is one of them.
func (d *dev) builtIn() ([][3]string, error) {
	root, err := d.output(nil, "go", "env", "GOROOT")
	if err != nil {
		return nil, err
	}
	out := [][3]string{{"Go", "", strings.TrimSpace(root)}}
	text, err := d.output(nil, "go", "list", "-deps", "-tags", "migrated_fynedo", "-f", "{{with .Module}}{{if not .Main}}{{.Path}}\t{{.Version}}\t{{.Dir}}{{end}}{{end}}", "./cmd/lotpair", "./cmd/lotpair-cli", "./app")
	if err != nil {
		return nil, err
	}
	var all []string
	for _, line := range strings.Split(text, "\n") {
		if line = strings.TrimSpace(line); line != "" && !slices.Contains(all, line) {
			all = append(all, line)
		}
	}
	slices.Sort(all)
	for _, line := range all {
		f := strings.Split(line, "\t")
		if len(f) != 3 || f[2] == "" {
			return nil, fmt.Errorf("go list: found %q, want a module with its folder; run go mod download", line)
		}
		out = append(out, [3]string{f[0], f[1], f[2]})
	}
	return out, nil
}

// licenceFiles are the licences of a module, with those of the fonts that the toolkit brings.
func licenceFiles(dir string) ([]string, error) {
	var out []string
	for _, in := range []string{dir, filepath.Join(dir, "theme", "font")} {
		entries, err := os.ReadDir(in)
		if err != nil {
			if in != dir {
				continue
			}
			return nil, err
		}
		for _, e := range entries {
			name := strings.ToUpper(e.Name())
			if !e.IsDir() && (strings.HasPrefix(name, "LICEN") || strings.HasPrefix(name, "COPYING") || strings.HasPrefix(name, "NOTICE")) {
				out = append(out, filepath.Join(in, e.Name()))
			}
		}
	}
	return out, nil
}
