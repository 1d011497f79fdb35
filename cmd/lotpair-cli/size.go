package main

import (
	"encoding/json"
	"errors"
	"flag"
	"fmt"
	"strconv"
	"strings"

	"lotpair/qa"
)

// sizeFlags is what size was asked for, as given.
type sizeFlags struct {
	sd, margin, marginLower, marginUpper, shift, alpha float64
	power, ratio, sdCandidate, spreadRatio             float64
	guard, uncertaintyReference, uncertaintyCandidate  float64
	sdBetween                                          float64
	objective, design, method, fractions               string
	characteristics, n, perGroup                       int
	json                                               bool
	given                                              map[string]bool
}

func (p *program) size(args []string) int {
	s := sizeFlags{given: map[string]bool{}}
	f := p.flags("size --sd S (--margin M | --margin-lower A --margin-upper B) [--shift D] [--alpha 0.05] [--power 0.9] [--ratio 1] [--objective O] [--design independent|paired] [--method welch|pooled] [--sd-candidate S] [--spread-ratio R] [--fractions P1 P2] [--guard G] [--uncertainty-reference U] [--uncertainty-candidate U] [--sd-between S --per-group M] [--characteristics K] [--n N] [--json]",
		"Says how many readings a lot a study needs, or with --n how likely it is to show what it is to. The power is exact for normal readings\n(for fractions: counted out); it is the smallest number with at least that power. A margin and a standard deviation are in one unit.\nWith a spread ratio the power is that of showing mean and spread both, the spread by its F interval.",
		"lotpair-cli size --sd 0.01 --margin 0.006 --shift 0.001")
	f.Float64Var(&s.sd, "sd", 0, "true standard deviation `S` of one reading; paired: of the differences")
	f.Float64Var(&s.margin, "margin", 0, "the margin is from -`M` to M; one-sided objectives take the end that they ask for")
	f.Float64Var(&s.marginLower, "margin-lower", 0, "lower end `A` of the margin")
	f.Float64Var(&s.marginUpper, "margin-upper", 0, "upper end `B` of the margin")
	f.Float64Var(&s.shift, "shift", 0, "true difference `D` of the means, candidate minus reference (default 0)")
	f.Float64Var(&s.alpha, "alpha", qa.DefaultAlpha, "largest `probability` of a false verdict")
	f.Float64Var(&s.power, "power", qa.DefaultPower, "`probability` with which it is to be shown")
	f.Float64Var(&s.ratio, "ratio", 1, "`candidate` over reference readings; n_candidate is rounded up")
	f.StringVar(&s.objective, "objective", string(qa.Equivalence), "`O`: equivalence, not-lower, not-higher; difference, lower, higher (these need --shift and take no margin)")
	f.StringVar(&s.design, "design", "independent", "`D`: independent, or paired (n is then pairs)")
	f.StringVar(&s.method, "method", qa.StudyPooled, "`test` planned for: pooled or welch")
	f.Float64Var(&s.sdCandidate, "sd-candidate", 0, "true standard deviation `S` of one reading of the candidate (default: that of --sd)")
	f.Float64Var(&s.spreadRatio, "spread-ratio", 0, "the ratio of standard deviations, candidate over reference, is to be shown below `R`")
	f.StringVar(&s.fractions, "fractions", "", "compare parts that fail: true fractions `P1 P2` of reference and candidate, margin in fractions")
	f.Float64Var(&s.guard, "guard", 0, "`G` in the unit is taken off both ends of the margin, as the plan's guard is (default 0)")
	f.Float64Var(&s.uncertaintyReference, "uncertainty-reference", 0, "standard uncertainty `U` of the bias of the reference's measuring system; the power counts what is not known of both")
	f.Float64Var(&s.uncertaintyCandidate, "uncertainty-candidate", 0, "the same `U` of the candidate's")
	f.Float64Var(&s.sdBetween, "sd-between", 0, "true standard deviation `S` of the means of groups (lots of a source, heats): groups are counted, --sd is within one")
	f.IntVar(&s.perGroup, "per-group", 0, "`M` readings a group, with --sd-between")
	f.IntVar(&s.characteristics, "characteristics", 1, "`K` independent characteristics must all pass")
	f.IntVar(&s.n, "n", 0, "reference readings (pairs, groups) `N`: say the power, and the narrowest margin shown with --power")
	f.BoolVar(&s.json, "json", false, "print as JSON (lotpair.size/1)")
	if _, code, err := f.parse(joinFractions(args)); err != nil {
		return code
	}
	f.Visit(func(x *flag.Flag) { s.given[x.Name] = true })
	study, err := s.study()
	if err != nil {
		return p.usageError(f, err.Error())
	}
	size, err := study.Size()
	if err != nil {
		p.say(fmt.Errorf("size: %w", err))
		return exitUsage
	}
	if s.json {
		b, err := json.MarshalIndent(size, "", "  ")
		if err != nil {
			p.say(err)
			return exitFault
		}
		fmt.Fprintf(p.out, "%s\n", b)
		return exitDone
	}
	p.printSize(study, size)
	return exitDone
}

