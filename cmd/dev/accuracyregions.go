package main

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// A region is the part of a function's arguments in which one line of the table speaks.
type region struct {
	function string
	kind     string
	args     []string
	from, to []float64          // smallest and largest of each argument
	least    float64            // the smallest value that is not a quantile
	points   int                //
	worst    map[string]float64 // who -> worst relative error; NaN where some value was no number
	allowed  float64            // the largest error that a point of it may have
	holds    bool               // every point is within its own
}

// The regions of a function: probabilities below farTail apart, and more freedoms than manyFreedoms apart.
const (
	farTail      = 1e-25
	manyFreedoms = 1e6
)

// kindOf says which region a point belongs to.
func kindOf(p exactPoint) string {
	var kind []string
	for i, name := range accuracyFunctions[p.function].args {
		if strings.HasPrefix(name, "df") && p.args[i] > manyFreedoms {
			kind = append(kind, "many df")
			break
		}
	}
	probability := p.want
	if i := position(accuracyFunctions[p.function].args, "p"); i >= 0 {
		probability = p.args[i]
	}
	if probability > 0 && probability < farTail {
		kind = append(kind, "far tail")
	}
	return strings.Join(kind, ", ")
}

func position(all []string, s string) int {
	for i, a := range all {
		if a == s {
			return i
		}
	}
	return -1
}

// inRegions sorts the points of a table into regions, in the order of their first points. values are everyone's for each point.
func inRegions(points []exactPoint, values map[string][]float64) []*region {
	var out []*region
	known := map[string]*region{}
	for i, p := range points {
		key := p.function + "\n" + kindOf(p)
		r, ok := known[key]
		if !ok {
			args := accuracyFunctions[p.function].args
			r = &region{function: p.function, kind: kindOf(p), args: args, from: append([]float64{}, p.args...), to: append([]float64{}, p.args...), least: math.Inf(1), worst: map[string]float64{}, holds: true}
			known[key] = r
			out = append(out, r)
		}
		r.add(p)
		for who, all := range values {
			if len(all) == 0 || all[i] == missingValue {
				continue
			}
			off := relative(all[i], p.want)
			r.worst[who] = math.Max(r.worst[who], off) // NaN stays
			if who == "ours" && !(off <= p.allowed) {
				r.holds = false
			}
		}
	}
	return out
}

func (r *region) add(p exactPoint) {
	r.points++
	r.allowed = max(r.allowed, p.allowed)
	r.least = min(r.least, math.Abs(p.want))
	for i, a := range p.args {
		r.from[i], r.to[i] = min(r.from[i], a), max(r.to[i], a)
	}
}

// said is the region in words: the range of every argument, and for probabilities the smallest.
func (r *region) said() string {
	var out []string
	for i, name := range r.args {
		from, to := short(r.from[i]), short(r.to[i])
		if from != to {
			from += " to " + to
		}
		out = append(out, name+" "+from)
	}
	if position(r.args, "p") < 0 && r.least < 0.01 {
		out = append(out, "value from "+short(r.least))
	}
	if r.kind != "" {
		return r.kind + ": " + strings.Join(out, ", ")
	}
	return strings.Join(out, ", ")
}

// short writes a number with the digits that tell regions apart.
func short(v float64) string {
	if text := strconv.FormatFloat(v, 'g', -1, 64); len(text) <= 7 {
		return text
	}
	if v > 0.99 && v < 1 {
		return "1-" + strconv.FormatFloat(1-v, 'g', 2, 64)
	}
	return strconv.FormatFloat(v, 'g', 4, 64)
}

// accuracyTable lays the regions out.
func accuracyTable(regions []*region, programs []outsider) string {
	head := []string{"function", "region", "points", "worst error", "claimed", "", "gonum"}
	for _, o := range programs {
		head = append(head, o.name)
	}
	rows := [][]string{head}
	for _, r := range regions {
		verdict := "holds"
		if !r.holds {
			verdict = "DOES NOT HOLD"
		}
		row := []string{r.function, r.said(), strconv.Itoa(r.points), r.errorOf("ours"), "≤ " + short(r.allowed), verdict, r.errorOf("gonum")}
		for _, o := range programs {
			if o.found == "" {
				row = append(row, "not installed")
				continue
			}
			row = append(row, r.errorOf(o.name))
		}
		rows = append(rows, row)
	}
	return table(rows)
}

// errorOf is the worst error of one of them.
func (r *region) errorOf(who string) string {
	off, ok := r.worst[who]
	switch {
	case !ok:
		return nothing
	case math.IsNaN(off):
		return "no number"
	case off == 0:
		return "0"
	case off >= 1:
		return "no digit"
	}
	return fmt.Sprintf("%.1e", off)
}
