package stats

// A Runs holds a runs test about the median: the number of stretches of
// consecutive readings on one side, and the two-sided probability of so few or
// so many when the order is chance.
type Runs struct {
	Runs int
	P    float64
}

// RunsTest counts the runs of x above and below its median, equal readings left
// out, and returns the exact P: twice the smaller tail, at most 1, of the
// distribution of Wald & Wolfowitz (1940, Annals of Mathematical Statistics 11,
// 147-162, from memory). It needs 2 readings, not all equal. Where readings are
// left on one side only, there is one run and P is 1.
func RunsTest(x []float64) (Runs, error) {
	sorted := rising(x)
	return RunsAbout(x, MedianOf(sorted))
}

// RunsAbout is RunsTest for one who knows the median.
func RunsAbout(x []float64, median float64) (Runs, error) {
	if len(x) < 2 {
		return Runs{}, ErrTooFew
	}
	var r Runs
	above, below := 0, 0
	last := 0
	for _, v := range x {
		side := 0
		switch {
		case v > median:
			side = 1
			above++
		case v < median:
			side = -1
			below++
		}
		if side != 0 && side != last {
			r.Runs++
			last = side
		}
	}
	if above+below == 0 {
		return Runs{}, ErrConstant
	}
	r.P = runsTails(r.Runs, above, below)
	return r, nil
}

// runsTails is twice the smaller of P(R <= runs) and P(R >= runs) for a and b
// readings on the two sides. With c(k) = C(a-1,k-1) C(b-1,k-1):
//
//	P(R = 2k)   proportional to 2 c(k)
//	P(R = 2k+1) proportional to c(k) (a+b-2k)/k
//
// and c(k+1) = c(k) (a-k)(b-k)/k^2, walked both ways from the largest c, so that
// no factorial appears and each tail is a sum of positive terms.
func runsTails(runs, a, b int) float64 {
	if a == 0 || b == 0 {
		return 1
	}
	most := min(a, b)
	c := make([]float64, most+1)
	top := max(1, min(most, int(float64(a)*float64(b)/float64(a+b))))
	c[top] = 1
	for k := top; k < most; k++ {
		c[k+1] = c[k] * (float64(a-k) * float64(b-k)) / (float64(k) * float64(k))
	}
	for k := top; k > 1; k-- {
		c[k-1] = c[k] * (float64(k-1) * float64(k-1)) / (float64(a-k+1) * float64(b-k+1))
	}
	var fewer, same, more float64
	add := func(r int, weight float64) {
		switch {
		case r < runs:
			fewer += weight
		case r > runs:
			more += weight
		default:
			same += weight
		}
	}
	for k := 1; k <= most; k++ {
		add(2*k, 2*c[k])
		add(2*k+1, c[k]*float64(a+b-2*k)/float64(k))
	}
	return min(1, 2*(same+min(fewer, more))/(fewer+same+more))
}
