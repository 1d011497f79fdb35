package stats_test

import (
	"math"
	"slices"
	"strconv"
	"testing"

	"lotpair/qa/stats"
)

// published is one printed comparison of two means. The numbers are those of the
// source where it prints enough digits, else those of R 4.2.2 that agree with
// the source to its last digit; allowed is half a unit of the last one.
type published struct {
	name         string
	ref, cand    stats.Summary
	t, df, p     float64 // p two-sided
	level        float64
	lower, upper float64
	allowed      float64
}

// TestPublishedWelch: NIST handbook, R's own examples, Student's sleep data,
// three examples on Welch's test, and two sets known by their summaries.
func TestPublishedWelch(t *testing.T) {
	pair := func(name, ref, cand string) (r, c stats.Summary) {
		lots := readings(t, name, 0, 1)
		return stats.Summarize(lots[ref]), stats.Summarize(lots[cand])
	}
	sleep := stats.Summarize(readings2(t, "r_sleep.csv", 2))
	sleep1 := stats.Summarize(readings2(t, "r_sleep.csv", 1))
	japan, us := pair("nist_auto83b.csv", "Japan", "US")
	newLine, oldLine := pair("nist_prc31.csv", "new", "old")
	y, x := pair("r_ttest_1to10_7to20.csv", "y", "x")
	wild := readings(t, "r_ttest_1to10_7to20.csv", 0, 1)
	manual, automatic := pair("r_mtcars.csv", "1", "0")
	w1r, w1c := pair("welch_example1.csv", "A2", "A1")
	w2r, w2c := pair("welch_example2.csv", "A2", "A1")
	w3r, w3c := pair("welch_example3.csv", "A2", "A1")
	screwsR, screwsC := pair("screws_two_sample.csv", "A2", "A1")
	for _, c := range []published{
		// NIST/SEMATECH e-Handbook 1.3.5.3, printed -12.946, 136.87, 1.571e-25.
		{"AUTO83B", japan, us, -12.9462732749, 136.874976673, 1.5708547843e-25, 0.95, -11.9152480946, -8.75762059531, 1e-10},
		// NIST/SEMATECH e-Handbook 7.3.1, printed 2.2694, 15.5.
		{"7.3.1 assembly", newLine, oldLine, 2.26937313336, 15.5325143535, 0.0378794761, 0, 0, 0, 2e-9},
		// R help of t.test, printed -5.4349, 21.982, 1.855e-05, -11.052802, -4.947198.
		{"R 1:10, 7:20", y, x, -5.43492976389, 21.9822123402, 1.85528183251e-05, 0.95, -11.0528017252, -4.94719827484, 1e-10},
		// The same with 200 appended, printed -1.6329, 14.165, .1245, -47.242900, 6.376233.
		{"R with 200", stats.Summarize(append(slices.Clone(wild["y"]), 200)), x, -1.6329026332, 14.164598953, 0.12451349809, 0.95, -47.2428998871, 6.37623322044, 1e-10},
		// R datasets mtcars, printed -3.7671, 18.332, .001374, -11.280194, -3.209684.
		{"R mtcars", manual, automatic, -3.76712314514, 18.3322516384, 0.00137363833307, 0.95, -11.280194, -3.209684, 2e-7},
		// Student 1908, printed -1.8608, 17.776, .07939.
		{"sleep", sleep, sleep1, -1.86081346749, 17.7764735162, 0.0793941401874, 0.95, -3.36548323, 0.205483231, 3e-9},
		// Printed results from memory: -2.46 25.0 .021; -1.57 9.9 .149; -2.22 24.5 .036.
		{"Welch 1", w1r, w1c, -2.45535639829, 24.9885292902, 0.0213780014629, 0, 0, 0, 1e-10},
		{"Welch 2", w2r, w2c, -1.5654335236, 9.90474124865, 0.148841696605, 0, 0, 0, 1e-10},
		{"Welch 3", w3r, w3c, -2.21924091582, 24.4962231242, 0.0359722710298, 0, 0, 0, 1e-10},
		// Screw weights, printed df 7.03, p .091, -.0196, .2096; the difference .095.
		{"screws", screwsR, screwsC, 1.95900580811, 7.03055995988, 0.0907733242857, 0.95, -0.0195690896, 0.2095690896, 5e-9},
		// Bonett, help of ci.mean2: printed 14.9769, 73.54, 7.022256, 9.177744.
		{"Bonett", stats.Summary{N: 40, Mean: 11.3, SD: 2.1}, stats.Summary{N: 40, Mean: 19.4, SD: 2.7}, 14.9769052981, 73.5438518188, 0, 0.95, 7.02225627, 9.17774373, 1e-9},
		// Two means from summaries: printed -2.67915, 17.73997, .01544705.
		{"summaries", stats.Summary{N: 10, Mean: 41.5, SD: 6.451}, stats.Summary{N: 10, Mean: 34.2, SD: 5.712}, -2.67914994, 17.7399721518, 0.0154470472, 0, 0, 0, 3e-9},
	} {
		t.Run(c.name, func(t *testing.T) {
			e, err := stats.Welch(c.ref, c.cand)
			if err != nil {
				t.Fatal(err)
			}
			tee, p := e.TwoSided(0)
			near(t, "t", tee, c.t, c.allowed)
			near(t, "df", e.DF, c.df, c.allowed)
			if c.p != 0 {
				near(t, "p", p, c.p, c.allowed)
			}
			if c.level != 0 {
				i := e.Interval(c.level)
				near(t, "lower", i.Lower, c.lower, c.allowed)
				near(t, "upper", i.Upper, c.upper, c.allowed)
			}
		})
	}
}

