package draw

import (
	_ "embed" // the fonts are part of the program: a picture must not depend on what a machine has installed
	"fmt"
	"strings"

	"golang.org/x/image/font"
	"golang.org/x/image/font/opentype"
)

// Noto Sans, SIL Open Font License 1.1; see fonts/OFL.txt.
var (
	//go:embed fonts/NotoSans-Regular.ttf
	regular []byte
	//go:embed fonts/NotoSans-Bold.ttf
	bold []byte
)

// faces makes the fonts of one picture, a face for each size that it uses.
type faces struct {
	regular, bold *opentype.Font
	made          map[faceKey]font.Face
}

type faceKey struct {
	bold bool
	size float64
}

func newFaces() (*faces, error) {
	r, err := opentype.Parse(regular)
	if err != nil {
		return nil, fmt.Errorf("embedded font: %w", err)
	}
	b, err := opentype.Parse(bold)
	if err != nil {
		return nil, fmt.Errorf("embedded font: %w", err)
	}
	return &faces{regular: r, bold: b, made: map[faceKey]font.Face{}}, nil
}

// readable is s as the fonts can set it: where they lack the minus sign, the dash that looks like it stands for it.
func (f *faces) readable(s string) string {
	const minus, dash = "\u2212", "\u2013"
	if !strings.Contains(s, minus) {
		return s
	}
	if i, err := f.regular.GlyphIndex(nil, []rune(minus)[0]); err == nil && i != 0 {
		return s
	}
	return strings.ReplaceAll(s, minus, dash)
}

// of is the face of the given height in pixels.
func (f *faces) of(heavy bool, size float64) (font.Face, error) {
	key := faceKey{heavy, size}
	if face, ok := f.made[key]; ok {
		return face, nil
	}
	family := f.regular
	if heavy {
		family = f.bold
	}
	face, err := opentype.NewFace(family, &opentype.FaceOptions{Size: size, DPI: 72, Hinting: font.HintingNone})
	if err != nil {
		return nil, fmt.Errorf("embedded font: %w", err)
	}
	f.made[key] = face
	return face, nil
}
