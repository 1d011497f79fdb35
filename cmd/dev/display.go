package main

import (
	"bufio"
	"errors"
	"fmt"
	"os"
	"runtime"
	"strings"
	"time"
)

const onLinux = runtime.GOOS == "linux"

// display starts an X server without a screen on a display number that it finds free itself, and gives the display's name
// and what ends the server. screen is its size in pixels; more is what the server takes besides.
func (d *dev) display(screen string, more ...string) (string, func(), error) {
	read, write, err := os.Pipe()
	if err != nil {
		return "", nil, err
	}
	defer func() { _ = read.Close() }() // nothing is lost: the number was read
	args := append([]string{"-displayfd", "3", "-screen", "0", screen + "x24", "-nolisten", "tcp"}, more...)
	d.show(nil, "Xvfb", args...)
	c := d.command(nil, "Xvfb", args...)
	c.ExtraFiles = []*os.File{write}
	if err := c.Start(); err != nil {
		_ = write.Close()
		return "", nil, fmt.Errorf("display: Xvfb: %w", err)
	}
	_ = write.Close() // ours; the server holds its own
	end := func() {
		_ = c.Process.Kill() // it may have ended by itself
		_ = c.Wait()
	}
	number := make(chan string, 1)
	go func() {
		line, _ := bufio.NewReader(read).ReadString('\n')
		number <- strings.TrimSpace(line)
	}()
	select {
	case n := <-number:
		if n == "" {
			end()
			return "", nil, errors.New("display: Xvfb ended without naming a display; see its messages above")
		}
		return ":" + n, end, nil
	case <-time.After(30 * time.Second):
		end()
		return "", nil, errors.New("display: Xvfb named no display within 30 seconds")
	}
}

// managed is a display with a window manager, as people have one, and the environment of a program that opens its window there.
// Software GL: the same pictures everywhere, and no driver needed. A bare machine sets no locale, and without one the title of a
// window loses what is not ASCII on its way to another program.
func (d *dev) managed(screen string) (env []string, end func(), err error) {
	display, endDisplay, err := d.display(screen)
	if err != nil {
		return nil, nil, err
	}
	env = []string{"DISPLAY=" + display, "WAYLAND_DISPLAY=", "LIBGL_ALWAYS_SOFTWARE=1", "LC_ALL=C.UTF-8"}
	d.show(env[:1], "openbox")
	c := d.command(env, "openbox")
	if err := c.Start(); err != nil {
		endDisplay()
		return nil, nil, fmt.Errorf("display: openbox: %w", err)
	}
	return env, func() {
		_ = c.Process.Kill() // it may have ended by itself
		_ = c.Wait()
		endDisplay()
	}, nil
}
