package batch

import (
	"bufio"
	"io"
	"strconv"
	"unicode/utf8"

	"shearbook/report"
)

// jsonRow makes a JSON object of a record of summary.csv: the names of the
// columns, numbers as numbers, blanks as null. It is written by hand: the
// numbers of the table are JSON's as they stand, and so cost no more than
// their bytes.
type jsonRow struct {
	keys   []string // `"file":`, `,"line":` …
	number []bool
	object []byte
}

func newJSONRow() *jsonRow {
	j := &jsonRow{}
	for i, c := range Columns {
		key := `"` + c.Name + `":`
		if i > 0 {
			key = "," + key
		}
		j.keys = append(j.keys, key)
		j.number = append(j.number, c.Type != "string")
	}
	return j
}

// of returns the object of a record; it holds until the next call.
func (j *jsonRow) of(t *table, record [][]byte) ([]byte, error) {
	b := append(j.object[:0], '{')
	for i, cell := range record {
		b = append(b, j.keys[i]...)
		switch {
		case len(cell) == 0:
			b = append(b, "null"...)
		case !j.number[i]:
			b = appendJSONString(b, cell)
		case isJSONNumber(cell):
			b = append(b, cell...)
		default:
			v, err := strconv.ParseFloat(string(cell), 64)
			if err != nil || v-v != 0 {
				return nil, t.fault("cell %d, %q, is not a number", i+1, cell)
			}
			b = strconv.AppendFloat(b, v, 'f', -1, 64)
		}
	}
	j.object = append(b, '}')
	return j.object, nil
}

// isJSONNumber reports whether text is a number as JSON writes it (RFC 8259,
// section 6).
func isJSONNumber(text []byte) bool {
	if len(text) > 0 && text[0] == '-' {
		text = text[1:]
	}
	whole := digits(text)
	if whole == 0 || whole > 1 && text[0] == '0' {
		return false
	}
	if text = text[whole:]; len(text) > 0 && text[0] == '.' {
		n := digits(text[1:])
		if n == 0 {
			return false
		}
		text = text[1+n:]
	}
	if len(text) > 0 && (text[0] == 'e' || text[0] == 'E') {
		if text = text[1:]; len(text) > 0 && (text[0] == '+' || text[0] == '-') {
			text = text[1:]
		}
		n := digits(text)
		return n > 0 && n == len(text)
	}
	return len(text) == 0
}

// digits counts the digits that text begins with.
func digits(text []byte) int {
	n := 0
	for n < len(text) && text[n] >= '0' && text[n] <= '9' {
		n++
	}
	return n
}

// appendJSONString appends text as a JSON string. Bytes that are no UTF-8
// become U+FFFD.
func appendJSONString(b, text []byte) []byte {
	b = append(b, '"')
	plain := 0 // where the bytes begin that are taken as they are
	for i := 0; i < len(text); {
		c := text[i]
		if c < utf8.RuneSelf && c >= ' ' && c != '"' && c != '\\' && c != 0x7f {
			i++
			continue
		}
		r, n := rune(c), 1
		if c >= utf8.RuneSelf {
			if r, n = utf8.DecodeRune(text[i:]); r != utf8.RuneError || n > 1 {
				i += n
				continue
			}
		}
		b = append(b, text[plain:i]...)
		i += n
		plain = i
		switch r {
		case '"', '\\':
			b = append(b, '\\', c)
		case '\n':
			b = append(b, `\n`...)
		case '\t':
			b = append(b, `\t`...)
		case utf8.RuneError:
			b = append(b, "\ufffd"...)
		default:
			const hex = "0123456789abcdef"
			b = append(b, '\\', 'u', '0', '0', hex[c>>4], hex[c&15])
		}
	}
	b = append(b, text[plain:]...)
	return append(b, '"')
}

// jsonLines writes the objects one a line.
type jsonLines struct{ out *bufio.Writer }

func newJSONLines(w io.Writer) *jsonLines { return &jsonLines{bufio.NewWriterSize(w, 256<<10)} }

func (l *jsonLines) row(object []byte) error {
	l.out.Write(object)
	return l.out.WriteByte('\n')
}

func (l *jsonLines) close() error { return l.out.Flush() }

// mapLayer writes a GeoJSON FeatureCollection (RFC 7946), a feature a row.
// Its geometry is a point where latitude and longitude are known, longitude
// first (section 3.1.1); a profile that is known by its grid alone has the
// geometry null and the grid's numbers among its properties (section 3.2): a
// grid is never turned into degrees here. A row without any position is only
// counted. Behind the features stand two foreign members (section 6.1): the
// caution, and that count.
type mapLayer struct {
	out     *bufio.Writer
	begun   bool
	without int // rows without any position
	feature []byte
}

func newMapLayer(w io.Writer) *mapLayer {
	m := &mapLayer{out: bufio.NewWriterSize(w, 256<<10)}
	m.out.WriteString(`{"type":"FeatureCollection","features":[`)
	return m
}

func (m *mapLayer) row(t *table, record [][]byte, object []byte) error {
	lat, lon := record[atLatitude], record[atLongitude]
	degrees := len(lat) > 0 && len(lon) > 0
	if !degrees && (len(record[atEasting]) == 0 || len(record[atNorthing]) == 0) {
		m.without++
		return nil
	}
	b := m.feature[:0]
	if m.begun {
		b = append(b, ',')
	}
	m.begun = true
	b = append(b, "\n"+`{"type":"Feature","geometry":`...)
	if degrees {
		if !within(lat, 90) || !within(lon, 180) {
			return t.fault("latitude %q and longitude %q are no place on Earth in degrees", lat, lon)
		}
		b = append(b, `{"type":"Point","coordinates":[`...)
		b = appendDegrees(b, lon)
		b = append(b, ',')
		b = appendDegrees(b, lat)
		b = append(b, "]}"...)
	} else {
		b = append(b, "null"...)
	}
	b = append(b, `,"properties":`...)
	b = append(b, object...)
	m.feature = append(b, '}')
	_, err := m.out.Write(m.feature)
	return err
}

// appendDegrees appends a number that within has looked at.
func appendDegrees(b, cell []byte) []byte {
	if isJSONNumber(cell) {
		return append(b, cell...)
	}
	v, _ := strconv.ParseFloat(string(cell), 64)
	return strconv.AppendFloat(b, v, 'f', -1, 64)
}

func within(cell []byte, limit float64) bool {
	v, err := strconv.ParseFloat(string(cell), 64)
	return err == nil && v >= -limit && v <= limit
}

func (m *mapLayer) close() error {
	b := append(m.feature[:0], "\n"+`],"confirmation":`...)
	b = appendJSONString(b, []byte(report.Caution))
	b = append(b, `,"rows_without_position":`...)
	b = strconv.AppendInt(b, int64(m.without), 10)
	m.out.Write(append(b, "}\n"...))
	return m.out.Flush()
}
