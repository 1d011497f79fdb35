package importers

import "testing"

// A unit is taken off a heading where it can hardly be anything else.
func TestSplitUnit(t *testing.T) {
	for _, c := range []struct{ heading, name, unit string }{
		{"Width mm", "Width", "mm"},
		{"Breite in mm", "Breite", "mm"},
		{"Largeur en mm", "Largeur", "mm"},
		{"Gap/mm", "Gap", "mm"},
		{"Gap / µm", "Gap", "µm"},
		{"Cycle / s", "Cycle", "s"},
		{"Cycle in min", "Cycle", "min"},
		{"Time / s", "Time / s", ""},
		{"Sample mm", "Sample mm", ""},
		{"Pressure, bar", "Pressure", "bar"},
		{"Bore dia, mm", "Bore dia", "mm"},
		{"Voltage in V", "Voltage", "V"},
		{"Width in in", "Width", "in"},
		{"Width, in", "Width", "in"},
		{"Width/in", "Width", "in"},
		{"Ra2 in um", "Ra2", "um"},
		{"Mass_kg", "Mass_kg", ""},
		{"Speed m/s", "Speed", "m/s"},
		{"Speed in 1/min", "Speed", "1/min"},
		{"Density, g/cm³", "Density", "g/cm³"},
		{"Temp °C", "Temp", "°C"},
		{"Moisture %", "Moisture", "%"},
		{"Width [mm]", "Width", "mm"},
		{"Width (mm)", "Width", "mm"},
		{"Width (Position A)", "Width (Position A)", ""},
		{"Hole A", "Hole A", ""},
		{"Point, A", "Point, A", ""},
		{"Gap min", "Gap min", ""},
		{"Gap, min", "Gap, min", ""},
		{"Round bar", "Round bar", ""},
		{"Plug in", "Plug in", ""},
		{"OK Y/N", "OK Y/N", ""},
		{"S/N", "S/N", ""},
		{"Force at 5 mm", "Force at 5 mm", ""},
		{"Bore 40.000 ±0.025 mm", "Bore 40.000 ±0.025 mm", ""},
		{"Flow l/min", "Flow l/min", ""},
		{"Force per mm", "Force per mm", ""},
		{"mm", "mm", ""},
		{"m/s", "m/s", ""},
		{"in mm", "in mm", ""},
		{"Lot", "Lot", ""},
	} {
		if name, unit := splitUnit(c.heading); name != c.name || unit != c.unit {
			t.Errorf("%s: got %q and %q, want %q and %q", c.heading, name, unit, c.name, c.unit)
		}
	}
}
