package main

// demoPlan is the plan of the worked example, as text: its comments are part of the example.
const demoPlan = `# The worked example: hub shell HS-40 of Kettlewick Cycle Parts (invented), cast by two foundries.
# Written by "go run ./cmd/dev cases"; nothing in it was measured.
format = "lotpair.plan/1"
title = "Hub shell HS-40: second foundry"
supports = "DEV-2291"
signatures = [{ meaning = "prepared" }]

[record]
part = "HS-40"
revision = "C"
quantity_reference = 1200
quantity_candidate = 1140
sampling = "every 30th shell in order of casting"
gauge_reference = "measuring station 14, calibrated to 2027-03"
gauge_candidate = "measuring station 14, calibrated to 2027-03"

[reference]
lot = "R-118"
source = "Existing foundry"
file = "hub-shell.xlsx"

[candidate]
lot = "C-022"
source = "Second foundry"
file = "hub-shell.xlsx"

[reading]
layout = "row-per-part"
sheet = "Data"
lot_column = "Lot"
part_column = "Part"
exclude = [{ cell = "Data!D17", reason = "dropped part, NCR-77" }]

[criterion]
objective = "equivalence"
alpha = 0.05
method = "welch"
margin = { tolerance_fraction = 0.10, of = "full", reason = "a tenth of the drawing's tolerance, agreed with design before the first casting" }

# The limits stand in the file as well; here they are part of what was decided beforehand.
[[characteristic]]
name = "Bore diameter"
unit = "mm"
lower = 39.975
target = 40.000
upper = 40.025

[[characteristic]]
name = "Flange run-out"
unit = "mm"
upper = 0.080
objective = "not-higher"
margin = { absolute = 0.008, reason = "what the flange may lose before the rotor rubs, note FN-12" }

[[characteristic]]
name = "Wall thickness"
unit = "mm"
lower = 3.900
target = 4.000
upper = 4.100

[[characteristic]]
name = "Bearing seat depth"
unit = "mm"
lower = 12.45
target = 12.50
upper = 12.55

[[characteristic]]
name = "Spoke hole pitch"
unit = "mm"
lower = 44.85
target = 45.00
upper = 45.15

[[characteristic]]
name = "Mass"
unit = "g"
lower = 176
target = 182
upper = 188
`
