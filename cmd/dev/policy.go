package main

// This file is the policy of imports as data; policy_test.go holds the project against it. It says the same as the picture
// in DEVELOPERS.md: change both or neither. Every package is listed; one that is not may not exist.

// rule is what one package may import besides the standard library.
type rule struct {
	own     []string // packages of this project
	outside []string // modules of others, as path prefixes
	tests   []string // what its tests may import besides: of this project and of others
}

// Modules of others, each with its one home.
const (
	fyneModule     = "fyne.io/fyne/v2"
	excelizeModule = "github.com/xuri/excelize/v2"
	tomlModule     = "github.com/pelletier/go-toml/v2"
	etreeModule    = "github.com/beevik/etree"
	pkcs12Module   = "software.sslmate.com/src/go-pkcs12"
	gonumModule    = "gonum.org/v1/gonum"
	imageModule    = "golang.org/x/image"
	termModule     = "golang.org/x/term"
	sqliteModule   = "modernc.org/sqlite"
	rapidModule    = "pgregory.net/rapid"
	scriptModule   = "github.com/rogpeppe/go-internal/testscript"
)

// testTools may be imported by every test.
var testTools = []string{rapidModule, excelizeModule, scriptModule}

var policy = map[string]rule{
	"qa/stats/dist":  {outside: []string{gonumModule}},
	"qa/stats":       {own: []string{"qa/stats/dist"}, tests: []string{"qa/published"}},
	"qa":             {own: []string{"qa/stats", "qa/stats/dist"}, tests: []string{"qa/published"}},
	"qa/published":   {own: []string{"qa", "qa/stats", "qa/stats/dist"}},
	"qa/figure":      {own: []string{"qa"}},
	"qa/figure/draw": {own: []string{"qa/figure"}, outside: []string{imageModule}, tests: []string{"qa"}},

	"importers/cells": {},
	"importers":       {own: []string{"qa", "importers/cells"}, outside: []string{tomlModule}},

	"exports/opcsign":  {outside: []string{etreeModule}, tests: []string{"exports/identity"}},
	"exports/identity": {outside: []string{pkcs12Module}},
	"exports": {
		own:     []string{"qa", "qa/figure", "qa/figure/draw", "exports/opcsign", "exports/identity", "importers/cells"},
		outside: []string{excelizeModule},
	},

	"app/desk":     {own: []string{"qa", "qa/stats", "qa/figure", "importers"}}, // qa/stats says how many readings a study needs
	"app/chart":    {own: []string{"qa/figure", "qa/figure/draw"}, outside: []string{fyneModule}, tests: []string{"qa"}},
	"app/language": {},
	"app/register": {outside: []string{sqliteModule}},
	"app": {
		own: []string{
			"app/desk", "app/chart", "app/language", "app/register", "importers", "exports", "exports/identity", "exports/opcsign",
			"qa", "qa/figure", "qa/figure/draw", "qa/published",
		},
		outside: []string{fyneModule, imageModule},
	},

	"cmd/lotpair": {own: []string{"app"}, outside: []string{fyneModule}},
	// A signature is made with an identity and a statement: the two types that exports takes from the packages below it.
	"cmd/lotpair-cli": {
		own:     []string{"importers", "exports", "exports/identity", "exports/opcsign", "qa", "qa/published"},
		outside: []string{termModule},
	},
	// The worked example is written with excelize, so that no code of ours writes what our code reads; gonum is a peer of the
	// bench and accuracy tables.
	"cmd/dev": {own: []string{"importers", "exports", "exports/identity", "exports/opcsign", "qa", "qa/stats", "qa/stats/dist"}, outside: []string{excelizeModule, gonumModule}},
}

// apart are packages that never meet in one program file below cmd and app.
var apart = [2]string{"importers", "exports"}

// topLevel are the entries that the project's folder may hold besides dotfiles.
var topLevel = []string{"app", "cmd", "exports", "importers", "qa", "testdata", "go.mod", "go.sum", "README.md", "DEVELOPERS.md", "FyneApp.toml"}

// longestFile is how many lines a Go file may have: a longer one holds two nouns.
const longestFile = 450

// outsideWorld lists what nothing below cmd and app may call: time, user and settings come in as arguments.
var outsideWorld = map[string][]string{
	"time":         {"Now", "Since", "Until", "Sleep", "After", "Tick", "NewTimer", "NewTicker"},
	"os":           {"Getenv", "LookupEnv", "Environ", "Setenv", "Args", "Exit", "Getwd", "Hostname", "UserHomeDir"},
	"os/user":      {"Current"},
	"math/rand":    {"Int", "Intn", "Float64", "NormFloat64", "Perm", "Shuffle"},
	"math/rand/v2": {"Int", "IntN", "N", "Float64", "NormFloat64", "Perm", "Shuffle", "Uint64"},
}

// pureFolders are the folders that outsideWorld holds for.
var pureFolders = []string{"qa", "importers", "exports"}
