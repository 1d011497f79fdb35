// Package app is the desktop: it places what package desk says in a window and turns what the user does into acts on its
// state. Handlers are one line; everything slow runs in jobs.go, which is the only file with a goroutine.
package app
