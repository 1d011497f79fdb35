package qa

import "time"

// Superseded is an earlier record in whose place a record stands.
type Superseded struct {
	Record   string    `json:"record"`   // its id
	File     File      `json:"file"`     // as it was when it was superseded
	Verdict  Verdict   `json:"verdict"`  // what came out then
	Compared time.Time `json:"compared"` // when; zero where its trail does not say
	Reason   string    `json:"reason"`   // why it is superseded
}

// Superseding is the record in the place of earlier ones, oldest first: the last is the one it supersedes, the others are those
// that one had superseded. The act is entered in the trail.
func (r Record) Superseding(earlier []Superseded, who string, when time.Time) Record {
	if len(earlier) == 0 {
		return r
	}
	last := earlier[len(earlier)-1]
	r.Supersedes = append([]Superseded{}, earlier...)
	r.Trail = r.Trail.With(when, who, "superseded record "+last.Record, last.File.Name+", sha-256 "+last.File.SHA256, last.Reason)
	return r
}

// Compared is when the comparison was made, by the trail; zero where it does not say.
func (r Record) Compared() time.Time {
	for _, a := range r.Trail {
		if a.What == "compared" {
			return a.Time
		}
	}
	return time.Time{}
}
