// Package draw paints the marks of package figure: as an anti-aliased image and as SVG. The window, the workbook and saved
// pictures use this one painter. The same figure gives the same picture.
package draw
