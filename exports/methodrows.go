package exports

import (
	"fmt"
	"strings"

	"lotpair/qa"
)

// methodSheet says how every figure comes about, by which program, and how to check file and figures without it.
func methodSheet(rec qa.Record) sheet {
	s := sheet{name: SheetMethod, widths: []float64{24, 78, 34}}
	s.add(text("Method", titleLook))
	s.addTall(30, wide("How each figure comes about, in words, with its source; which program computed it; how to check this file and its figures without that program.", wrapLook, 3))
	s.add(text("Figure", headLook), text("How", headLook), text("Source", headLook))
	s.frozen, s.heads = len(s.rows), len(s.rows)
	uses := methodsUsed(rec.Result)
	for _, m := range methodLines {
		if m.when != "" && !uses[m.when] {
			continue
		}
		s.addTall(max(lines(m.how, 90), lines(m.source, 36), lines(m.figure, 25))*13+3, text(m.figure, ruledStrongLook), text(m.how, ruledWrapLook), text(m.source, ruledWrapLook))
	}
	v := rec.Result.Software
	section := func(head string, paragraphs ...string) {
		s.gap()
		s.add(wide(head, groupLook, 3))
		s.addTall(3)
		for _, p := range paragraphs {
			s.addTall(lines(p, 138)*13+3, wide(p, wrapLook, 3))
		}
	}
	section("Program and its validation",
		fmt.Sprintf("Computed by Lotpair %s (%s), edition %d of the calculation, %s/%s. A change of any number that the same readings give raises the edition.", v.Version, orWord(v.Revision, "no revision"), v.Calculation, v.OS, v.Arch),
		"State of validation: the maker's tests hold the methods against published values and other programs. Whether the program is valid for its use at a site is for the site to show and to keep beside this record, with the version above.",
		"The program proves origin and integrity by signatures. It does not by itself make a site's procedure meet 21 CFR 11 or any other rule.")
	section("To verify this file without Lotpair", verifyRecipe...)
	section("To compute the figures again without Lotpair", recomputeRecipe(rec)...)
	return s
}

// methodsUsed says which of the conditional lines apply.
func methodsUsed(r qa.Result) map[string]bool {
	uses := map[string]bool{}
	for _, c := range r.Characteristics {
		uses[c.Method] = true
		uses["kind "+c.Kind] = true
		if c.Equivalence != nil {
			uses["margin"] = true
			uses["scale "+c.Equivalence.Scale] = true
		}
		if c.Difference.PHolm != nil {
			uses["holm"] = true
		}
		if c.Performance != nil {
			uses["performance"] = true
		}
		if c.Groups != nil {
			uses["groups"] = true
		}
		if c.Spread != nil && c.Spread.Bonett != nil {
			uses["bonett"] = true
		}
		if len(c.Sensitivity) > 0 {
			uses["sensitivity"] = true
		}
	}
	return uses
}

type methodLine struct {
	figure, how, source string
	when                string // the condition, empty for always
}

