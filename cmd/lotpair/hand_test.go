//go:build window && cgo

package main

import (
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"time"
)

// hand uses the program in its real window as a person does: it finds what it needs by the words that can be read there, and
// moves a pointer or presses keys.
type hand struct {
	*testing.T
	running  *running
	id       string // of the window
	controls string // the file that says where everything stands
	pictures string // where pictures are kept; "" for nowhere
	taken    int
	clicks   int
	pressed  int
}

// control is one line of the controls' file.
type control struct {
	what                     string
	left, top, right, bottom float64
	text                     string
}

func (h *hand) seen() []control {
	data, err := os.ReadFile(h.controls)
	if err != nil {
		return nil // it is not written yet
	}
	var out []control
	for _, line := range strings.Split(string(data), "\n") {
		f := strings.SplitN(line, "\t", 6)
		if len(f) == 2 {
			out = append(out, control{what: f[0], text: f[1]})
		}
		if len(f) != 6 {
			continue
		}
		c := control{what: f[0], text: f[5]}
		for i, to := range []*float64{&c.left, &c.top, &c.right, &c.bottom} {
			*to, _ = strconv.ParseFloat(f[i+1], 64) // our own file
		}
		out = append(out, c)
	}
	return out
}

// until waits until find finds what it looks for and no work runs.
func (h *hand) until(what string, find func([]control) (control, bool)) control {
	h.Helper()
	for end := time.Now().Add(90 * time.Second); time.Now().Before(end); time.Sleep(100 * time.Millisecond) {
		all := h.seen()
		busy := false
		for _, c := range all {
			busy = busy || c.what == "busy" && c.text == "true"
		}
		if c, ok := find(all); ok && !busy {
			return c
		}
		select {
		case err := <-h.running.gone:
			h.Fatalf("%s: the program ended: %v\n%s", what, err, h.running.said.String())
		default:
		}
	}
	h.shot("failed")
	var texts []string
	for _, c := range h.seen() {
		texts = append(texts, c.what+": "+c.text)
	}
	h.Fatalf("%s: not found; what can be seen:\n%s", what, strings.Join(texts, "\n"))
	return control{}
}

// sees waits for a text that holds the words.
func (h *hand) sees(words string) control {
	h.Helper()
	return h.until(fmt.Sprintf("text %q", words), func(all []control) (control, bool) {
		for _, c := range all {
			if c.what == "text" && strings.Contains(c.text, words) {
				return c, true
			}
		}
		return control{}, false
	})
}

// reads waits for a text of exactly these words; of several the nth from above, counted from 0.
func (h *hand) reads(words string, nth int) control {
	h.Helper()
	return h.until(fmt.Sprintf("text %q, no. %d", words, nth+1), func(all []control) (control, bool) {
		n := 0
		for _, c := range all {
			if c.what == "text" && c.text == words {
				if n == nth {
					return c, true
				}
				n++
			}
		}
		return control{}, false
	})
}

// lineOf waits for the line to type in below or right of its label.
func (h *hand) lineOf(label string, nth int) control {
	h.Helper()
	l := h.reads(label, nth)
	return h.until("line of "+label, func(all []control) (control, bool) {
		found := false
		var best control
		for _, c := range all {
			below := c.left < l.right && c.right > l.left && c.top >= l.bottom-6 && c.top < l.bottom+24
			beside := c.left >= l.right-4 && c.top < l.bottom && c.bottom > l.top
			if c.what == "line" && (below || beside) && (!found || c.left < best.left) {
				best, found = c, true
			}
		}
		return best, found
	})
}

func (h *hand) tool(args ...string) {
	h.Helper()
	if out, err := tool(args...); err != nil {
		h.Fatalf("xdotool %v: %v %s", args, err, out)
	}
}

// focus gives the window the keys, as soon as the window manager shows it.
func (h *hand) focus() {
	h.Helper()
	for try := 0; ; try++ {
		time.Sleep(500 * time.Millisecond)
		out, err := tool("windowfocus", "--sync", h.id)
		if err == nil {
			return
		}
		if try == 20 {
			h.Fatalf("focus: %v %s", err, out)
		}
	}
}

