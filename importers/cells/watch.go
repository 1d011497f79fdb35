package cells

// Watch follows a reading and can stop it: it is called about every MiB that is unpacked, with the part's name and how many
// of the bytes to unpack are done. Its error stops the reading and is the reading's error. A nil Watch does neither.
type Watch func(part string, done, whole int64) error

// watchEvery is how many unpacked bytes lie between two calls: a few milliseconds.
const watchEvery = 1 << 20

func (p *pack) tell(part string) error {
	if p.watch == nil || p.read-p.told < watchEvery {
		return nil
	}
	p.told = p.read
	return p.watch(part, p.read, max(p.read, p.whole))
}
