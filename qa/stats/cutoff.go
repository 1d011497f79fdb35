package stats

import "lotpair/qa/stats/dist"

// A CutOff says whether readings end sharply at a limit: Inside is the number at
// most one standard deviation inside of it (on it counts as inside), Beyond the
// number at most one standard deviation beyond, and P the probability of so few
// beyond, given both together, for a normal curve that does not know the limit.
type CutOff struct {
	Inside, Beyond int
	P              float64
}

// CutOffAt looks at the upper limit, or at the lower one where upper is false, of
// readings x with summary s. A lot that was sorted, or measured again until it
// passed, has readings just inside a limit and none beyond: a small P is a reason
// to ask, not a proof. With Z the normal curve of mean and standard deviation of
// the readings, and d the distance of the limit from the mean in its units,
//
//	share beyond = P(d < Z < d+1)/P(d-1 < Z < d+1), P = P(Binomial(Inside+Beyond, share) <= Beyond)
//
// (Common practice, no source.) A sorted lot has a smaller standard deviation than
// it had before, so P errs on the large side. It needs 2 readings that vary; with
// none near the limit P is 1.
func CutOffAt(x []float64, s Summary, limit float64, upper bool) (CutOff, error) {
	if s.N < 2 {
		return CutOff{}, ErrTooFew
	}
	if s.SD == 0 {
		return CutOff{}, ErrConstant
	}
	sign := 1.0
	if !upper {
		sign = -1
	}
	var c CutOff
	for _, v := range x {
		switch beyond := sign * (v - limit) / s.SD; {
		case beyond > 0 && beyond <= 1:
			c.Beyond++
		case beyond <= 0 && beyond >= -1:
			c.Inside++
		}
	}
	d := sign * (limit - s.Mean) / s.SD
	between := func(a, b float64) float64 {
		if a < 0 { // mirrored, where the upper tails would have no digits left
			a, b = -b, -a
		}
		return dist.NormalUpper(a) - dist.NormalUpper(b)
	}
	beyond, inside := between(d, d+1), between(d-1, d)
	if !(beyond+inside > 0) {
		c.P = 1
		return c, nil
	}
	c.P = binomialLower(c.Beyond, c.Inside+c.Beyond, beyond/(beyond+inside))
	return c, nil
}
