package cells

// dress is what fonts and fills say that people read meaning into, and which of them each cell style uses.
type dress struct {
	struck, filled []bool // by the index of the font and the fill
	used           [][2]int
}

// font reads one child of <fonts>.
func (d *dress) font(x *scanner) error {
	if len(d.struck) == maxStyles {
		return damaged(x.part, "more than %d fonts", maxStyles)
	}
	struck := false
	err := x.children(func() error {
		if v := x.attr("val"); x.is("strike") && (v == nil || yes(v)) {
			struck = true
		}
		return nil
	})
	d.struck = append(d.struck, struck)
	return err
}

// fill reads one child of <fills>: a pattern other than none and the grey that every file has is a fill.
func (d *dress) fill(x *scanner) error {
	if len(d.filled) == maxStyles {
		return damaged(x.part, "more than %d fills", maxStyles)
	}
	filled := false
	err := x.children(func() error {
		p := string(x.attr("patternType"))
		filled = filled || x.is("gradientFill") || x.is("patternFill") && p != "" && p != "none" && p != "gray125"
		return nil
	})
	d.filled = append(d.filled, filled)
	return err
}

// use keeps which font and fill a cell style has.
func (d *dress) use(x *scanner) {
	font, _ := whole(x.attr("fontId"))
	fill, _ := whole(x.attr("fillId"))
	d.used = append(d.used, [2]int{font, fill})
}

// marks are those of each cell style.
func (d *dress) marks() []Marks {
	all := make([]Marks, len(d.used))
	for i, u := range d.used {
		if u[0] < len(d.struck) && d.struck[u[0]] {
			all[i] |= Struck
		}
		if u[1] < len(d.filled) && d.filled[u[1]] {
			all[i] |= Filled
		}
	}
	return all
}
