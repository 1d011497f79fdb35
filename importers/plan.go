package importers

import (
	"bytes"
	"errors"
	"fmt"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"

	"github.com/pelletier/go-toml/v2"

	"lotpair/qa"
)

// maxPlan is the largest plan file that is read.
const maxPlan = 4 << 20

// LoadPlan reads a plan file and checks it to the last key. The name is the one messages begin with. The error is a
// *PlanError that lists all that is wrong, with the line where it is known.
func LoadPlan(name string, data []byte) (qa.Plan, error) {
	return loadPlan(name, data, func(qa.PlanFault) bool { return false })
}

// LoadDraft reads a plan file as LoadPlan does, but one that may not say yet in which files the readings stand.
func LoadDraft(name string, data []byte) (qa.Plan, error) { return loadPlan(name, data, StillToCome) }

// StillToCome says whether a fault of a plan is only that a file of readings is not named yet.
func StillToCome(f qa.PlanFault) bool { return f.Key == "reference.file" || f.Key == "candidate.file" }

func loadPlan(name string, data []byte, allowed func(qa.PlanFault) bool) (qa.Plan, error) {
	data = bytes.TrimPrefix(data, []byte("\xef\xbb\xbf"))
	if err := soundText(name, data); err != nil {
		return qa.Plan{}, err
	}
	keys := walkPlan(name, data)
	if len(keys.faults) > 0 {
		return qa.Plan{}, &PlanError{Faults: keys.faults}
	}
	var plan qa.Plan
	decoder := toml.NewDecoder(bytes.NewReader(data)).DisallowUnknownFields()
	if err := decoder.Decode(&plan); err != nil {
		return qa.Plan{}, syntaxError(name, data, err)
	}
	faults := slices.DeleteFunc(append(keys.zeros(plan), plan.Validate()...), allowed)
	if len(faults) == 0 {
		return plan, nil
	}
	e := &PlanError{}
	for _, f := range faults {
		line := keys.line(f.Key)
		e.Faults = append(e.Faults, Fault{Place: placeOf(name, line), Line: line, Text: f.Error()})
	}
	return qa.Plan{}, e
}

func placeOf(name string, line int) string {
	if line == 0 {
		return name
	}
	return name + ":" + strconv.Itoa(line)
}

// soundText refuses what cannot be a plan before it is parsed.
func soundText(name string, data []byte) error {
	const want = "a plan in TOML"
	switch {
	case len(data) > maxPlan:
		return planError(name, "found %d bytes, want %s of at most 4 MiB; name the plan file", len(data), want)
	case len(bytes.TrimSpace(data)) == 0:
		return planError(name, "found an empty file, want %s; begin it with format = %q", want, qa.PlanFormat)
	case bytes.HasPrefix(data, []byte("PK")):
		return planError(name, "found a zip file or workbook, want %s; name the plan file", want)
	case bytes.HasPrefix(data, []byte("\xff\xfe")), bytes.HasPrefix(data, []byte("\xfe\xff")):
		return planError(name, "found UTF-16 text, want %s in UTF-8; save it as UTF-8", want)
	case bytes.IndexByte(data, 0) >= 0:
		return planError(name, "found a binary file, want %s; name the plan file", want)
	case !utf8.Valid(data):
		line := 1
		for rest := data; len(rest) > 0; {
			r, size := utf8.DecodeRune(rest)
			if r == utf8.RuneError && size == 1 {
				break
			}
			if r == '\n' {
				line++
			}
			rest = rest[size:]
		}
		return &PlanError{Faults: []Fault{{
			Place: placeOf(name, line), Line: line,
			Text: fmt.Sprintf("found a byte that is not UTF-8, want %s in UTF-8; save it as UTF-8", want),
		}}}
	}
	return nil
}

// syntaxError turns what the TOML reader says into a fault with its line.
func syntaxError(name string, data []byte, err error) error {
	decode, ok := errors.AsType[*toml.DecodeError](err)
	if !ok {
		return planError(name, "found a fault in the TOML (%s), want a plan; correct it", strings.TrimPrefix(err.Error(), "toml: "))
	}
	line, _ := decode.Position()
	found := ""
	if lines := strings.Split(string(data), "\n"); line >= 1 && line <= len(lines) {
		found = strings.TrimSpace(lines[line-1])
	}
	return &PlanError{Faults: []Fault{{
		Place: placeOf(name, line), Line: line,
		Text: fmt.Sprintf("found %s, want TOML (%s); correct the line", quoted(found), strings.TrimPrefix(decode.Error(), "toml: ")),
	}}}
}

// zeros finds the keys that the plan sets to 0, which is not in their range and looks like a key left out once it is read.
func (k *planKeys) zeros(p qa.Plan) []qa.PlanFault {
	var out []qa.PlanFault
	performance := qa.PerformancePlan{}
	if p.Performance != nil {
		performance = *p.Performance
	}
	for _, z := range []struct {
		key, want string
		is        bool
	}{
		{"reading.header_row", "a row number from 1", p.Reading.HeaderRow == 0},
		{"performance.coverage", "a number above 0 and below 1", performance.Coverage == 0},
		{"performance.confidence", "a number above 0 and below 1", performance.Confidence == 0},
	} {
		if z.is && k.lines[z.key] > 0 {
			out = append(out, qa.PlanFault{Key: z.key, Found: "0", Want: z.want, Do: "correct the plan, or leave it out"})
		}
	}
	return out
}

// numbered is how Validate names an element of a list: "characteristic 2 (Bore).lower".
var numbered = regexp.MustCompile(`^([a-z_.]+) ([0-9]+)`)

// line is the line of the key that a fault of Validate names, or of the nearest table around it; 0 where neither stands in
// the plan.
func (k *planKeys) line(key string) int {
	if m := numbered.FindStringSubmatch(key); m != nil {
		rest := key[len(m[0]):]
		if i := strings.LastIndex(rest, ")."); i >= 0 { // the name in brackets may hold anything
			rest = rest[i+1:]
		} else if strings.HasPrefix(rest, " (") {
			rest = ""
		}
		key = m[1] + "[" + m[2] + "]" + rest
	}
	for key != "" {
		if line, ok := k.lines[key]; ok {
			return line
		}
		key = key[:max(0, strings.LastIndexByte(key, '.'))]
	}
	return 0
}
