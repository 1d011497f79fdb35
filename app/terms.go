package app

import (
	"slices"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
	"lotpair/qa"
)

// termsForm are the lines of a criterion, or of what a characteristic states for itself.
type termsForm struct {
	objective, claim, method, margin, of, look *pick
	first, second, mean, sd, reason, approved  *field
	alpha, spread, guard, power                *field
	decimal                                    desk.Decimal
}

// addTerms puts the lines of a criterion into a form. own: those that a characteristic may state for itself.
func (f *form) addTerms(t desk.Terms, own bool) *termsForm {
	x := &termsForm{decimal: t.Decimal}
	words := func(all []string) []string {
		if own {
			return slices.Insert(slices.Clone(all), 0, desk.AsAll)
		}
		return all
	}
	x.objective = f.choice("Objective", t.Objective, words(desk.Objectives), "what is to be shown; a difference needs no margin and is never part of the overall verdict")
	if !own {
		x.claim = f.choice("Claim", t.Claim, desk.Claims, "what the verdict may be said of; a sample of groups or sources needs their column")
	}
	x.method = f.choice("Method", t.Method, words(desk.Methods), "Welch: spreads may differ. Paired: needs the pairs' column. Log: ratio of geometric means")
	margins := desk.Margins
	if own {
		margins = margins[:len(margins)-1] // a margin of its own, or that of all
	}
	x.margin = f.choice("Margin", t.Margin, words(margins), "equivalence limit (ASTM E2935): the largest difference that does not matter in use")
	x.first = f.text("Number, or lower end", t.First, "per cent for a part of the tolerance and a ratio; else in the unit")
	x.second = f.text("Upper end", t.Second, "of a margin from … to …; empty for one end alone")
	x.of = f.choice("Part of the", t.Of, desk.Widths, "")
	x.mean = f.text("Mean known beforehand", t.Mean, "for a margin that keeps a Ppk; empty takes the target")
	x.sd = f.text("SD known beforehand", t.SD, "for a margin that keeps a Ppk or is a multiple; empty takes the planned sd")
	x.reason = f.text("Why this margin", t.Reason, "")
	x.approved = f.text("Margin approved by", t.ApprovedBy, "")
	x.alpha = f.text("alpha", t.Alpha, "largest probability of calling a lot equivalent that is not")
	x.guard = f.text("Guard", t.Guard, "taken off both ends of the margin for the bias of measuring, in the unit (JCGM 106)")
	x.spread = f.text("Spread ratio at most", t.Spread, "candidate over reference standard deviation; then part of the verdict")
	if !own {
		x.power = f.text("Power", t.Power, "probability with which a study of two equal lots shows it")
		x.look = f.choice("Second sample", t.Look, desk.Looks, "one enlargement allowed: alpha is halved for each of the two looks")
	}
	return x
}

// terms are the lines as they are typed.
func (x *termsForm) terms() desk.Terms {
	t := desk.Terms{
		Objective: x.objective.Selected, Method: x.method.Selected, Margin: x.margin.Selected, First: x.first.Text, Second: x.second.Text, Of: x.of.Selected,
		Decimal: x.decimal, Mean: x.mean.Text, SD: x.sd.Text, Reason: x.reason.Text, ApprovedBy: x.approved.Text, Alpha: x.alpha.Text, Spread: x.spread.Text, Guard: x.guard.Text,
	}
	if x.claim != nil {
		t.Claim, t.Power, t.Look = x.claim.Selected, x.power.Text, x.look.Selected
	}
	return t
}

// mostConsequences is how many lines a form says.
const mostConsequences = 8

// askTerms asks for all terms of the criterion.
func (w *window) askTerms() {
	if w.busy() || !w.state.Drafting || w.state.Sealed() {
		return
	}
	f := w.newForm()
	x := f.addTerms(desk.TermsOf(desk.Unsettled(w.state.Record.Plan), w.decimal), false)
	f.live = w.consequences(x)
	f.ask("All terms of the criterion", "Keep", func() error {
		p, err := x.terms().Into(desk.Unsettled(w.state.Record.Plan))
		if err != nil {
			return err
		}
		w.choose("terms of the criterion", func(to *qa.Plan) { *to = p })()
		return nil
	})
}