// joinFractions makes one value of the two that follow --fractions.
func joinFractions(args []string) []string {
	for i, a := range args {
		if (a == "--fractions" || a == "-fractions") && i+2 < len(args) {
			out := append([]string{}, args[:i]...)
			return append(append(out, "--fractions="+args[i+1]+" "+args[i+2]), args[i+3:]...)
		}
	}
	return args
}

// study is what the flags ask; an error says which do not go together.
func (s sizeFlags) study() (qa.Study, error) {
	st := qa.Study{
		Objective: qa.Objective(s.objective), Method: s.method, SD: s.sd, SDCandidate: s.sd, Shift: s.shift, Alpha: s.alpha,
		Power: s.power, Ratio: s.ratio, SpreadRatio: s.spreadRatio, Characteristics: s.characteristics, N: s.n,
		Guard: s.guard, SDBetween: s.sdBetween, PerGroup: s.perGroup,
		Uncertainty: qa.DifferenceUncertainty(s.uncertaintyReference, s.uncertaintyCandidate),
	}
	if s.uncertaintyReference < 0 || s.uncertaintyCandidate < 0 {
		return st, errors.New("found an uncertainty below 0, want a standard uncertainty from 0")
	}
	if s.given["sd-between"] != s.given["per-group"] || s.given["sd-between"] && !(s.sdBetween > 0) {
		return st, errors.New("found --sd-between and --per-group not both, want a standard deviation above 0 and the readings a group")
	}
	if s.given["sd-candidate"] {
		st.SDCandidate = s.sdCandidate
	}
	switch st.Objective {
	case qa.Equivalence, qa.NotLower, qa.NotHigher, qa.Difference, qa.Lower, qa.Higher:
	default:
		return st, fmt.Errorf("found --objective %q, want equivalence, not-lower, not-higher, difference, lower or higher", s.objective)
	}
	if s.method != qa.StudyPooled && s.method != qa.StudyWelch {
		return st, fmt.Errorf("found --method %q, want pooled or welch", s.method)
	}
	if s.design != "independent" && s.design != "paired" {
		return st, fmt.Errorf("found --design %q, want independent or paired", s.design)
	}
	if s.given["n"] && s.n < 2 {
		return st, fmt.Errorf("found --n %d, want at least 2", s.n)
	}
	if s.given["spread-ratio"] && !(s.spreadRatio > 0) {
		return st, fmt.Errorf("found --spread-ratio %v, want a number above 0", s.spreadRatio)
	}
	var err error
	switch {
	case s.given["fractions"]:
		st.Method = qa.StudyFractions
		if st.Fractions, err = s.twoFractions(); err != nil {
			return st, err
		}
		err = s.not("with --fractions", "sd", "sd-candidate", "shift", "spread-ratio", "method", "design", "uncertainty-reference", "uncertainty-candidate", "sd-between")
	case !s.given["sd"]:
		err = errors.New("found no --sd, want the true standard deviation of one reading (or --fractions)")
	case s.design == "paired":
		st.Method = qa.StudyPaired
		err = s.not("with --design paired", "sd-candidate", "spread-ratio", "method", "ratio", "sd-between")
	}
	if err != nil {
		return st, err
	}
	return st, s.margins(&st)
}

// not refuses flags that have no meaning beside another.
func (s sizeFlags) not(where string, names ...string) error {
	for _, n := range names {
		if s.given[n] {
			return fmt.Errorf("found --%s %s, want it left out", n, where)
		}
	}
	return nil
}

func (s sizeFlags) twoFractions() (two [2]float64, err error) {
	words := strings.FieldsFunc(s.fractions, func(r rune) bool { return r == ' ' || r == ',' })
	if len(words) != 2 {
		return two, fmt.Errorf("found --fractions %q, want two numbers: reference, then candidate", s.fractions)
	}
	for i, w := range words {
		if two[i], err = strconv.ParseFloat(w, 64); err != nil {
			return two, fmt.Errorf("found --fractions %q, want two numbers: reference, then candidate", s.fractions)
		}
	}
	return two, nil
}

// margins sets the ends of the margin that the objective asks for.
func (s sizeFlags) margins(st *qa.Study) error {
	if !st.Objective.AgainstMargin() {
		if err := s.not("with --objective "+s.objective, "margin", "margin-lower", "margin-upper"); err != nil {
			return err
		}
		if !s.given["shift"] && !s.given["fractions"] {
			return fmt.Errorf("found no --shift with --objective %s, want the true difference that is to be shown", s.objective)
		}
		return nil
	}
	low, high := s.given["margin-lower"], s.given["margin-upper"]
	lower, upper := s.marginLower, s.marginUpper
	if s.given["margin"] {
		if low || high {
			return errors.New("found --margin beside --margin-lower or --margin-upper, want either")
		}
		if !(s.margin > 0) {
			return fmt.Errorf("found --margin %v, want a number above 0", s.margin)
		}
		low, high, lower, upper = true, true, -s.margin, s.margin
	} else if st.Objective == qa.NotLower && high || st.Objective == qa.NotHigher && low {
		return fmt.Errorf("found an end of the margin that --objective %s does not ask for, want the other alone", s.objective)
	}
	needsLow, needsHigh := st.Objective != qa.NotHigher, st.Objective != qa.NotLower
	switch {
	case !low && !high && st.SpreadRatio > 0:
		return nil // the spread alone
	case needsLow && !low || needsHigh && !high:
		return fmt.Errorf("found no full margin for --objective %s, want --margin, or the ends that it asks for", s.objective)
	}
	if needsLow {
		st.MarginLower = &lower
	}
	if needsHigh {
		st.MarginUpper = &upper
	}
	return nil
}

