package desk

import (
	"encoding/json"

	"lotpair/qa"
	"lotpair/qa/stats"
)

// Planner remembers what was planned: while a person types, only what changed is planned again. Its zero value is ready; nil
// remembers nothing. What it gives is the same either way.
type Planner struct {
	plans  map[string]Planned
	faults map[string]string
	powers map[stats.Design]float64
}

// mostPlans is how many plans are remembered before all are forgotten.
const mostPlans = 20_000

// planKey is all that a plan of one characteristic rests on.
func planKey(p qa.Plan, c qa.Characteristic) string {
	b, err := json.Marshal(struct {
		Criterion   qa.Criterion
		Pair, Group string
		C           qa.Characteristic
	}{p.Criterion, p.Reading.PairColumn, p.Reading.GroupColumn, c})
	if err != nil {
		return "" // a number that is none: it is refused before
	}
	return string(b)
}

func (m *Planner) planned(p qa.Plan, c qa.Characteristic) Planned {
	key := planKey(p, c)
	if m == nil || key == "" {
		return planned(p, c)
	}
	one, ok := m.plans[key]
	if !ok {
		if one = planned(p, c); m.plans == nil || len(m.plans) >= mostPlans {
			m.plans = map[string]Planned{}
		}
		m.plans[key] = one
	}
	return one
}

// fault is why the margin of one characteristic is not settled; empty where it is.
func (m *Planner) fault(p qa.Plan, c qa.Characteristic) string {
	key := planKey(p, c)
	if m == nil || key == "" {
		return plannedWith(p, c, false).Fault
	}
	fault, ok := m.faults[key]
	if !ok {
		if fault = plannedWith(p, c, false).Fault; m.faults == nil || len(m.faults) >= mostPlans {
			m.faults = map[string]string{}
		}
		m.faults[key] = fault
	}
	return fault
}

// power is how likely n parts a lot show one characteristic where there is no true difference.
func (m *Planner) power(p Planned, n int) (float64, error) {
	d := p.design
	d.NRef, d.NCand, d.Shift = n, n, 0
	if m == nil || !p.ready {
		return p.at(n, 0)
	}
	if known, ok := m.powers[d]; ok {
		return known, nil
	}
	power, err := p.at(n, 0)
	if err != nil {
		return power, err
	}
	if m.powers == nil || len(m.powers) >= mostPlans {
		m.powers = map[stats.Design]float64{}
	}
	m.powers[d] = power
	return power, nil
}
