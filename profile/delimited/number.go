package delimited

import (
	"bytes"
	"math"
	"strconv"

	"shearbook/profile"
)

// numerals is how a file writes its numbers.
type numerals struct {
	comma bool // decimal comma; otherwise decimal point

	// Where a number has the sign that the file does not use:

	mixed     bool // it uses both, and says so in line
	line      int
	ambiguous bool // no number of the file says whether its commas are decimal
}

// parse reads a number. It returns what is wrong with it as the end of a
// sentence.
func (n numerals) parse(text []byte) (v float64, problem string) {
	if bytes.HasPrefix(text, []byte("−")) {
		text = append([]byte("-"), text[len("−"):]...)
	}
	digits := false
	for i, b := range text {
		switch {
		case b >= '0' && b <= '9':
			digits = true
		case b == ',':
			if !n.comma {
				return 0, n.commaProblem(text)
			}
		case b == '.':
			if n.comma {
				return 0, "has a decimal point in a file with decimal commas"
			}
		case (b == 'e' || b == 'E') && digits:
		case b == '+' || b == '-':
			if i > 0 && text[i-1] != 'e' && text[i-1] != 'E' {
				return 0, "is not a number"
			}
		default:
			return 0, notNumber(text)
		}
	}
	var room [32]byte // spares an allocation
	pointed := append(room[:0], text...)
	if i := bytes.IndexByte(pointed, ','); i >= 0 {
		pointed[i] = '.'
	}
	v, err := strconv.ParseFloat(string(pointed), 64)
	switch {
	case err != nil && math.IsInf(v, 0):
		return 0, "is not a finite number"
	case err != nil:
		return 0, "is not a number"
	}
	return v, ""
}

func (n numerals) commaProblem(text []byte) string {
	switch {
	case !decimalComma(text) && !thousands(text):
		return "is not a number"
	case n.mixed:
		return "has a comma, but line " + strconv.Itoa(n.line) + " has a decimal point"
	case n.ambiguous:
		return "may have a decimal comma or a separator of thousands"
	}
	return "has a comma where a decimal point is expected"
}

func notNumber(text []byte) string {
	switch string(bytes.ToLower(bytes.TrimLeft(text, "+-"))) {
	case "inf", "infinity", "∞":
		return "is not a finite number"
	}
	return "is not a number"
}

// hintNumber says how to mend a number.
func (n numerals) hintNumber(text []byte) string {
	switch {
	case bytes.IndexByte(text, ',') >= 0 && decimalComma(text):
		return "use one decimal sign throughout; decimal commas need semicolons or tabs between the cells"
	case bytes.IndexByte(text, ',') >= 0:
		return "write numbers without separators of thousands, and decimals with a point"
	}
	_, rest := cutNumber(string(text))
	for d := profile.Length; d <= profile.Blows; d++ {
		if _, ok := unitOf(rest, d); ok {
			return "leave only the number in the cell; units stand in the heading"
		}
	}
	return "write a plain number such as 12.5"
}

// thousands reports whether a number looks like 1,200 or 1,200,000: its
// commas may be there for the eye only.
func thousands(text []byte) bool {
	text = bytes.TrimLeft(text, "+-")
	head, rest, found := bytes.Cut(text, []byte(","))
	if !found || len(head) == 0 || len(head) > 3 || head[0] == '0' || !allDigits(head) {
		return false
	}
	rest, _, _ = bytes.Cut(rest, []byte("."))
	for group := range bytes.SplitSeq(rest, []byte(",")) {
		if len(group) != 3 || !allDigits(group) {
			return false
		}
	}
	return true
}

// pointThousands reports whether a number looks like 1.400: where commas are
// decimal its point is there for the eye only.
func pointThousands(text []byte) bool {
	head, rest, found := bytes.Cut(text, []byte("."))
	return found && len(head) <= 3 && allDigits(head) && head[0] != '0' && len(rest) == 3 && allDigits(rest)
}

// decimalComma reports whether a number has one comma that can only be a
// decimal one.
func decimalComma(text []byte) bool {
	if bytes.Count(text, []byte(",")) != 1 || thousands(text) {
		return false
	}
	_, problem := numerals{comma: true}.parse(text)
	return problem == ""
}

func allDigits(text []byte) bool {
	for _, b := range text {
		if b < '0' || b > '9' {
			return false
		}
	}
	return len(text) > 0
}

// numeralsOf is how the number in a cell is written. A spreadsheet stores its
// numbers with a point, whatever the text beside them does.
func (r *reader) numeralsOf(text []byte) numerals {
	if r.scan.grid != nil && bytes.IndexByte(text, ',') < 0 {
		return numerals{}
	}
	return r.numerals
}

// readNumerals looks through the numbers of the file for the decimal sign
// that it uses. In a file whose cells are separated by commas it is a point.
func (r *reader) readNumerals() {
	ahead := r.scan
	ahead.cells = nil
	if ahead.sep == ',' || bytes.IndexByte(ahead.text[ahead.off:], ',') < 0 {
		return
	}
	comma, eitherWay, point := false, false, 0
	for {
		ok, bad := ahead.next()
		if !ok || bad != nil {
			break
		}
		for i := range r.columns.list {
			if q := r.columns.list[i].quantity; q.Dimension() == profile.Dimensionless && q != profile.SigmaLnVs {
				continue
			}
			text := ahead.cell(i)
			switch {
			case bytes.IndexByte(text, ',') >= 0:
				comma = comma || decimalComma(text)
				eitherWay = eitherWay || thousands(text)
			case point == 0 && ahead.grid == nil && bytes.IndexByte(text, '.') >= 0:
				if _, problem := (numerals{}).parse(text); problem == "" {
					point = ahead.end.line
				}
			}
		}
	}
	r.numerals = numerals{
		comma:     comma && point == 0,
		mixed:     point > 0,
		line:      point,
		ambiguous: eitherWay && !comma && point == 0,
	}
}

// isDash reports whether a cell holds a dash, or words, for nothing.
func isDash(text string) bool {
	switch text {
	case "-", "–", "—", "n/a", "N/A":
		return true
	}
	return false
}