// printSize says the answer and what it rests on.
func (p *program) printSize(s qa.Study, z qa.StudySize) {
	readings := fmt.Sprintf("%d reference and %d candidate readings", z.NReference, z.NCandidate)
	switch {
	case z.PerGroup > 0:
		readings = fmt.Sprintf("%d reference and %d candidate groups of %s", z.NReference, z.NCandidate, qa.Count(z.PerGroup, "reading", "readings"))
	case s.Method == qa.StudyPaired:
		readings = qa.Count(z.NReference, "pair", "pairs")
	case s.Method == qa.StudyFractions:
		readings = fmt.Sprintf("%d reference and %d candidate parts", z.NReference, z.NCandidate)
	}
	fmt.Fprintf(p.out, "%s: power %s\n", readings, strconv.FormatFloat(z.Power, 'f', 6, 64))
	fmt.Fprintf(p.out, "method     %s\n", map[string]string{
		qa.StudyPooled:    "pooled: two lots tested with one common standard deviation, exact; --method welch plans for the test that compare uses by itself",
		qa.StudyWelch:     "welch: exact, integrated over both standard deviations",
		qa.StudyPaired:    "paired: the differences of pairs, exact",
		qa.StudyFractions: "miettinen-nurminen: score test, all counts gone through",
		qa.StudySpread:    "f-interval: the F interval of the ratio of standard deviations, exact",
	}[z.Method])
	fmt.Fprintf(p.out, "shown is   %s\n", shownBy(s))
	if s.Characteristics > 1 {
		fmt.Fprintf(p.out, "power is   that of %d independent characteristics all passing\n", s.Characteristics)
	}
	if s.Guard > 0 {
		fmt.Fprintf(p.out, "guard      %s off both ends of the margin; the margins here are before it\n", qa.Plain(s.Guard))
	}
	if s.Uncertainty > 0 {
		fmt.Fprintf(p.out, "bias       of the measuring systems counted: standard uncertainty %s in the difference, however many readings\n", qa.ThreeDigits(s.Uncertainty))
	}
	if s.SDBetween > 0 {
		fmt.Fprintf(p.out, "groups     are a random sample: standard deviation %s between them and %s within\n", qa.Plain(s.SDBetween), qa.Plain(s.SD))
	}
	if z.SmallestMargin != nil {
		sign := map[qa.Objective]string{qa.Equivalence: "±", qa.NotLower: "−"}[s.Objective]
		fmt.Fprintf(p.out, "margin     the narrowest shown with power %s is %s%s\n", qa.Plain(s.Power), sign, strconv.FormatFloat(*z.SmallestMargin, 'g', 6, 64))
	}
	for _, w := range z.Warnings {
		fmt.Fprintf(p.out, "warning    %s (%s)\n", w.Text, w.Code)
	}
	if s.N == 0 {
		fmt.Fprintln(p.out, "for a new study, fixed before its readings are taken; not for adding readings until it passes")
	}
}

// shownBy is what the study is to show, and what is taken as true.
func shownBy(s qa.Study) string {
	var parts []string
	switch {
	case s.MarginLower != nil && s.MarginUpper != nil:
		parts = append(parts, fmt.Sprintf("%s within %s to %s", s.Objective, qa.Plain(*s.MarginLower), qa.Plain(*s.MarginUpper)))
	case s.MarginLower != nil:
		parts = append(parts, fmt.Sprintf("%s than %s", s.Objective, qa.Plain(*s.MarginLower)))
	case s.MarginUpper != nil:
		parts = append(parts, fmt.Sprintf("%s than %s", s.Objective, qa.Plain(*s.MarginUpper)))
	case !s.Objective.AgainstMargin():
		parts = append(parts, string(s.Objective))
	}
	if s.SpreadRatio > 0 {
		parts = append(parts, "ratio of standard deviations below "+qa.Plain(s.SpreadRatio))
	}
	truth := fmt.Sprintf("a true difference of %s and the standard deviation %s", qa.Plain(s.Shift), qa.Plain(s.SD))
	switch {
	case s.Method == qa.StudyFractions:
		truth = fmt.Sprintf("true fractions %s and %s", qa.Plain(s.Fractions[0]), qa.Plain(s.Fractions[1]))
	case s.Method == qa.StudyPaired:
		truth += " of the differences"
	case s.SDCandidate != s.SD:
		truth += " (candidate " + qa.Plain(s.SDCandidate) + ")"
	}
	return strings.Join(parts, ", ") + ", at alpha " + qa.Plain(s.Alpha) + ", for " + truth
}