// readings2 is one column of a file that has a column for each group.
func readings2(t *testing.T, name string, column int) []float64 {
	t.Helper()
	var x []float64
	subjects := readings(t, name, 0, column)
	for i := 1; i <= len(subjects); i++ {
		x = append(x, subjects[strconv.Itoa(i)]...)
	}
	return x
}

// TestPublishedTOST holds two one-sided tests to the reference run of the
// statsmodels tests (made there by R).
func TestPublishedTOST(t *testing.T) {
	for _, c := range []struct {
		name                string
		column              int
		sign                float64 // +1: group 1 minus group 2
		lower, upper        float64
		diff, se, df        float64
		ciLower, ciUpper, p float64
	}{
		{"var1", 2, 1, -0.6, 0.6, 0.164666666666667, 0.253162599108363, 26.7484787582315, -0.266686298072253, 0.596019631405587, 0.0485308397623697},
		{"var2", 3, 1, -0.6, 0.6, 0.562666666666666, 0, 24.1100015106273, 0.194916250699966, 0.930417082633366, 0.43179368125948},
		{"asymmetric", 2, -1, -1.5, 0.6, -0.164666666666667, 0, 26.7484787582315, -0.596019631405587, 0.266686298072253, 0.00274867705173331},
	} {
		t.Run(c.name, func(t *testing.T) {
			lots := readings(t, "tost_clinic.csv", 1, c.column)
			ref, cand := lots["2"], lots["1"]
			if c.sign < 0 {
				ref, cand = cand, ref
			}
			e := welch(t, ref, cand)
			near(t, "difference", e.Value, c.diff, 5e-15)
			if c.se != 0 {
				near(t, "se", e.SE, c.se, 5e-15)
			}
			near(t, "df", e.DF, c.df, 5e-15)
			got := stats.TwoOneSided(e, c.lower, c.upper, 0.05)
			near(t, "p", max(got.PLower, got.PUpper), c.p, 2e-13)
			near(t, "lower", got.Interval.Lower, c.ciLower, 1e-14)
			near(t, "upper", got.Interval.Upper, c.ciUpper, 1e-14)
			if c.name == "asymmetric" {
				near(t, "t upper", got.TUpper, -3.02045669210151, 5e-15)
				near(t, "t lower", got.TLower, 5.27460745795931, 5e-15)
			}
		})
	}
}

// TestPublishedVariances holds the variance ratio to JAHANMI2 of the NIST
// handbook (1.3.5.9) and to the example of USP <1010> (printed .83, 3.90; 4.47).
func TestPublishedVariances(t *testing.T) {
	lots := readings(t, "nist_jahanmi2_strength_batch.csv", 0, 1)
	one, two := stats.Summarize(lots["1"]), stats.Summarize(lots["2"])
	near(t, "sd of batch 1", one.SD, 65.54909, 5e-8)
	near(t, "sd of batch 2", two.SD, 61.85425, 6e-8)
	v, err := stats.FRatio(two, one, 0.95)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "F", v.F, 1.12303752331, 3e-12)
	near(t, "p", v.P, 0.370382930269, 2e-12)
	near(t, "df1", v.DF1, 239, 0)
	near(t, "df2", v.DF2, 239, 0)
	near(t, "lower", v.Interval.Lower*v.Interval.Lower, 0.870987, 5e-7)
	near(t, "upper", v.Interval.Upper*v.Interval.Upper, 1.448027, 5e-7)

	ref, cand := stats.Summary{N: 20, SD: 5}, stats.Summary{N: 20, SD: math.Sqrt(45)}
	v, err = stats.FRatio(ref, cand, 0.90)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "F", v.F, 1.8, 1e-15)
	near(t, "lower", v.Interval.Lower*v.Interval.Lower, 0.830161960, 1e-9)
	near(t, "upper", v.Interval.Upper*v.Interval.Upper, 3.902852883, 1e-9)
	ref.N, cand.N = 15, 15
	if v, err = stats.FRatio(ref, cand, 0.90); err != nil {
		t.Fatal(err)
	}
	near(t, "upper at 15", v.Interval.Upper*v.Interval.Upper, 4.470706334, 1e-9)
}

// TestPublishedGrubbs holds Grubbs' statistic to the uranium readings of Tietjen
// & Moore (1972) in the NIST handbook 1.3.5.17.1, printed G 2.4687.
func TestPublishedGrubbs(t *testing.T) {
	x := readings(t, "nist_grubbs_uranium.csv", 0, 1)["y"]
	g, err := stats.GrubbsTest(x)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "G", g.G, 2.46876461121, 3e-12)
	if g.Index != 7 {
		t.Errorf("index: got %d, want 7", g.Index)
	}
	// From G by the formula in R 4.2.2: 16 pt(sqrt(48 G^2/(49-8 G^2)), 6, lower = FALSE).
	near(t, "p", g.P, 3.00263868207e-07, 1e-11)
}
