package desk

import (
	"strings"
	"time"
	"unicode"
	"unicode/utf8"

	"lotpair/qa"
)

// Word is a word or a number of the window, what it means, and what a standard calls it.
type Word struct{ Word, Means, Term string }

// Words are what the window says, in plain words (sources from memory where none is named in the design).
var Words = []Word{
	{"reference, candidate", "the lot taken as known good; the lot that must show itself as good", "ASTM E2935"},
	{"lot", "units made or supplied under like conditions; also the output of one machine or one supplier when those are compared", "lot, ISO 3534-2"},
	{"characteristic", "what is measured on a part, with its unit, specification limits and target", "characteristic, ISO 3534-2"},
	{"criterion", "objective, margin, alpha and method: what must hold for the verdict", "acceptance criterion"},
	{"margin", "the largest difference of the means that does not matter in use", "equivalence limit, ASTM E2935"},
	{"alpha", "the largest probability of calling a lot equivalent whose mean lies at the margin", "significance level, ISO 3534-1"},
	{"interval", "where the true difference lies, with confidence 1 − 2·alpha: equivalent where it lies wholly inside the margin", "confidence interval, ISO 3534-1; two one-sided tests, ASTM E2935"},
	{"p", "how often a difference at least as far inside the margin would come by chance if the true one lay at the margin", "p-value, ISO 3534-1"},
	{"degrees of freedom", "how much the spread that is used can be relied on; Welch's are rarely whole", "degrees of freedom, ISO 3534-1; Welch 1947"},
	{"smallest margin", "the narrowest symmetric margin at which these readings would have shown it; said afterwards, it decides nothing", "own"},
	{"equivalent, not equivalent, undecided", "the interval lies inside the margin; outside it; across an end of it. Undecided is no proof of a difference", "own; demonstrated, contradicted for one side"},
	{"detectable", "there is a difference, be it ever so small beside the margin (two-sided p below alpha)", "statistically significant"},
	{"mean, standard deviation", "the middle of the readings and how far they scatter about it", "sample mean, sample standard deviation, ISO 3534-1"},
	{"median, quartiles", "half of the readings lie below the median, a quarter below the lower quartile (type 7)", "sample median, sample quartile, ISO 3534-1"},
	{"spread ratio", "candidate over reference standard deviation; decided by Bonett's interval from 5 readings a lot on", "ratio of standard deviations"},
	{"Pp, Ppk", "how the readings fit between the limits: 1 where six standard deviations do; Ppk counts the nearer limit", "performance indices, ISO 22514-2"},
	{"permits", "what a mean at the worse end of the margin would leave: Ppk and the fraction outside the limits", "own"},
	{"expected outside", "the fraction outside the limits for a normal distribution with this mean and spread", "fraction nonconforming, ISO 3534-2"},
	{"tolerance interval", "where at least the stated coverage of the lot lies, with the stated confidence", "statistical tolerance interval, ISO 16269-6"},
	{"guard", "a strip taken off both ends of the margin for the bias of measuring", "guard band, JCGM 106"},
	{"uncertainty", "how far the bias of a measuring system is known, as a standard deviation", "standard uncertainty, JCGM 100"},
	{"power", "the probability with which a study shows it, if the lots are as is said", "power, ISO 3534-1"},
	{"seal", "fixes the criterion, with its time and digest, before the readings are opened", "own"},
	{"amendment", "a change of a sealed criterion, with its reason; both verdicts stay", "amendment"},
	{"ledger", "every cell that was not taken as a number, and every reading left out, with the reason", "own"},
	{"finding", "what a check of the readings came upon: few readings, an outlier, a drift, coarse resolution", "own"},
	{"Grubbs", "how far the farthest reading lies from the mean, in standard deviations, and how often chance puts one there", "Grubbs' test, ISO 16269-4"},
	{"Shapiro–Wilk", "how well the readings follow a normal distribution; 1 is best", "Shapiro–Wilk test, ISO 5479"},
	{"runs, lag 1", "whether readings follow each other by chance: runs about the median, correlation of each with the next", "runs test; autocorrelation"},
	{"resolution", "the step of which all readings are multiples", "resolution, ISO/IEC Guide 99"},
	{"sensitivity", "the verdict again under each other sound method, with and without the readings left out; it decides nothing", "sensitivity analysis"},
	{"trail", "who did what when, in order, each entry holding the digest of the one before it", "audit trail, 21 CFR 11.10(e)"},
	{"meaning", "what a signature stands for: prepared, reviewed, approved", "meaning of a signature, 21 CFR 11.50"},
	{"identity", "a person's signing key and certificate", "digital certificate, ITU-T X.509"},
	{"disposition", "what the responsible unit decided about the lot; never the tool", "disposition, ISO 9000"},
	{"supersedes", "stands in the place of an earlier signed record, which is named with its digest and the reason", "superseded"},
}

