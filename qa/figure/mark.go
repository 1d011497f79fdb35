package figure

import "lotpair/qa"

// Role says what a mark stands for; the painter gives each role its colour.
type Role string

// The roles of marks.
const (
	Text      Role = "text"      // ink: words, intervals, limits
	Muted     Role = "muted"     // what stands back: posts, notes, readings left out
	Rule      Role = "rule"      // thin dividing lines
	Reference Role = "reference" // whatever belongs to the reference lot
	Candidate Role = "candidate" // whatever belongs to the candidate lot
	Margin    Role = "margin"    // the margin as a band
)

// Kind is the shape of a mark.
type Kind string

// The kinds of marks, and what their fields mean.
const (
	Line    Kind = "line"    // from X, Y to X2, Y2; Size is its width
	Box     Kind = "box"     // X, Y and X2, Y2 are opposite corners
	Dot     Kind = "dot"     // a circle about X, Y; Size is its radius
	Diamond Kind = "diamond" // a square on its corner about X, Y; Size is half its diagonal
	Label   Kind = "label"   // Text whose baseline stands at X, Y; Size is the height of its font
)

// Anchor says which end of a label stands at its X.
type Anchor string

// The anchors of a label; the empty anchor is Start.
const (
	Start  Anchor = "start"
	Middle Anchor = "middle"
	End    Anchor = "end"
)

// Mark is one shape of a picture.
type Mark struct {
	Kind         Kind
	Name         string // what it shows, for tests and for readers that cannot see it
	Role         Role
	X, Y, X2, Y2 float64
	Size         float64
	Text         string
	Anchor       Anchor
	Bold         bool
	Open         bool        // a box, dot or diamond drawn as its outline, filled with paper
	Dashed       bool        // a line of short strokes
	Reading      *qa.Reading // the one it shows, which is not to be changed; nil where it shows none or several
}

// Figure is a picture: marks in the order in which they are painted.
type Figure struct {
	Title         string // says in one sentence what is shown, for readers that cannot see it
	Width, Height float64
	Marks         []Mark
}

// Find returns the first mark of the name.
func (f Figure) Find(name string) (Mark, bool) {
	for _, m := range f.Marks {
		if m.Name == name {
			return m, true
		}
	}
	return Mark{}, false
}

// All returns every mark of the name, in the order of painting.
func (f Figure) All(name string) []Mark {
	var out []Mark
	for _, m := range f.Marks {
		if m.Name == name {
			out = append(out, m)
		}
	}
	return out
}

// add appends marks.
func (f *Figure) add(m ...Mark) { f.Marks = append(f.Marks, m...) }
