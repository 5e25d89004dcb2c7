package spreadsheet

import "shearbook/profile"

// collector gathers the faults of one file in the order of its sheets and
// tables: profile.MaxFaults of them, and the one that ended the reading.
type collector struct {
	file   string
	faults profile.Faults
	total  int
}

// fault adds a fault.
func (c *collector) fault(at profile.Place, hint, format string, args ...any) {
	if c.total++; c.total <= profile.MaxFaults {
		at.File = c.file
		c.faults = append(c.faults, profile.Faultf(at, hint, format, args...))
	}
}

// stop adds a fault after which reading cannot go on; it is told however many
// there are.
func (c *collector) stop(hint, format string, args ...any) {
	c.total++
	c.faults = append(c.faults, profile.Faultf(profile.Place{File: c.file}, hint, format, args...))
}

// err returns what was gathered, nil if nothing was.
func (c *collector) err() error {
	if more := c.total - len(c.faults); more > 0 {
		c.faults = append(c.faults, profile.MoreFaults(c.file, more))
	}
	return c.faults.Err()
}