// WordsIn are the words that stand in a text and have a meaning to be said.
func WordsIn(text string) []Word {
	text = strings.ToLower(text)
	var out []Word
	for _, w := range Words {
		for _, one := range strings.Split(strings.ToLower(w.Word), ", ") {
			if holdsWord(text, one) {
				out = append(out, w)
				break
			}
		}
	}
	return out
}

// holdsWord says whether a text holds a word by itself, also in the plural.
func holdsWord(text, word string) bool {
	for from := 0; ; {
		at := strings.Index(text[from:], word)
		if at < 0 {
			return false
		}
		at += from
		end := at + len(word)
		before, _ := utf8.DecodeLastRuneInString(text[:at])
		rest := strings.TrimPrefix(text[end:], "s")
		after, _ := utf8.DecodeRuneInString(rest)
		if !unicode.IsLetter(before) && !unicode.IsLetter(after) {
			return true
		}
		from = end
	}
}

// Help is a text with what its words mean, a paragraph each.
func Help(text string) []string {
	out := []string{text}
	for _, w := range WordsIn(text) {
		t := w.Word + ": " + w.Means + "."
		if w.Term != "own" {
			t += " In standards: " + strings.TrimPrefix(w.Term, "own; ") + "."
		}
		out = append(out, t)
	}
	return out
}

// Keys are what the keys do.
var Keys = [][]string{
	{"Tab, Shift+Tab", "the next control, the one before"},
	{"Space, Return", "press the control that has the keys"},
	{"Up, Down, Page, Home, End", "along the spine, the list, the readings and the rows of a file"},
	{"Left, Right", "in a file: columns further left and right"},
	{"Return on the sentences", "what they say with what their words mean, to be copied; a click on one shows that one"},
	{"1 to 5", "the ways of looking at a characteristic"},
	{"Return on a reading", "leave it out with a reason, or put it back"},
	{"Ctrl+Return", "the one next thing, as the foot names it"},
	{"Ctrl+O", "open a file"},
	{"Ctrl+E", "export the workbook"},
	{"Ctrl+L", "all records"},
	{"Ctrl+M", "what else can be done"},
	{"Ctrl+C", "copy what the bench says, or the marked text"},
	{"Ctrl+V", "bring in readings copied from a spreadsheet"},
	{"Ctrl+Shift+C", "copy all characteristics as a table"},
	{"F1", "words and what they mean"},
	{"Ctrl+Z, Ctrl+Shift+Z", "undo, redo; never a seal, an opening of readings, an export or a signature"},
	{"Escape", "leave a dialog"},
	{"Ctrl+Q", "close; every act was kept"},
}

// AboutText says what the program is for.
const AboutText = "Lotpair says whether a candidate lot is equivalent to a reference lot within a margin that was fixed before, and writes a record that can be signed, checked and computed again. The calculation supports engineering judgement and does not replace it."

// TrustText says what trusting a certificate means.
const TrustText = "Anyone can make a certificate with any name in it. A certificate is trusted here after its sha-256 was compared with what its owner says by another way. Where certificates are trusted, a signer who is not among them is said so at the head of the window."

// IdentityText says what an identity is.
const IdentityText = "A key and a certificate in one file behind a passphrase. Keep the file and the passphrase to yourself; give the certificate to those who verify."

// Trail is what was done, an act a line: time, who, what, on what, why.
func (s State) Trail() [][5]string {
	var out [][5]string
	for _, a := range s.Record.Trail {
		out = append(out, [5]string{a.Time.Format(time.RFC3339), a.Who, a.What, a.On, a.Why})
	}
	return out
}

// TrailText says whether the trail is whole.
func (s State) TrailText() []string {
	if at := s.Record.Trail.Broken(); at >= 0 {
		return []string{"The trail is broken: act " + qa.Plain(float64(at+1)) + " does not follow the one before it."}
	}
	return []string{qa.Count(len(s.Record.Trail), "act", "acts") + ", each holding the digest of the one before it: none is missing or changed."}
}

// SignText says what a signature stands for.
const SignText = "A signature shows who signed, when and with which meaning, and that the content is unchanged since; it does not show that the content is right."
