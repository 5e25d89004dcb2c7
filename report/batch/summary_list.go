package batch

import (
	"math"
	"slices"
)

// list is the rows with a flag that are to be looked at first.
type list struct {
	flag    Flags
	n       int      // rows with the flag
	entries []*entry // the worst, worst first
}

// entry is one row of a list.
type entry struct {
	Row
	list  Flags
	order int      // of the row
	worse float64  // the larger, the worse
	codes []string // all under which the same failure happened
	note  string   // why, from faults.csv
}

// add puts a row into its place, if it is among the worst.
func (l *list) add(r *Row, t *tally) {
	l.n++
	if l.flag == Failed {
		if last := l.last(); last != nil && sameUnit(&last.Row, r) && last.Problem == r.Problem {
			last.codes = append(last.codes, r.Code)
			return
		}
	}
	worse := l.worse(r, t)
	if len(l.entries) == mostListed && worse <= l.entries[mostListed-1].worse {
		return
	}
	e := &entry{Row: *r, list: l.flag, order: l.n, worse: worse, codes: []string{r.Code}}
	i, _ := slices.BinarySearchFunc(l.entries, worse, func(e *entry, worse float64) int {
		if e.worse >= worse {
			return -1
		}
		return 1
	})
	if len(l.entries) == mostListed {
		l.entries = l.entries[:mostListed-1]
	}
	l.entries = slices.Insert(l.entries, i, e)
}

// last is the entry of the row before this one, nil if that is not listed.
func (l *list) last() *entry {
	for _, e := range l.entries {
		if e.order+len(e.codes) == l.n {
			return e
		}
	}
	return nil
}

func sameUnit(a, b *Row) bool { return a.File == b.File && a.Line == b.Line && a.Profile == b.Profile }

// worse says how bad a row is among those of its list: a failure by its
// faults, a near bound by how near it is, a short survey by the metres that
// are missing, a reversal by how soft the ground is, another doubt by the
// notes.
func (l *list) worse(r *Row, t *tally) float64 {
	switch l.flag {
	case Failed:
		return float64(r.Faults)
	case NearBound:
		return -math.Abs(r.Margin)
	case Shallow:
		return missing(r, t)
	case Odd:
		return float64(r.Notes)
	}
	if r.Velocity > 0 {
		return -r.Velocity
	}
	return math.Inf(-1)
}

// missing is how many metres the survey ends above the depth that is averaged
// over.
func missing(r *Row, t *tally) float64 {
	depth := r.Depth
	if depth == 0 && t.code != nil {
		depth = t.code.Depth
	}
	if depth == 0 {
		return 0
	}
	return max(0, r.Datum+depth-r.DepthReached)
}
