package app

import (
	"image/color"
	"os"
	"runtime"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/theme"

	"lotpair/qa/figure/draw"
)

// look is the theme: ink on paper, and the same roles on a dark ground. Fonts and icons are the toolkit's own (Noto Sans).
type look struct {
	forced *fyne.ThemeVariant // nil follows the system
	clears bool               // the window is cleared by the toolkit's GL painter
}

func (l look) variant(v fyne.ThemeVariant) fyne.ThemeVariant {
	if l.forced != nil {
		return *l.forced
	}
	return v
}

// wanted is the look of the window: dark where that is asked for, else what the system says, and paper where a system has no
// reliable way of saying.
func wanted(dark bool) look {
	light, night := theme.VariantLight, theme.VariantDark
	switch {
	case dark:
		return look{forced: &night}
	case runtime.GOOS == "windows" || runtime.GOOS == "darwin" || os.Getenv("FYNE_THEME") != "":
		return look{}
	}
	return look{forced: &light}
}

// palette is the colours of the roles, the same for text in the window and for marks in its pictures.
func palette(v fyne.ThemeVariant) draw.Palette {
	if v == theme.VariantDark {
		return draw.Dark()
	}
	return draw.Light()
}

// Color implements fyne.Theme.
func (l look) Color(name fyne.ThemeColorName, v fyne.ThemeVariant) color.Color {
	v = l.variant(v)
	p := palette(v)
	switch name {
	case theme.ColorNameBackground:
		if l.clears {
			return cleared(p.Paper)
		}
		return p.Paper
	case theme.ColorNameOverlayBackground, theme.ColorNameMenuBackground, theme.ColorNameInputBackground, theme.ColorNameHeaderBackground:
		return p.Paper
	case theme.ColorNameForeground, theme.ColorNamePrimary, theme.ColorNameHyperlink, theme.ColorNameError, theme.ColorNameWarning, theme.ColorNameSuccess:
		return p.Text
	case theme.ColorNameForegroundOnPrimary, theme.ColorNameForegroundOnError, theme.ColorNameForegroundOnWarning, theme.ColorNameForegroundOnSuccess:
		return p.Paper
	case theme.ColorNamePlaceHolder, theme.ColorNameInputBorder, theme.ColorNameScrollBar:
		return p.MutedText
	case theme.ColorNameDisabled:
		return p.Muted
	case theme.ColorNameButton, theme.ColorNameDisabledButton, theme.ColorNameSeparator, theme.ColorNameSelection:
		return p.Rule
	case theme.ColorNameShadow:
		return color.NRGBA{A: 0x38}
	case theme.ColorNameHover, theme.ColorNameFocus, theme.ColorNamePressed:
		return faint(p.Text, 0x18)
	}
	return theme.DefaultTheme().Color(name, v)
}

// cleared is a colour such that the window has it when it is cleared: the toolkit (2.7) divides by 255² there, not by 65535, and a
// box of paper over the whole window would cost ten milliseconds a frame without a graphics processor.
func cleared(c color.NRGBA) color.RGBA64 {
	return color.RGBA64{R: uint16(c.R) * 0xFF, G: uint16(c.G) * 0xFF, B: uint16(c.B) * 0xFF, A: 0xFFFF}
}

// Font implements fyne.Theme.
func (look) Font(s fyne.TextStyle) fyne.Resource { return theme.DefaultTheme().Font(s) }

// Icon implements fyne.Theme.
func (look) Icon(n fyne.ThemeIconName) fyne.Resource { return theme.DefaultTheme().Icon(n) }

// Size implements fyne.Theme.
func (look) Size(n fyne.ThemeSizeName) float32 {
	switch n {
	case theme.SizeNameText:
		return 14
	case theme.SizeNameInputRadius, theme.SizeNameSelectionRadius:
		return 3
	case theme.SizeNameScrollBarSmall:
		return 4
	}
	return theme.DefaultTheme().Size(n)
}

// faint is a colour that lets most of what is below it through.
func faint(c color.NRGBA, alpha uint8) color.NRGBA {
	c.A = alpha
	return c
}
