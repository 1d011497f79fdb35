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
// and what ends the server. more is what the server takes besides.
func (d *dev) display(more ...string) (string, func(), error) {
	read, write, err := os.Pipe()
	if err != nil {
		return "", nil, err
	}
	defer func() { _ = read.Close() }() // nothing is lost: the number was read
	args := append([]string{"-displayfd", "3", "-screen", "0", "1600x1000x24", "-nolisten", "tcp"}, more...)
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
