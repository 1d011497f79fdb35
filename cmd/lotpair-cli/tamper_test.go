package main

import (
	"archive/zip"
	"bytes"
	"io"
	"os"
	"strings"

	"github.com/rogpeppe/go-internal/testscript"
)

// tamper changes a package as an attacker would, one kind a call:
//
//	tamper replace FILE OUT PART OLD NEW   the first OLD in a part becomes NEW
//	tamper add FILE OUT PART TEXT          one more part
//	tamper drop FILE OUT PART              a part gone
//	tamper twice FILE OUT PART             a second entry of the same name
//	tamper append FILE OUT                 bytes after the end
func tamper(ts *testscript.TestScript, _ bool, args []string) {
	kind, in, out, args := args[0], args[1], args[2], args[3:]
	b, err := os.ReadFile(ts.MkAbs(in))
	ts.Check(err)
	if kind == "append" {
		ts.Check(os.WriteFile(ts.MkAbs(out), append(b, "more"...), 0o600))
		return
	}
	var w bytes.Buffer
	z := zip.NewWriter(&w)
	write := func(name string, b []byte) {
		e, err := z.Create(name)
		ts.Check(err)
		_, err = e.Write(b)
		ts.Check(err)
	}
	r, err := zip.NewReader(bytes.NewReader(b), int64(len(b)))
	ts.Check(err)
	hit := kind == "add"
	for _, f := range r.File {
		o, err := f.Open()
		ts.Check(err)
		part, err := io.ReadAll(o)
		ts.Check(err)
		if len(args) > 0 && f.Name == args[0] {
			switch kind {
			case "replace":
				if !strings.Contains(string(part), args[1]) {
					ts.Fatalf("%s holds no %q", f.Name, args[1])
				}
				part = []byte(strings.Replace(string(part), args[1], args[2], 1))
				hit = true
			case "drop":
				hit = true
				continue
			case "twice":
				write(f.Name, part)
				hit = true
			}
		}
		write(f.Name, part)
	}
	if kind == "add" {
		write(args[0], []byte(args[1]))
	}
	if !hit {
		ts.Fatalf("found no part %s", args[0])
	}
	ts.Check(z.Close())
	ts.Check(os.WriteFile(ts.MkAbs(out), w.Bytes(), 0o600))
}
