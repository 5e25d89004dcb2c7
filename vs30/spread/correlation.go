package spread

import (
	"errors"
	"fmt"
)

// Rule is how the errors of layers go together.
type Rule uint8

// The rules.
const (
	Independent Rule = iota // each layer errs for itself
	Full                    // all layers err by the same number of sigmas
	Interlayer              // each layer goes with the one above (Toro 1995)
)

// Correlation is how the errors of layers go together. The zero value is
// Independent.
type Correlation struct {
	Rule  Rule
	Class ToroClass // for Interlayer
}

// String says what is taken.
func (c Correlation) String() string {
	switch c.Rule {
	case Independent:
		return "layers independent"
	case Full:
		return "layers fully correlated"
	case Interlayer:
		return fmt.Sprintf("layers correlated with the one above (Toro 1995, %s)", c.Class.Name)
	}
	return fmt.Sprintf("unknown rule %d", c.Rule)
}

func (c Correlation) check() error {
	if c.Rule > Interlayer {
		return fmt.Errorf("correlation has the %s", c)
	}
	if c.Rule == Interlayer && !(c.Class.Delta > 0) {
		return errors.New("a correlation between layers needs a class of Toro (1995)")
	}
	return nil
}

// between returns the correlation of ln Vs between two adjacent layers, the
// upper with its middle at depth a m, the lower at b m.
func (c Correlation) between(a, b float64) float64 {
	switch c.Rule {
	case Full:
		return 1
	case Interlayer:
		return min(1, max(0, c.Class.Correlation((a+b)/2, b-a)))
	}
	return 0
}
