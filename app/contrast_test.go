package app

import (
	"image/color"
	"math"
	"testing"

	"lotpair/importers"
	"lotpair/qa/figure/draw"
)

// luminance is the relative luminance of a colour (WCAG 2.1, "relative luminance").
func luminance(c color.Color) float64 {
	r, g, b, _ := c.RGBA()
	l := func(v uint32) float64 {
		x := float64(v) / 0xFFFF
		if x <= 0.04045 {
			return x / 12.92
		}
		return math.Pow((x+0.055)/1.055, 2.4)
	}
	return 0.2126*l(r) + 0.7152*l(g) + 0.0722*l(b)
}

// over is a colour laid over a ground.
func over(c, ground color.NRGBA) color.NRGBA {
	a := float64(c.A) / 255
	mix := func(x, y uint8) uint8 { return uint8(math.Round(float64(x)*a + float64(y)*(1-a))) }
	return color.NRGBA{R: mix(c.R, ground.R), G: mix(c.G, ground.G), B: mix(c.B, ground.B), A: 0xFF}
}

// TestContrast holds every text of the window against the grounds it stands on: at least 4.5 to 1.
func TestContrast(t *testing.T) {
	for name, p := range map[string]draw.Palette{"light": draw.Light(), "dark": draw.Dark()} {
		pn := &pen{Palette: p}
		grounds := map[string]color.NRGBA{
			"paper": p.Paper, "margin": p.Margin, "selected line": over(faint(p.Text, 0x0D), p.Paper), "selected margin": over(faint(p.Text, 0x0D), p.Margin),
			"cursor": over(faint(p.Text, 0x14), p.Paper),
		}
		for _, plays := range []string{importers.PlaysLot, importers.PlaysPart, importers.PlaysCharacteristic} {
			grounds[plays] = over(tint(pn, plays).(color.NRGBA), p.Paper)
		}
		inks := map[string]color.NRGBA{"text": p.Text, "muted": p.MutedText, "reference": p.ReferenceText, "candidate": p.CandidateText}
		for ground, g := range grounds {
			for ink, c := range inks {
				if (ink == "reference" || ink == "candidate") && ground != "paper" && ground != "margin" {
					continue // no such text stands there
				}
				a, b := luminance(c), luminance(g)
				if ratio := (math.Max(a, b) + 0.05) / (math.Min(a, b) + 0.05); ratio < 4.5 {
					t.Errorf("%s: %s on %s: got %.2f to 1, want at least 4.5", name, ink, ground, ratio)
				}
			}
		}
		a, b := luminance(p.Text), luminance(p.Paper)
		if ratio := (math.Max(a, b) + 0.05) / (math.Min(a, b) + 0.05); ratio < 7 {
			t.Errorf("%s: text on paper and a main button: got %.2f to 1, want at least 7", name, ratio)
		}
	}
}