// consequences say at once what the typed terms come to.
func (w *window) consequences(x *termsForm) func() []string {
	return func() []string {
		p, err := x.terms().Into(desk.Unsettled(w.state.Record.Plan))
		if err != nil {
			return []string{err.Error()}
		}
		return desk.Consequences(p, mostConsequences)
	}
}

// askAmend asks for a change of the sealed criterion: the reason first.
func (w *window) askAmend() {
	if w.busy() || !w.state.Sealed() || w.state.Closed() {
		return
	}
	f := w.newForm()
	reason := f.text("Reason", "", "why the sealed criterion is changed; both verdicts, old and new, stay in the record")
	x := f.addTerms(desk.TermsOf(desk.Unsettled(w.state.Record.Plan), w.decimal), false)
	f.live = w.consequences(x)
	f.ask("Amend the criterion", "Amend", func() error {
		p, err := x.terms().Into(desk.Unsettled(w.state.Record.Plan))
		if err != nil {
			return err
		}
		p = desk.Settled(p)
		if _, err := w.state.Amended(p, reason.Text, person(), now()); err != nil {
			return err
		}
		w.change("Amending", func(s desk.State) (desk.State, error) { return s.Amended(p, reason.Text, person(), now()) })
		return nil
	})
}

// offerObjective offers what may be claimed.
func (w *window) offerObjective() {
	w.offerTerms(w.act.objective, desk.Objectives, "objective", func(t *desk.Terms, word string) { t.Objective = word })
}

func (w *window) offerClaim() {
	w.offerTerms(w.act.claim, desk.Claims, "claim", func(t *desk.Terms, word string) { t.Claim = word })
}

// offerMethod offers the methods. The log method and bounds of a ratio go together, each brings the other.
func (w *window) offerMethod() {
	var items []*fyne.MenuItem
	for _, m := range desk.Methods {
		items = append(items, fyne.NewMenuItem(m, w.choose("method "+m, func(p *qa.Plan) { *p = desk.WithMethod(*p, m) })))
	}
	w.offer(w.act.method, items...)
}

// offerTerms offers the words of one term.
func (w *window) offerTerms(under *button, words []string, name string, set func(*desk.Terms, string)) {
	var items []*fyne.MenuItem
	for _, word := range words {
		items = append(items, fyne.NewMenuItem(word, w.choose(name+": "+word, func(p *qa.Plan) {
			open := desk.Unsettled(*p)
			t := desk.TermsOf(open, w.decimal)
			set(&t, word)
			if next, err := t.Into(open); err == nil {
				*p = next
			}
		})))
	}
	w.offer(under, items...)
}

// offerWay offers the two ways of stating a margin of its kind.
func (w *window) offerWay() {
	words, _ := desk.Ways(w.state.Record.Plan)
	var items []*fyne.MenuItem
	for i, word := range words {
		items = append(items, fyne.NewMenuItem(word, w.choose("margin: "+word, func(p *qa.Plan) { *p = desk.WithWay(*p, i == 1) })))
	}
	w.offer(w.act.of, items...)
}

// chooseKind states the margin in another way; the number is asked anew, because it means another thing.
func (w *window) chooseKind(k desk.MarginKind) {
	if k == desk.KindOf(w.state.Record.Plan) && w.state.Record.Plan.Criterion.Margin != nil {
		return
	}
	w.choose("margin: "+desk.MarginKinds[k], func(p *qa.Plan) { *p = desk.WithKind(*p, k) })()
}

// sealDraft fixes the criterion.
func (w *window) sealDraft() {
	w.change("Sealing", func(s desk.State) (desk.State, error) {
		s.Record.Plan = desk.Settled(s.Record.Plan)
		return s.Seal(person(), now())
	})
}