// resize gives the window a size in pixels, as often as it takes.
func (h *hand) resize(wide, high string) {
	h.Helper()
	want := wide + "x" + high
	for range 20 {
		h.tool("windowsize", h.id, wide, high)
		time.Sleep(500 * time.Millisecond)
		if out, err := tool("getwindowgeometry", h.id); err == nil && strings.Contains(out, want) {
			time.Sleep(time.Second)
			return
		}
	}
	h.Errorf("size: want %s; the window does not take it", want)
}

// scrolledTo turns the wheel over a control until a text is in sight.
func (h *hand) scrolledTo(words string, over control) control {
	h.Helper()
	h.moveTo(over)
	for range 30 {
		for _, c := range h.seen() {
			if c.what == "text" && c.text == words {
				return h.reads(words, 0)
			}
		}
		h.tool("click", "5")
		time.Sleep(600 * time.Millisecond)
	}
	return h.reads(words, 0)
}

// moveTo moves the pointer to the middle of a control.
func (h *hand) moveTo(c control) {
	h.Helper()
	scale := 1.0
	for _, x := range h.seen() {
		if x.what == "scale" {
			scale, _ = strconv.ParseFloat(x.text, 64) // our own file
		}
	}
	h.tool("mousemove", "--window", h.id, strconv.Itoa(int((c.left+c.right)/2*scale)), strconv.Itoa(int((c.top+c.bottom)/2*scale)))
	time.Sleep(150 * time.Millisecond)
}

// clickAt clicks into the middle of a control.
func (h *hand) clickAt(c control) {
	h.Helper()
	h.moveTo(c)
	h.tool("click", "1")
	time.Sleep(350 * time.Millisecond)
	h.clicks++
}

// click clicks what reads so.
func (h *hand) click(words string) {
	h.Helper()
	h.clickAt(h.reads(words, 0))
}

// press presses keys, one after the other.
func (h *hand) press(keys ...string) {
	h.Helper()
	for _, k := range keys {
		h.tool("key", k)
		time.Sleep(150 * time.Millisecond)
		h.pressed++
	}
	time.Sleep(200 * time.Millisecond)
}

// writes types a text over what stands in the line that has the keys.
func (h *hand) writes(text string) {
	h.Helper()
	h.tool("key", "ctrl+a")
	h.tool("type", "--delay", "25", text)
	time.Sleep(300 * time.Millisecond)
	h.pressed++
}

// keys is the control that has the keys.
func (h *hand) keys() control {
	for _, c := range h.seen() {
		if c.what == "keys" {
			return c
		}
	}
	return control{}
}

// tabTo presses the Tab key until the keys are on what is wanted.
func (h *hand) tabTo(what string, wanted func(control) bool) {
	h.Helper()
	at := h.keys()
	for range 70 {
		if wanted(at) {
			return
		}
		h.tool("key", "Tab")
		h.pressed++
		before := at
		for end := time.Now().Add(3 * time.Second); at == before && time.Now().Before(end); time.Sleep(40 * time.Millisecond) {
			at = h.keys()
		}
	}
	h.shot("failed")
	h.Fatalf("the Tab key does not reach %s", what)
}

// tabToLine goes to the line of a label.
func (h *hand) tabToLine(label string, nth int) {
	h.Helper()
	l := h.lineOf(label, nth)
	h.tabTo("the line of "+label, func(c control) bool {
		return c.left < l.right && c.right > l.left && c.top < l.bottom && c.bottom > l.top && c.bottom-c.top < 60
	})
}

// tabToButton goes to a button.
func (h *hand) tabToButton(label string) {
	h.Helper()
	h.tabTo("the button "+label, func(c control) bool { return c.text == label })
}

// shot keeps a picture of the window.
func (h *hand) shot(name string) {
	h.Helper()
	if h.pictures == "" {
		return
	}
	h.taken++
	to := filepath.Join(h.pictures, fmt.Sprintf("%02d-%s.png", h.taken, name))
	if out, err := exec.Command("import", "-window", h.id, to).CombinedOutput(); err != nil {
		h.Errorf("picture %s: %v %s", name, err, out)
	}
}
