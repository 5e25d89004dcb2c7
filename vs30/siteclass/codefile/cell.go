package codefile

import (
	"fmt"
	"regexp"
	"strconv"
	"strings"

	"shearbook/vs30/siteclass"
)

// cell is a range as a file writes it: what stands in a cell of the printed
// table, or the limit of a condition.
type cell struct {
	siteclass.Range
	about bool   // the print says "about"
	unit  string // as written behind the number; "" if there is none
}

// cellForms is the hint on a range that cannot be read.
const cellForms = `write it with its operator, in quotes, as "> 1200", ">= 600, <= 1200" or "600 to 1200"`

// parseCell reads "> 1200", ">= 600, <= 1200", "600 to 1200", "to 20",
// "about 5 to 20 m". The signs ≥, ≤ and – serve as well as >=, <= and to.
func parseCell(text string) (cell, error) {
	var c cell
	rest := strings.TrimSpace(text)
	rest, c.about = strings.CutPrefix(rest, "about ")
	digit := strings.LastIndexFunc(rest, func(r rune) bool { return r >= '0' && r <= '9' })
	if digit < 0 {
		return cell{}, fmt.Errorf("%q holds no number", shown(text))
	}
	rest, c.unit = rest[:digit+1], strings.TrimSpace(rest[digit+1:])
	rest = strings.NewReplacer("≥", ">=", "≤", "<=", "–", " to ").Replace(rest)
	if thousands.MatchString(rest) {
		return cell{}, fmt.Errorf("%q has a comma inside a number", shown(text))
	}
	var err error
	if from, to, dash := strings.Cut(" "+rest, " to "); dash {
		c.Range, err = dashRange(from, to)
	} else {
		c.Range, err = bounds(rest)
	}
	if err == nil {
		err = ordered(c.Range)
	}
	if err != nil {
		return cell{}, fmt.Errorf("%q %w", shown(text), err)
	}
	return c, nil
}

// dashRange reads the two ends of a range "from … to …"; the first may be
// open.
func dashRange(from, to string) (r siteclass.Range, err error) {
	if from = strings.TrimSpace(from); from != "" {
		r.Lower.Op = siteclass.Dash
		if r.Lower.Value, err = parseNumber(from); err != nil {
			return r, err
		}
	}
	r.Upper.Op = siteclass.Dash
	r.Upper.Value, err = parseNumber(to)
	return r, err
}

// bounds reads one bound, or two with a comma between.
func bounds(text string) (siteclass.Range, error) {
	var r siteclass.Range
	for part := range strings.SplitSeq(text, ",") {
		limit, err := parseLimit(strings.TrimSpace(part))
		if err != nil {
			return r, err
		}
		end := &r.Upper
		if limit.Op == siteclass.Above || limit.Op == siteclass.AtLeast {
			end = &r.Lower
		}
		if end.Op != siteclass.Open {
			return r, fmt.Errorf("has two bounds on the same side")
		}
		*end = limit
	}
	return r, nil
}

// signs are the operators by their signs, the longer first.
var signs = []struct {
	sign string
	op   siteclass.Operator
}{{">=", siteclass.AtLeast}, {"<=", siteclass.AtMost}, {">", siteclass.Above}, {"<", siteclass.Below}}

func parseLimit(text string) (siteclass.Limit, error) {
	for _, s := range signs {
		if rest, ok := strings.CutPrefix(text, s.sign); ok {
			v, err := parseNumber(rest)
			return siteclass.Limit{Op: s.op, Value: v}, err
		}
	}
	return siteclass.Limit{}, fmt.Errorf("has a number without an operator")
}

// digits is a number of a table: no sign, no exponent, no commas.
var digits = regexp.MustCompile(`^[0-9]{1,9}(\.[0-9]{1,12})?$`)

// thousands is a number with a comma between its thousands.
var thousands = regexp.MustCompile(`[0-9],[0-9]`)

func parseNumber(text string) (float64, error) {
	text = strings.TrimSpace(text)
	if !digits.MatchString(text) {
		return 0, fmt.Errorf("holds %q, which is not a plain number", shown(text))
	}
	return strconv.ParseFloat(text, 64)
}

// ordered returns an error where the lower end does not lie below the upper.
func ordered(r siteclass.Range) error {
	lo, hi := r.Lower, r.Upper
	if lo.Op != siteclass.Open && hi.Op != siteclass.Open && !(lo.Value < hi.Value) {
		return fmt.Errorf("ends below where it begins")
	}
	return nil
}

// Range writes a range as a file has it, "" for an empty one.
func Range(r siteclass.Range) string {
	if r.Empty() {
		return ""
	}
	return cell{Range: r}.String()
}

// String writes the cell as parseCell reads it.
func (c cell) String() string {
	text := ""
	if c.about {
		text = "about "
	}
	lo, hi := c.Lower, c.Upper
	switch {
	case hi.Op == siteclass.Dash && lo.Op == siteclass.Open:
		text += "to " + plainNumber(hi.Value)
	case hi.Op == siteclass.Dash:
		text += plainNumber(lo.Value) + " to " + plainNumber(hi.Value)
	case hi.Op == siteclass.Open:
		text += limitText(lo)
	case lo.Op == siteclass.Open:
		text += limitText(hi)
	default:
		text += limitText(lo) + ", " + limitText(hi)
	}
	if c.unit != "" {
		text += " " + c.unit
	}
	return text
}

func limitText(l siteclass.Limit) string {
	for _, s := range signs {
		if s.op == l.Op {
			return s.sign + " " + plainNumber(l.Value)
		}
	}
	return l.Op.String() + " " + plainNumber(l.Value)
}

// plainNumber writes a number with as many digits as it takes to read it
// back.
func plainNumber(v float64) string { return strconv.FormatFloat(v, 'f', -1, 64) }
