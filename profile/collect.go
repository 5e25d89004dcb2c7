package profile

import (
	"cmp"
	"fmt"
	"slices"
	"strconv"
	"unicode/utf8"
)

// MaxFaults is how many faults a Collector keeps of one file.
const MaxFaults = 20

// Collector gathers what a reader finds wrong in one file: the first
// MaxFaults faults, those that ended the reading, and how many there were.
type Collector struct {
	File   string // as the user named it; put into every place
	faults Faults
	total  int
}

// Fault adds a fault at a place of the file.
func (c *Collector) Fault(at Place, hint, format string, args ...any) {
	if c.total < MaxFaults {
		c.keep(at, hint, format, args)
	}
	c.total++
}

// Stop adds a fault after which reading cannot go on; it is kept however many
// there are.
func (c *Collector) Stop(at Place, hint, format string, args ...any) {
	c.keep(at, hint, format, args)
	c.total++
}

func (c *Collector) keep(at Place, hint, format string, args []any) {
	at.File = c.File
	c.faults = append(c.faults, Faultf(at, hint, format, args...))
}

// Add adds the faults of a profile.
func (c *Collector) Add(faults Faults) {
	for _, f := range faults {
		if f.More > 0 {
			c.total += f.More
			continue
		}
		c.Fault(f.Place, f.Hint, "%s", f.Text)
	}
}

// Count returns how many faults were added.
func (c *Collector) Count() int { return c.total }

// Err returns what was gathered as Faults in the order of the file, with a
// last one that says how many more there are; nil if nothing was.
func (c *Collector) Err() error {
	faults := slices.Clone(c.faults)
	slices.SortStableFunc(faults, func(a, b Fault) int {
		return cmp.Or(cmp.Compare(a.Place.Line, b.Place.Line), cmp.Compare(a.Place.Column, b.Place.Column))
	})
	if more := c.total - len(faults); more > 0 {
		faults = append(faults, MoreFaults(c.File, more))
	}
	return faults.Err()
}

// Quote returns an offending text between quotes, shortened to 40 characters,
// with what cannot be printed escaped.
func Quote[T string | []byte](text T) string {
	const most = 40
	s := string(text[:min(len(text), utf8.UTFMax*(most+1))])
	n := 0
	for i := range s {
		if n == most {
			return strconv.Quote(s[:i] + "…")
		}
		n++
	}
	return strconv.Quote(s)
}

// Plural returns a number of things in words: "1 layer", "12 layers".
func Plural(n int, thing string) string {
	if n == 1 {
		return "1 " + thing
	}
	return fmt.Sprintf("%d %ss", n, thing)
}
