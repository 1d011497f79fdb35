package stats

import (
	"errors"
	"math/rand/v2"
)

// ErrFewResamples says that there are too few resamples for an answer: below 100,
// or all of them on one side of the estimate.
var ErrFewResamples = errors.New("too few resamples")

// A Resampling says how often and from which seed readings are drawn again. Run
// does the blocks of work, in any order or at the same time: each has its own
// stream of random numbers and its own place for the answers, so that the same
// Seed and Resamples give the same answer for any Run. Nil does one after another.
type Resampling struct {
	Seed      uint64
	Resamples int
	Run       func(blocks int, do func(block int))
}

// fewestResamples is the least number that is drawn for.
const fewestResamples = 100

// perBlock is the number of resamples with one stream. It is part of what a seed
// means: another number gives other answers.
const perBlock = 256

// each calls do for every block with its stream and the resamples from..to.
func (r Resampling) each(do func(source *rand.PCG, from, to int)) {
	blocks := (r.Resamples + perBlock - 1) / perBlock
	one := func(block int) {
		source := rand.NewPCG(mixed(r.Seed), mixed(uint64(block)+1))
		do(source, block*perBlock, min((block+1)*perBlock, r.Resamples))
	}
	if r.Run != nil {
		r.Run(blocks, one)
		return
	}
	for block := range blocks {
		one(block)
	}
}

// mixed spreads neighbouring seeds over all bits (the finish of SplitMix64: Steele,
// Lea & Flood 2014, OOPSLA, from memory).
func mixed(v uint64) uint64 {
	v += 0x9e3779b97f4a7c15
	v = (v ^ v>>30) * 0xbf58476d1ce4e5b9
	v = (v ^ v>>27) * 0x94d049bb133111eb
	return v ^ v>>31
}

// fair is the least low half of a 32-bit product that leaves every number below n
// equally likely (Lemire 2019, ACM Transactions on Modeling and Computer Simulation
// 29, 3, from memory).
func fair(n uint32) uint32 { return -n % n }