var methodLines = []methodLine{
	{"mean, standard deviation", "Sum of the readings in use over their number n; root of the sum of squared distances from the mean over n − 1.", "common definitions", "kind numeric"},
	{"quartiles", "Between the ordered readings in proportion: position 1 + (n − 1)·share.", "Hyndman and Fan 1996, type 7", "kind numeric"},
	{"standard error (Welch)", "Root of (s_r²/n_r + s_c²/n_c); no assumption of equal variances.", "Welch 1947", "welch"},
	{"degrees of freedom (Welch)", "(s_r²/n_r + s_c²/n_c)² / ((s_r²/n_r)²/(n_r − 1) + (s_c²/n_c)²/(n_c − 1)); seldom a whole number and never rounded.", "Satterthwaite 1946", "welch"},
	{"standard error (pooled)", "Root of s²·(1/n_r + 1/n_c), s² the pooled variance with n_r + n_c − 2 degrees of freedom.", "Student 1908; common textbooks", "pooled"},
	{"paired", "The differences of the same parts, candidate minus reference: their mean, standard error s_d/√n and n − 1 degrees of freedom. Parts without a partner are left out and listed.", "Student 1908; common textbooks", "paired"},
	{"on logarithms", "Welch's test on natural logarithms of the readings; the estimate and its interval are the ratio of geometric means.", "common textbooks", "log"},
	{"ratio of means", "candidate − theta·reference is tested at both ends of the margin, each with its own standard error and degrees of freedom; the interval is every theta that is not rejected.", "Fieller 1954; Sasabuchi 1988; from memory", "scale ratio"},
	{"shift that keeps Ppk", "The candidate mean minus the middle of the room that the wanted Ppk leaves, one-sample t with the candidate's own standard deviation and n − 1 degrees of freedom.", "own", "scale shift"},
	{"sub-lots as a random effect", "The test on the unweighted means of the groups, degrees of freedom from the number of groups; variation between and within by analysis of variance.", "common textbooks", "groups"},
	{"fractions that failed", "Difference of the fractions with the score interval: every difference that the score test with the factor N/(N − 1) does not reject. Fisher's exact p stands beside it and decides nothing.", "Miettinen and Nurminen 1985; Fisher 1935", "kind attribute"},
	{"difference, its test", "Candidate mean minus reference mean; t = difference / standard error; two-sided p = P(|T| > |t|).", "Welch 1947", "kind numeric"},
	{"difference, its interval", "Difference ± t(level, df) · standard error, level 1 − alpha (1 − 2·alpha where one direction is asked).", "Welch 1947", "kind numeric"},
	{"against the margin", "Two one-sided tests: t_lower = (difference − lower end)/standard error, p_lower = P(T > t_lower); t_upper = (difference − upper end)/standard error, p_upper = P(T < t_upper). Equivalent where both are below alpha; the same as the 1 − 2·alpha interval lying strictly inside the margin.", "Schuirmann 1987; ASTM E2935", "margin"},
	{"verdict", "Shown: the interval lies inside the margin. Refuted: wholly outside it. Else undecided. Over several characteristics all must hold (intersection-union), which keeps the error of a false overall verdict of equivalence at alpha.", "Berger 1982", "margin"},
	{"smallest margin", "The smallest symmetric margin at which the readings would have shown equivalence, the guard included. After the fact: never to be used as a margin.", "own", "margin"},
	{"what the margin permits", "Ppk and normal share outside the limits, were the mean shifted to the worse end of the margin at the reference's mean and standard deviation.", "ISO 22514-2", "margin"},
	{"adjusted p", "The p-values of the characteristics asked for a difference, adjusted as one family.", "Holm 1979", "holm"},
	{"ratio of spread", "s_c/s_r with the F interval: ratio / root of F(1 − alpha; n_c − 1, n_r − 1) to ratio · root of F(1 − alpha; n_r − 1, n_c − 1). It assumes normal readings.", "common textbooks", "kind numeric"},
	{"ratio of spread, robust", "Interval of the ratio of standard deviations that allows for the shape of the readings, inverted from the test.", "Bonett 2006, from memory", "bonett"},
	{"by ranks", "Pairs in which the candidate is above the reference (ties one half), and the shift between the lots by the median of all differences, with its interval; paired: signed ranks. Decides nothing.", "Mann and Whitney 1947; Wilcoxon 1945; Hodges and Lehmann 1963", "kind numeric"},
	{"verdict by other methods", "The same criterion with another estimate of the difference or its error, a line each in the sheet Sensitivity. Decides nothing.", "own", "sensitivity"},
	{"closeness to normal", "W from 3 to 5000 readings with its p.", "Shapiro and Wilk 1965; Royston 1995, AS R94", "kind numeric"},
	{"outlying readings", "Generalized extreme studentized deviates, up to a tenth of the readings sought, alpha 0.05. It removes nothing.", "Rosner 1983", "kind numeric"},
	{"runs, neighbours", "Runs about the median, readings equal to it left out, exact two-sided p; correlation of neighbours in the order measured.", "Wald and Wolfowitz 1940; common definitions", "kind numeric"},
	{"farthest reading", "Largest distance from the mean in standard deviations; p from t with n − 2 degrees of freedom, times 2·n, at most 1. It removes nothing.", "Grubbs 1969", "kind numeric"},
	{"Pp, Ppk", "Tolerance / (6·s); distance of the mean to the nearer limit / (3·s). No claim that the process is stable.", "ISO 22514-2", "performance"},
	{"interval of Ppk", "Ppk ± normal quantile · √(1/(9·n) + Ppk²/(2·(n − 1))).", "Bissell 1990", "performance"},
	{"tolerance interval", "Mean ± k·s that holds the stated part of a normal lot with the stated confidence, exact factor; with one limit one bound.", "ISO 16269-6, from memory", "performance"},
	{"share outside, estimated", "Normal shares beyond the limits at the lot's mean and standard deviation.", "ISO 22514-2", "performance"},
}

var verifyRecipe = []string{
	"The signatures are those of the standard for office files (ECMA-376 part 2, XML signatures). Work on a copy; saving again in any program ends them.",
	"LibreOffice: open, then File, Digital Signatures. \"Valid\" means unchanged; whether you trust the certificate is yours to settle by its SHA-256, got from the signer another way. Version 7.4 calls the third and later signatures of one file invalid by a fault of its own.",
	"xmlsec1: unzip RECORD.xlsx -d parts; then: xmlsec1 --verify --insecure --id-attr:Id http://www.w3.org/2000/09/xmldsig#:Object --id-attr:Id http://uri.etsi.org/01903/v1.3.2#:SignedProperties parts/_xmlsignatures/sig1.xml, " +
		"with --url-map:URI FILE for each Reference of the Manifest. Look at \"Manifests References (ok/all)\": the exit code alone does not tell.",
	"Each part by hand: openssl dgst -sha256 -binary parts/xl/worksheets/sheet1.xml | base64 must give the DigestValue of that part in parts/_xmlsignatures/sig1.xml.",
	"That nothing was added: every file under parts but [Content_Types].xml and _xmlsignatures must stand in the Manifest, and each relationship in a .rels file under its Id. Those programs do not look for it; Lotpair does.",
	"The whole content as data: parts/customXml/item1.xml holds plan, readings, result and trail.",
}

// recomputeRecipe is the two ways that need no program of ours, the commands with this record's own levels.
func recomputeRecipe(rec qa.Record) []string {
	alpha := qa.DefaultAlpha
	if len(rec.Result.Characteristics) > 0 {
		alpha = rec.Result.Characteristics[0].Alpha
	}
	return []string{
		"In the spreadsheet: sheet Workings, computed again as its head says.",
		"By hand, one interval: take difference.estimate, difference.se and equivalence.quantile from the sheet Workings; ends = estimate ± quantile · se. The quantile is t of " +
			"the stated degrees of freedom from any table, between the whole numbers on either side.",
		fmt.Sprintf("In R, r and c the columns Value of the sheet Readings for the reference and the candidate (used readings only): t.test(c, r); t.test(c, r, conf.level = %s); sqrt(var.test(c, r, conf.level = %[1]s)$conf.int).",
			strings.TrimRight(strings.TrimRight(fmt.Sprintf("%.6f", 1-2*alpha), "0"), ".")),
	}
}
