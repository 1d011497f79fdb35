package main

import (
	"bufio"
	"fmt"
	"math/rand/v2"
	"os"
	"path/filepath"
)

// writePlan writes a plan and its file of readings, a row a part, for the bench of the window, and gives the plan's path.
func writePlan(dir, name string, characteristics, partsALot int) (string, error) {
	to := filepath.Join(dir, name+".toml")
	plan := fmt.Sprintf(`format = "lotpair.plan/1"
title = "Bench: %[1]s"

[reference]
lot = "R"
file = "%[1]s.csv"

[candidate]
lot = "C"
file = "%[1]s.csv"

[reading]
layout = "row-per-part"
lot_column = "Lot"
part_column = "Part"

[criterion]
objective = "equivalence"
margin = { absolute = 0.01, reason = "for the bench" }
`, name)
	if err := os.WriteFile(to, []byte(plan), 0o600); err != nil {
		return "", err
	}
	f, err := os.Create(filepath.Join(dir, name+".csv"))
	if err != nil {
		return "", err
	}
	w := bufio.NewWriterSize(f, 1<<20)
	fmt.Fprint(w, "Lot,Part")
	for c := range characteristics {
		fmt.Fprintf(w, ",Length %d [mm]", c+1)
	}
	random := rand.New(rand.NewPCG(3, 4))
	for part := range 2 * partsALot {
		lot := "R"
		if part >= partsALot {
			lot = "C"
		}
		fmt.Fprintf(w, "\n%s,%d", lot, part+1)
		for range characteristics {
			fmt.Fprintf(w, ",%.4f", 12+0.01*random.NormFloat64())
		}
	}
	fmt.Fprintln(w)
	if err := w.Flush(); err != nil {
		return "", err
	}
	return to, f.Close()
}
