package spreadsheet

import (
	"encoding/xml"
	"math"
	"strconv"
	"strings"
	"time"
)

// numberFormat is how a number is shown, as far as it changes what is read.
type numberFormat struct {
	percent, date bool
	code          []token // of a date
}

// token is a piece of the code of a format: n letters y, m or d, or a text.
type token struct {
	letter byte
	n      int
	text   string
}

// readFormats reads the format of each style of cells (ISO/IEC 29500-1,
// 18.8.10 cellXfs and 18.8.31 numFmts).
func readFormats(p *part) ([]numberFormat, error) {
	codes := map[string]string{}
	known := map[string]numberFormat{} // few formats serve many styles
	var formats []numberFormat
	err := p.root("styleSheet", func(e xml.StartElement) error {
		list := e.Name.Local
		if list != "numFmts" && list != "cellXfs" {
			return nil
		}
		return p.children(func(e xml.StartElement) error {
			id := attribute(e, "numFmtId")
			if list == "numFmts" {
				codes[id] = attribute(e, "formatCode")
				return nil
			}
			f, ok := known[id]
			if !ok {
				f = formatOf(id, codes)
				known[id] = f
			}
			formats = append(formats, f)
			return nil
		})
	})
	return formats, err
}

// formatOf is the format of a number: one that the workbook defines, or one
// that is built in (ISO/IEC 29500-1, 18.8.30). Of the built-in dates those
// whose order of day and month depends on the reader's country have no code.
func formatOf(id string, codes map[string]string) numberFormat {
	if code, ok := codes[id]; ok {
		return parseFormat(code)
	}
	switch n, _ := strconv.Atoi(id); {
	case n == 9, n == 10:
		return numberFormat{percent: true}
	case n == 15:
		return parseFormat("d-mmm-yy")
	case n == 16:
		return parseFormat("d-mmm")
	case n == 17:
		return parseFormat("mmm-yy")
	case n == 14, n == 22, n >= 27 && n <= 31, n == 36, n >= 50 && n <= 54, n == 57, n == 58:
		return numberFormat{date: true}
	}
	return numberFormat{}
}

// maxCode is how many bytes the code of a format has at most; common practice,
// from memory.
const maxCode = 255

// parseFormat tells what the code of a format shows of a positive number. It
// is a date if it has two of year, month and day, or the name of a month. A
// code that is too long shows numbers as they are stored.
func parseFormat(code string) numberFormat {
	if len(code) > maxCode {
		return numberFormat{}
	}
	tokens, percent, digit := scan(code)
	has := map[byte]bool{}
	named := false
	for _, t := range tokens {
		if t.letter != 0 {
			has[t.letter] = true
			named = named || t.letter == 'm' && t.n > 2
		}
	}
	switch {
	case percent:
		return numberFormat{percent: true}
	case !digit && (len(has) > 1 || named):
		return numberFormat{date: true, code: tokens}
	}
	return numberFormat{}
}

// scan takes the first section of a code apart, up to the time of the day. It
// reports whether a percent sign or the place of a digit is in it.
func scan(code string) (tokens []token, percent, digit bool) {
	text := func(s string) { tokens = append(tokens, token{text: s}) }
	for i := 0; i < len(code); i++ {
		switch c := code[i] | 0x20; {
		case code[i] == ';', c == 'h', c == 's', c == 'a':
			return tokens, percent, digit
		case code[i] == '"', code[i] == '[':
			end := strings.IndexByte(code[i+1:], map[byte]byte{'"': '"', '[': ']'}[code[i]])
			if end < 0 {
				return tokens, percent, digit
			}
			if code[i] == '"' {
				text(code[i+1 : i+1+end])
			}
			i += end + 1
		case code[i] == '\\' && i+1 < len(code):
			text(code[i+1 : i+2])
			i++
		case code[i] == '_', code[i] == '*', code[i] == '\\':
			i++
		case c == 'y', c == 'm', c == 'd':
			n := 1
			for i+1 < len(code) && code[i+1]|0x20 == c {
				i++
				n++
			}
			tokens = append(tokens, token{letter: c, n: n})
		default:
			percent = percent || code[i] == '%'
			digit = digit || strings.IndexByte("0#?", code[i]) >= 0
			text(code[i : i+1])
		}
	}
	return tokens, percent, digit
}

// shown is a stored number as it is shown, if that is a percentage or a date
// from 1954 to 2119; otherwise as it is stored. Days are counted from 1900, or
// from 1904 (ISO/IEC 29500-1, 18.17.4.1).
func (f *numberFormat) shown(stored string, from1904 bool) string {
	if !f.percent && !f.date {
		return stored
	}
	v, err := strconv.ParseFloat(strings.TrimSpace(stored), 64)
	if err != nil {
		return stored
	}
	if f.percent {
		return strconv.FormatFloat(v*100, 'g', digits, 64)
	}
	if from1904 {
		v += 1462
	}
	if v < 20000 || v >= 80000 {
		return stored
	}
	return f.day(time.Date(1899, time.December, 30+int(math.Floor(v)), 0, 0, 0, 0, time.UTC))
}

// day is a date as it is shown, without the time of the day. A date whose
// order is not known, or that would look like a number, is year-month-day.
func (f *numberFormat) day(at time.Time) string {
	var b strings.Builder
	for _, t := range f.code {
		b.WriteString(t.of(at))
	}
	text := strings.TrimSpace(b.String())
	if strings.Trim(text, "0123456789., ") == "" && strings.Count(text, ".") < 2 {
		return at.Format(time.DateOnly)
	}
	return text
}

// of is what a token shows of a date.
func (t *token) of(at time.Time) string {
	layouts := map[byte][]string{
		'y': {"06", "06", "2006"},
		'm': {"1", "01", "Jan", "January", "Jan", "January"},
		'd': {"2", "02", "Mon", "Monday"},
	}[t.letter]
	if layouts == nil {
		return t.text
	}
	text := at.Format(layouts[min(t.n, len(layouts))-1])
	if t.letter == 'm' && t.n == 5 {
		return text[:1]
	}
	return text
}
