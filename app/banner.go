package app

import (
	"fmt"
	"strings"

	"fyne.io/fyne/v2"
)

const (
	bannerLine  = 20
	bannerLines = 5 // more are scrolled
	bannerRight = 110
)

// bannerText is what went wrong, or what is being done.
func (w *window) bannerText() string {
	s := w.state
	switch {
	case s.Job.Name != "" && w.jobs.quiet:
		return ""
	case s.Job.Name != "":
		text := s.Job.Name
		if p := w.jobs.doing; p.Doing != "" {
			text += ": " + p.Doing
			if p.Of != "" && !strings.Contains(text, p.Of) {
				text += " (" + p.Of + ")"
			}
		}
		if share := w.share(); share >= 0 {
			return fmt.Sprintf("%s, %.0f %%", text, 100*share)
		}
		return text + " …"
	case s.Problem.Text != "":
		return s.Problem.Place + ": " + s.Problem.Text
	}
	return ""
}

// share is how far the job that runs has come; below 0 where that is not known.
func (w *window) share() float64 {
	if w.jobs.doing.Doing != "" {
		return w.jobs.doing.Share()
	}
	return w.state.Job.Share
}

// bannerWrapped is the banner's text in lines; what is one fact a line stays so.
func (w *window) bannerWrapped(width float32) []string {
	var out []string
	for _, fact := range strings.Split(strings.TrimSpace(w.bannerText()), "\n") {
		out = append(out, fontBody.wrap(fact, width, width)...)
	}
	return out
}

// bannerHeight is 0 while there is nothing to say.
func (w *window) bannerHeight(width float32) float32 {
	if w.bannerText() == "" {
		return 0
	}
	n := len(w.bannerWrapped(width - 2*margin - bannerRight))
	return float32(min(n, bannerLines))*bannerLine + 16
}

func (w *window) newProblem() *scrolled {
	return newScrolled(&sheet{
		palette: w.palette,
		height:  func(width float32) float32 { return float32(len(w.bannerWrapped(width))) * bannerLine },
		paint: func(p *pen, size fyne.Size, _, _ float32) {
			p.lines(w.bannerWrapped(size.Width), 0, 15, bannerLine, fontBody, p.Text)
		},
	})
}

// paintBanner draws an error where it happened, or the work that runs with what ends it. It covers nothing.
func (w *window) paintBanner(p *pen, size fyne.Size) {
	if w.bannerText() == "" {
		return
	}
	p.box(0, 0, size.Width, size.Height, p.Margin)
	p.box(0, 0, 4, size.Height, p.Text)
	p.across(0, size.Width, size.Height-0.5, 1, p.Text)
	w.problem.place(p, margin, 8, size.Width-2*margin-bannerRight, size.Height-16)
	b := w.act.read
	if w.state.Job.Name != "" {
		b = w.act.cancel
		if share := w.share(); share > 0 {
			p.across(0, size.Width*float32(share), size.Height-1.5, 3, p.Text)
		}
	}
	wide := min(b.wide(), bannerRight)
	p.put(b, size.Width-margin-wide, size.Height/2-14, wide, 28)
	b.Refresh()
}
